package payback

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/fixfirst"
	"barlitre/app/sitecheck"
	"barlitre/app/station"
	"barlitre/app/widgets"
)

// page is one of the pages of the station, chosen at its top.
type page struct {
	name    string
	content fyne.CanvasObject
	changed func(station.What)
	button  *widgets.Button
}

// pages shows one page at a time.
type pages struct {
	all     []*page
	stack   *fyne.Container
	content fyne.CanvasObject
	at      int
}

func newPages(ctx station.Context, saving fyne.CanvasObject, changed func(station.What)) *pages {
	fix, check := fixfirst.New(ctx), sitecheck.New(ctx)
	s := &pages{stack: container.NewStack()}
	row := container.NewHBox()
	for i, p := range []*page{{name: "Saving and payback", content: saving, changed: changed}, {name: "Fix first", content: fix.Content(), changed: fix.Changed}, {name: "Site check", content: check.Content(), changed: check.Changed}} {
		p.button = widgets.Name(widgets.NewButton(p.name, func() { s.show(i) }), "payback.page."+[]string{"saving", "fixfirst", "sitecheck"}[i])
		s.all = append(s.all, p)
		row.Add(p.button)
	}
	inset := layout.NewCustomPaddedLayout(theme.Padding(), 0, 2*theme.Padding(), 2*theme.Padding())
	s.content = container.NewBorder(container.NewVBox(container.New(inset, container.NewHScroll(row)), widget.NewSeparator()), nil, nil, nil, s.stack)
	s.show(0)
	return s
}

// show brings a page to the front; it takes up all that it missed.
func (s *pages) show(i int) {
	s.at = i
	for j, p := range s.all {
		p.button.Importance = widget.LowImportance
		if j == i {
			p.button.Importance = widget.HighImportance
		}
		p.button.Refresh()
	}
	s.stack.Objects = []fyne.CanvasObject{s.all[i].content}
	s.stack.Refresh()
	s.all[i].changed(station.Everything)
}

// named shows a page by the name on its button.
func (s *pages) named(name string) {
	for i, p := range s.all {
		if p.name == name {
			s.show(i)
		}
	}
}

// tell passes a change on to the page in sight.
func (s *pages) tell(w station.What) { s.all[s.at].changed(w) }
