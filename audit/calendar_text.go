package audit

import (
	"fmt"
	"strings"

	"barlitre/audit/calendar"
	"barlitre/audit/thermal"
)

// spans are the times of the week in which the machine runs, in shifts with one load and in their breaks with another; none
// without a calendar.
func (c *Calendar) spans(inShifts, inBreaks int) []thermal.Span {
	if c == nil || c.Hours == nil {
		return nil
	}
	var out []thermal.Span
	for _, s := range c.Runs() {
		load := inShifts
		if s.Break {
			load = inBreaks
		}
		if n := len(out); n > 0 && out[n-1].To == s.From && out[n-1].Load == load {
			out[n-1].To = s.To
			continue
		}
		out = append(out, thermal.Span{From: s.From, To: s.To, Load: load})
	}
	return out
}

// standbyOf is what the electric supply of a circuit draws while the machine is off [W].
func (f *File) standbyOf(c *CircuitEntry) float64 {
	switch {
	case c != nil && c.HasStandby:
		return c.Standby
	case f.Calendar != nil:
		return f.Calendar.Standby
	}
	return 0
}

// calendarLines say for the report where the hours of the year come from.
func (f *File) calendarLines(p printer) []string {
	c := f.Calendar
	if c == nil || c.Hours == nil {
		return nil
	}
	h := c.Hours
	var shifts []string
	for i := range c.Shifts {
		shifts = append(shifts, ShiftText(&c.Shifts[i]))
	}
	text := fmt.Sprintf("Hours come from a shift calendar: %s; %s weeks a year", strings.Join(shifts, "; "), p.count(c.Weeks))
	for _, s := range c.Stops {
		text += fmt.Sprintf("; planned stop %s %s", s.Name, p.hours(s.Hours))
	}
	text += fmt.Sprintf("; in breaks the machine is %s.", c.InBreaks)
	sum := fmt.Sprintf("Of the 8760 hours of a year the calendar gives %s to work, %s to idle, %s to hold and %s to off", p.hours(h.Work), p.hours(h.Idle), p.hours(h.Hold), p.hours(h.Off))
	if h.Own > 0 {
		sum += "; " + p.hours(h.Own) + " are of duties with hours of their own"
	}
	if c.Standby > 0 {
		sum += "; while off the electric supply draws " + p.power(c.Standby) + ", of circuits fed by the mains"
	}
	for _, x := range f.Circuits {
		if x.HasStandby {
			sum += "; that of " + x.Name + " draws " + p.power(x.Standby)
		}
	}
	out := []string{text, sum + "."}
	for _, n := range f.found {
		if strings.HasPrefix(n.Text, "calendar") || strings.Contains(n.Text, "shifts of the calendar") {
			out = append(out, upperFirst(n.Text)+".")
		}
	}
	return out
}

func upperFirst(s string) string { return strings.ToUpper(s[:1]) + s[1:] }

// ShiftText writes a shift in words.
func ShiftText(s *calendar.Shift) string {
	text := fmt.Sprintf("%s %s to %s, %s", s.Name, calendar.Clock(s.From), calendar.Clock(s.To), calendar.DaysText(s.Days))
	if len(s.Breaks) == 0 {
		return text
	}
	var breaks []string
	for _, b := range s.Breaks {
		breaks = append(breaks, calendar.BreakText(b))
	}
	return text + ", breaks " + strings.Join(breaks, ", ")
}
