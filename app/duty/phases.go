package duty

import (
	"errors"
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	cycle "barlitre/circuit/duty"
	"barlitre/machines/units"
)

// phases is the page with the phases that a duty is computed from.
type phases struct {
	s       *Station
	body    fyne.CanvasObject
	beside  *fyne.Container
	table   *widgets.Table
	note    *widgets.Text
	preset  *widgets.Select
	own     *fyne.Container // buttons for a duty that has phases
	start   *widgets.Button // for one that has not
	columns []phaseColumn
	texts   []map[string]string // what stands written, by phase and key
}

// phaseColumn is what a phase says, in the unit that bare numbers are in.
type phaseColumn struct {
	key  string
	of   string
	what string
	unit units.Unit
}

func newPhases(s *Station) *phases {
	p := &phases{s: s, note: widgets.Wrapped("duty.phases.note")}
	p.note.Importance = widget.LowImportance
	p.table = widgets.Name(widgets.NewTable(fyne.NewSize(240, 90), s.ctx.Palette), "duty.phases")
	p.table.Note, p.table.Commit, p.table.Key = p.note, p.commit, p.key
	p.table.Editable = func(row, col int) bool { return s.staged() && row <= len(p.texts) }
	p.table.EditText = func(row, col int) string { return s.ctx.Local(p.text(row, col)) }
	p.table.Hint = p.hint
	p.table.Empty = "This duty has points. Begin a new duty from phases with the button above, or with a usual one."
	var names []string
	for _, x := range presets {
		names = append(names, x.name)
	}
	p.preset = widgets.Name(widgets.NewSelect(names, p.begin), "duty.preset")
	p.preset.PlaceHolder = "New duty from a usual one"
	p.own = container.NewHBox(
		widgets.Name(widgets.NewButton("Insert phase", p.insert), "duty.phase.insert"),
		widgets.Name(widgets.NewButton("Delete phase", p.remove), "duty.phase.delete"),
		widgets.Name(widgets.NewButton("Turn into points", p.convert), "duty.phase.convert"))
	p.start = widgets.Name(widgets.NewButton("New duty from phases", p.startTable), "duty.phase.start")
	p.beside = container.NewHBox(p.own, p.start, p.preset)
	p.body = container.NewBorder(nil, p.note, nil, nil, p.table)
	return p
}

// staged reports whether the duty at hand is computed from phases.
func (s *Station) staged() bool {
	f := s.ctx.Doc().File()
	i := s.ctx.Duty()
	return f != nil && s.shown != nil && i >= 0 && i < len(f.Stages) && f.Stages[i] != nil
}

func (p *phases) fill() {
	show(p.own, p.s.staged())
	show(p.start, !p.s.staged())
	p.columns, p.texts = nil, nil
	if !p.s.staged() {
		p.table.SetData(nil, 0, nil)
		return
	}
	f, sys := p.s.ctx.Doc().File(), p.s.ctx.System()
	second := units.Preferred(units.Time, sys)
	p.columns = []phaseColumn{{"name", "phase", "", units.Unit{}}, {"lasts", "lasts", "", second}, {"ramp", "ramp", "", second}}
	for _, a := range f.Axes {
		for _, w := range audit.StageWords() {
			p.columns = append(p.columns, phaseColumn{a.Name + "." + w, a.Name, strings.ReplaceAll(w, "_", " at "), units.Preferred(audit.StageDim(w, a.Kind), sys)})
		}
	}
	for i := range f.Stages[p.s.ctx.Duty()] {
		p.texts = append(p.texts, f.StageTexts(p.s.shown.Name, i))
	}
	var cols []widgets.Column
	for _, c := range p.columns {
		cols = append(cols, widgets.Column{Name: c.key, Head: strings.TrimSpace(c.of + "\n" + c.what), Unit: c.unit.Label(), Left: c.key == "name"})
	}
	p.table.SetData(cols, len(p.texts)+1, func(r int) widgets.TableRow {
		row := widgets.TableRow{}
		for c := range p.columns {
			text := p.text(r, c)
			if p.columns[c].key != "name" {
				text = strings.Replace(text, "-", "−", 1)
			}
			row.Cells = append(row.Cells, p.s.ctx.Local(text))
		}
		return row
	})
}

// text is what a cell shows: a number in the unit of its column, "" where nothing is given.
func (p *phases) text(row, col int) string {
	if row >= len(p.texts) {
		return ""
	}
	c := p.columns[col]
	text := p.texts[row][c.key]
	if c.key == "name" || text == "" {
		return text
	}
	si, _, err := units.Parse(text, c.unit.Dim)
	if err != nil {
		return text
	}
	return strings.TrimSpace(strings.TrimSuffix(units.FileText(si, c.unit), c.unit.Symbol))
}

// commit sends a cell to the file; one of the empty row at the end adds a phase.
func (p *phases) commit(row, col int, text string) error {
	c, doc, name := p.columns[col], p.s.ctx.Doc(), p.s.shown.Name
	if c.key != "name" && text != "" {
		si, u, err := units.ParseLoose(text, c.unit.Dim, c.unit)
		if err != nil {
			return err
		}
		text = units.FileText(si, u)
	}
	if (c.key == "name" || c.key == "lasts") && text == "" {
		return errors.New("a phase needs its name and how long it lasts")
	}
	if row < len(p.texts) {
		return p.s.panel.took(doc.SetStage(name, row, c.key, text))
	}
	title := fmt.Sprintf("phase %d", row+1)
	if c.key == "name" {
		title = text
	}
	return p.s.panel.took(doc.Edit("Add phase "+title, func(f *audit.File) error {
		if err := f.AddStage(name, row, title); err != nil || c.key == "name" {
			return err
		}
		return f.SetStage(name, row, c.key, text)
	}))
}

func (p *phases) key(k fyne.KeyName) bool {
	switch k {
	case fyne.KeyInsert:
		p.insert()
	case fyne.KeyDelete:
		p.remove()
	default:
		return false
	}
	return true
}

// insert puts a phase below the selected one.
func (p *phases) insert() {
	row, _ := p.table.Selection()
	if row < 0 || row >= len(p.texts) {
		row = len(p.texts) - 1
	}
	p.s.panel.do(p.s.ctx.Doc().AddStage(p.s.shown.Name, row+1, fmt.Sprintf("phase %d", row+2)))
	p.table.Select(row+1, 0)
}

func (p *phases) remove() {
	row, col := p.table.Selection()
	if row < 0 || row >= len(p.texts) {
		return
	}
	p.s.panel.do(p.s.ctx.Doc().RemoveStage(p.s.shown.Name, row))
	p.table.Select(min(row, len(p.texts)-1), col)
}

func (p *phases) convert() {
	p.s.panel.do(p.s.ctx.Doc().StagesToPoints(p.s.shown.Name))
	p.s.pages.open(0)
}

// startTable adds a duty with one phase in which every axis stands.
func (p *phases) startTable() {
	name, file := p.s.panel.freeName("duty %d", 1), p.s.ctx.Doc().File()
	if len(file.Axes) == 0 {
		p.s.ctx.Fail(errors.New("a duty from phases needs an axis; add one on the right first"))
		return
	}
	first := []string{"name", "phase 1", "lasts", newLength}
	for _, a := range file.Axes {
		zero := "0 kN"
		if a.Kind == cycle.Rotary {
			zero = "0 N m"
		}
		first = append(first, a.Name+".load", zero)
	}
	if err := p.s.ctx.Doc().AddStagedDuty(name, [][]string{first}); err != nil {
		p.s.ctx.Fail(err)
		return
	}
	p.s.panel.open(name)
	p.s.ctx.Say("Added " + name + " with one phase: type how long it lasts, stroke or speed and load of each axis; the empty row adds a phase.")
}

// begin adds a duty from a preset, for the first axis of its kind.
func (p *phases) begin(name string) {
	if name == "" {
		return
	}
	p.preset.Selected = ""
	p.preset.Refresh()
	for _, x := range presets {
		if x.name != name {
			continue
		}
		for _, a := range p.s.ctx.Doc().File().Axes {
			if a.Kind == x.kind {
				p.add(x, a)
				return
			}
		}
		p.s.ctx.Fail(fmt.Errorf("a %s needs a %s axis; add one on the right first", name, x.kind))
	}
}

func (p *phases) add(x preset, a cycle.Axis) {
	name := x.name
	for n := 2; ; n++ {
		free := true
		for _, d := range p.s.ctx.Doc().File().Duties {
			free = free && d.Name != name
		}
		if free {
			break
		}
		name = fmt.Sprintf("%s %d", x.name, n)
	}
	if err := p.s.ctx.Doc().AddStagedDuty(name, x.phasesFor(a.Name)); err != nil {
		p.s.ctx.Fail(err)
		return
	}
	for i, d := range p.s.ctx.Doc().File().Duties {
		if d.Name == name {
			p.s.ctx.SetDuty(i)
		}
	}
	p.s.reload()
	p.s.ctx.Say("Invented numbers for a " + x.name + " to begin with: put your own in.")
}

// hint says what the selected cell takes.
func (p *phases) hint(row, col int) string {
	switch {
	case !p.s.staged():
		return ""
	case row < 0 || col < 0 || col >= len(p.columns):
		return "One row a phase. An axis moves by its stroke, or at its speed, or stands; its load may change until the end of the phase. The tracks are computed from it."
	case row == len(p.texts):
		return "Type a name here to add a phase."
	case p.columns[col].key == "name":
		return "The name of the phase."
	case p.columns[col].key == "ramp":
		return "Time for speeding up, and at the end for slowing down, in " + unitWord(p.columns[col].unit) + "; a tenth of the phase, at most 0.1 s, when empty."
	}
	return fmt.Sprintf("%s of %s in %s; empty for none.", p.columns[col].key, p.texts[row]["name"], unitWord(p.columns[col].unit))
}
