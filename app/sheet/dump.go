package sheet

import (
	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
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

// Parts tells scripts where the blocks and their ports are, in units of the widget.
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
	return out
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
