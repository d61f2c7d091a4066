package figures

import (
	"cmp"
	"math"
	"slices"

	"barlitre/audit/pen"
	"barlitre/circuit/drawing"
	"barlitre/machines/units"
)

// Sizes of text on a sheet [M]. At the scale that fits a usual sheet into half a
// window they come out as 11 and 9.5 pixels, on a page as 3 mm and more.
const (
	tagSize   = 2.1
	noteSize  = 1.8
	rowHeight = 1.2 // in sizes
	labelGap  = 0.7 // between a block and its label [M]
)

// row says what stands in a row of a label.
type row int

const (
	rowTag row = iota
	rowTagHeat
	rowValue
	rowLive
	rowHeat
	rowBoth     // pressure and flow of a line
	rowPressure // of a line
	rowFlow
)

// sheetLabel is a label with the room that is kept for it.
type sheetLabel struct {
	part    int // -1 for a label of a line
	stretch int // -1 for a label of a block
	rows    []row
	box     drawing.Box
	align   pen.Align
	halo    bool // lies on a line
}

func (r row) size() float64 {
	if r == rowTag || r == rowTagHeat {
		return tagSize
	}
	return noteSize
}

// width is the widest that a row of a block's label gets.
func (r row) width(p *part) float64 {
	text := func(make func(units.System) string) float64 {
		return math.Max(pen.TextWidth(make(units.Metric), noteSize, false), pen.TextWidth(make(units.US), noteSize, false))
	}
	heat := pen.TextWidth("88.8 kW", noteSize, true)
	switch r {
	case rowTag:
		return pen.TextWidth(p.id, tagSize, true)
	case rowTagHeat:
		return pen.TextWidth(p.id, tagSize, true) + wordGap + heat
	case rowValue:
		w := text(p.value)
		if p.block.Kind == "valve" {
			w = math.Max(w, text(func(s units.System) string { return p.live(nil, s) }))
		}
		return w
	case rowLive:
		return text(func(s units.System) string { return p.live(nil, s) })
	case rowHeat:
		return heat
	case rowBoth:
		return math.Max(pen.TextWidth("88.8 bar · 88.8 L/min", noteSize, false), pen.TextWidth("8888 psi · 88.8 gpm", noteSize, false))
	case rowPressure:
		return math.Max(pen.TextWidth("88.8 bar", noteSize, false), pen.TextWidth("8888 psi", noteSize, false))
	}
	return math.Max(pen.TextWidth("88.8 L/min", noteSize, false), pen.TextWidth("88.8 gpm", noteSize, false))
}

// labelSize is the room that rows need.
func labelSize(p *part, rows []row) (w, h float64) {
	for _, r := range rows {
		w = math.Max(w, r.width(p))
		h += r.size() * rowHeight
	}
	return w, h
}

// labelSpot is a place where a label could stand, with what speaks against it.
type labelSpot struct {
	box     drawing.Box
	align   pen.Align
	rows    []row
	stretch int
	cost    float64
}

// What speaks against a place of a label. Nothing may lie on another label.
const (
	costOnLine   = 9.0  // each module of a line under it
	costOnSymbol = 6.0  // each square module of a symbol under it
	costRows     = 14.0 // each row left out
	costFar      = 1.5  // each module away
	costDoubt    = 2.0  // each module nearer to another block
)

// labeller keeps what is already taken.
type labeller struct {
	solid, lines, labels boxIndex
	bodies               boxIndex // by part
}

func (s *Sheet) placeLabels() {
	k := &labeller{}
	for i := range s.parts {
		for _, b := range s.parts[i].solid {
			k.solid.add(b)
		}
		k.bodies.add(s.parts[i].body)
	}
	for _, st := range s.stretches {
		for i := 1; i < len(st.pts); i++ {
			k.lines.add(segmentBox(st.pts[i-1], st.pts[i]))
		}
	}
	s.marksTaken(k)
	s.labels = nil
	for i := range s.parts {
		s.labels = append(s.labels, s.blockLabel(i, k))
	}
	s.lineLabels(k)
}

func segmentBox(a, b drawing.Pt) drawing.Box {
	return grown(union(drawing.Box{Min: a, Max: a}, drawing.Box{Min: b, Max: b}), lineWidest/2)
}

// weigh returns what lies under a box, in costs, up to limit; ok is false if a label does.
func (k *labeller) weigh(b drawing.Box, limit float64) (cost float64, ok bool) {
	ok = true
	k.labels.near(grown(b, 0.4), func(i int) bool {
		ok = shared(grown(b, 0.4), k.labels.boxes[i]) == 0
		return ok
	})
	if !ok {
		return 0, false
	}
	near := grown(b, 0.25)
	k.lines.near(near, func(i int) bool {
		if o := k.lines.boxes[i]; shared(near, o) > 0 {
			cost += costOnLine * math.Max(1, math.Max(math.Min(b.Max.X, o.Max.X)-math.Max(b.Min.X, o.Min.X), math.Min(b.Max.Y, o.Max.Y)-math.Max(b.Min.Y, o.Min.Y)))
		}
		return cost <= limit
	})
	k.solid.near(near, func(i int) bool {
		if a := shared(near, k.solid.boxes[i]); a > 0 {
			cost += costOnSymbol * (0.5 + a)
		}
		return cost <= limit
	})
	return cost, true
}

// best returns the cheapest of the spots; ok is false if each lies on a label.
func (k *labeller) best(spots []labelSpot) (labelSpot, bool) {
	slices.SortStableFunc(spots, func(a, b labelSpot) int { return cmp.Compare(a.cost, b.cost) })
	least, found := labelSpot{cost: math.Inf(1)}, false
	for _, sp := range spots {
		if sp.cost >= least.cost {
			break
		}
		if c, ok := k.weigh(sp.box, least.cost-sp.cost); ok && sp.cost+c < least.cost {
			sp.cost += c
			least, found = sp, true
		}
	}
	return least, found
}

// take enters a label.
func (k *labeller) take(sp labelSpot, part int) sheetLabel {
	k.labels.add(sp.box)
	l := sheetLabel{part: part, stretch: sp.stretch, rows: sp.rows, box: sp.box, align: sp.align}
	k.lines.near(sp.box, func(i int) bool {
		l.halo = l.halo || shared(sp.box, k.lines.boxes[i]) > 0
		return !l.halo
	})
	return l
}

// forms are the ways to write a block's label, best first, with what they cost.
func (p *part) forms(heat bool) (forms [][]row, cost []float64) {
	add := func(c float64, rows ...row) { forms, cost = append(forms, rows), append(cost, c) }
	var notes []row
	if !p.copied && p.value(units.Metric) != "" {
		notes = append(notes, rowValue)
	}
	if p.moves() || p.varies() {
		notes = append(notes, rowLive)
	}
	if !heat {
		add(0, append([]row{rowTag}, notes...)...)
		if len(notes) > 0 {
			add(costRows*float64(len(notes)), rowTag)
		}
		return forms, cost
	}
	add(0, append([]row{rowTagHeat}, notes...)...)
	add(0.5, append(append([]row{rowTag}, notes...), rowHeat)...)
	if len(notes) > 0 {
		add(costRows*float64(len(notes)), rowTagHeat)
		add(costRows*float64(len(notes)), rowTag, rowHeat)
	}
	add(costRows*float64(len(notes)+1), rowTag)
	return forms, cost
}

// blockLabel finds room for the label of a part; it always finds some.
func (s *Sheet) blockLabel(i int, k *labeller) sheetLabel {
	p := &s.parts[i]
	forms, cost := p.forms(s.seen.hot(p))
	for _, reach := range []float64{4, 12, 40, 400} {
		var spots []labelSpot
		for f, rows := range forms {
			w, h := labelSize(p, rows)
			spots = append(spots, p.spots(w, h, rows, cost[f], reach)...)
		}
		for n := range spots {
			spots[n].cost += k.doubt(spots[n].box, i)
		}
		if sp, ok := k.best(spots); ok {
			return k.take(sp, i)
		}
	}
	// Not met: 400 modules away there is room for any label.
	w, h := labelSize(p, []row{rowTag})
	return k.take(labelSpot{box: boxAt(p.body.Max.X+labelGap, p.body.Min.Y, w, h), rows: []row{rowTag}, stretch: -1}, i)
}

// doubt is what speaks against a place where a label may be taken for that of another
// block: one that is nearer than its own.
func (k *labeller) doubt(b drawing.Box, part int) float64 {
	own, cost := apart(b, k.bodies.boxes[part]), 0.0
	k.bodies.near(grown(b, own+1), func(i int) bool {
		if gap := apart(b, k.bodies.boxes[i]); i != part && gap < own+1 {
			cost += costDoubt * math.Min(2, own+1-gap)
		}
		return true
	})
	return cost
}

// apart is the distance between two boxes along the axes, 0 if they touch.
func apart(a, b drawing.Box) float64 {
	return math.Max(0, math.Max(a.Min.X-b.Max.X, b.Min.X-a.Max.X)) + math.Max(0, math.Max(a.Min.Y-b.Max.Y, b.Min.Y-a.Max.Y))
}

func boxAt(x, y, w, h float64) drawing.Box {
	return drawing.Box{Min: drawing.Pt{X: x, Y: y}, Max: drawing.Pt{X: x + w, Y: y + h}}
}

// spots lists places for a label of size w × h round a part: beside its body, and
// farther away up to reach.
func (p *part) spots(w, h float64, rows []row, cost, reach float64) []labelSpot {
	var out []labelSpot
	add := func(x, y float64, al pen.Align, c float64) {
		out = append(out, labelSpot{box: boxAt(x, y, w, h), align: al, rows: rows, stretch: -1, cost: cost + c})
	}
	step := math.Max(1, reach/8)
	wide := p.body.Max.X-p.body.Min.X > 1.5*(p.body.Max.Y-p.body.Min.Y) && p.base.Name == "cylinder"
	for _, b := range []drawing.Box{p.body, p.symbol.Box()} {
		cx, cy := (b.Min.X+b.Max.X)/2, (b.Min.Y+b.Max.Y)/2
		for d := 0.0; d <= reach; d += step {
			far := costFar * d
			up := 3.0
			if wide { // beside a cylinder the rod moves
				up = -3
			}
			for _, y := range []float64{b.Min.Y, cy - h/2, b.Max.Y - h, b.Min.Y - h/2, b.Max.Y - h/2, b.Min.Y - h, b.Max.Y} {
				off := math.Abs(y+h/2-cy) * 0.3
				add(b.Max.X+labelGap+d, y, pen.Left, far+off)
				add(b.Min.X-labelGap-d-w, y, pen.Right, far+off+1.5)
			}
			for _, x := range []float64{b.Min.X, cx - w/2, b.Max.X - w, b.Max.X, b.Min.X - w, cx + 1.2, cx - 1.2 - w} {
				al := pen.Left
				switch {
				case x == cx-w/2:
					al = pen.Center
				case x+w <= cx || x == b.Max.X-w:
					al = pen.Right
				}
				off := math.Abs(x+w/2-cx) * 0.1
				add(x, b.Min.Y-labelGap/2-d-h, al, far+up+off)
				add(x, b.Max.Y+labelGap/2+d, al, far+4+off)
			}
		}
	}
	return out
}
