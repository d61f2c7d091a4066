package calendar

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
)

var workdays = [7]bool{true, true, true, true, true}

func plan(shifts ...Shift) *Plan {
	return &Plan{Shifts: shifts, Weeks: 50, InBreaks: Off, Uses: map[State][]Use{Work: {{"a", Amount{Share: 1}}}}}
}

// A handbook week by hand: two shifts of 8 h on five days, half an hour of break each, 48 weeks, 100 h of stops:
// 2·7.5·5·48 − 100 = 3500 h worked, 2·0.5·5·48 = 240 h of breaks.
func TestTwoShiftsByHand(t *testing.T) {
	p := plan(Shift{Name: "early", From: 6 * Hour, To: 14 * Hour, Days: workdays, Breaks: []Break{{Lasts: Hour / 2}}},
		Shift{Name: "late", From: 14 * Hour, To: 22 * Hour, Days: workdays, Breaks: []Break{{From: 18 * Hour, To: 18.5 * Hour}}})
	p.Weeks, p.Stops, p.InBreaks, p.IdleTime = 48, []Stop{{"maintenance", 100 * Hour}}, Idle, Amount{Share: 0.1}
	p.Uses = map[State][]Use{Work: {{"a", Amount{Share: 0.6}}, {"b", Amount{Share: 0.4}}}, Idle: {{"w", Amount{Share: 1}}}}
	h, err := p.Year(60 * Hour)
	if err != nil {
		t.Fatal(err)
	}
	for name, x := range map[string][2]float64{"worked": {h.Worked, 3500}, "breaks": {h.Breaks, 240}, "work": {h.Work, 3150}, "idle": {h.Idle, 350 + 240},
		"own": {h.Own, 60}, "off": {h.Off, 8760 - 3150 - 590 - 60}, "a": {h.Duty["a"], 1890}, "b": {h.Duty["b"], 1260}, "w": {h.Duty["w"], 590},
		"away": {h.Away, 8760 - 48*168}} {
		if math.Abs(x[0]/Hour-x[1]) > 1e-9 {
			t.Errorf("%s: %g h, by hand %g h", name, x[0]/Hour, x[1])
		}
	}
}

// Random calendars against a count of the minutes of a week, which knows nothing of stretches: shifts over midnight and
// over the end of the week, breaks with and without times.
func TestRandomCalendars(t *testing.T) {
	rnd := rand.New(rand.NewPCG(8, 760))
	done, overMidnight, refused := 0, 0, 0
	for done < 2000 {
		var minutes [7 * 1440]byte // 0 free, 1 worked, 2 break
		p, clash := &Plan{Weeks: float64(rnd.IntN(52)) + rnd.Float64(), InBreaks: []State{Idle, Hold, Off}[rnd.IntN(3)]}, false
		for n := range 1 + rnd.IntN(3) {
			s := Shift{Name: fmt.Sprint(n), From: float64(rnd.IntN(96)) * Hour / 4, To: float64(rnd.IntN(96)) * Hour / 4}
			for d := range 7 {
				s.Days[d] = rnd.IntN(3) > 0
			}
			length := int(s.Length() / 60)
			var pauses [][2]int // in minutes from the beginning
			if at := 15 * rnd.IntN(8); at+15 < length {
				s.Breaks = []Break{{From: math.Mod(s.From+float64(at)*60, Day), To: math.Mod(s.From+float64(at+15)*60, Day)}}
				pauses = [][2]int{{at, at + 15}}
			} else if length > 60 {
				s.Breaks = []Break{{Lasts: 30 * 60}}
				pauses = [][2]int{{(length - 30) / 2, (length-30)/2 + 30}}
			}
			if s.To <= s.From {
				overMidnight++
			}
			for d, on := range s.Days {
				for m := 0; on && m < length; m++ {
					cell := &minutes[(d*1440+int(s.From/60)+m)%len(minutes)]
					clash = clash || *cell != 0
					if *cell = 1; len(pauses) > 0 && m >= pauses[0][0] && m < pauses[0][1] {
						*cell = 2
					}
				}
			}
			p.Shifts = append(p.Shifts, s)
		}
		p.IdleTime, p.HoldTime = Amount{Share: rnd.Float64() / 2}, Amount{Share: rnd.Float64() / 2}
		p.Uses = map[State][]Use{Work: {{"a", Amount{Share: rnd.Float64() + 0.01}}, {"b", Amount{Share: rnd.Float64()}}}, Idle: {{"i", Amount{Share: 1}}}, Hold: {{"h", Amount{Share: 1}}}}
		h, err := p.Year(0)
		if clash {
			if refused++; err == nil || !strings.Contains(err.Error(), "overlaps") {
				t.Fatalf("overlapping shifts were taken: %v, %+v", err, p.Shifts)
			}
			continue
		}
		if err != nil {
			t.Fatalf("%v: %+v", err, p.Shifts)
		}
		done++
		var count [3]float64
		for _, m := range minutes {
			count[m] += 60
		}
		if sum := h.Work + h.Idle + h.Hold + h.Off; math.Abs(sum/Hour-8760) > 1e-6 {
			t.Fatalf("%g h a year: %+v", sum/Hour, p)
		}
		worked, breaks := count[1]*p.Weeks, count[2]*p.Weeks
		if math.Abs(h.Worked-worked) > 1e-3 || math.Abs(h.Breaks-breaks) > 1e-3 {
			t.Fatalf("worked %g, breaks %g; by minutes %g, %g: %+v", h.Worked, h.Breaks, worked, breaks, p.Shifts)
		}
		off := Year - worked
		if p.InBreaks != Off {
			off -= breaks
		}
		if math.Abs(h.Off-off) > 1e-3 {
			t.Fatalf("off %g, by minutes %g", h.Off, off)
		}
		duties := h.Duty["a"] + h.Duty["b"] + h.Duty["i"] + h.Duty["h"]
		if math.Abs(duties-(Year-h.Off)) > 1e-3 {
			t.Fatalf("duties have %g of %g", duties, Year-h.Off)
		}
		runs := 0.0
		for _, s := range p.Runs() {
			if s.From < 0 || s.To > Week || s.To <= s.From {
				t.Fatalf("a stretch %+v", s)
			}
			runs += s.To - s.From
		}
		if want := (Year - h.Off) / p.Weeks; p.Weeks > 0.01 && math.Abs(runs-want) > 1 {
			t.Fatalf("runs %g s a week, the year says %g", runs, want)
		}
	}
	if overMidnight < 500 || refused < 100 {
		t.Errorf("only %d shifts over midnight, %d refused: the test looks in the wrong place", overMidnight, refused)
	}
}

func TestRefused(t *testing.T) {
	day := Shift{Name: "day", From: 6 * Hour, To: 14 * Hour, Days: workdays}
	with := func(breaks ...Break) *Plan { s := day; s.Breaks = breaks; return plan(s) }
	stopped, idle, hours, some := plan(day), plan(day), plan(day), plan(day)
	stopped.Stops = []Stop{{"rebuild", 3000 * Hour}}
	idle.IdleTime = Amount{Hours: 2500 * Hour}
	hours.Uses = map[State][]Use{Work: {{"a", Amount{Hours: 2100 * Hour}}}}
	some.Uses = map[State][]Use{Work: {{"a", Amount{Hours: 100 * Hour}}}}
	for text, p := range map[string]*Plan{
		"its breaks last 8.5 h, the shift only 8 h":                   with(Break{Lasts: 8.5 * Hour}),
		"its breaks take all of it, 8 h":                              with(Break{From: 6 * Hour, To: 14 * Hour}),
		"the break 13:30 - 14:30 does not lie within":                 with(Break{From: 13.5 * Hour, To: 14.5 * Hour}),
		"the break 10:00 - 09:00 does not lie within":                 with(Break{From: 10 * Hour, To: 9 * Hour}),
		"breaks overlap at 09:15":                                     with(Break{From: 9 * Hour, To: 9.5 * Hour}, Break{From: 9.25 * Hour, To: 10 * Hour}),
		"give all in one way":                                         with(Break{From: 9 * Hour, To: 9.5 * Hour}, Break{Lasts: 60}),
		"overlaps with the shift day on Mon at 13:00":                 plan(day, Shift{Name: "late", From: 13 * Hour, To: 22 * Hour, Days: workdays}),
		"planned stops take 3000 h, the shifts work only 2000 h":      stopped,
		"idle 2500 h and hold 0 min are more than the 2000 h":         idle,
		"the duties of work take 2100 h, it has only 2000 h":          hours,
		"the duties of work take 100 h of its 2000 h a year; give on": some,
	} {
		if _, err := p.Year(0); err == nil || !strings.Contains(err.Error(), text) {
			t.Errorf("%q: %v", text, err)
		}
	}
	if _, err := plan(day).Year(7000 * Hour); err == nil || !strings.Contains(err.Error(), "only 6760 h of the year are left") {
		t.Errorf("own hours: %v", err)
	}
}

func TestTexts(t *testing.T) {
	for text, want := range map[string]string{"Mon-Fri": "Mon-Fri", "5": "Mon-Fri", "monday, Wed , sat": "Mon, Wed, Sat", "Sat-Mon": "Mon, Sat, Sun", "Mon-Thu, Sun": "Mon-Thu, Sun", "7": "Mon-Sun", "Mon–Tue": "Mon, Tue"} {
		d, err := ParseDays(text)
		if got := DaysText(d); err != nil || got != want {
			t.Errorf("%q: %q, %v", text, got, err)
		}
	}
	for _, text := range []string{"", "Mo-Fx", "8", "0", "Mon-", "every day"} {
		if _, err := ParseDays(text); err == nil {
			t.Errorf("%q was read as days", text)
		}
	}
	for text, want := range map[string]float64{"06:00": 6, "6.30": 6.5, "24:00": 24, " 0:15": 0.25} {
		if got, err := ParseClock(text); err != nil || got != want*Hour {
			t.Errorf("%q: %g, %v", text, got, err)
		}
	}
	for _, text := range []string{"", "6", "24:01", "-1:00", "6:60", "6:5", "noon"} {
		if _, err := ParseClock(text); err == nil {
			t.Errorf("%q was read as a time", text)
		}
	}
}
