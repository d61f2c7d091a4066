package sheet

import (
	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
)

// fold says what the user chose for the property panel.
type fold int

const (
	foldAuto   fold = iota // open unless the window is narrow
	foldOpen               // opened in a narrow window
	foldClosed             // closed in a wide one
)

// Sizes of the page [units at scale 1].
const (
	narrowBelow = 1200 // width of the window under which the panel folds
	panelWidth  = 300
	edgeWidth   = 26
	gapWidth    = 8
	panelShare  = 0.68 // of the height; the findings have the rest
	twoSheets   = 560  // width under which two sheets cannot be read
	loneShare   = 0.72 // of the width for the first sheet while the second is empty
)

// pageLayout places bar, sheets and panel.
type pageLayout struct{ s *Station }

func (s *Station) layOut() *fyne.Container {
	return container.New(pageLayout{s}, s.bar.content, s.cards[0].content, s.cards[1].content, s.panel.content, s.findings.content, s.edge)
}

// MinSize lets the window be small; the sheets and the panel scroll.
func (l pageLayout) MinSize([]fyne.CanvasObject) fyne.Size {
	return fyne.NewSize((panelWidth+200)*widgets.Scale(), 260*widgets.Scale())
}

// Layout places all and hides what does not belong on the page now.
func (l pageLayout) Layout(_ []fyne.CanvasObject, size fyne.Size) {
	s, k := l.s, widgets.Scale()
	gap := gapWidth * k
	right := size.Width - gap
	open := s.panelOpen()
	show(s.panel.content, open)
	show(s.findings.content, open)
	show(s.edge, !open)
	if open {
		w := panelWidth * k
		top := (size.Height - 3*gap) * panelShare
		put(s.panel.content, right-w, gap, w, top)
		put(s.findings.content, right-w, 2*gap+top, w, size.Height-3*gap-top)
		right -= w + gap
	} else {
		put(s.edge, right-edgeWidth*k, gap, edgeWidth*k, size.Height-2*gap)
		right -= edgeWidth*k + gap
	}
	bar := s.bar.height(right - gap)
	put(s.bar.content, gap, gap/2, right-gap, bar)
	s.single = s.wide || right-gap < twoSheets*k
	top := bar + gap
	height := max(0, size.Height-top-gap)
	for i := range s.cards {
		show(s.cards[i].content, !s.single || i == s.active)
	}
	if s.single {
		put(s.cards[s.active].content, gap, top, right-gap, height)
		return
	}
	first := (right - 2*gap) / 2
	if s.editors[1].circuit < 0 { // an empty sheet needs no more than its hint
		first = (right - 2*gap) * loneShare
	}
	put(s.cards[0].content, gap, top, first, height)
	put(s.cards[1].content, 2*gap+first, top, right-2*gap-first, height)
}

func put(o fyne.CanvasObject, x, y, w, h float32) {
	o.Move(fyne.NewPos(x, y))
	o.Resize(fyne.NewSize(max(0, w), max(0, h)))
}

func show(o fyne.CanvasObject, on bool) {
	if o.Visible() == on {
		return
	}
	if on {
		o.Show()
	} else {
		o.Hide()
	}
}

// arrange lays the page out again.
func (s *Station) arrange() {
	if s.content != nil {
		s.content.Refresh()
	}
}

// narrow tells whether the window has too little width for the panel.
func (s *Station) narrow() bool {
	w := s.ctx.Window()
	return w != nil && w.Canvas() != nil && w.Canvas().Size().Width < narrowBelow*widgets.Scale()
}

func (s *Station) panelOpen() bool {
	switch s.fold {
	case foldOpen:
		return true
	case foldClosed:
		return false
	}
	return !s.narrow()
}

// togglePanel opens or folds the panel. A choice that is what the width of the
// window asks for anyway is forgotten.
func (s *Station) togglePanel() {
	open := !s.panelOpen()
	switch {
	case open != s.narrow():
		s.fold = foldAuto
	case open:
		s.fold = foldOpen
	default:
		s.fold = foldClosed
	}
	s.arrange()
	s.bar.reload()
}

// newEdge makes the edge that the panel folds to: it tells what is selected and how
// many findings need mending, and opens the panel.
func newEdge(s *Station) *widgets.Figure {
	f := widgets.NewFigure(fyne.NewSize(edgeWidth, 100), func(p pen.Pen, w, h float64) []widgets.Part {
		pal := s.ctx.Palette()
		pen.RoundRect(p, 0.5, 0.5, w-1, h-1, 6, pal.Card, pen.Stroke{W: 1, C: pal.Edge})
		text, bad := s.edgeText()
		colour := pal.Ink
		if bad {
			pen.Rect(p, w/2-4, 10, 8, 8, pal.Danger, pen.Stroke{})
		}
		p.RotatedText(pen.Pt{X: w/2 - 4, Y: 28}, text, 11.5, 90, colour, pen.Left, false)
		return []widgets.Part{{Name: "open", Text: text, W: w, H: h, Click: true}}
	})
	f.Tapped = func(widgets.Part, float64, float64) { s.togglePanel() }
	return widgets.Name(f, "sheet.edge")
}

func (s *Station) edgeText() (text string, bad bool) {
	text = "Properties"
	if _, block := s.ctx.Selected(); block != "" {
		text = "Properties of " + block
	}
	t := circuit.TallyOf(s.findings.list)
	return text + " · findings: " + t.String(), t.Faults+t.ToMend > 0
}

// card is the paper that a sheet lies on, with the name of its circuit.
type card struct {
	s       *Station
	index   int
	paper   *widgets.Rim
	head    *widgets.Figure
	picker  *picker
	content *fyne.Container
	name    string
	note    string
}

func newCard(s *Station, index int) *card {
	c := &card{s: s, index: index, paper: widgets.NewRim()}
	c.head = widgets.NewFigure(fyne.NewSize(120, 26), c.drawHead)
	c.head.Tapped = func(widgets.Part, float64, float64) {
		if e := s.editors[index]; e.circuit >= 0 {
			s.active = index
			e.choose("", false)
		}
	}
	widgets.Name(c.head, fmt.Sprintf("sheet.head.%d", index))
	var right fyne.CanvasObject
	if index == 1 {
		c.picker = newPicker(s)
		right = c.picker.content
	}
	head := container.NewBorder(nil, nil, nil, right, c.head)
	inner := container.NewBorder(head, nil, nil, nil, s.editors[index])
	c.content = container.New(cardLayout{c, inset{6}}, c.paper, inner)
	return c
}

// cardLayout leaves the paper out where the drawing covers it.
type cardLayout struct {
	c     *card
	inset inset
}

func (l cardLayout) Layout(o []fyne.CanvasObject, size fyne.Size) {
	put(o[0], 0, 0, size.Width, size.Height)
	l.inset.Layout(o[1:], size)
	e := l.c.s.editors[l.c.index]
	l.c.paper.SetHole(o[1].Position().Add(e.Position()), e.Size())
}

func (l cardLayout) MinSize(o []fyne.CanvasObject) fyne.Size { return l.inset.MinSize(o[1:]) }

// inset leaves room round its objects.
type inset struct{ by float32 }

func (l inset) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	by := l.by * widgets.Scale()
	for _, o := range objects {
		put(o, by, by, size.Width-2*by, size.Height-2*by)
	}
}

func (l inset) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m := fyne.Size{}
	for _, o := range objects {
		m = m.Max(o.MinSize())
	}
	by := 2 * l.by * widgets.Scale()
	return m.AddWidthHeight(by, by)
}

func (c *card) drawHead(p pen.Pen, w, h float64) []widgets.Part {
	pal := c.s.ctx.Palette()
	const gap = 8.0
	name := pen.Shorten(c.name, 14, true, w-2*gap)
	p.Text(pen.Pt{X: gap, Y: 18}, name, 14, pal.Ink, pen.Left, true)
	x := 2*gap + p.TextWidth(name, 14, true)
	if x+40 < w {
		p.Text(pen.Pt{X: x, Y: 18}, pen.Shorten(c.note, 11, false, w-x), 11, pal.Secondary, pen.Left, false)
	}
	return []widgets.Part{{Name: "name", Text: c.name, W: w, H: h, Click: c.name != ""}}
}

// reload takes name and note of the circuit.
func (c *card) reload() {
	name, note := "As found", ""
	if c.index == 1 {
		name = "Proposal"
	}
	if e := c.s.editors[c.index]; e.drawn != nil {
		name, note = e.drawn.Name, e.drawn.Note
	}
	if name != c.name || note != c.note {
		c.name, c.note = name, note
		c.head.Refresh()
	}
	if c.picker != nil {
		c.picker.reload()
	}
}

func (c *card) recolour() {
	pal := c.s.ctx.Palette()
	paper(c.paper, pal, false)
	c.head.Refresh()
}

// paper makes a rim a card; plain fills its inside.
func paper(r *widgets.Rim, pal figures.Palette, plain bool) {
	r.Dress(pal.Card, pal.Edge, 1, 6, plain)
}
