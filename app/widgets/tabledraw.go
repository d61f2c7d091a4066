package widgets

import (
	"image"
	"image/color"
	"math"

	"fyne.io/fyne/v2"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// tableRenderer keeps the picture and the editor in place.
type tableRenderer struct{ t *Table }

func (r *tableRenderer) Layout(size fyne.Size) {
	r.t.raster.Resize(size)
	r.t.arrange()
}
func (r *tableRenderer) MinSize() fyne.Size { return r.t.MinSize() }
func (r *tableRenderer) Refresh()           {}
func (r *tableRenderer) Destroy()           {}
func (r *tableRenderer) Objects() []fyne.CanvasObject {
	return []fyne.CanvasObject{r.t.raster, r.t.editor}
}

// arrange puts the editor over its cell.
func (t *Table) arrange() {
	if !t.editing || t.selRow < 0 {
		return
	}
	k := Scale()
	x, y, w, h, _ := t.place(t.selRow, t.selCol)
	w = math.Max(w, 84) // what is typed may be longer than the number
	_, _, viewW, _ := t.body()
	x = math.Max(0, math.Min(x, viewW-w))
	t.editor.Move(fyne.NewPos(float32(x)*k, float32(y)*k))
	t.editor.Resize(fyne.NewSize(float32(w)*k, float32(h)*k))
}

// paint draws what is in sight. It runs on the UI goroutine.
func (t *Table) paint(w, h int) image.Image {
	if t.drawn == nil || t.drawn.Image().Rect.Dx() != w || t.drawn.Image().Rect.Dy() != h {
		t.drawn = pen.NewRaster(image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1))))
	}
	t.drawn.Reset(t.drawn.Image())
	p := t.Palette()
	t.drawn.Clear(p.Card)
	vw, vh := t.view()
	if vw > 0 && vh > 0 {
		t.drawn.Push(0, 0, float64(w)/vw)
		t.draw(t.drawn, p, vw, vh)
		if t.focused || t.editing {
			focusFrame(t.drawn, p, vw, vh)
		}
		t.drawn.Pop()
	}
	return t.drawn.Image()
}

func (t *Table) draw(p pen.Pen, pal figures.Palette, w, h float64) {
	if t.rows == 0 || len(t.columns) == 0 {
		lines := pen.Wrap(t.Empty, tableText, w-20)
		for i, line := range lines {
			p.Text(pen.Pt{X: w / 2, Y: h/2 + 4 + (float64(i)-float64(len(lines)-1)/2)*tableText*1.35}, line, tableText, pal.Secondary, pen.Center, false)
		}
		return
	}
	_, _, viewW, viewH := t.body()
	top, frozen := t.headHeight(), t.frozen()
	first, last := int(t.scrollY/tableRow), min(t.rows-1, int((t.scrollY+viewH)/tableRow))
	p.ClipRect(0, top, viewW, viewH)
	for r := first; r <= last; r++ {
		t.ground(p, pal, r, viewW)
	}
	for c := range t.columns {
		clipped := c > 0 || frozen == 0
		if clipped {
			p.ClipRect(frozen, top, viewW-frozen, viewH)
		}
		for r := first; r <= last; r++ {
			t.drawCell(p, pal, r, c)
		}
		if clipped {
			p.Unclip()
		}
	}
	p.Unclip()
	t.drawHead(p, pal, viewW)
	if frozen > 0 && t.scrollX > 0 {
		hair(p, frozen, 0, frozen, top+viewH, pal.Edge)
	}
	t.drawBars(p, pal)
}

// focusFrame shows that the keys go to a figure.
func focusFrame(p pen.Pen, pal figures.Palette, w, h float64) {
	pen.Rect(p, 1, 1, w-2, h-2, color.NRGBA{}, pen.Stroke{W: 1.5, C: pal.Gain})
}

func hair(p pen.Pen, x0, y0, x1, y1 float64, c color.NRGBA) {
	pen.Line(p, pen.Pt{X: x0, Y: y0}, pen.Pt{X: x1, Y: y1}, pen.Stroke{W: 1, C: c})
}

func fill(p pen.Pen, x, y, w, h float64, c color.NRGBA) { pen.Rect(p, x, y, w, h, c, pen.Stroke{}) }

// ground draws what lies behind the texts of a row.
func (t *Table) ground(p pen.Pen, pal figures.Palette, r int, w float64) {
	y := t.headHeight() + tableRow*float64(r) - t.scrollY
	row := t.at(r)
	if row.Kind == RowPlain && t.striped(r) {
		fill(p, 0, y, w, tableRow, pal.Ground)
	}
	if t.ByRow && r == t.selRow {
		fill(p, 0, y, w, tableRow, faint(pal.Gain, 46))
		fill(p, 0, y, 3, tableRow, pal.Gain)
	}
	switch row.Kind {
	case RowSum:
		hair(p, 0, y+0.5, w, y+0.5, pal.Secondary)
	case RowGroup:
		hair(p, 0, y+tableRow-0.5, w, y+tableRow-0.5, pal.Edge)
	}
}

// striped counts from the last title on, so that every group begins alike. Only
// tables of few rows have titles.
func (t *Table) striped(r int) bool {
	if t.rows > tableLook {
		return r%2 == 1
	}
	n := 0
	for i := r - 1; i >= 0 && t.at(i).Kind != RowGroup; i-- {
		n++
	}
	return n%2 == 0
}

func (t *Table) drawCell(p pen.Pen, pal figures.Palette, r, c int) {
	row := t.at(r)
	x, y, w, h, visible := t.place(r, c)
	if row.Kind == RowGroup {
		if c == 0 {
			p.Text(pen.Pt{X: x + tablePad, Y: y + h/2 + 0.365*tableText}, row.cell(0), tableText, pal.Ink, pen.Left, true)
		}
		return
	}
	if !visible {
		return
	}
	ink, text := pal.Ink, t.text(r, c)
	_, bad := t.refused[cellAt{r, c}]
	if bad {
		ink = pal.Danger
		pen.Rect(p, x+1.5, y+1.5, w-3, h-3, color.NRGBA{}, pen.Stroke{W: 1, C: pal.Danger, Dash: []float64{3, 2}})
	}
	if !t.ByRow && r == t.selRow && c == t.selCol {
		pen.Rect(p, x+1, y+1, w-2, h-2, faint(pal.Gain, 40), pen.Stroke{W: 1.5, C: pal.Gain})
	}
	at, align := x+w-tablePad, pen.Right
	if t.columns[c].Left {
		at, align = x+tablePad, pen.Left
	}
	bold := row.Kind == RowSum
	p.Text(pen.Pt{X: at, Y: y + h/2 + 0.365*tableText}, pen.Shorten(text, tableText, bold, w-2*tablePad+1), tableText, ink, align, bold)
}

// drawHead writes names and units over the columns, the lowest line at the bottom.
func (t *Table) drawHead(p pen.Pen, pal figures.Palette, viewW float64) {
	h, frozen := t.headHeight(), t.frozen()
	for c, col := range t.columns {
		x, w := t.x[c], t.x[c+1]-t.x[c]
		clipped := c > 0 || frozen == 0
		if clipped {
			x -= t.scrollX
			p.ClipRect(frozen, 0, viewW-frozen, h)
		}
		lines := col.lines()
		for i, line := range lines {
			y := h - 6 - tableLine*float64(len(lines)-1-i)
			at, align := x+w-tablePad, pen.Right
			if col.Left {
				at, align = x+tablePad, pen.Left
			}
			p.Text(pen.Pt{X: at, Y: y}, pen.Shorten(line, tableSmall, false, w-2*tablePad+1), tableSmall, pal.Secondary, align, false)
		}
		if clipped {
			p.Unclip()
		}
	}
	hair(p, 0, h-0.5, viewW, h-0.5, pal.Edge)
}

// bars returns where the scroll bars lie; a width of 0 = there is none.
func (t *Table) bars() (across, down [4]float64) {
	width, height, viewW, viewH := t.body()
	top := t.headHeight()
	if width > viewW+0.5 && viewW > 0 {
		from := t.frozen()
		room := viewW - from
		size := math.Max(24, room*room/(width-from))
		across = [4]float64{from + (room-size)*t.scrollX/(width-viewW), top + viewH + 2, size, tableBar - 4}
	}
	if height > viewH+0.5 && viewH > 0 {
		size := math.Min(viewH, math.Max(24, viewH*viewH/height))
		down = [4]float64{viewW + 2, top + (viewH-size)*t.scrollY/(height-viewH), tableBar - 4, size}
	}
	return across, down
}

func (t *Table) drawBars(p pen.Pen, pal figures.Palette) {
	across, down := t.bars()
	for _, b := range [2][4]float64{across, down} {
		if b[2] > 0 {
			pen.RoundRect(p, b[0], b[1], b[2], b[3], 2.5, faint(pal.Ink, 80), pen.Stroke{})
		}
	}
}
