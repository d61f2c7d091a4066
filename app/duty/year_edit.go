package duty

import (
	"errors"
	"fmt"
	"strings"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/calendar"
	"barlitre/machines/units"
)

var shiftColumns = []widgets.Column{{Name: "name", Head: "shift", Left: true}, {Name: "from", Head: "from"}, {Name: "to", Head: "to"},
	{Name: "days", Head: "days", Left: true}, {Name: "breaks", Head: "breaks", Left: true}}

var useColumns = []widgets.Column{{Name: "duty", Head: "duty", Left: true, Most: 220}, {Name: "state", Head: "stands for", Left: true}, {Name: "amount", Head: "share or hours"}, {Name: "hours", Head: "a year", Unit: "h"}}

// editing lets the tables take what is typed.
func (y *year) editing() {
	y.shifts.Editable = func(row, col int) bool { return true }
	y.shifts.EditText = func(row, col int) string { return y.shiftText(row, col) }
	y.shifts.Commit = y.setShift
	y.duties.Editable = func(row, col int) bool { return col == 1 || col == 2 }
	y.duties.EditText = func(row, col int) string { return y.s.ctx.Local(y.useText(row, col)) }
	y.duties.Commit = y.setUse
}

func (y *year) fillShifts(c *audit.Calendar) {
	y.shifts.SetData(shiftColumns, len(c.Shifts)+1, func(i int) widgets.TableRow {
		row := widgets.TableRow{}
		for col := range shiftColumns {
			row.Cells = append(row.Cells, y.shiftText(i, col))
		}
		return row
	})
	y.shifts.FitRows()
}

func (y *year) shiftText(row, col int) string {
	c := y.calendar()
	if c == nil || row >= len(c.Shifts) {
		return ""
	}
	s := &c.Shifts[row]
	switch shiftColumns[col].Name {
	case "name":
		return s.Name
	case "from":
		return calendar.Clock(s.From)
	case "to":
		return calendar.Clock(s.To)
	case "days":
		return calendar.DaysText(s.Days)
	}
	var parts []string
	for _, b := range s.Breaks {
		parts = append(parts, calendar.BreakText(b))
	}
	return strings.Join(parts, ", ")
}

// setShift takes a cell; one of the empty row at the end adds a shift that follows the last.
func (y *year) setShift(row, col int, text string) error {
	key := shiftColumns[col].Name
	return y.s.panel.took(y.s.ctx.Doc().EditYear("a shift", func(f *audit.File) error {
		if row < len(f.Calendar.Shifts) {
			return f.SetShift(row, key, text)
		}
		if err := f.AddShift(nextShift(f.Calendar)...); err != nil {
			return err
		}
		return f.SetShift(row, key, text)
	}))
}

// nextShift is a shift of eight hours after the last one, on its days.
func nextShift(c *audit.Calendar) []string {
	last := c.Shifts[len(c.Shifts)-1]
	end := last.To
	if end >= calendar.Day {
		end -= calendar.Day
	}
	to := end + 8*calendar.Hour
	if to > calendar.Day {
		to -= calendar.Day
	}
	return []string{"name", fmt.Sprintf("shift %d", len(c.Shifts)+1), "from", calendar.Clock(end), "to", calendar.Clock(to), "days", calendar.DaysText(last.Days)}
}

func (y *year) addShift() {
	y.s.panel.do(y.s.ctx.Doc().EditYear("a shift", func(f *audit.File) error { return f.AddShift(nextShift(f.Calendar)...) }))
}

func (y *year) removeShift() {
	row, _ := y.shifts.Selection()
	if row < 0 {
		row = len(y.calendar().Shifts) - 1
	}
	y.s.panel.do(y.s.ctx.Doc().EditYear("a shift", func(f *audit.File) error { return f.RemoveShift(row) }))
}

func (y *year) fillDuties(c *audit.Calendar) {
	duties := y.s.ctx.Doc().File().Duties
	y.duties.SetData(useColumns, len(duties), func(i int) widgets.TableRow {
		return widgets.TableRow{Name: duties[i].Name, Cells: []string{duties[i].Name, y.useText(i, 1), y.s.ctx.Local(y.useText(i, 2)), y.hours(duties[i].Hours)}}
	})
	y.duties.FitRows()
}

// useText is what a cell of the duties says.
func (y *year) useText(row, col int) string {
	c, f := y.calendar(), y.s.ctx.Doc().File()
	if c == nil || row >= len(f.Duties) {
		return ""
	}
	name := f.Duties[row].Name
	state := c.StateOf(name)
	switch {
	case col == 1 && state == "":
		return "own hours"
	case col == 1:
		return string(state)
	}
	for _, u := range c.Uses[state] {
		if u.Duty == name && u.Hours > 0 {
			return y.hours(u.Hours) + " h"
		} else if u.Duty == name {
			return units.FileText(u.Share, units.Percent)
		}
	}
	return ""
}

// setUse takes the state or the amount of a duty.
func (y *year) setUse(row, col int, text string) error {
	name := y.s.ctx.Doc().File().Duties[row].Name
	state := y.calendar().StateOf(name)
	amount := strings.ReplaceAll(strings.TrimSpace(text), ",", ".")
	if col == 1 {
		amount = ""
		switch word := strings.ToLower(strings.TrimSpace(text)); word {
		case "work", "idle", "hold":
			state = calendar.State(word)
		case "own hours", "own", "":
			state = ""
		case "off":
			return errors.New("off needs no duty: it is what the shifts leave; write work, idle, hold or own hours")
		default:
			return fmt.Errorf("%q is no state; write work, idle, hold or own hours", text)
		}
		if state == y.calendar().StateOf(name) {
			return nil
		}
	} else if state == "" {
		return errors.New("say first what the duty stands for: work, idle or hold")
	}
	return y.s.panel.took(y.s.ctx.Doc().EditYear("duty "+name, func(f *audit.File) error { return f.AssignDuty(name, state, withUnit(amount, "%")) }))
}

// withUnit adds a unit to a bare number.
func withUnit(text, unit string) string {
	if text != "" && strings.Trim(text, "0123456789.") == "" {
		return text + " " + unit
	}
	return text
}

// set takes a field of the calendar.
func (y *year) set(key, text string) error {
	text = strings.TrimSpace(text)
	return y.s.panel.took(y.s.ctx.Doc().EditYear(strings.ReplaceAll(key, "_", " "), func(f *audit.File) error {
		switch key {
		case "stops":
			return setStops(f, text)
		case "standby":
			return f.SetCalendar(key, withUnit(strings.ReplaceAll(text, ",", "."), "W"))
		case "idle_time", "hold_time":
			return f.SetCalendar(key, withUnit(strings.ReplaceAll(text, ",", "."), "%"))
		}
		return f.SetCalendar(key, strings.ReplaceAll(text, ",", "."))
	}))
}

// setStops takes "maintenance 40 h, rebuild 60 h" for all planned stops.
func setStops(f *audit.File, text string) error {
	wanted := map[string]bool{}
	for _, part := range strings.Split(text, ",") {
		part = strings.TrimSpace(part)
		if part == "" {
			continue
		}
		at := strings.IndexAny(part, "0123456789")
		if at < 0 {
			return fmt.Errorf("%q has no hours; write the name and its hours a year, such as maintenance 40 h", part)
		}
		name := strings.TrimSpace(part[:at])
		if name == "" {
			name = "stop"
		}
		if err := f.SetStop(name, withUnit(strings.TrimSpace(part[at:]), "h")); err != nil {
			return err
		}
		wanted[name] = true
	}
	for _, s := range append([]calendar.Stop(nil), f.Calendar.Stops...) {
		if !wanted[s.Name] {
			if err := f.SetStop(s.Name, ""); err != nil {
				return err
			}
		}
	}
	return nil
}

func (y *year) setBreaks(state string) {
	if c := y.calendar(); !y.loading && c != nil && state != "" && state != string(c.InBreaks) {
		y.s.panel.do(y.s.ctx.Doc().EditYear("breaks", func(f *audit.File) error { return f.SetCalendar("in_breaks", state) }))
		y.fill() // a choice that was refused goes back
	}
}

func (y *year) add() {
	y.s.panel.do(y.s.ctx.Doc().Edit("Begin a shift calendar", func(f *audit.File) error { return f.AddCalendar() }))
}

func (y *year) remove() {
	y.s.panel.do(y.s.ctx.Doc().Edit("Go back to typed hours", func(f *audit.File) error { return f.RemoveCalendar() }))
}
