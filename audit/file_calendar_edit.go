package audit

import (
	"errors"
	"fmt"
	"regexp"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/audit/calendar"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// AddCalendar adds a calendar with one shift to begin with. Duties that have hours stand for work, those in which nothing
// moves for idle, with shares by those hours, which are taken out.
func (f *File) AddCalendar() error {
	if f.Calendar != nil {
		return errors.New("there is a calendar already")
	}
	if len(f.Duties) == 0 {
		return errors.New("a calendar needs a duty to give its hours to; add one first")
	}
	d := f.draft()
	for i, du := range f.Duties {
		if child(d.duty(i), "hours") != nil {
			if err := d.cutKey(d.duty(i), "hours"); err != nil {
				return fmt.Errorf("duty %q: %w", du.Name, err)
			}
		}
	}
	lines := append([]string{"shifts: [{name: day, from: 06:00, to: 14:00, days: Mon-Fri}]"}, f.firstUses()...)
	err := d.add(d.root, "calendar", false, lines...)
	if err != nil {
		return fmt.Errorf("calendar: %w", err)
	}
	return f.take("calendar", d, func(g *File) bool { return g.Calendar != nil })
}

// firstUses are the lines of a new calendar that say what the duties stand for.
func (f *File) firstUses() []string {
	hours, count, in := map[calendar.State]float64{}, map[calendar.State]int{}, make([]calendar.State, len(f.Duties))
	for i, du := range f.Duties {
		in[i] = f.stateFor(du)
		hours[in[i]] += du.Hours
		count[in[i]]++
	}
	if count[calendar.Work] == 0 { // nothing moves yet: what there is stands for work
		for i := range in {
			in[i] = calendar.Work
		}
		hours[calendar.Work], hours[calendar.Idle], count[calendar.Work] = hours[calendar.Idle], 0, len(in)
	}
	var lines []string
	if work, idle := hours[calendar.Work], hours[calendar.Idle]; work > 0 && idle > 0 {
		lines = append(lines, "idle_time: "+percentText(idle/(work+idle)))
	}
	for _, state := range calendar.Busy {
		var uses []string
		for i, du := range f.Duties {
			if in[i] != state {
				continue
			}
			share := 1 / float64(count[state])
			if hours[state] > 0 {
				share = du.Hours / hours[state]
			}
			uses = append(uses, encode(du.Name, true)+": "+percentText(share))
		}
		if len(uses) > 0 {
			lines = append(lines, string(state)+": {"+strings.Join(uses, ", ")+"}")
		}
	}
	return lines
}

// percentText writes a share as the file does.
func percentText(x float64) string {
	return strings.ReplaceAll(units.FileText(tidy(units.Percent, x), units.Percent), "\u202f", " ")
}

// stateFor is work for a duty in which something moves, else idle.
func (f *File) stateFor(d *duty.Duty) calendar.State {
	for _, a := range f.Axes {
		if top, _ := d.TopSpeed(a.Name); top > 0 {
			return calendar.Work
		}
	}
	if len(d.Tracks) == 0 {
		return calendar.Work
	}
	return calendar.Idle
}

// RemoveCalendar takes the calendar out; the duties keep the hours that it gave them.
func (f *File) RemoveCalendar() error {
	if f.Calendar == nil {
		return errors.New("there is no calendar")
	}
	d := f.draft()
	err := d.cutKey(d.root, "calendar")
	hour, _ := units.ParseUnit("h", units.Time)
	for i, du := range f.Duties {
		if f.Calendar.StateOf(du.Name) != "" && du.Hours > 0 && err == nil {
			err = d.one(d.src.put(d.duty(i), "hours", encode(units.FileText(tidy(hour, du.Hours), hour), false)))
		}
	}
	if err != nil {
		return fmt.Errorf("calendar: %w", err)
	}
	return f.take("calendar", d, func(g *File) bool { return g.Calendar == nil })
}

// calendarDraft begins an edit of the calendar.
func (f *File) calendarDraft() (*draft, *yaml.Node, error) {
	if f.Calendar == nil {
		return nil, nil, errors.New("there is no calendar; add one first")
	}
	d := f.draft()
	return d, child(d.root, "calendar"), nil
}

// calendarEdit takes a draft in which the calendar was changed.
func (f *File) calendarEdit(d *draft, err error, holds func(*File) bool) error {
	if err != nil {
		return fmt.Errorf("calendar: %w", err)
	}
	return f.take("calendar", d, func(g *File) bool { return g.Calendar != nil && holds(g) })
}

// SetCalendar sets weeks, in_breaks, idle_time, hold_time or standby; "" takes it out.
func (f *File) SetCalendar(key, value string) error {
	if !slices.Contains(calendarKeys, key) {
		return fmt.Errorf("calendar: %s: give one of %s", key, strings.Join(calendarKeys, ", "))
	}
	d, m, err := f.calendarDraft()
	if err != nil {
		return err
	}
	return f.calendarEdit(d, d.setOrCut(m, key, value, false), func(g *File) bool {
		n := child(child(g.root, "calendar"), key)
		return written(child(n, "value"), n) == strings.TrimSpace(value)
	})
}

// setOrCut sets a single value of a mapping; "" takes its key out.
func (d *draft) setOrCut(m *yaml.Node, key, value string, isText bool) error {
	value = strings.TrimSpace(value)
	if value != "" {
		return d.one(d.src.put(m, key, encode(value, isText)))
	}
	if child(m, key) == nil {
		return nil
	}
	return d.cutKey(m, key)
}

// SetStop sets the hours a year of a planned stop, which is added when it is new; "" takes it out.
func (f *File) SetStop(name, hours string) error {
	name, hours = oneLine(name), strings.TrimSpace(hours)
	d, m, err := f.calendarDraft()
	if err != nil {
		return err
	}
	if name == "" {
		return errors.New("a planned stop needs a name; write one, such as maintenance")
	}
	stops := child(m, "stops")
	switch {
	case child(stops, name) != nil:
		err = d.setOrCut(stops, name, hours, false)
	case hours != "":
		err = d.addInline(m, "stops", false, encode(name, true)+": "+encode(hours, false))
	}
	return f.calendarEdit(d, err, func(g *File) bool {
		has := slices.ContainsFunc(g.Calendar.Stops, func(s calendar.Stop) bool { return s.Name == name })
		return has == (hours != "")
	})
}

// AddShift adds a shift: what it says by key, such as from, 14:00, to, 22:00.
func (f *File) AddShift(pairs ...string) error {
	d, m, err := f.calendarDraft()
	if err != nil {
		return err
	}
	n := len(f.Calendar.Shifts)
	var parts []string
	for i := 0; i+1 < len(pairs); i += 2 {
		parts = append(parts, pairs[i]+": "+shiftValue(pairs[i], pairs[i+1]))
	}
	err = d.one(d.src.attach(child(m, "shifts"), "{"+strings.Join(parts, ", ")+"}"))
	return f.calendarEdit(d, err, func(g *File) bool { return len(g.Calendar.Shifts) == n+1 })
}

// clockText is what may stand in a list without quotes: times of day.
var clockText = regexp.MustCompile(`^[0-9][0-9: -]*$`)

// shiftValue writes what a shift says under a key; breaks are a list.
func shiftValue(key, value string) string {
	if clockText.MatchString(strings.TrimSpace(value)) && (key == "from" || key == "to") {
		return strings.TrimSpace(value)
	}
	if key != "breaks" {
		return encode(strings.TrimSpace(value), key == "name" || strings.Contains(value, ","))
	}
	var parts []string
	for _, p := range strings.Split(value, ",") {
		if p = strings.TrimSpace(p); clockText.MatchString(p) {
			parts = append(parts, p)
		} else if p != "" {
			parts = append(parts, encode(p, false))
		}
	}
	return "[" + strings.Join(parts, ", ") + "]"
}

// SetShift changes what a shift says: name, from, to, days or breaks, such as "09:00 - 09:15, 12:00 - 12:30"; "" takes it
// out. i counts from 0.
func (f *File) SetShift(i int, key, value string) error {
	if !slices.Contains(shiftKeys, key) {
		return fmt.Errorf("calendar: %s: give one of %s", key, strings.Join(shiftKeys, ", "))
	}
	d, m, err := f.calendarDraft()
	if err != nil {
		return err
	}
	shift := item(child(m, "shifts"), i)
	if shift == nil {
		return fmt.Errorf("calendar: there is no shift %d; it has %d", i+1, len(f.Calendar.Shifts))
	}
	if child(shift, key) != nil { // a list may stand where a text comes now
		if err = d.cutKey(shift, key); err == nil {
			shift = item(child(child(d.root, "calendar"), "shifts"), i)
		}
	}
	if value = strings.TrimSpace(value); value != "" && err == nil {
		err = d.one(d.src.insert(shift, key, shiftValue(key, value)))
	}
	return f.calendarEdit(d, err, func(g *File) bool { return len(g.Calendar.Shifts) == len(f.Calendar.Shifts) })
}

// RemoveShift takes a shift out; one stays.
func (f *File) RemoveShift(i int) error {
	d, m, err := f.calendarDraft()
	if err != nil {
		return err
	}
	n := len(f.Calendar.Shifts)
	if i < 0 || i >= n || n < 2 {
		return fmt.Errorf("calendar: shift %d cannot be taken out; it has %d and needs one", i+1, n)
	}
	return f.calendarEdit(d, d.cut(m, "shifts", true, func(k int) bool { return k == i }), func(g *File) bool { return len(g.Calendar.Shifts) == n-1 })
}

// AssignDuty lets a duty stand for work, idle or hold, with its share or its hours a year, "60 %" or "1200 h"; hours of
// its own are taken out. The state "" takes it out of the calendar.
func (f *File) AssignDuty(name string, state calendar.State, amount string) error {
	i, err := f.dutyNamed(name)
	if err != nil {
		return err
	}
	d, _, err := f.calendarDraft()
	if err != nil {
		return err
	}
	if state != "" && !slices.Contains(calendar.Busy, state) {
		return fmt.Errorf("a duty stands for work, idle or hold, not for %q", state)
	}
	section := func() *yaml.Node { return child(d.root, "calendar") }
	was := f.Calendar.StateOf(name)
	if n := child(child(section(), string(was)), name); n != nil && was == state && strings.TrimSpace(amount) != "" {
		err = d.one(d.src.put(child(section(), string(state)), name, encode(strings.TrimSpace(amount), false)))
	} else {
		if was != "" {
			err = d.cutState(was, name)
		}
		if amount = strings.TrimSpace(amount); amount == "" {
			amount = "100 %"
		}
		if state != "" && err == nil {
			err = d.addInline(section(), string(state), false, encode(name, true)+": "+encode(amount, false))
		}
	}
	if state != "" && err == nil && child(d.duty(i), "hours") != nil {
		err = d.cutKey(d.duty(i), "hours")
	}
	return f.calendarEdit(d, err, func(g *File) bool { return g.Calendar.StateOf(name) == state })
}

// cutState takes a duty out of a state, and the state when nothing is left of it.
func (d *draft) cutState(state calendar.State, name string) error {
	m := child(d.root, "calendar")
	uses := child(m, string(state))
	if len(mappingKeys(uses)) == 1 {
		return d.cutKey(m, string(state))
	}
	return d.cut(m, string(state), true, func(k int) bool { return oneLine(mappingKeys(uses)[k].Value) == name })
}

// CalendarTexts returns what stands written in the calendar, by key; stops as "maintenance 40 h, rebuild 60 h".
func (f *File) CalendarTexts() map[string]string {
	out := map[string]string{}
	m := child(f.root, "calendar")
	for _, key := range calendarKeys {
		n := child(m, key)
		out[key] = written(child(n, "value"), n)
	}
	var stops []string
	for i, k := range mappingKeys(child(m, "stops")) {
		n := child(m, "stops").Content[2*i+1]
		stops = append(stops, k.Value+" "+written(child(n, "value"), n))
	}
	out["stops"] = strings.Join(stops, ", ")
	return out
}
