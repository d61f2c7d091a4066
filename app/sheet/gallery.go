package sheet

import (
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// gallery shows the pictures that the selected block offers, one at a time; a click opens it large.
type gallery struct {
	p       *panel
	choice  *widgets.Select
	picture *widgets.Picture
	hint    *link
	content *fyne.Container
	list    []figures.Picture
	of      galleryOf
	chosen  string
	filling bool
}

// galleryOf is what the pictures are of.
type galleryOf struct {
	solution *audit.Solution
	circuit  string
	block    string
	system   units.System
}

func newGallery(p *panel) *gallery {
	g := &gallery{p: p}
	pal := func() figures.Palette { return p.s.ctx.Palette() }
	g.choice = widgets.Name(widgets.NewSelect(nil, g.choose), "sheet.picture.choice")
	g.picture = widgets.Name(widgets.NewPicture(fyne.NewSize(100, 220), pal), "sheet.picture")
	g.picture.Tapped = g.open
	g.hint = widgets.Name(newLink("larger", g.open), "sheet.picture.larger")
	g.content = container.New(tight{}, gapOf(6), g.choice, gapOf(4), g.picture, g.hint)
	return g
}

// bring takes the pictures of what is selected.
func (g *gallery) bring() {
	s := g.p.s
	of := galleryOf{solution: s.ctx.Solution(), system: s.ctx.System()}
	c, b := g.p.at()
	if c != nil && b != nil {
		of.circuit, of.block = c.Name, b.ID
	}
	if of != g.of {
		g.of, g.list = of, nil
		if run := s.solved(of.circuit); run != nil && of.block != "" {
			g.list = figures.PicturesOf(of.solution, run, of.block, of.system)
		}
		g.fill()
	}
	show(g.content, len(g.list) > 0)
}

func (g *gallery) fill() {
	var names []string
	for _, x := range g.list {
		names = append(names, x.Name)
	}
	if len(names) == 0 {
		g.picture.Set(nil)
		return
	}
	name := g.chosen
	if !slices.Contains(names, name) {
		name = names[0]
	}
	g.filling = true
	g.choice.Options, g.choice.Selected = names, name
	g.choice.Refresh()
	g.filling = false
	x := g.now()
	g.picture.Set(x.Draw)
	g.picture.SetMin(fyne.NewSize(100, float32(x.Height(float64(g.p.width()/widgets.Scale())))))
}

// now is the picture that is shown.
func (g *gallery) now() figures.Picture {
	for _, x := range g.list {
		if x.Name == g.choice.Selected {
			return x
		}
	}
	return g.list[0]
}

func (g *gallery) choose(name string) {
	if g.filling {
		return
	}
	g.chosen = name
	g.fill()
	g.p.relay()
}

// open shows the picture as large as the window allows.
func (g *gallery) open() {
	ctx := g.p.s.ctx
	if len(g.list) == 0 || ctx.Window() == nil {
		return
	}
	large := widgets.Name(widgets.NewPicture(fyne.NewSize(300, 240), func() figures.Palette { return ctx.Palette() }), "sheet.picture.large")
	large.Set(g.now().Draw)
	d := dialog.NewCustom(g.of.block+" · "+g.of.circuit, "Close", large, ctx.Window())
	room := ctx.Window().Canvas().Size()
	w := min(room.Width-60, 1.5*(room.Height-160))
	d.Resize(fyne.NewSize(w, room.Height-60))
	d.Show()
	ctx.Keep(d)
}
