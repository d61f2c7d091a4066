package figures

import (
	"image/color"
	"math"

	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// word is a run of text in a row of a label.
type word struct {
	text string
	size float64
	c    color.NRGBA
	bold bool
}

func (w word) width() float64 { return pen.TextWidth(w.text, w.size, w.bold) }

// labelTexts writes the labels of blocks and lines.
func (d *sheetDrawing) labelTexts() {
	for i := range d.labels {
		l := &d.labels[i]
		if l.part >= 0 && d.veil.part(l.part) || l.part < 0 && d.veil.net(d.stretches[l.stretch].net) {
			continue
		}
		var rows [][]word
		unused := l.box.Max.Y - l.box.Min.Y
		for _, r := range l.rows {
			if ws := d.words(l, r); len(ws) > 0 {
				rows = append(rows, ws)
				unused -= ws[0].size * rowHeight
			}
		}
		if len(rows) == 0 {
			continue
		}
		y := l.box.Min.Y + d.rest(l)*unused
		if l.halo {
			d.halo(l, rows)
		}
		for _, ws := range rows {
			d.writeRow(l, ws, y+ws[0].size*pen.Ascent)
			y += ws[0].size * rowHeight
		}
	}
}

// rest is the share of the unused height of a label that lies above its text: all of it
// for a label above its block, so that the text stays near.
func (d *sheetDrawing) rest(l *sheetLabel) float64 {
	switch {
	case l.part < 0:
		return 0.5
	case l.box.Max.Y <= d.parts[l.part].body.Min.Y:
		return 1
	}
	return 0
}

// words is what stands in a row of a label now.
func (d *sheetDrawing) words(l *sheetLabel, r row) []word {
	if d.opt.hides(Numbers) && r != rowTag && r != rowTagHeat && r != rowValue {
		return nil
	}
	if l.part < 0 {
		return d.lineWords(&d.stretches[l.stretch], r)
	}
	p := &d.parts[l.part]
	note := func(s string) []word {
		if s == "" {
			return nil
		}
		return []word{{text: s, size: noteSize, c: d.pal.Secondary}}
	}
	switch r {
	case rowTag, rowTagHeat:
		out := []word{{text: p.id, size: tagSize, c: d.pal.Ink, bold: true}}
		if r == rowTagHeat {
			out = append(out, d.heatWords(p)...)
		}
		return out
	case rowHeat:
		return d.heatWords(p)
	case rowLive:
		if d.st == nil {
			return nil
		}
		return note(p.live(d.st, d.opt.System))
	}
	if p.block.Kind == "valve" && d.st != nil && !d.opt.hides(Numbers) {
		if text := p.live(d.st, d.opt.System); text != "" {
			return note(text)
		}
	}
	return note(p.value(d.opt.System))
}

// heatWords is the heat of a block, if it counts among the others.
func (d *sheetDrawing) heatWords(p *part) []word {
	h := d.st.Heat(p.id)
	if p.copied || ratio(h, d.most) < heatShown || d.opt.hides(Numbers) || d.opt.hides(Discs) {
		return nil
	}
	return []word{{text: heatText(h, d.st.Energy, d.opt.System), size: noteSize, c: d.warm, bold: true}}
}

// heatText writes a power or an energy.
func heatText(h float64, energy bool, sys units.System) string {
	dim := units.Power
	if energy {
		dim = units.Energy
	}
	return units.Format(h, units.Preferred(dim, sys), 2+boolInt(h >= 1e4))
}

func boolInt(b bool) int {
	if b {
		return 1
	}
	return 0
}

// lineWords is what a label of a line says: nothing of what is not worth showing.
func (d *sheetDrawing) lineWords(st *stretch, r row) []word {
	if d.st == nil {
		return nil
	}
	n := d.now[st.net]
	pressure, flow := "", ""
	if r != rowFlow && ratio(n.pressure, d.scales.Pressure) >= pressureShown {
		pressure = units.Format(n.pressure, units.Preferred(units.Pressure, d.opt.System), 3)
	}
	if q := st.along(n); r != rowPressure && ratio(math.Abs(q), d.scales.Flow) >= flowNumber {
		flow = units.Format(math.Abs(q), units.Preferred(units.Flow, d.opt.System), 3)
	}
	text := pressure + flow
	if pressure != "" && flow != "" {
		text = pressure + " · " + flow
	}
	if text == "" {
		return nil
	}
	return []word{{text: text, size: noteSize, c: d.pal.Ink}}
}

// wordGap lies between the words of a row [M].
const wordGap = 0.7

// rowWidth is the width of words with the gaps between them.
func rowWidth(ws []word) float64 {
	w := 0.0
	for i, v := range ws {
		if i > 0 {
			w += wordGap
		}
		w += v.width()
	}
	return w
}

// writeRow writes words with their baseline at y. What is wider than the room kept for
// it is made smaller.
func (d *sheetDrawing) writeRow(l *sheetLabel, ws []word, y float64) {
	room := l.box.Max.X - l.box.Min.X
	k := 1.0
	if w := rowWidth(ws); w > room {
		k = room / w
	}
	x := l.box.Min.X
	switch w := k * rowWidth(ws); l.align {
	case pen.Right:
		x = l.box.Max.X - w
	case pen.Center:
		x = (l.box.Min.X + l.box.Max.X - w) / 2
	}
	for _, w := range ws {
		d.p.Text(pen.Pt{X: x, Y: y}, w.text, w.size*k, w.c, pen.Left, w.bold)
		x += k * (w.width() + wordGap)
	}
}

// halo covers the lines behind a label with the ground.
func (d *sheetDrawing) halo(l *sheetLabel, rows [][]word) {
	w := 0.0
	for _, ws := range rows {
		w = max(w, rowWidth(ws))
	}
	b := l.box
	w = min(w, b.Max.X-b.Min.X)
	x := b.Min.X
	switch l.align {
	case pen.Right:
		x = b.Max.X - w
	case pen.Center:
		x = (b.Min.X + b.Max.X - w) / 2
	}
	pen.RoundRect(d.p, x-0.3, b.Min.Y, w+0.6, b.Max.Y-b.Min.Y, 0.6, faded(d.pal.Card, 225), pen.Stroke{})
}

// mark draws the sign of a finding: a disc that stops, a triangle that warns or cautions,
// a ring that notes.
func (d *sheetDrawing) mark(level circuit.Level, x, y, r float64) {
	bar := func(c color.NRGBA) {
		pen.Line(d.p, pen.Pt{X: x, Y: y - 0.5*r}, pen.Pt{X: x, Y: y + 0.12*r}, pen.Stroke{W: 0.3 * r, C: c})
		d.p.Circle(pen.Pt{X: x, Y: y + 0.48*r}, 0.17*r, c, pen.Stroke{})
	}
	switch level {
	case circuit.Stops:
		d.p.Circle(pen.Pt{X: x, Y: y}, r, d.pal.Danger, pen.Stroke{})
		bar(d.pal.Card)
	case circuit.Warns, circuit.Caution:
		c := d.pal.Heat
		if level == circuit.Caution {
			c = d.pal.Danger
		}
		d.p.Polyline([]pen.Pt{{X: x, Y: y - r}, {X: x + r, Y: y + 0.8*r}, {X: x - r, Y: y + 0.8*r}}, true, c, pen.Stroke{})
		bar(d.pal.On(c))
	default:
		d.p.Circle(pen.Pt{X: x, Y: y}, 0.8*r, color.NRGBA{}, pen.Stroke{W: 0.22, C: d.pal.Secondary})
		d.p.Circle(pen.Pt{X: x, Y: y}, 0.2*r, d.pal.Secondary, pen.Stroke{})
	}
}
