package sheet

import (
	"fmt"
	"math"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
)

// hit finds what lies at a place on screen.
func (e *editor) hit(p fyne.Position) (block string, net int, ok bool) {
	if _, h := e.room(); e.sheet == nil || float64(p.Y) > h {
		return "", -1, false
	}
	x, y := e.at(p)
	ox, oy := e.sheet.Origin()
	return e.sheet.Hit(x-ox, y-oy)
}

// Parts tells scripts where the blocks and their ports, lines, notes and groups are, in
// units of the widget, and how often the sheet was drawn.
func (e *editor) Parts() []widgets.Part {
	var out []widgets.Part
	for _, b := range e.boxes {
		out = append(out, widgets.Part{Name: b.id, Text: e.blockText(b.id), Click: true,
			X: e.x + b.x*e.zoom, Y: e.y + b.y*e.zoom, W: b.w * e.zoom, H: b.h * e.zoom})
	}
	const half = 3
	for _, p := range e.ports {
		at := e.onScreen(p)
		out = append(out, widgets.Part{Name: p.String(), Text: pick(e.joined(p.PortRef), "connected", "free"), Click: true,
			X: float64(at.X) - half, Y: float64(at.Y) - half, W: 2 * half, H: 2 * half})
	}
	spot := func(name, text string, at fyne.Position) {
		out = append(out, widgets.Part{Name: name, Text: text, Click: true, X: float64(at.X) - half, Y: float64(at.Y) - half, W: 2 * half, H: 2 * half})
	}
	for n := 0; e.sheet != nil && n < e.sheet.Nets(); n++ {
		longest, mid := -1.0, fyne.Position{}
		for _, p := range e.sheet.Pieces(n) {
			a, b, _ := e.sheet.PieceEnds(p)
			if l := math.Abs(a[0]-b[0]) + math.Abs(a[1]-b[1]); l > longest {
				longest, mid = l, e.onSheet((a[0]+b[0])/2, (a[1]+b[1])/2)
			}
		}
		if ports := e.sheet.Net(n); len(ports) > 0 {
			spot("line."+ports[0].String(), e.lineName(n), mid)
		}
	}
	for i := 0; e.sheet != nil && i < len(e.drawn.Notes); i++ {
		x, y, w, h, _ := e.sheet.MarkBox(figures.SheetMark{Note: i, Group: -1})
		spot(fmt.Sprintf("note.%d", i), e.drawn.Notes[i].Text, e.onSheet(x+w/2, y+h/2))
	}
	for i := 0; e.sheet != nil && i < len(e.drawn.Groups); i++ {
		x, y, _ := e.sheet.GroupLabel(i)
		spot(fmt.Sprintf("group.%d", i), e.drawn.Groups[i].Label, e.onSheet(x, y))
	}
	return append(out, widgets.Part{Name: "frames", Text: fmt.Sprint(e.frames)})
}

// DumpText tells scripts what the sheet shows.
func (e *editor) DumpText() string {
	if e.sheet == nil {
		return "empty"
	}
	text := e.name
	for _, id := range e.ids() {
		text += " [" + id + "]"
	}
	if e.line >= 0 {
		text += " line " + e.lineName(e.line)
	}
	return text
}
