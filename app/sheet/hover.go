package sheet

import (
	"strings"
	"unicode/utf8"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
)

// hover is the small label at the pointer.
type hover struct {
	e     *editor
	block string
	net   int
	port  *figures.SheetPort // under the pointer, before block and line
	on    bool
	told  []string // instead of what lies under the pointer
	at    fyne.Position
	paper *canvas.Rectangle
	lines []*canvas.Text
}

const (
	hoverLines  = 10
	hoverWidest = 52 // letters of a row, where words can be broken
)

// wrapped breaks a text between words into rows of so many letters.
func wrapped(text string, letters int) []string {
	var out []string
	row := ""
	for _, word := range strings.Fields(text) {
		if row != "" && utf8.RuneCountInString(row)+1+utf8.RuneCountInString(word) > letters {
			out, row = append(out, row), word
			continue
		}
		row = strings.TrimSpace(row + " " + word)
	}
	return append(out, row)
}

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
		t.Color, t.TextSize, t.TextStyle.Bold = pal.Ink, 11*k, i == 0 && h.told == nil
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
	if !h.on || h.told != nil || block != h.block || net != h.net || port != h.port {
		h.on, h.block, h.net, h.port, h.told = true, block, net, port, nil
		h.e.wire.ring(0, port)
		h.e.wire.mark(block)
		h.fill()
	}
	h.place()
}

// tell shows other words at a place.
func (h *hover) tell(p fyne.Position, text ...string) {
	var rows []string
	for _, t := range text {
		rows = append(rows, wrapped(t, hoverWidest)...)
	}
	h.on, h.block, h.net, h.port, h.told, h.at = true, "", -1, nil, rows, p
	h.fill()
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
	if h.told != nil {
		text = h.told
	} else if h.port != nil {
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
		// What is read has a heading; what is told is one sentence over several rows.
		if bold := i == 0 && h.told == nil; t.Text != s || t.TextStyle.Bold != bold {
			t.Text, t.TextStyle.Bold = s, bold
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
	h.on, h.block, h.net, h.port, h.told = false, "", -1, nil, nil
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
