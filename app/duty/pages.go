package duty

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// pages are what can stand below the plots: the table of points, the phases that it is
// computed from, and the year.
type pages struct {
	s       *Station
	content fyne.CanvasObject
	list    []*page
	at      int
	year    int             // the page that is of all duties, without the plot of one
	points  *fyne.Container // buttons of the table
}

// page is one of them, with the button that opens it.
type page struct {
	button *widgets.Button
	body   fyne.CanvasObject
	beside fyne.CanvasObject // its own buttons, in the row of the pages
	fill   func()
}

func newPages(s *Station) *pages {
	p := &pages{s: s}
	p.points = container.NewHBox(
		widgets.Name(widgets.NewButton("Insert row", s.insertRow), "duty.row.insert"),
		widgets.Name(widgets.NewButton("Delete row", s.deleteRow), "duty.row.delete"))
	p.add("Points", "duty.page.points", container.NewBorder(nil, s.refusal, nil, nil, s.table), p.points, nil)
	s.phases = newPhases(s)
	p.add("Phases", "duty.page.phases", s.phases.body, s.phases.beside, s.phases.fill)
	s.year = newYear(s)
	p.add("Year", "duty.page.year", s.year.body, s.year.beside, s.year.fill)
	p.year = len(p.list) - 1
	bar, bodies, beside := container.NewHBox(), container.NewStack(), container.NewStack()
	for _, g := range p.list {
		bar.Add(g.button)
		bodies.Add(g.body)
		beside.Add(g.beside)
	}
	head := container.NewHScroll(container.NewBorder(nil, nil, bar, beside))
	p.content = container.NewBorder(head, nil, nil, nil, bodies)
	p.open(0)
	return p
}

func (p *pages) add(word, name string, body, beside fyne.CanvasObject, fill func()) {
	i := len(p.list)
	button := widgets.Name(widgets.NewButton(word, func() { p.open(i) }), name)
	p.list = append(p.list, &page{button, body, beside, fill})
}

// open shows a page.
func (p *pages) open(i int) {
	p.at = i
	if p.s.upper != nil {
		show(p.s.upper, i != p.year)
		p.s.both.Refresh()
	}
	for k, g := range p.list {
		show(g.body, k == i)
		show(g.beside, k == i)
		g.button.Importance = widget.MediumImportance
		if k == i {
			g.button.Importance = widget.HighImportance
		}
		g.button.Refresh()
	}
	p.fill()
}

// fill brings the page that is shown up to date.
func (p *pages) fill() {
	if g := p.list[p.at]; g.fill != nil && p.s.shown != nil {
		g.fill()
	}
}
