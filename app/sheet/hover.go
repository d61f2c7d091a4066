package sheet

import (
	"math"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// hover is the small label at the pointer, the frame round the block under it, and
// the ghosts of dragged blocks.
type hover struct {
	e      *editor
	block  string
	net    int
	port   *figures.SheetPort // under the pointer, before block and line
	on     bool
	at     fyne.Position
	paper  *canvas.Rectangle
	lines  []*canvas.Text
	ghosts []*canvas.Rectangle
}

const hoverLines = 10

func (h *hover) build(e *editor) {
	h.e, h.net = e, -1
	h.paper = canvas.NewRectangle(nil)
	h.paper.Hide()
	e.over.Add(h.paper)
	for range hoverLines {
		t := canvas.NewText("", nil)
		t.Hide()
		h.lines = append(h.lines, t)
		e.over.Add(t)
	}
}

func (h *hover) recolour() {
	pal, k := h.e.s.ctx.Palette(), widgets.Scale()
	h.paper.FillColor, h.paper.StrokeColor, h.paper.StrokeWidth, h.paper.CornerRadius = pal.Ground, pal.Edge, 1, 4
	for i, t := range h.lines {
		t.Color, t.TextSize, t.TextStyle.Bold = pal.Ink, 11*k, i == 0
	}
	for _, g := range h.ghosts {
		g.StrokeColor, g.StrokeWidth = pal.Gain, 1.5
	}
}

// moveTo reads what lies at a place.
func (h *hover) moveTo(p fyne.Position) {
	block, net, ok := h.e.hit(p)
	port := h.e.portAt(p)
	if !ok && port == nil {
		h.hide()
		return
	}
	h.at = p
	if !h.on || block != h.block || net != h.net || port != h.port {
		h.on, h.block, h.net, h.port = true, block, net, port
		h.e.wire.ring(0, port)
		h.e.wire.mark(block)
		h.fill()
	}
	h.place()
}

// stale reads again, as after the clock moved.
func (h *hover) stale() {
	if h.on {
		h.fill()
	}
}

// fill writes the label.
func (h *hover) fill() {
	var text []string
	if h.port != nil {
		text = h.e.portLines(h.port.PortRef)
	} else if h.block != "" {
		text = h.e.blockLines(h.block)
	} else {
		text = h.e.lineLines(h.net)
	}
	for i, t := range h.lines {
		s := ""
		if i < len(text) {
			s = text[i]
		}
		if t.Text != s {
			t.Text = s
			t.Refresh()
		}
	}
}

// place puts the label beside the pointer, inside the sheet.
func (h *hover) place() {
	if !h.on {
		return
	}
	k := widgets.Scale()
	pad, row := 6*k, 15*k
	w, n := float32(0), 0
	for _, t := range h.lines {
		if t.Text != "" {
			w, n = max(w, t.MinSize().Width), n+1
		}
	}
	if n == 0 {
		h.hide()
		return
	}
	box := fyne.NewSize(w+2*pad, float32(n)*row+pad)
	size := h.e.Size()
	x, y := h.at.X+14, h.at.Y+16
	if x+box.Width > size.Width {
		x = max(0, h.at.X-10-box.Width)
	}
	if y+box.Height > size.Height {
		y = max(0, h.at.Y-8-box.Height)
	}
	h.paper.Move(fyne.NewPos(x, y))
	h.paper.Resize(box)
	h.paper.Show()
	for i, t := range h.lines {
		if t.Text == "" {
			t.Hide()
			continue
		}
		t.Move(fyne.NewPos(x+pad, y+pad/2+float32(i)*row))
		t.Show()
	}
	canvas.Refresh(h.e.over)
}

func (h *hover) hide() {
	if !h.on {
		return
	}
	h.on, h.block, h.net, h.port = false, "", -1, nil
	h.e.wire.hide()
	h.paper.Hide()
	for _, t := range h.lines {
		t.Hide()
	}
	canvas.Refresh(h.e.over)
}

// text of the label, for scripts and tests.
func (h *hover) text() string {
	var out []string
	for _, t := range h.lines {
		if h.on && t.Text != "" {
			out = append(out, t.Text)
		}
	}
	return strings.Join(out, "\n")
}

// ghost shows where dragged blocks are, while the lines wait.
func (h *hover) ghost(ids []string, dx, dy float64) {
	h.clearGhosts()
	e := h.e
	for _, b := range e.boxes {
		for _, id := range ids {
			if b.id != id {
				continue
			}
			g := canvas.NewRectangle(nil)
			g.StrokeColor, g.StrokeWidth = e.s.ctx.Palette().Gain, 1.5
			g.Move(fyne.NewPos(float32(e.x+(b.x+dx)*e.zoom), float32(e.y+(b.y+dy)*e.zoom)))
			g.Resize(fyne.NewSize(float32(b.w*e.zoom), float32(b.h*e.zoom)))
			h.ghosts = append(h.ghosts, g)
			e.over.Add(g)
		}
	}
}

func (h *hover) clearGhosts() {
	for _, g := range h.ghosts {
		h.e.over.Remove(g)
	}
	h.ghosts = nil
}

// blockLines tells of a block under the pointer.
func (e *editor) blockLines(id string) []string {
	b := e.drawn.Block(id)
	if b == nil {
		return nil
	}
	out := []string{id}
	if k := circuit.KindNamed(b.Kind); k != nil {
		out[0] += " · " + lower(k.Title)
	}
	if t := e.heatText(id); t != "" {
		out = append(out, t)
	}
	out = append(out, e.valveLines(b)...)
	return append(out, e.findingLines(id)...)
}

// heatText is the heat of a block at the clock or over the cycle, "" for none.
func (e *editor) heatText(id string) string {
	v := e.state.Heat(id)
	switch {
	case v == 0:
		return ""
	case e.state.Energy:
		return "turns " + e.s.ctx.Text(v, units.Energy, 3) + " a cycle to heat"
	}
	return "turns " + e.s.ctx.Text(v, units.Power, 3) + " to heat"
}

// blockText is what scripts read of a block.
func (e *editor) blockText(id string) string {
	text := strings.Join(e.blockLines(id), ", ")
	if e.selected[id] {
		text += ", selected"
	}
	return text
}

// lineLines tells of a line under the pointer: its pressure, and flow and power at
// each end that has a flow, the largest first seen on top.
func (e *editor) lineLines(net int) []string {
	ports := e.sheet.Net(net)
	if len(ports) == 0 {
		return nil
	}
	var names, flows []string
	pressure, known := 0.0, false
	for _, p := range ports {
		names = append(names, p.String())
		if v, ok := e.state.Signal(p.String() + ".p"); ok && !known {
			pressure, known = v, true
		}
	}
	for _, p := range ports {
		q, ok := e.state.Signal(p.String() + ".q")
		if !ok || math.Abs(q) < 1e-3*e.opt.Scales.Flow {
			continue
		}
		way := "into "
		if q < 0 {
			way = "out of "
		}
		line := way + p.Block + ": " + e.s.ctx.Text(math.Abs(q), units.Flow, 3)
		if known {
			line += ", " + e.s.ctx.Text(math.Abs(q*pressure), units.Power, 3)
		}
		flows = append(flows, line)
	}
	out := []string{strings.Join(names, " – ")}
	if known {
		out[0] = e.s.ctx.Text(pressure, units.Pressure, 3)
	} else {
		out = append(out, e.shaftLines(ports)...)
	}
	out = append(out, flows...)
	if known {
		out = append(out, e.velocityLines(ports)...)
	}
	return out
}

// shaftLines tells speed and power of a shaft or an electric line.
func (e *editor) shaftLines(ports []circuit.PortRef) []string {
	var out []string
	for _, p := range ports {
		if w, ok := e.state.Signal(p.Block + ".w"); ok {
			out = append(out, p.Block+": "+e.s.ctx.Text(w, units.AngularSpeed, 3))
		}
		for _, what := range []string{"shaft", "electric"} {
			if v, ok := e.state.Signal(p.Block + "." + what); ok && (what == "shaft") == (p.Port == "shaft") {
				out = append(out, p.Block+": "+e.s.ctx.Text(v, units.Power, 3))
			}
		}
	}
	return out
}
