package figures

import (
	"math"
	"strings"

	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

// What is written on a sheet beside its circuit: notes, and boxes with a label round
// blocks.

// sheetNote is a text on the sheet.
type sheetNote struct {
	lines []string
	box   drawing.Box
}

// sheetGroup is a box round blocks.
type sheetGroup struct {
	text       string
	box, label drawing.Box
}

// Sizes of notes and groups [M].
const (
	noteText   = 2.0
	notePad    = 0.6
	noteWidest = 60.0 // longer lines are broken
	groupRoom  = 1.8  // between a box and what it goes around
)

// notesOf lays the notes of a circuit out.
func notesOf(c *circuit.Circuit) []sheetNote {
	var out []sheetNote
	for _, n := range c.Notes {
		note := sheetNote{}
		w := 0.0
		for _, l := range strings.Split(n.Text, "\n") {
			for _, part := range broken(l, noteWidest) {
				note.lines = append(note.lines, part)
				w = math.Max(w, pen.TextWidth(part, noteText, false))
			}
		}
		note.box = boxAt(n.At[0], n.At[1], w+2*notePad, float64(len(note.lines))*noteText*rowHeight+2*notePad)
		out = append(out, note)
	}
	return out
}

// broken breaks a line between words where it is too wide.
func broken(line string, width float64) []string {
	var out []string
	now := ""
	for _, word := range strings.Fields(line) {
		if now != "" && pen.TextWidth(now+" "+word, noteText, false) > width {
			out, now = append(out, now), word
			continue
		}
		now = strings.TrimSpace(now + " " + word)
	}
	return append(out, now)
}

// groups lays the boxes round blocks out: one that holds another goes around it.
func (s *Sheet) groups() []sheetGroup {
	list := s.circuit.Groups
	if len(list) == 0 {
		return nil
	}
	held := make([]map[string]bool, len(list))
	for i, g := range list {
		held[i] = map[string]bool{}
		for _, id := range g.Blocks {
			held[i][id] = true
		}
	}
	out := make([]sheetGroup, len(list))
	for i, g := range list {
		room := groupRoom
		for j := range list {
			if j != i && inner(held[j], held[i], j < i) {
				room += groupRoom + noteText
			}
		}
		box := emptyBox()
		for k := range s.parts {
			if p := &s.parts[k]; held[i][p.id] && !p.copied {
				box = union(box, p.symbol.Box())
			}
		}
		box = grown(box, room)
		out[i] = sheetGroup{g.Label, box, s.groupLabel(g.Label, box)}
	}
	return out
}

// groupLabel puts the label of a group above or below a corner of its box, where it lies
// on as little as may be: symbols count most.
func (s *Sheet) groupLabel(text string, box drawing.Box) drawing.Box {
	w, h := pen.TextWidth(text, noteText, true)+2*notePad, noteText*rowHeight
	best, least := drawing.Box{}, math.Inf(1)
	for _, at := range [6]drawing.Pt{{X: box.Min.X, Y: box.Min.Y - h}, {X: box.Max.X - w, Y: box.Min.Y - h}, {X: box.Min.X, Y: box.Max.Y},
		{X: box.Max.X - w, Y: box.Max.Y}, {X: (box.Min.X + box.Max.X - w) / 2, Y: box.Min.Y - h}, {X: (box.Min.X + box.Max.X - w) / 2, Y: box.Max.Y}} {
		label, cost := boxAt(at.X, at.Y, w, h), 0.0
		if !s.clear(label) {
			cost += 10
		}
		for _, st := range s.stretches {
			for i := 1; i < len(st.pts); i++ {
				if shared(label, segmentBox(st.pts[i-1], st.pts[i])) > 0 {
					cost++
				}
			}
		}
		if cost < least {
			best, least = label, cost
		}
	}
	return best
}

// inner tells whether all of a is in b too; of two that hold the same one counts as inner.
func inner(a, b map[string]bool, first bool) bool {
	for id := range a {
		if !b[id] {
			return false
		}
	}
	return len(a) < len(b) || first
}

// marksTaken keeps labels of blocks and lines off notes and the labels of groups.
func (s *Sheet) marksTaken(k *labeller) {
	for _, n := range s.notes {
		k.labels.add(n.box)
	}
	for _, g := range s.groups() {
		k.labels.add(g.label)
		a, b := g.box.Min, g.box.Max
		for _, edge := range [4][2]drawing.Pt{{a, {X: b.X, Y: a.Y}}, {{X: a.X, Y: b.Y}, b}, {a, {X: a.X, Y: b.Y}}, {{X: b.X, Y: a.Y}, b}} {
			k.lines.add(grown(drawing.Box{Min: edge[0], Max: edge[1]}, symbolLine))
		}
	}
}

// groupBoxes draws the boxes, below all else.
func (d *sheetDrawing) groupBoxes() {
	for i, g := range d.groups() {
		if d.veil.group(i) {
			continue
		}
		line := dashed(0.2, d.pal.Secondary, drawing.Chain)
		fill := faded(d.pal.Secondary, 10)
		if d.opt.Groups[i] {
			line.C, line.W, fill = d.pal.Gain, 0.35, faded(d.pal.Gain, 20)
		}
		w, h := g.box.Max.X-g.box.Min.X, g.box.Max.Y-g.box.Min.Y
		pen.Rect(d.p, g.box.Min.X, g.box.Min.Y, w, h, fill, line)
	}
}

// noteTexts writes the labels of groups, and the notes, each with a stroke at its left edge.
func (d *sheetDrawing) noteTexts() {
	for i, g := range d.groups() {
		if d.veil.group(i) {
			continue
		}
		c, b, ground := d.pal.Secondary, g.label, d.pal.Card
		if d.opt.Groups[i] {
			c = d.pal.Gain
		}
		ground.A = 200
		pen.Rect(d.p, b.Min.X, b.Min.Y+0.15, b.Max.X-b.Min.X, b.Max.Y-b.Min.Y-0.3, ground, pen.Stroke{})
		d.p.Text(pen.Pt{X: b.Min.X + notePad, Y: b.Min.Y + noteText*pen.Ascent}, g.text, noteText, c, pen.Left, true)
	}
	for i, n := range d.notes {
		if d.veil.note(i) {
			continue
		}
		b := n.box
		edge, fill := faded(d.pal.Secondary, 150), d.pal.Card
		fill.A = 220
		if d.opt.Notes[i] {
			edge, fill = d.pal.Gain, mixLab(d.pal.Card, d.pal.Gain, 0.12)
		}
		pen.Rect(d.p, b.Min.X, b.Min.Y, b.Max.X-b.Min.X, b.Max.Y-b.Min.Y, fill, pen.Stroke{})
		pen.Rect(d.p, b.Min.X, b.Min.Y, 0.3, b.Max.Y-b.Min.Y, edge, pen.Stroke{})
		y := b.Min.Y + notePad
		for _, l := range n.lines {
			d.p.Text(pen.Pt{X: b.Min.X + notePad + 0.3, Y: y + noteText*pen.Ascent}, l, noteText, d.pal.Ink, pen.Left, false)
			y += noteText * rowHeight
		}
	}
}

// SheetMark is a note or a group, by its place in the circuit.
type SheetMark struct {
	Note, Group int // −1 for the other
}

// MarkBox is where a mark lies, in the circuit's own coordinates [M]; ok is false for one
// that is not there.
func (s *Sheet) MarkBox(m SheetMark) (x, y, w, h float64, ok bool) {
	var b drawing.Box
	switch groups := s.groups(); {
	case m.Note >= 0 && m.Note < len(s.notes):
		b = s.notes[m.Note].box
	case m.Note < 0 && m.Group >= 0 && m.Group < len(groups):
		b = groups[m.Group].box
	default:
		return 0, 0, 0, 0, false
	}
	return b.Min.X, b.Min.Y, b.Max.X - b.Min.X, b.Max.Y - b.Min.Y, true
}

// GroupLabel is where the label of a group begins, in the circuit's own coordinates [M].
func (s *Sheet) GroupLabel(group int) (x, y float64, ok bool) {
	groups := s.groups()
	if group < 0 || group >= len(groups) {
		return 0, 0, false
	}
	b := groups[group].label
	return b.Min.X + notePad, (b.Min.Y + b.Max.Y) / 2, true
}

// MarkAt finds the note at a point of the circuit's own coordinates [M], or the group
// whose label or edge is there.
func (s *Sheet) MarkAt(x, y float64) (m SheetMark, ok bool) {
	at := drawing.Pt{X: x, Y: y}
	for i := len(s.notes) - 1; i >= 0; i-- {
		if contains(s.notes[i].box, at) {
			return SheetMark{Note: i, Group: -1}, true
		}
	}
	for i, g := range s.groups() {
		const edge = 0.5
		if contains(g.label, at) || contains(grown(g.box, edge), at) && !contains(grown(g.box, -edge), at) {
			return SheetMark{Note: -1, Group: i}, true
		}
	}
	return SheetMark{-1, -1}, false
}
