package sheet

import (
	"fmt"
	"image/color"
	"math"
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit/cure"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// findings is the list of what there is to say of both circuits. It is drawn as one
// figure; with the focus the arrow keys go through it and Enter opens one.
type findings struct {
	widget.BaseWidget
	s       *Station
	list    []circuit.Finding
	cures   []*cure.Cure // of list, nil where there is none
	faults  []bool       // of list: found by fix first, whose page tells more
	at      int          // where the keys are
	focused bool
	opened  bool   // another file, whose list begins at its top
	sides   [2]int // the circuits that are shown
	paper   *widgets.Rim
	head    *widgets.Figure
	figure  *widgets.Figure
	scroll  *container.Scroll
	content *fyne.Container
	places  []widgets.Part
}

var (
	_ fyne.Focusable = (*findings)(nil)
	_ fyne.Tabbable  = (*findings)(nil)
)

// ranks is the order of the levels, and how they are called.
var ranks = []circuit.Level{circuit.Stops, circuit.Warns, circuit.Caution, circuit.Note}

var levelWords = map[circuit.Level]string{circuit.Stops: "Stops", circuit.Warns: "Warning", circuit.Caution: "Caution", circuit.Note: "Note"}

func newFindings(s *Station) *findings {
	f := &findings{s: s, paper: widgets.NewRim()}
	f.figure = widgets.NewFigure(fyne.NewSize(100, 20), f.draw)
	f.figure.Tapped = func(p widgets.Part, _, _ float64) {
		number, isCure := strings.CutSuffix(p.Name, cureSuffix)
		number, isLink := strings.CutSuffix(number, fixSuffix)
		i, err := strconv.Atoi(number)
		switch {
		case err != nil:
		case isLink:
			f.s.ctx.Go(fixPage)
		case isCure:
			f.mend(i)
		default:
			f.open(i)
		}
	}
	f.head = widgets.NewFigure(fyne.NewSize(100, 26), f.drawHead)
	f.ExtendBaseWidget(f)
	widgets.Name(f, "sheet.findings")
	f.scroll = container.NewVScroll(f)
	f.content = container.NewStack(f.paper, container.New(inset{4}, container.NewBorder(f.head, nil, nil, nil, f.scroll)))
	return f
}

// reload takes the findings of the document. While an edit is being solved the list
// stays as it was, so that it does not flicker.
func (f *findings) reload() {
	doc := f.s.ctx.Doc()
	anew := f.otherCircuits()
	newStop, before := false, f.place()
	if solving, _, _ := doc.Solving(); !solving || anew || len(f.list) == 0 {
		list, faults := doc.Listed(f.s.ctx.System())
		slices.SortStableFunc(list, func(a, b circuit.Finding) int { return slices.Index(ranks, a.Level) - slices.Index(ranks, b.Level) })
		newStop = slices.ContainsFunc(list, func(g circuit.Finding) bool { return g.Level == circuit.Stops && !slices.Contains(f.list, g) })
		f.list, f.cures, f.faults = list, nil, nil
		for _, g := range list {
			f.cures = append(f.cures, doc.Cure(g))
			f.faults = append(f.faults, slices.Contains(faults, g))
		}
	}
	f.at = min(f.at, max(0, len(f.list)-1))
	f.measure()
	if anew || newStop {
		f.at = 0
		f.scroll.ScrollToTop()
	} else {
		f.keepPlace(before)
	}
	f.head.Refresh()
	f.figure.Refresh()
	f.s.edge.Refresh()
}

// of is the place in the list of the worst finding marked at a block, −1 for none.
func (f *findings) of(circuitName, block string) int {
	return slices.IndexFunc(f.list, func(g circuit.Finding) bool {
		return g.Circuit == circuitName && g.Block == block && g.Marked()
	})
}

// Sizes of the list.
const (
	findLeft  = 22.0
	findLine  = 14.5
	findGap   = 9.0
	findRight = 14.0
)

// lines breaks the text of a finding into lines.
func (f *findings) lines(g circuit.Finding) []string {
	return wrap(f.s.ctx.Local(g.Text), 11.5, float64(f.width())-findLeft-findRight)
}

// width of the list at scale 1.
func (f *findings) width() float32 { return panelWidth - 8 }

// wrap breaks a text at its spaces so that no line is wider than it may be.
func wrap(text string, size, width float64) []string {
	var out []string
	line, last, start := 0.0, -1, 0
	runes := []rune(text)
	for i := 0; i < len(runes); i++ {
		if runes[i] == ' ' {
			last = i
		}
		line += pen.TextWidth(string(runes[i]), size, false)
		if line <= width || i == start {
			continue
		}
		end := i
		if last > start {
			end = last
		}
		out = append(out, string(runes[start:end]))
		start = end
		if runes[start] == ' ' {
			start++
		}
		i, line, last = start-1, 0, -1
	}
	return append(out, string(runes[min(start, len(runes)):]))
}

// measure makes the list as high as its texts.
func (f *findings) measure() {
	h := 4.0
	for i := range f.list {
		h += f.height(i)
	}
	f.figure.SetMin(fyne.NewSize(100, float32(math.Max(40, h))))
	f.Refresh()
	f.scroll.Refresh()
}

func (f *findings) height(i int) float64 {
	return 16 + findLine*float64(len(f.lines(f.list[i]))) + f.cureRoom(i) + f.fixRoom(i) + findGap
}

func (f *findings) drawHead(p pen.Pen, w, _ float64) []widgets.Part {
	pal := f.s.ctx.Palette()
	text := "Findings"
	if len(f.list) > 0 {
		text += " · " + circuit.TallyOf(f.list).String()
	}
	p.Text(pen.Pt{X: 8, Y: 18}, text, 14, pal.Ink, pen.Left, true)
	doc := f.s.ctx.Doc()
	if running, _, _ := doc.Solving(); running || !doc.Current() {
		p.Text(pen.Pt{X: w - 8, Y: 18}, pick(running, "being solved", "not solved"), 11, pal.Secondary, pen.Right, false)
	}
	return nil
}

// draw draws the list.
func (f *findings) draw(p pen.Pen, w, _ float64) []widgets.Part {
	pal := f.s.ctx.Palette()
	if len(f.list) == 0 {
		p.Text(pen.Pt{X: 8, Y: 16}, pick(f.s.ctx.Doc().Current(), "Nothing to mend.", "They follow when the circuits are solved."), 11.5, pal.Secondary, pen.Left, false)
		return nil
	}
	f.places = nil
	_, block := f.s.ctx.Selected()
	name := f.s.editors[f.s.active].name
	y := 4.0
	for i, g := range f.list {
		h := f.height(i)
		own := block != "" && g.Block == block && g.Circuit == name
		if f.focused && i == f.at {
			pen.RoundRect(p, 2, y-2, w-8, h-3, 4, color.NRGBA{}, pen.Stroke{W: 1.5, C: pal.Gain})
		}
		if own {
			fill := pal.Gain
			fill.A = 22
			pen.RoundRect(p, 2, y-2, w-8, h-3, 4, fill, pen.Stroke{})
		}
		levelMark(p, 11, y+8, g.Level, pal)
		p.Text(pen.Pt{X: findLeft, Y: y + 12}, pen.Shorten(f.where(g), 11, true, w-findLeft-findRight), 11, pal.Ink, pen.Left, true)
		lines := f.lines(g)
		for k, l := range lines {
			p.Text(pen.Pt{X: findLeft, Y: y + 12 + findLine*float64(k+1)}, l, 11.5, pal.Ink, pen.Left, false)
		}
		f.places = append(f.places, widgets.Part{Name: fmt.Sprint(i), Text: f.where(g) + ": " + g.Text, Y: y - 2, W: w, H: h, Click: true})
		if c := f.cures[i]; c != nil {
			f.places = append(f.places, f.drawCure(p, fmt.Sprint(i), c, y+14+findLine*float64(len(lines)), w))
		}
		if f.faults[i] {
			f.places = append(f.places, f.drawLink(p, fmt.Sprint(i)+fixSuffix, fixText, y+14+findLine*float64(len(lines))+f.cureRoom(i), w))
		}
		y += h
	}
	return f.places
}

// where is the line above a finding: level, block, circuit, duties, time.
func (f *findings) where(g circuit.Finding) string {
	text := levelWords[g.Level]
	duties := ""
	if len(f.s.ctx.Doc().File().Duties) > 1 {
		duties = g.Duties()
	}
	for _, s := range []string{g.Block, g.Circuit, duties} {
		if s != "" {
			text += " · " + s
		}
	}
	if g.Time > 0 {
		text += " · at " + f.s.ctx.Text(g.Time, units.Time, 4)
	}
	return text
}

// levelMark draws a form for each level: a square stops, a triangle warns, an
// octagon cautions, a dot notes.
func levelMark(p pen.Pen, x, y float64, l circuit.Level, pal figures.Palette) {
	switch l {
	case circuit.Stops:
		pen.Rect(p, x-4.5, y-4.5, 9, 9, pal.Danger, pen.Stroke{})
	case circuit.Warns:
		p.Polyline([]pen.Pt{{X: x - 5.5, Y: y + 4.5}, {X: x, Y: y - 5}, {X: x + 5.5, Y: y + 4.5}}, true, pal.Heat, pen.Stroke{})
	case circuit.Caution:
		var pts []pen.Pt
		for k := range 8 {
			sin, cos := math.Sincos((float64(k) + 0.5) * math.Pi / 4)
			pts = append(pts, pen.Pt{X: x + 5.5*cos, Y: y + 5.5*sin})
		}
		p.Polyline(pts, true, color.NRGBA{}, pen.Stroke{W: 1.6, C: pal.Danger})
	default:
		p.Circle(pen.Pt{X: x, Y: y}, 3, pal.Secondary, pen.Stroke{})
	}
}

// open selects the block of a finding, and moves the clock to its time.
func (f *findings) open(i int) {
	if i < 0 || i >= len(f.list) {
		return
	}
	f.at = i
	g, ctx := f.list[i], f.s.ctx
	file := ctx.Doc().File()
	for k, d := range file.Duties {
		if d.Name == g.Duty && k != ctx.Duty() {
			ctx.SetDuty(k)
		}
	}
	for k, c := range file.Circuits {
		if c.Name == g.Circuit {
			ctx.Select(k, g.Block)
		}
	}
	if g.Time > 0 {
		ctx.SetClock(g.Time)
	}
	if g.Block != "" && g.Parameter != "" {
		f.s.panel.showParameter(g.Parameter)
	}
	f.figure.Refresh()
}

// Parts are the findings, for scripts.
func (f *findings) Parts() []widgets.Part { return f.figure.Parts() }

// DumpText counts them.
func (f *findings) DumpText() string { return "findings: " + circuit.TallyOf(f.list).String() }

// AcceptsTab: Tab goes on.
func (f *findings) AcceptsTab() bool { return false }

// FocusGained and FocusLost show where the keys are.
func (f *findings) FocusGained() { f.focused = true; f.figure.Refresh() }
func (f *findings) FocusLost()   { f.focused = false; f.figure.Refresh() }

// TypedRune mends the finding at hand with M.
func (f *findings) TypedRune(r rune) {
	if r == 'm' || r == 'M' {
		f.mend(f.at)
	}
}

// TypedKey goes through the list and opens a finding.
func (f *findings) TypedKey(k *fyne.KeyEvent) {
	switch k.Name {
	case fyne.KeyUp:
		f.at = max(0, f.at-1)
	case fyne.KeyDown:
		f.at = min(len(f.list)-1, f.at+1)
	case fyne.KeyReturn, fyne.KeyEnter, fyne.KeySpace:
		f.open(f.at)
		return
	default:
		widgets.PassKey(f, k)
		return
	}
	f.scrollTo(f.at)
}

// follow brings the finding that is marked at the selected block to the top, unless the
// finding at hand is about that block already.
func (f *findings) follow() {
	_, block := f.s.ctx.Selected()
	name := f.s.editors[f.s.active].name
	if f.at < len(f.list) && f.list[f.at].Block == block && f.list[f.at].Circuit == name {
		return
	}
	if i := f.of(name, block); block != "" && i >= 0 {
		f.at = i
		f.scrollTo(i)
	}
}

// MinSize is that of the list.
func (f *findings) MinSize() fyne.Size { return f.figure.MinSize() }

// CreateRenderer is for the toolkit.
func (f *findings) CreateRenderer() fyne.WidgetRenderer { return widget.NewSimpleRenderer(f.figure) }

func (f *findings) recolour() {
	paper(f.paper, f.s.ctx.Palette(), true)
	f.head.Refresh()
	f.figure.Refresh()
}
