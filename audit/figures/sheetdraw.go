package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
	"barlitre/machines/units"
)

// Sizes of what is drawn [M].
const (
	symbolLine = 0.26 // lines of symbols
	lineThin   = 0.22 // a line without flow
	lineWidest = 1.1  // a line with the largest flow
	discRadius = 5.5  // the disc of the largest heat
)

// Shares of the largest value below which something is not shown.
const (
	flowShown     = 1e-3 // chevrons
	flowNumber    = 5e-3 // numbers of flows
	pressureShown = 2e-3 // numbers of pressures
	heatShown     = 0.01 // numbers of heats
	discShown     = 1e-4 // discs
)

// SheetOptions say how a sheet is drawn. The zero value draws nothing useful: a
// palette must be given.
type SheetOptions struct {
	Palette    Palette
	System     units.System
	Scales     SheetScales // 0 = the largest value at the instant shown
	Selected   map[string]bool
	Hover      map[string]bool
	Lines      map[int]bool // selected lines, by number
	Piece      *SheetPiece  // selected piece of a line
	Notes      map[int]bool // selected notes and groups, by place in the circuit
	Groups     map[int]bool
	Findings   map[string]circuit.Level
	Legend     bool // below the sheet, LegendHeight high
	HideLabels bool
	Hide       Signs // results that are not shown
}

// SheetKind says what a region of a sheet shows.
type SheetKind int

// The kinds of regions of a sheet.
const (
	SheetBlock SheetKind = iota
	SheetLine
	SheetLabel
)

// SheetRegion is a place on a drawn sheet that can be pointed at, in the units of the
// pen it was drawn with. Net is -1 for blocks and their labels.
type SheetRegion struct {
	Kind       SheetKind
	Block      string
	Net        int
	X, Y, W, H float64
}

// Contains reports whether the point lies in the region.
func (r SheetRegion) Contains(x, y float64) bool {
	return x >= r.X && x < r.X+r.W && y >= r.Y && y < r.Y+r.H
}

// sheetDrawing is one drawing of a sheet.
type sheetDrawing struct {
	*Sheet
	p      pen.Pen
	st     *SheetState
	opt    SheetOptions
	pal    Palette
	scales SheetScales
	most   float64 // heat of the largest disc
	fixed  *fixture
	now    []netNow
	tints  []color.NRGBA // of the lines
	warm   color.NRGBA   // of numbers that belong to a disc
	bold   float64       // how much wider than usual symbols are drawn; 0 = as usual
	room   []pen.Pt      // for points on their way to the pen, which keeps none
}

// Draw draws the sheet with its upper left corner at (x, y), scale units of p a module.
// A nil state draws the circuit alone. Nothing is drawn outside Size (and LegendHeight
// below it).
func (s *Sheet) Draw(p pen.Pen, x, y, scale float64, st *SheetState, opt SheetOptions) {
	d := &sheetDrawing{Sheet: s, p: p, st: st, opt: opt, pal: opt.Palette, fixed: s.fixed()}
	d.now = s.flows(st)
	d.scales = d.fill(opt.Scales)
	d.most = d.scales.Heat
	if st != nil && st.Energy {
		d.most = d.scales.Energy
	}
	d.warm = d.pal.heatText()
	d.tints = make([]color.NRGBA, len(d.now))
	for i, n := range d.now {
		d.tints[i] = d.tint(n)
	}
	p.Push(x, y, scale)
	p.Push(-s.box.Min.X, -s.box.Min.Y, 1)
	d.groupBoxes()
	d.highlights()
	d.discs()
	d.lines()
	d.symbols()
	if !opt.HideLabels {
		d.labelTexts()
	}
	d.noteTexts()
	p.Pop()
	if opt.Legend {
		w, h := s.Size()
		p.Push(sheetMargin, h, 1)
		if st == nil {
			d.scales = SheetScales{}
		}
		DrawLegend(p, w-2*sheetMargin, d.scales, st != nil && st.Energy, opt)
		p.Pop()
	}
	p.Pop()
}

// fill replaces scales that are not given by the largest value at hand.
func (d *sheetDrawing) fill(sc SheetScales) SheetScales {
	own := SheetScales{}
	for _, n := range d.now {
		if finite(n.pressure) {
			own.Pressure = math.Max(own.Pressure, math.Abs(n.pressure))
		}
		own.Flow = math.Max(own.Flow, largestOf(n.into))
	}
	if d.st != nil {
		for _, h := range d.st.heat {
			own.Heat = math.Max(own.Heat, h)
		}
		own.Energy = own.Heat
	}
	pick := func(given, own float64) float64 {
		if given > 0 && finite(given) {
			return given
		}
		return own
	}
	return SheetScales{pick(sc.Pressure, own.Pressure), pick(sc.Flow, own.Flow), pick(sc.Heat, own.Heat), pick(sc.Energy, own.Energy)}
}

// part of a whole, 0 where either is not a number or the whole is nothing.
func ratio(v, of float64) float64 {
	if r := v / of; of > 0 && finite(r) {
		return r
	}
	return 0
}

// highlights marks selected and pointed-at blocks.
func (d *sheetDrawing) highlights() {
	for i := range d.parts {
		p := &d.parts[i]
		sel, hov := d.opt.Selected[p.id], d.opt.Hover[p.id]
		if !sel && !hov || d.veil.part(i) {
			continue
		}
		b := grown(p.body, 0.5)
		fill, edge := faded(d.pal.Gain, 20), pen.Stroke{W: 0.2, C: faded(d.pal.Gain, 120)}
		if sel {
			fill, edge = faded(d.pal.Gain, 34), pen.Stroke{W: 0.35, C: d.pal.Gain}
		}
		pen.RoundRect(d.p, b.Min.X, b.Min.Y, b.Max.X-b.Min.X, b.Max.Y-b.Min.Y, 1, fill, edge)
	}
}

// discs draws the heat of the blocks.
func (d *sheetDrawing) discs() {
	if d.opt.hides(Discs) {
		return
	}
	for i := range d.parts {
		p := &d.parts[i]
		share := ratio(d.st.Heat(p.id), d.most)
		if share < discShown || p.copied || d.veil.part(i) {
			continue
		}
		d.p.Circle(penPt(p.centre), discOf(share), faded(d.pal.Heat, 84), pen.Stroke{W: 0.16, C: faded(d.pal.Heat, 190)})
	}
}

// discOf is the radius of a disc: its area is in proportion to the heat.
func discOf(share float64) float64 { return discRadius * math.Sqrt(math.Min(1, math.Max(0, share))) }

// heatText is the colour of numbers that belong to a disc: heat amber taken towards ink
// until it can be read.
func (pal Palette) heatText() color.NRGBA {
	for t := 0.0; t < 1; t += 0.05 {
		if c := mixLab(pal.Heat, pal.Ink, t); contrast(c, pal.Card) >= 5.5 {
			return c
		}
	}
	return pal.Ink
}

func penPt(p drawing.Pt) pen.Pt { return pen.Pt{X: p.X, Y: p.Y} }

// points are points on their way to the pen, until the next.
func (d *sheetDrawing) points(p []drawing.Pt) []pen.Pt {
	d.room = d.room[:0]
	for _, q := range p {
		d.room = append(d.room, penPt(q))
	}
	return d.room
}

func penPts(p []drawing.Pt) []pen.Pt {
	out := make([]pen.Pt, len(p))
	for i, q := range p {
		out[i] = penPt(q)
	}
	return out
}

// Regions lists what can be pointed at on the sheet as Draw draws it there: blocks and
// labels before lines.
func (s *Sheet) Regions(x, y, scale float64, hideLabels bool) []SheetRegion {
	var out []SheetRegion
	add := func(k SheetKind, block string, net int, b drawing.Box) {
		out = append(out, SheetRegion{k, block, net, x + (b.Min.X-s.box.Min.X)*scale, y + (b.Min.Y-s.box.Min.Y)*scale,
			(b.Max.X - b.Min.X) * scale, (b.Max.Y - b.Min.Y) * scale})
	}
	for i := range s.parts {
		add(SheetBlock, s.parts[i].id, -1, grown(s.parts[i].body, 0.3))
	}
	for _, l := range s.labels {
		switch {
		case hideLabels:
		case l.part >= 0:
			add(SheetLabel, s.parts[l.part].id, -1, l.box)
		default:
			add(SheetLabel, "", s.stretches[l.stretch].net, l.box)
		}
	}
	for _, st := range s.stretches {
		for i := 1; i < len(st.pts); i++ {
			add(SheetLine, "", st.net, segmentBox(st.pts[i-1], st.pts[i]))
		}
	}
	return out
}

// Hit finds the block or the line at a point of the sheet [M from its upper left
// corner]. net is -1 for a block; block is empty for a line. Of blocks that lie over
// each other the smallest is meant.
func (s *Sheet) Hit(x, y float64) (block string, net int, ok bool) {
	at := drawing.Pt{X: x + s.box.Min.X, Y: y + s.box.Min.Y}
	least := math.Inf(1)
	for i := range s.parts {
		b := grown(s.parts[i].body, 0.3)
		if area := (b.Max.X - b.Min.X) * (b.Max.Y - b.Min.Y); contains(b, at) && area < least {
			block, net, ok, least = s.parts[i].id, -1, true, area
		}
	}
	if ok {
		return block, net, ok
	}
	for _, l := range s.labels {
		if contains(l.box, at) {
			if l.part >= 0 {
				return s.parts[l.part].id, -1, true
			}
			return "", s.stretches[l.stretch].net, true
		}
	}
	for _, st := range s.stretches {
		for i := 1; i < len(st.pts); i++ {
			if contains(grown(segmentBox(st.pts[i-1], st.pts[i]), 0.2), at) {
				return "", st.net, true
			}
		}
	}
	return "", -1, false
}
