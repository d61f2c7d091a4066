package audit

import (
	"strings"

	"barlitre/audit/calendar"
)

// yearState is what a year holds of one state of the machine.
type yearState struct {
	Key, Name string
	Duties    []string
	Seconds   float64 // s
	Drawn     Split   // J
}

// ownHours is the state of duties that have hours of their own beside a calendar.
const ownHours = "own hours"

// states returns the parts of a year: those of the calendar, or without one what the ledger saw the axes do. They add up to
// what is drawn, and with a calendar to 8760 h when every duty was solved.
func (y *Year) states(cal *Calendar) []yearState {
	if cal == nil || cal.Hours == nil {
		return []yearState{
			{Key: "working", Name: "working: an axis moves", Seconds: y.Seconds.Working, Drawn: Split{Working: y.Drawn.Working}},
			{Key: "holding", Name: "holding: an axis stands under load", Seconds: y.Seconds.Holding, Drawn: Split{Holding: y.Drawn.Holding}},
			{Key: "idle", Name: "idle: all axes stand without load", Seconds: y.Seconds.Idle, Drawn: Split{Idle: y.Drawn.Idle}},
		}
	}
	var out []yearState
	for _, s := range append(calendar.Busy[:len(calendar.Busy):len(calendar.Busy)], "") {
		x := yearState{Key: string(s)}
		if s == "" {
			x.Key = ownHours
		}
		for _, d := range y.Duties {
			if d.State == s {
				x.Duties, x.Seconds, x.Drawn = append(x.Duties, d.Duty), x.Seconds+d.Hours, x.Drawn.Plus(d.By)
			}
		}
		if x.Name = x.Key; len(x.Duties) > 0 {
			x.Name += ": " + strings.Join(x.Duties, ", ")
		}
		if len(x.Duties) > 0 || s == calendar.Work || s == calendar.Idle {
			out = append(out, x)
		}
	}
	return append(out, yearState{Key: string(calendar.Off), Name: string(calendar.Off), Seconds: y.Seconds.Off, Drawn: Split{Off: y.Drawn.Off}})
}

// calendarTable sets the states of the calendar with hours and energy; without one it is empty.
func (s *Solution) calendarTable(p printer, c *CircuitRun) Table {
	t := Table{Title: "The year by state", Head: []string{"", "time a year", "drawn a year", "mean power drawn", "share of drawn"}}
	cal := s.File.Calendar
	if cal == nil || cal.Hours == nil {
		return t
	}
	all, drawn := 0.0, c.Year.Drawn.Total()
	for _, x := range c.Year.states(cal) {
		e := x.Drawn.Total()
		t.add(false, x.Name, p.hours(x.Seconds), p.kWh(e), p.power(ratio(e, x.Seconds)), shareText(p, e, drawn))
		all += x.Seconds
	}
	t.add(true, "the year", p.hours(all), p.kWh(drawn), p.power(ratio(drawn, all)), shareText(p, drawn, drawn))
	t.Note = "By the shift calendar; pauses within a cycle of work count as work here."
	return t
}

// standby writes what a year holds besides its duties, "" for nothing.
func (s *Solution) standby(p printer, y *Year) string {
	if y.Drawn.Off == 0 {
		return ""
	}
	return " + off: " + p.power(y.Standby) + " × " + p.hours(y.Seconds.Off)
}

// offToo puts the hours off into the calculation of what is drawn in a year.
func (s *Solution) offToo(p printer, y *Year, f Figure) Figure {
	if text := s.standby(p, y); text != "" {
		f.Calculation.Numbers = strings.Replace(f.Calculation.Numbers, " = "+f.Text, text+" = "+f.Text, 1)
	}
	return f
}

func (s *Solution) standbyCalculation(p printer, c *CircuitRun) Calculation {
	e := c.Year.Drawn.Off
	if e == 0 {
		return Calculation{}
	}
	return Calculation{"E = P_standby · hours off", joined([]string{strings.TrimPrefix(s.standby(p, c.Year), " + off: ") + " = " + p.kWh(e), s.inMoney(p, c, e)}),
		"standby and hours off of the calendar, from " + fromFile}
}

// stateCalculation opens a state of the year: the duties that stand for it.
func (s *Solution) stateCalculation(p printer, c *CircuitRun, row EnergyRow) Calculation {
	for _, x := range c.Year.states(s.File.Calendar) {
		if ofWhich+x.Name != row.Name {
			continue
		}
		var parts []string
		for _, d := range c.Year.Duties {
			if e := stateOf(d, x.Key); e != 0 {
				parts = append(parts, d.Duty+": "+p.kWh(e))
			}
		}
		if text := s.standby(p, c.Year); text != "" && x.Key == string(calendar.Off) {
			parts = append(parts, strings.TrimPrefix(text, " + off: "))
		}
		e := x.Drawn.Total()
		source := "balance of each duty by what its axes do; hours from " + fromFile
		if s.File.Calendar != nil {
			source = "balance of each duty; states and hours of the calendar, from " + fromFile
		}
		return Calculation{"E = Σ of its duties, E_cycle · hours / cycle", joined([]string{strings.Join(parts, " + ") + " = " + p.kWh(e), p.hours(x.Seconds) + " a year", s.inMoney(p, c, e)}), source}
	}
	return Calculation{}
}

// stateOf is what a duty draws in a state, of the calendar or of the ledger [J a year].
func stateOf(d YearDuty, key string) float64 {
	switch key {
	case "working":
		return d.By.Working
	case "holding":
		return d.By.Holding
	case "idle":
		if d.State == "" {
			return d.By.Idle
		}
	case ownHours:
		key = ""
	}
	if string(d.State) == key {
		return d.Drawn
	}
	return 0
}
