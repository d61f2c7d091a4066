package duty

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/calendar"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// year is the page with the shift calendar and what it gives the duties.
type year struct {
	s            *Station
	body         fyne.CanvasObject
	beside       *fyne.Container
	none, filled fyne.CanvasObject // without a calendar, and with one
	begin, own   fyne.CanvasObject // buttons for either
	told         *widgets.Text     // without one: what is typed at the duties
	picture      *widgets.Figure
	states       *widgets.Table
	shifts       *widgets.Table
	duties       *widgets.Table
	warning      *widgets.Text
	fields       map[string]*widgets.Field // by key of the calendar
	perCircuit   *fyne.Container           // what each circuit draws while off
	standby      map[string]*widgets.Field // by circuit
	breaks       *widgets.Select
	loading      bool
}

// yearFields are the fields of the page, by key of the section.
var yearFields = []struct{ key, title, hint string }{
	{"weeks", "Weeks a year", "all of them, 52.14"},
	{"stops", "Planned stops", "none; such as maintenance 40 h, rebuild 60 h"},
	{"idle_time", "Idle within shifts", "none; a share, or hours a year"},
	{"hold_time", "Hold within shifts", "none; a share, or hours a year"},
	{"standby", "Drawn while off", "nothing; such as 80 W"},
}

func newYear(s *Station) *year {
	y := &year{s: s, fields: map[string]*widgets.Field{}}
	y.told = widgets.Wrapped("duty.year.told")
	y.begin = widgets.Name(widgets.NewButton("Begin a shift calendar", y.add), "duty.year.begin")
	y.own = container.NewHBox(
		widgets.Name(widgets.NewButton("Add shift", y.addShift), "duty.shift.add"),
		widgets.Name(widgets.NewButton("Delete shift", y.removeShift), "duty.shift.delete"),
		widgets.Name(widgets.NewButton("Back to typed hours", y.remove), "duty.year.remove"))
	y.beside = container.NewHBox(y.begin, y.own)
	y.picture = widgets.Name(widgets.NewFigure(fyne.NewSize(260, float32(figures.Week{}.Height())), func(p pen.Pen, w, h float64) []widgets.Part {
		figures.Week{Calendar: y.calendar()}.Draw(p, w, h, s.ctx.Palette())
		return nil
	}), "duty.year.week")
	y.picture.Ground = nil
	y.warning = widgets.Wrapped("duty.year.warning")
	y.warning.Importance = widget.DangerImportance
	scroll := container.NewVScroll(nil)
	scroll.Content = y.lay(scroll)
	y.none, y.filled = container.NewVScroll(y.told), scroll
	y.body = container.NewStack(y.none, y.filled)
	return y
}

// lay puts the parts of a calendar below each other.
func (y *year) lay(scroll *container.Scroll) fyne.CanvasObject {
	table := func(name string) *widgets.Table {
		t := widgets.Name(widgets.NewTable(fyne.NewSize(240, 60), y.s.ctx.Palette), name)
		t.Outer = scroll.Scrolled
		return t
	}
	y.states, y.shifts, y.duties = table("duty.year.states"), table("duty.year.shifts"), table("duty.year.duties")
	y.states.ByRow = true
	note := func(t *widgets.Table, hint string) *widgets.Text {
		l := widgets.Wrapped("")
		l.Importance = widget.LowImportance
		t.Note, t.Hint = l, func(int, int) string { return hint }
		return l
	}
	shiftNote := note(y.shifts, "One row a shift, on the days that it begins: Mon-Fri, or Mon, Wed, Sat. A shift that ends before it begins ends on the next day. Breaks with their times, 09:00 - 09:15, or only how long, 30 min.")
	dutyNote := note(y.duties, "What each duty stands for: work, idle (nothing moves), hold, or own hours. Its share of that state, 60 %, or hours a year, 1200 h; shares are of what hours leave.")
	y.editing()
	rows := container.New(&abreast{})
	for _, f := range yearFields {
		field := widgets.Name(widgets.NewField("", func(text string) error { return y.set(f.key, text) }), "duty.year."+f.key)
		y.fields[f.key] = field
		rows.Add(widgets.FieldRow(f.title, field))
	}
	y.breaks = widgets.Name(widgets.NewSelect([]string{"idle", "hold", "off"}, y.setBreaks), "duty.year.in_breaks")
	rows.Add(widgets.Row("In breaks", y.breaks, nil))
	y.perCircuit = container.New(&abreast{})
	head := func(text string) fyne.CanvasObject {
		return widget.NewLabelWithStyle(text, fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	}
	return container.New(besideBar{}, container.NewVBox(y.warning,
		container.New(&abreast{}, y.picture, y.states),
		head("Shifts"), y.shifts, shiftNote, rows, y.perCircuit, head("What the duties stand for"), y.duties, dutyNote))
}

func (y *year) calendar() *audit.Calendar {
	if f := y.s.ctx.Doc().File(); f != nil {
		return f.Calendar
	}
	return nil
}

// hours writes hours with as many digits as tell them from their neighbours.
func (y *year) hours(t float64) string {
	return y.s.ctx.Local(station.TrimZeros(units.Number(t/units.Hour, 5)))
}

func (y *year) fill() {
	c := y.calendar()
	show(y.none, c == nil)
	show(y.filled, c != nil)
	show(y.begin, c == nil)
	show(y.own, c != nil)
	if c == nil {
		y.told.SetText(y.typedHours())
		return
	}
	y.loading = true
	defer func() { y.loading = false }()
	y.fillStates(c)
	y.fillShifts(c)
	y.fillDuties(c)
	texts := y.s.ctx.Doc().File().CalendarTexts()
	for _, f := range yearFields {
		value, hint := y.s.ctx.Local(texts[f.key]), ""
		if value == "" {
			hint = f.hint
		}
		y.fields[f.key].SetValue(value, hint)
	}
	y.fillStandby(texts["standby"])
	y.breaks.SetSelected(string(c.InBreaks))
	var warnings []string
	for _, n := range y.s.ctx.Doc().Findings() {
		if strings.HasPrefix(n.Text, "calendar") {
			warnings = append(warnings, "⚠ "+y.s.ctx.Local(n.Text))
		}
	}
	y.warning.SetText(strings.Join(warnings, "\n"))
	show(y.warning, len(warnings) > 0)
	y.picture.Refresh()
}

// typedHours says what the duties have without a calendar.
func (y *year) typedHours() string {
	sum := 0.0
	var parts []string
	for _, d := range y.s.ctx.Doc().File().Duties {
		if sum += d.Hours; d.Hours > 0 {
			parts = append(parts, d.Name+" "+y.hours(d.Hours)+"\u202fh")
		}
	}
	text := "The hours of the year are typed at the duties: " + strings.Join(parts, ", ")
	if len(parts) == 0 {
		text = "No duty has hours a year yet"
	}
	text += fmt.Sprintf(". That is %s\u202fh of 8760\u202fh. What the machine does in the rest is not said.\n\n"+
		"A shift calendar gives the hours instead: shifts with their breaks, weeks and planned stops, and which duty stands for work, idle and hold. The rest of the year is off. "+
		"The oil temperature then follows these shifts, too.", y.hours(sum))
	if sum > calendar.Year {
		text += "\n\n⚠ The duties have more hours than a year."
	}
	return text
}

func (y *year) fillStates(c *audit.Calendar) {
	type line struct {
		name  string
		hours float64
		kind  widgets.RowKind
	}
	var lines []line
	if h := c.Hours; h != nil {
		lines = []line{{"work", h.Work, 0}, {"idle", h.Idle, 0}, {"hold", h.Hold, 0}, {"own hours", h.Own, 0}, {"off", h.Off, 0},
			{"the year", h.Work + h.Idle + h.Hold + h.Own + h.Off, widgets.RowSum},
			{"weeks not worked", h.Away, 0}, {"outside the shifts", h.Between, 0}, {"planned stops", h.Stops, 0}, {"breaks", h.Breaks, 0}}
	}
	cols := []widgets.Column{{Name: "state", Head: "hours by state", Left: true}, {Name: "hours", Head: "a year", Unit: "h"}, {Name: "share", Head: "of the year", Unit: "%"}}
	y.states.SetData(cols, len(lines), func(i int) widgets.TableRow {
		l := lines[i]
		return widgets.TableRow{Name: l.name, Kind: l.kind, Cells: []string{l.name, y.hours(l.hours), y.s.ctx.Local(units.Number(100*l.hours/calendar.Year, 3))}}
	})
	y.states.FitRows()
}
