package sheet

import (
	"strings"

	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
)

// pickerWidth leaves room for a name [units at scale 1].
const pickerWidth = 170

// picker chooses the circuit on the second sheet, where there are several.
type picker struct {
	s       *Station
	sel     *widgets.Select
	content *fyne.Container
	filling bool
}

func newPicker(s *Station) *picker {
	p := &picker{s: s}
	p.sel = widgets.Name(widgets.NewSelect(nil, p.chosen), "sheet.proposal")
	p.content = container.New(widgets.Wide(pickerWidth), p.sel)
	p.content.Hide()
	return p
}

func (p *picker) chosen(name string) {
	if !p.filling {
		p.s.ctx.Pick(name)
	}
}

func (p *picker) reload() {
	names := p.s.ctx.Doc().File().Besides()
	show(p.content, len(names) > 1)
	p.filling = true
	defer func() { p.filling = false }()
	p.sel.Options = names
	if name := p.s.ctx.Beside(); p.sel.Selected != name {
		p.sel.Selected = name
	}
	p.sel.Refresh()
}

// openCircuits lists what can be done with whole circuits.
func (s *Station) openCircuits() {
	w := s.ctx.Window()
	if w == nil {
		return
	}
	if len(s.ctx.Doc().File().Circuits) == 0 {
		s.ctx.Say("There is no circuit yet; / adds a first block, and File > New has circuits to begin with.")
		return
	}
	box := container.NewVBox()
	var first fyne.Focusable
	var pop *widget.PopUp
	add := func(name, text string, do func()) {
		b := widgets.Name(widgets.NewButton(text, func() {
			pop.Hide()
			do()
		}), "circuits."+name)
		b.Alignment, b.Importance = widget.ButtonAlignLeading, widget.LowImportance
		if first == nil {
			first = b
		}
		box.Add(b)
	}
	base, beside := s.editors[0].name, s.ctx.Beside()
	if other := s.editors[1-s.active].name; s.single && other != "" {
		add("other", "Show the sheet of "+other, s.otherSheet)
	}
	if beside != "" {
		add("rename", "Rename "+beside+"…", func() { s.renameCircuit(beside) })
		add("duplicate", "Duplicate "+beside, func() { s.copyCircuit(beside) })
		add("swap", "Swap sides: "+beside+" is as found", func() { s.swapSides(base, beside) })
		add("delete", "Delete "+beside, func() { s.deleteCircuit(beside) })
	}
	add("rename.base", "Rename "+base+"…", func() { s.renameCircuit(base) })
	add("copy", "New proposal, a copy of "+base, s.copyAsFound)
	add("empty", "New proposal, an empty sheet", s.emptyProposal)
	for _, name := range s.ctx.Doc().File().Besides() {
		if name != beside {
			add("pick."+name, "Pick "+name, func() { s.ctx.Pick(name) })
		}
	}
	pop = widget.NewPopUp(container.New(inset{4}, container.NewVScroll(box)), w.Canvas())
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(s.bar.circuits)
	size := box.MinSize().AddWidthHeight(24*widgets.Scale(), 20*widgets.Scale())
	s.popAt(pop, at.AddXY(0, s.bar.circuits.Size().Height), size)
	w.Canvas().Focus(first)
}

// otherSheet shows the other of the two sheets where there is room for one.
func (s *Station) otherSheet() {
	s.active = 1 - s.active
	s.ctx.Select(s.editors[s.active].circuit, "")
	s.arrange()
	s.fitAll()
}

// freeName returns a name for a new circuit, numbered where it is taken.
func freeName(f *audit.File, name string) string {
	for n, try := 2, name; ; n++ {
		if f.Circuit(try) == nil {
			return try
		}
		try = fmt.Sprintf("%s %d", name, n)
	}
}

// done picks a circuit after an edit of whole circuits, or says why there was none.
func (s *Station) done(err error, pick, said string) bool {
	if err != nil {
		s.refused(err)
		return false
	}
	s.ctx.Pick(pick)
	s.bringCircuits(false)
	s.ctx.Say(said + " Ctrl+Z takes it back.")
	return true
}

// copyAsFound begins a proposal as a copy of the circuit as found.
func (s *Station) copyAsFound() {
	from, name := s.editors[0].name, freeName(s.ctx.Doc().File(), "Proposal")
	s.done(s.ctx.Doc().CopyCircuit(from, name), name,
		name+" begins as a copy of "+from+". Change it: / adds a block, Del removes one, a drag from port to port connects.")
}

func (s *Station) copyCircuit(from string) {
	name := freeName(s.ctx.Doc().File(), from)
	s.done(s.ctx.Doc().CopyCircuit(from, name), name, name+" begins as a copy of "+from+".")
}

func (s *Station) emptyProposal() {
	name := freeName(s.ctx.Doc().File(), "Proposal")
	s.done(s.ctx.Doc().AddCircuit(name, audit.Proposal), name, name+" is empty: / adds a first block.")
}

// swapSides makes the proposal the circuit as found, and the one as found a proposal.
func (s *Station) swapSides(base, beside string) {
	s.done(s.ctx.Doc().SwapRoles(base, beside), base, beside+" is the circuit as found now, and "+base+" stands beside it.")
}

func (s *Station) deleteCircuit(name string) {
	s.done(s.ctx.Doc().DeleteCircuit(name), "", "Deleted "+name+".")
}

// renameCircuit asks for another name of a circuit.
func (s *Station) renameCircuit(old string) {
	e := s.editors[1]
	if old == s.editors[0].name {
		e = s.editors[0]
	}
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(e).AddXY(20, 10)
	e.askAt(at, "Name of the circuit:", old, "sheet.rename", func(name string) bool {
		name = strings.TrimSpace(name)
		if name == old {
			return true
		}
		keep := name
		if e.index == 0 {
			keep = s.ctx.Beside()
		}
		return s.done(s.ctx.Doc().RenameCircuit(old, name), keep, old+" is called "+name+" now.")
	})
}
