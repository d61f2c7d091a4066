package fixfirst

import (
	"fmt"
	"slices"

	"barlitre/audit"
	"barlitre/audit/calendar"
	"barlitre/machines/units"
)

// worthOff is how long a break must be for the motor to be switched off in it [s]: trade literature.
const worthOff = 20 * units.Minute

// switchOff lets the hours of a duty be hours off. With a calendar these are the breaks and what the shifts idle; the hours of work
// stay as they are, and the standby is drawn while off.
func switchOff(f *audit.File, duty string) error {
	state := f.StateOf(duty)
	if state == "" {
		return f.SetDuty(duty, "hours", "0 h")
	}
	c := f.Calendar
	if state != calendar.Idle || len(c.Uses[state]) != 1 || c.HoldTime.Share > 0 || c.Hours == nil {
		return fmt.Errorf("the calendar does not tell which hours of %s could be off: that takes %s as the only duty of the state idle, and holding as hours, not as a share", duty, duty)
	}
	inShifts := c.Hours.Idle
	if c.InBreaks == calendar.Idle {
		inShifts -= c.Hours.Breaks
		for i := range c.Shifts {
			for _, b := range c.Shifts[i].Breaks {
				lasts := b.Lasts
				if lasts == 0 {
					if lasts = b.To - b.From; lasts < 0 {
						lasts += calendar.Day
					}
				}
				if lasts < worthOff {
					return fmt.Errorf("some breaks are shorter than %g\u202fmin, too short to switch off, and the calendar does not say how much of %s falls in them", worthOff/units.Minute, duty)
				}
			}
		}
		if err := f.SetCalendar("in_breaks", string(calendar.Off)); err != nil {
			return err
		}
	}
	if inShifts < 1 {
		return nil
	}
	name := "switched off while idle"
	for n := 2; slices.ContainsFunc(c.Stops, func(s calendar.Stop) bool { return s.Name == name }); n++ {
		name = fmt.Sprintf("switched off while idle %d", n)
	}
	if err := f.SetStop(name, fmt.Sprintf("%.9g h", inShifts/units.Hour)); err != nil {
		return err
	}
	return f.SetCalendar("idle_time", "")
}
