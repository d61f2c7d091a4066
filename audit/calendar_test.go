package audit

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/audit/calendar"
	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// planned is a file of three duties with a calendar in place of their hours.
const planned = `format: barlitre/1
oil: {grade: ISO VG 46, temperature: 50 C}
air: {temperature: 25 C}
axes: {ram: linear}
duties:
- name: product A
  points: {t: [0 s, 1 s], ram.speed: [0.1 m/s, 0.1 m/s], ram.load: [5 kN, 5 kN]}
- name: product B
  points: {t: [0 s, 1 s], ram.speed: [0.2 m/s, 0.2 m/s], ram.load: [9 kN, 9 kN]}
- name: waiting
  points: {t: [0 s, 1 s], ram.speed: [0 m/s, 0 m/s], ram.load: [0 kN, 0 kN]}
calendar:
  shifts: # two
  - {name: early, from: 06:00, to: 14:00, breaks: [30 min]}
  - {name: late, from: 14:00, to: 22:00, days: Mon-Thu, breaks: [18:00 - 18:15, 20:00 - 20:15]}
  weeks: 48 # a year
  stops: {maintenance: 20 h}
  idle_time: 10 %
  work: {product A: 60 %, product B: 40 %}
  idle: {waiting: 100 %}
circuits: []
`

// The hours by hand: 7.5 h on nine shifts of 48 weeks less 20 h, a tenth of that idle besides half an hour of break each.
func TestCalendarGivesHours(t *testing.T) {
	f, found := Parse([]byte(planned), nil, "")
	for _, n := range found {
		if strings.Contains(n.Text, "calendar") {
			t.Error(n)
		}
	}
	worked := 7.5*9*48 - 20
	for i, want := range []float64{0.9 * worked * 0.6, 0.9 * worked * 0.4, 0.1*worked + 0.5*9*48} {
		wants(t, f.Duties[i].Name, f.Duties[i].Hours/units.Hour, want, 1e-12)
	}
	h := f.Calendar.Hours
	wants(t, "the year", (h.Work+h.Idle+h.Hold+h.Off)/units.Hour, 8760, 1e-12)
	spans := f.Calendar.spans(Mix, Mix)
	wants(t, "spans", float64(len(spans)), 5, 0)
	if spans[0] != (thermal.Span{From: 6 * units.Hour, To: 22 * units.Hour, Load: Mix}) || spans[4].To-spans[4].From != 8*units.Hour {
		t.Errorf("the machine runs %v", spans)
	}
	spans = f.Calendar.spans(4, 5) // by hand: three breaks on four days and one on Friday, work before and after each
	wants(t, "with breaks", float64(len(spans)), 4*7+3, 0)
	if spans[1] != (thermal.Span{From: 9.75 * units.Hour, To: 10.25 * units.Hour, Load: 5}) || spans[2] != (thermal.Span{From: 10.25 * units.Hour, To: 18 * units.Hour, Load: 4}) {
		t.Errorf("the machine runs %v", spans)
	}
}

// Each fault of a calendar is told by its line.
func TestCalendarRefused(t *testing.T) {
	for _, x := range []struct{ old, new, where, says string }{
		{"breaks: [30 min]", "breaks: [9 h]", "breaks: [9 h]", "calendar, shift 1: its breaks last 9 h, the shift only 8 h"},
		{"from: 14:00", "from: 13:00", "shifts:", "overlaps with the shift early on Mon at 13:00"},
		{"from: 06:00", "from: six", "six", `"six" is no time of day`},
		{"Mon-Thu", "Mon-Thx", "Mon-Thx", "are no days"},
		{"weeks: 48", "weeks: 60", "weeks", "calendar, weeks a year (weeks): is 60; a year has 52.14"},
		{"maintenance: 20 h", "maintenance: 2 kg", "maintenance", "is not a unit of time"},
		{"idle_time: 10 %", "idle_time: 110 %", "idle_time", "is no share"},
		{"waiting: 100 %", "waitin: 100 %", "waitin:", `there is no duty "waitin"; did you mean "waiting"?`},
		{"waiting: 100 %", "product A: 100 %", "idle: {", `duty "product A" stands for work already`},
		{"- name: product B\n", "- name: product B\n  hours: 20 h\n", "hours: 20", `duty "product B", hours a year (hours): stand here, and the calendar gives the duty its hours too (work, in line`},
		{"  idle: {waiting: 100 %}\n", "", "shifts:", "idle takes 322 h a year and has no duty"},
		{"  weeks", "  week", "week:", `unknown key; did you mean weeks a year (weeks)?`},
		{"stops: {maintenance: 20 h}", "stops: {rebuild: 4000 h}", "shifts:", "planned stops take 4000 h, the shifts work only 3240 h"},
		{"work: {product A: 60 %", "work: {product A: sixty", "sixty", "neither a share nor hours"},
	} {
		text := strings.Replace(planned, x.old, x.new, 1)
		_, found := Parse([]byte(text), nil, "")
		line := 1 + strings.Count(text[:strings.Index(text, x.where)], "\n")
		ok := false
		for _, n := range found {
			ok = ok || n.Level == circuit.Stops && n.Line == line && strings.Contains(n.Text, x.says)
		}
		if !ok {
			t.Errorf("%q: wanted line %d, %q; found %v", x.new, line, x.says, found)
		}
	}
	for _, x := range [][2]string{{"product B: 40 %", "product B: 50 %"}, {"idle: {waiting: 100 %}", "idle: {waiting: 100 %}\nheat: {shift_days: 3}"}, {"ram.speed: [0 m/s, 0 m/s]", "ram.speed: [0 m/s, 1 m/s]"}} {
		f, found := Parse([]byte(strings.Replace(planned, x[0], x[1], 1)), nil, "")
		told := 0
		for _, n := range found {
			if n.Level != circuit.Stops && n.Line > 1 {
				told++
			}
		}
		if told != 1 || f.Calendar.Hours == nil {
			t.Errorf("%q: told %d things: %v", x[1], told, found)
		}
	}
}

// The edits of a calendar keep all that stands around them.
func TestCalendarEdits(t *testing.T) {
	file := func() *File { f, _ := Parse([]byte(planned), nil, ""); return f }
	for name, x := range map[string]struct {
		edit     func(*File) error
		old, new string
	}{
		"weeks":    {func(f *File) error { return f.SetCalendar("weeks", "46") }, "weeks: 48 #", "weeks: 46 #"},
		"standby":  {func(f *File) error { return f.SetCalendar("standby", "80 W") }, "  idle: {waiting: 100 %}\n", "  idle: {waiting: 100 %}\n  standby: 80 W\n"},
		"take out": {func(f *File) error { return f.SetCalendar("idle_time", "") }, "  idle_time: 10 %\n", ""},
		"stop":     {func(f *File) error { return f.SetStop("rebuild", "40 h") }, "maintenance: 20 h}", "maintenance: 20 h, rebuild: 40 h}"},
		"no stop":  {func(f *File) error { return f.SetStop("maintenance", "") }, "stops: {maintenance: 20 h}", "stops: {}"},
		"shift":    {func(f *File) error { return f.SetShift(0, "to", "13:30") }, "{name: early, from: 06:00, to: 14:00, breaks: [30 min]}", "{name: early, from: 06:00, breaks: [30 min], to: 13:30}"},
		"breaks":   {func(f *File) error { return f.SetShift(0, "breaks", "09:00 - 09:15, 12:00 - 12:30") }, "breaks: [30 min]", "breaks: [09:00 - 09:15, 12:00 - 12:30]"},
		"new shift": {func(f *File) error {
			return f.AddShift("name", "night", "from", "22:00", "to", "06:00", "days", "Mon, Tue")
		}, "  weeks", "  - {name: night, from: 22:00, to: 06:00, days: \"Mon, Tue\"}\n  weeks"},
		"less":       {func(f *File) error { return f.RemoveShift(1) }, "  - {name: late, from: 14:00, to: 22:00, days: Mon-Thu, breaks: [18:00 - 18:15, 20:00 - 20:15]}\n", ""},
		"share":      {func(f *File) error { return f.AssignDuty("product A", "work", "1500 h") }, "product A: 60 %", "product A: 1500 h"},
		"state":      {func(f *File) error { return f.AssignDuty("product B", "hold", "") }, "work: {product A: 60 %, product B: 40 %}\n  idle: {waiting: 100 %}", "work: {product A: 60 %}\n  idle: {waiting: 100 %}\n  hold: {product B: 100 %}"},
		"rename":     {func(f *File) error { return f.RenameDuty("waiting", "pause") }, "", ""},
		"removed":    {func(f *File) error { return f.RemoveDuty("product B") }, "", ""},
		"hours back": {func(f *File) error { return f.RemoveCalendar() }, "", ""},
	} {
		f := file()
		if err := x.edit(f); err != nil {
			t.Errorf("%s: %v", name, err)
			continue
		}
		if want := strings.Replace(planned, x.old, x.new, 1); x.old != "" && string(f.Bytes()) != want {
			t.Errorf("%s:\n%s\nwanted\n%s", name, f.Bytes(), want)
		}
		if g, found := Parse(f.Bytes(), nil, ""); g == nil || stops(found) != stops(file().Findings()) {
			t.Errorf("%s: %v", name, found)
		}
	}
	for name, edit := range map[string]func(*File) error{
		"overlap":      func(f *File) error { return f.SetShift(1, "from", "12:00") },
		"typed hours":  func(f *File) error { return f.SetDuty("waiting", "hours", "100 h") },
		"last of work": func(f *File) error { f.AssignDuty("product B", "", ""); return f.AssignDuty("product A", "", "") },
		"no such":      func(f *File) error { return f.AssignDuty("product C", "work", "") },
		"off":          func(f *File) error { return f.AssignDuty("waiting", "off", "") },
		"weeks":        func(f *File) error { return f.SetCalendar("weeks", "many") },
		"twice":        func(f *File) error { return f.AddCalendar() },
	} {
		f := file()
		if err := edit(f); err == nil {
			t.Errorf("%s was taken", name)
		} else if name != "last of work" && !bytes.Equal(f.Bytes(), []byte(planned)) {
			t.Errorf("%s was refused (%v), but the file changed", name, err)
		}
	}
	f := file()
	hours := []float64{f.Duties[0].Hours, f.Duties[1].Hours, f.Duties[2].Hours}
	if err := f.RemoveCalendar(); err != nil {
		t.Fatal(err)
	}
	for i, h := range hours {
		wants(t, "hours that stay", f.Duties[i].Hours, h, 1e-9)
	}
	if err := f.AddCalendar(); err != nil {
		t.Fatal(err)
	}
	if f.Calendar.StateOf("waiting") != calendar.Idle || f.Calendar.StateOf("product A") != calendar.Work {
		t.Errorf("a new calendar: %s", f.Bytes())
	}
	wants(t, "share", f.Calendar.Uses[calendar.Work][0].Share, 0.6, 1e-6)
}

// The year's energy, worked out apart: mean power of each duty, solved from the file without a calendar, times hours counted
// here minute by minute, and standby for what is left of 8760 h.
func TestYearOfCalendars(t *testing.T) {
	base := sampleWith(t, "handling-machine.yaml", nil)
	rnd := rand.New(rand.NewPCG(1, 2))
	for range 40 {
		f := base.File
		from, length, days := 15*rnd.IntN(96), 15*(16+rnd.IntN(60)), 1+rnd.IntN(7)
		pause, weeks, idle, watts := 15*rnd.IntN(8), 20+rnd.IntN(32), rnd.Float64()/2, 200*rnd.Float64()
		minutes := days * length // a week
		clock := func(m int) string { return fmt.Sprintf("%02d:%02d", m/60%24, m%60) }
		p := calendar.Plan{Weeks: float64(weeks), InBreaks: calendar.Idle, IdleTime: calendar.Amount{Share: idle}, Standby: watts,
			Uses: map[calendar.State][]calendar.Use{calendar.Work: {{Duty: f.Duties[0].Name, Amount: calendar.Amount{Share: 1}}}, calendar.Idle: {{Duty: f.Duties[1].Name, Amount: calendar.Amount{Share: 1}}}}}
		s := calendar.Shift{Name: "one"}
		var err error
		if s.From, err = calendar.ParseClock(clock(from)); err != nil {
			t.Fatal(err)
		}
		s.To, _ = calendar.ParseClock(clock(from + length))
		s.Days, _ = calendar.ParseDays(fmt.Sprint(days))
		if pause > 0 {
			s.Breaks = []calendar.Break{{Lasts: float64(pause) * 60}}
		}
		p.Shifts = []calendar.Shift{s}
		h, err := p.Year(0)
		if err != nil {
			t.Fatal(err)
		}
		cal := &Calendar{Plan: p, Hours: h}
		for i, c := range base.Circuits {
			for _, r := range c.Duties {
				r.Duty.Hours = h.Duty[r.Duty.Name]
			}
			y := year(c.Duties, cal, watts)
			breaks := float64(pause*days*weeks) / 60
			worked := float64(minutes*weeks)/60 - breaks
			idleHours := worked*idle + breaks
			mean := func(k int) float64 { return c.Duties[k].Balance.SupplyIn.Total() / c.Duties[k].Balance.Cycle }
			want := mean(0)*worked*(1-idle) + mean(1)*idleHours + watts*(8760-worked*(1-idle)-idleHours) // W·h
			wants(t, fmt.Sprintf("circuit %d, kWh", i), y.Drawn.Total()/units.KilowattHour, want/1000, 1e-9)
			wants(t, "hours", y.Seconds.Total()/units.Hour, 8760, 1e-9)
			sum, hours := 0.0, 0.0
			for _, x := range y.states(cal) {
				sum += x.Drawn.Total()
				hours += x.Seconds
			}
			wants(t, "states", sum, y.Drawn.Total(), 1e-12)
			wants(t, "hours of states", hours/units.Hour, 8760, 1e-9)
			out := y.WorkPositive().Total() + y.WorkNegative().Total() + y.Stored.Total() + y.Returned.Total() + sumRows(y.Losses, nil).Total()
			wants(t, "closure", out, y.Drawn.Total(), 1e-6)
		}
	}
}

// The calendar stands in print, JSON and the rows of the window, and the thermal week follows it.
func TestCalendarInResults(t *testing.T) {
	s := sampleWith(t, "handling-machine.yaml", nil)
	r := s.Report(units.Metric)
	for i, c := range r.Circuits {
		idle, off := 0, 0
		for _, row := range c.Losses.Rows {
			if strings.HasPrefix(row.Cells[0], "of which idle") {
				idle++
			}
			if row.Cells[0] == "of which off" {
				off++
			}
		}
		if idle != 1 || off != 1 || len(c.Calendar.Rows) != 4 {
			t.Errorf("%s: %d, %d, %v", c.Name, idle, off, c.Calendar.Rows)
		}
		parts := 0.0
		rows := s.EnergyRows(i, WholeYear)
		for _, row := range rows {
			if row.Part {
				parts += row.Year
				if c := s.RowCalculation(i, WholeYear, row, units.Metric); c.Formula == "" || c.Numbers == "" {
					t.Errorf("%s has no calculation", row.Name)
				}
			}
		}
		wants(t, "parts", parts, s.Circuits[i].Year.Drawn.Total(), 1e-12)
		if y := s.yearResult(s.Circuits[i]); len(y.Calendar) != 3 || math.Abs(y.Calendar[0].Hours+y.Calendar[1].Hours+y.Calendar[2].Hours-8760) > 1e-6 {
			t.Errorf("JSON: %+v", y.Calendar)
		}
		on := 0.0
		for _, sp := range s.Circuits[i].Warmth.Plant.Spans {
			on += sp.To - sp.From
		}
		wants(t, "thermal week", on/units.Hour, 24*6, 1e-12) // breaks are idle: the machine runs through
	}
	if !strings.Contains(strings.Join(r.Assumptions, "\n"), "Hours come from a shift calendar: early 06:00 to 14:00, Mon-Sat") {
		t.Error("the assumptions do not tell of the calendar")
	}
}
