package audit

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/audit/calendar"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Calendar is the section calendar: shifts, and the duties that stand for the states of the machine. The hours of those
// duties come from it.
type Calendar struct {
	calendar.Plan
	Hours *calendar.Hours // nil while something does not fit
}

// calendarKeys are those of the section besides shifts, stops and states; SetCalendar reaches them.
var calendarKeys = []string{"weeks", "in_breaks", "idle_time", "hold_time", "standby"}

// shiftKeys are those of a shift.
var shiftKeys = []string{"name", "from", "to", "days", "breaks"}

// calendar reads the section; the duties are read already.
func (r *reader) calendar(n *yaml.Node) {
	if isNull(n) {
		return
	}
	s := scope{where: "calendar"}.titled("calendar")
	before := stops(r.found)
	known := append([]string{"shifts", "stops"}, calendarKeys...)
	for _, st := range calendar.Busy {
		known = append(known, string(st))
	}
	f := r.fields(s, n, "", known...)
	c := &Calendar{Plan: calendar.Plan{Weeks: calendar.MostWeeks, Uses: map[calendar.State][]calendar.Use{}}}
	r.file.Calendar = c
	for i, item := range r.items(s, f["shifts"].value, "shifts", "shifts: [{name: early, from: 06:00, to: 14:00, days: Mon-Fri}]") {
		c.Shifts = append(c.Shifts, r.shift(s, i, item))
	}
	if len(c.Shifts) == 0 && stops(r.found) == before {
		r.bad(s, n, "shifts", "are missing; write shifts: [{name: early, from: 06:00, to: 14:00, days: Mon-Fri}]")
	}
	if v, ok := r.positive(s, f, "weeks", units.Count); ok {
		if c.Weeks = v.SI; c.Weeks > calendar.MostWeeks+0.15 { // 52 weeks and two days at most
			r.bad(s, f["weeks"].value, "weeks", "is %s; a year has %s", v.Text, units.Number(calendar.MostWeeks, 4))
		}
		c.Weeks = math.Min(c.Weeks, calendar.MostWeeks)
	}
	for _, e := range r.entries(s, f["stops"].value, "stops") {
		if v, ok := r.value(s.in("stops"), e.value, e.key, units.Time); ok && v.SI < 0 {
			r.bad(s.in("stops"), e.value, e.key, "is %s, must not be below 0", v.Text)
		} else if ok {
			c.Stops = append(c.Stops, calendar.Stop{Name: e.key, Hours: v.SI})
		}
	}
	if v, ok := r.optional(s, f, "standby", units.Power); ok {
		if c.Standby = v.SI; v.SI < 0 {
			r.bad(s, f["standby"].value, "standby", "is %s, must not be below 0", v.Text)
		}
	}
	c.IdleTime, c.HoldTime = r.amount(s, f["idle_time"], "idle_time"), r.amount(s, f["hold_time"], "hold_time")
	r.uses(s, f, c)
	c.InBreaks = calendar.State(r.word(s, f, "in_breaks", "idle", "hold", "off"))
	if c.InBreaks == "" {
		if c.InBreaks = calendar.Off; len(c.Uses[calendar.Idle]) > 0 {
			c.InBreaks = calendar.Idle
		}
	}
	if stops(r.found) == before {
		r.calendarHours(s, n, f, c)
	}
}

func (r *reader) shift(s scope, i int, n *yaml.Node) calendar.Shift {
	out := calendar.Shift{Name: fmt.Sprint(i + 1)}
	at, before := s.in(fmt.Sprintf("shift %d", i+1)), stops(r.found)
	f := r.fields(at, n, "", shiftKeys...)
	if name := oneLine(r.text(at, f, "name")); name != "" {
		out.Name = name
	}
	for key, to := range map[string]*float64{"from": &out.From, "to": &out.To} {
		e, ok := f[key]
		if !ok {
			r.bad(at, n, key, "is missing; write a time of day, such as 06:00")
			continue
		}
		if t, ok := r.scalar(at, e.value, key, "a time of day, such as 06:00"); ok {
			v, err := calendar.ParseClock(t)
			if err != nil {
				r.bad(at, e.value, key, "%v", err)
			}
			*to = v
		}
	}
	days := "Mon-Fri"
	if e, ok := f["days"]; ok {
		days = strings.Join(r.texts(at, e, "days", "days: Mon-Fri"), ", ")
	}
	var err error
	if out.Days, err = calendar.ParseDays(days); err != nil {
		r.bad(at, f["days"].value, "days", "%v", err)
	}
	if e, ok := f["breaks"]; ok {
		for _, text := range r.texts(at, e, "breaks", "breaks: [09:00 - 09:15, 12:00 - 12:30]") {
			b, err := breakOf(text)
			if err != nil {
				r.bad(at, e.value, "breaks", "%v", err)
			}
			out.Breaks = append(out.Breaks, b)
		}
	}
	if stops(r.found) == before {
		if _, _, err := calendar.WeekOf([]calendar.Shift{out}); err != nil {
			r.bad(at, n, "", "%v", err)
		}
	}
	return out
}

// texts reads a list of texts, or one text with commas.
func (r *reader) texts(s scope, e entry, key, example string) []string {
	if e.value != nil && e.value.Kind == yaml.ScalarNode && !isNull(e.value) {
		var out []string
		for _, part := range strings.Split(e.value.Value, ",") {
			if part = strings.TrimSpace(part); part != "" {
				out = append(out, part)
			}
		}
		return out
	}
	var out []string
	for _, n := range r.items(s, e.value, key, example) {
		if t, ok := r.scalar(s, n, key, "a text"); ok {
			out = append(out, t)
		}
	}
	return out
}

// breakOf reads "09:00 - 09:15" or "30 min".
func breakOf(text string) (calendar.Break, error) {
	b, timed, err := calendar.ParseBreak(text)
	if timed {
		return b, err
	}
	lasts, _, err := units.Parse(text, units.Time)
	if err != nil || lasts <= 0 {
		return b, fmt.Errorf("%q is no break; write its times, 09:00 - 09:15, or how long it lasts, 30 min", text)
	}
	return calendar.Break{Lasts: lasts}, nil
}

// amount reads a share or hours a year.
func (r *reader) amount(s scope, e entry, key string) calendar.Amount {
	if e.at == nil {
		return calendar.Amount{}
	}
	t, ok := r.scalar(s, e.value, key, "a share or hours a year")
	if !ok {
		return calendar.Amount{}
	}
	a, err := amountOf(t)
	if err != nil {
		r.bad(s, e.value, key, "%v", err)
	}
	return a
}

// amountOf reads "60 %" or "1200 h".
func amountOf(text string) (calendar.Amount, error) {
	if share, _, err := units.Parse(text, units.Ratio); err == nil {
		if share < 0 || share > 1 {
			return calendar.Amount{}, fmt.Errorf("%s is no share; it lies between 0 %% and 100 %%", text)
		}
		return calendar.Amount{Share: share}, nil
	}
	hours, _, err := units.Parse(text, units.Time)
	if err != nil || hours < 0 || hours > calendar.Year {
		return calendar.Amount{}, fmt.Errorf("%q is neither a share nor hours a year; write 60 %% or 1200 h", text)
	}
	return calendar.Amount{Hours: hours}, nil
}

// uses reads which duties stand for the states.
func (r *reader) uses(s scope, f map[string]entry, c *Calendar) {
	for _, state := range calendar.Busy {
		in := s.in(string(state))
		for _, e := range r.entries(s, f[string(state)].value, string(state)) {
			name := oneLine(e.key)
			i := r.file.dutyIndex(name)
			switch first := c.StateOf(name); {
			case i < 0:
				var known []string
				for _, d := range r.file.Duties {
					known = append(known, d.Name)
				}
				r.bad(in, e.at, "", "there is no duty %q%s", name, guess(name, known))
				continue
			case first != "":
				r.bad(in, e.at, "", "duty %q stands for %s already; keep it in one state", name, first)
				continue
			}
			if h := child(item(child(r.file.root, "duties"), i), "hours"); !isNull(h) {
				r.bad(scope{duty: name, where: fmt.Sprintf("duty %q", name)}.titled("duty"), h, "hours",
					"stand here, and the calendar gives the duty its hours too (%s, in line %d); take one of the two out", state, e.at.Line)
			}
			c.Uses[state] = append(c.Uses[state], calendar.Use{Duty: name, Amount: r.amount(in, e, e.key)})
			if state != calendar.Work {
				r.stands(in, e, r.file.Duties[i])
			}
		}
	}
}

// stands warns of a duty that moves in a state in which nothing does.
func (r *reader) stands(s scope, e entry, d *duty.Duty) {
	for _, a := range r.file.Axes {
		if top, _ := d.TopSpeed(a.Name); top > 0 {
			r.says(s, circuit.Warns, e.at, fmt.Sprintf("duty %q moves axis %s; in this state nothing moves. Make it work, or choose another duty", d.Name, a.Name))
			return
		}
	}
}

// says is a finding that stops nothing, of no duty or circuit.
func (r *reader) says(s scope, level circuit.Level, n *yaml.Node, text string) {
	r.found = append(r.found, circuit.Finding{Level: level, Text: s.where + ": " + text, Line: n.Line})
}

// calendarHours gives the duties their hours.
func (r *reader) calendarHours(s scope, n *yaml.Node, f map[string]entry, c *Calendar) {
	own := 0.0
	for _, d := range r.file.Duties {
		own += d.Hours
	}
	h, err := c.Year(own)
	if err != nil {
		at := n
		if e, ok := f["shifts"]; ok {
			at = e.at
		}
		r.bad(s, at, "", "%v", err)
		return
	}
	c.Hours = h
	for _, d := range r.file.Duties {
		if c.StateOf(d.Name) != "" {
			d.Hours = h.Duty[d.Name]
		}
	}
	for _, state := range calendar.Busy {
		if sum, any := c.Shares(state); any && math.Abs(sum-1) > 1e-6 {
			r.says(s.in(string(state)), circuit.Warns, f[string(state)].at, fmt.Sprintf("the shares add up to %s; they are taken in proportion, so that they make 100 %%", units.Format(sum, units.Percent, 4)))
		}
	}
	r.shiftsTwice()
}

// shiftsTwice says that shifts of a section heat are not used beside a calendar.
func (r *reader) shiftsTwice() {
	look := func(where string, n *yaml.Node) {
		for _, k := range mappingKeys(n) {
			if slices.Contains(heatShiftKeys, k.Value) {
				r.says(scope{where: where}, circuit.Note, k, k.Value+" is not used: the shifts of the calendar say when the machine runs")
			}
		}
	}
	look("heat", child(r.file.root, "heat"))
	for i := range r.file.Circuits {
		look(r.file.Circuits[i].Name+", heat", child(r.file.circuitNode(i), "heat"))
	}
}

// fewestWeeks is the number of weeks a year below which hours of the week and of the year are
// taken not to be of one machine (our choice).
const fewestWeeks = 40

// weekAgainstYear warns where the hours of the week in the section heat and those of the duties
// in the year cannot both be right.
func (r *reader) weekAgainstYear() {
	h, year := r.file.Heat.Values, 0.0
	daily, given := h["shift_hours"]
	for _, d := range r.file.Duties {
		year += d.Hours
	}
	if !given || r.file.Calendar != nil || year <= 0 {
		return
	}
	days := 5.0 // as HeatKeys has it
	if v, ok := h["shift_days"]; ok {
		days = v.SI
	}
	week := daily.SI * days
	if weeks := year / week; weeks >= fewestWeeks && weeks <= calendar.MostWeeks {
		return
	}
	hours := func(t float64) string { return units.Number(t/units.Hour, 4) + " h" }
	r.says(scope{where: "heat"}, circuit.Warns, child(r.file.root, "heat"), fmt.Sprintf("%s a week by hours a day and days a week (shift_hours, shift_days of heat) make %s in %s weeks, but the duties last %s a year; mend one, or write a shift calendar, which gives both",
		hours(week), hours(week*calendar.MostWeeks), units.Number(calendar.MostWeeks, 3), hours(year)))
}

// heatShiftKeys are the keys of a section heat in whose place a calendar stands.
var heatShiftKeys = []string{"shift_start", "shift_hours", "shift_days"}

// HeatShiftKey reports whether a key of the section heat says when the machine runs.
func HeatShiftKey(key string) bool { return slices.Contains(heatShiftKeys, key) }
