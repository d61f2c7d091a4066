package sheet

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// panel shows the selected block, or with none the circuit.
type panel struct {
	s       *Station
	paper   *widgets.Rim
	head    *widgets.Figure
	list    *fyne.Container
	scroll  *container.Scroll
	live    *live
	service *service
	asked   *asked
	year    *year
	gallery *gallery
	parts   []*part
	links   *fyne.Container // to the parts
	rows    []row
	groups  []*group
	content *fyne.Container

	compare     *link // sets the other circuit's values beside
	compareLine *fyne.Container
	comparing   bool

	shows    string                   // circuit and block that the rows are of
	many     []string                 // blocks that are edited together, with the one at hand
	manyOf   string                   // their circuit
	expanded map[circuit.Section]bool // values left at their defaults are listed as well
	drafts   map[string]string        // refused texts, by target
}

func newPanel(s *Station) *panel {
	p := &panel{s: s, paper: widgets.NewRim(), drafts: map[string]string{}, expanded: map[circuit.Section]bool{}}
	p.head = widgets.Name(widgets.NewFigure(fyne.NewSize(100, 40), p.drawHead), "sheet.title")
	p.head.Tapped = func(widgets.Part, float64, float64) {
		if _, b := p.at(); b != nil {
			s.Act(station.Rename)
		}
	}
	p.live = newLive(p)
	p.newParts()
	p.newCompare()
	p.list = container.New(tight{})
	p.scroll = widgets.Name(container.NewVScroll(container.New(edges{}, p.list)), "sheet.panel")
	p.live.plot.Outer = p.scroll.Scrolled
	top := container.New(tight{}, p.head, p.compareLine, p.links)
	inner := container.NewBorder(top, nil, nil, nil, p.scroll)
	p.content = container.NewStack(p.paper, container.New(inset{4}, inner))
	return p
}

// edges leaves room left and right, and for the scroll bar.
type edges struct{}

func (edges) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	k := widgets.Scale()
	for _, o := range objects {
		put(o, 8*k, 0, size.Width-18*k, size.Height)
	}
}

func (edges) MinSize(objects []fyne.CanvasObject) fyne.Size {
	return fyne.NewSize(0, objects[0].MinSize().Height+8)
}

// width is that of the rows [units].
func (p *panel) width() float32 { return (panelWidth - 2*4 - 18) * widgets.Scale() }

// at returns the circuit that the panel is about, and the selected block.
func (p *panel) at() (c *audit.CircuitEntry, b *circuit.Block) {
	file := p.s.ctx.Doc().File()
	i, block := p.s.ctx.Selected()
	if i < 0 {
		i = p.s.editors[p.s.active].circuit
	}
	if file == nil || i < 0 || i >= len(file.Circuits) {
		return nil, nil
	}
	c = &file.Circuits[i]
	if block != "" {
		b = c.Block(block)
	}
	return c, b
}

// changed brings in what changed.
func (p *panel) changed(w station.What) {
	if w.Has(station.Model | station.Selection | station.Settings) {
		switch shows := p.key(); {
		case shows != p.shows || w.Has(station.Settings):
			p.shows = shows
			p.rebuild()
		case p.hidden():
			p.rebuildHere()
		default:
			p.fill()
		}
	}
	if w.Has(station.Model | station.Solution | station.Selection | station.Settings) {
		p.warn()
		p.live.replot()
		p.bringParts()
		p.bringCompare()
	}
	if grown := p.live.moved(w&^station.Clock != 0); grown || w&^(station.Clock|station.Reading) != 0 {
		p.relay()
	}
}

// key names what the rows are made for: a block of another kind under the same name
// needs other rows.
func (p *panel) key() string {
	c, b := p.at()
	switch {
	case c == nil:
		return ""
	case b == nil:
		return c.Name + "/"
	}
	return c.Name + "/" + b.ID + "/" + b.Kind + "/" + strings.Join(p.several(c, b), " ")
}

// follow takes another selection of blocks, of which the frame knows only the first.
func (p *panel) follow() {
	if p.shows != p.key() {
		p.changed(station.Selection)
	}
}

// rebuild makes the rows anew.
func (p *panel) rebuild() {
	p.leave()
	p.rows, p.groups, p.many = nil, nil, nil
	c, b := p.at()
	if c != nil && b != nil {
		p.many, p.manyOf = p.several(c, b), c.Name
	}
	switch {
	case c == nil:
	case b == nil:
		p.circuitRows(c)
	default:
		p.blockRows(c, b)
	}
	p.list.Objects = nil
	if b == nil {
		p.list.Add(p.live.content)
	}
	for _, r := range p.rows {
		r.fill()
		if b == nil {
			p.list.Add(r.object())
		}
	}
	for _, g := range p.groups {
		for _, o := range g.objects() {
			p.list.Add(o)
		}
	}
	p.summarize()
	if b != nil {
		p.listParts()
	}
	for _, r := range p.rows {
		if f, ok := r.(interface{ restore() }); ok {
			f.restore()
		}
	}
	p.scroll.ScrollToTop()
	p.head.Refresh()
}

// leave hands over what is being typed and remembers what was refused.
func (p *panel) leave() {
	rows := p.rows
	if w := p.s.ctx.Window(); w != nil {
		focused := w.Canvas().Focused()
		for _, r := range rows {
			if focused != nil && r.focus() == focused {
				w.Canvas().Unfocus()
			}
		}
	}
	for _, r := range rows {
		r.keep()
	}
}

func (p *panel) fill() {
	for _, r := range p.rows {
		r.fill()
	}
	p.summarize()
	p.head.Refresh()
}

// warn puts the findings about a parameter below its row.
func (p *panel) warn() {
	c, b := p.at()
	for _, r := range p.rows {
		w, ok := r.(interface {
			key() string
			warnOf(string)
		})
		if !ok || c == nil || b == nil {
			continue
		}
		text := ""
		for _, f := range p.s.findings.list {
			if f.Circuit == c.Name && f.Block == b.ID && f.Parameter != "" && f.Parameter == w.key() && f.Level != circuit.Note {
				text = "⚠ " + f.Text
			}
		}
		w.warnOf(text)
	}
}

// relay lays the panel out again after a row has grown.
func (p *panel) relay() {
	p.list.Refresh()
	p.scroll.Refresh()
}

// focusFirst goes from the sheet to the first field.
func (p *panel) focusFirst() {
	w := p.s.ctx.Window()
	if w == nil || len(p.rows) == 0 {
		return
	}
	if !p.s.panelOpen() {
		p.s.togglePanel()
	}
	w.Canvas().Focus(p.rows[0].focus())
}

// showParameter makes sure that the field of a parameter is there, and goes to it.
func (p *panel) showParameter(key string) {
	has := func() row {
		for _, r := range p.rows {
			if k, ok := r.(interface{ key() string }); ok && k.key() == key {
				return r
			}
		}
		return nil
	}
	if _, b := p.at(); has() == nil && b != nil {
		if q := circuit.KindNamed(b.Kind).Param(key); q != nil {
			p.expanded[q.Section] = true
			p.rebuildHere()
		}
	}
	r := has()
	if w := p.s.ctx.Window(); r != nil && w != nil && p.s.panelOpen() {
		w.Canvas().Focus(r.focus())
		p.scroll.Offset.Y = max(0, r.object().Position().Y-20)
		p.scroll.Refresh()
	}
}

func (p *panel) drawHead(g pen.Pen, w, h float64) []widgets.Part {
	pal := p.s.ctx.Palette()
	title, sub := p.titles()
	_, b := p.at()
	const left = 8.0
	short := pen.Shorten(title, 14, true, w-2*left)
	g.Text(pen.Pt{X: left, Y: 18}, short, 14, pal.Ink, pen.Left, true)
	g.Text(pen.Pt{X: left, Y: 34}, pen.Shorten(sub, 11, false, w-2*left), 11, pal.Secondary, pen.Left, false)
	return []widgets.Part{{Name: "block", Text: title + ", " + sub, W: w, H: h, Click: b != nil}}
}

// titles are what stands on top of the panel.
func (p *panel) titles() (title, sub string) {
	c, b := p.at()
	switch {
	case c == nil:
		return "Properties", "Open an audit to see its circuits"
	case b == nil:
		return c.Name, fmt.Sprintf("circuit, %s · %d blocks; click one to see its values", c.Role, len(c.Blocks))
	}
	sub = b.Kind
	if k := circuit.KindNamed(b.Kind); k != nil {
		sub = circuit.InSentence(k.Title)
	}
	if n := len(p.many); n > 1 {
		return strings.Join(p.many, ", "), fmt.Sprintf("%d of kind %s · %s · edited together", n, sub, c.Name)
	}
	if n := len(p.s.editors[p.s.active].selected); n > 1 {
		return b.ID, fmt.Sprintf("%s · one of %d selected, of different kinds", sub, n)
	}
	return b.ID, sub + " · " + c.Name + " · F2 renames"
}

func (p *panel) recolour() { paper(p.paper, p.s.ctx.Palette(), true) }
