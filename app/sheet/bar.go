package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
)

// bar holds the buttons above the sheets.
type bar struct {
	s                                      *Station
	add, fit, wide, signs, circuits, panel *widgets.Button
	content                                *fyne.Container
}

func newBar(s *Station) *bar {
	b := &bar{s: s}
	button := func(name string, do func()) *widgets.Button {
		w := widgets.NewButton("", do)
		w.Importance = widget.LowImportance
		return widgets.Name(w, name)
	}
	b.add = button("sheet.add", func() { s.Act(station.AddBlock) })
	b.fit = button("sheet.fit", s.fitAll)
	b.wide = button("sheet.wide", func() { s.setWide(!s.wide) })
	b.signs = button("sheet.signs", s.openSigns)
	b.circuits = button("sheet.circuits", s.openCircuits)
	b.panel = button("sheet.panel", s.togglePanel)
	b.content = container.New(flow{}, b.add, b.fit, b.wide, b.signs, b.circuits, b.panel)
	b.add.SetText("Add block (/)")
	b.fit.SetText("Fit (F)")
	b.wide.SetText("Show one sheet (W)")
	b.signs.SetText(s.signsText())
	b.circuits.SetText("Circuits…")
	b.panel.SetText("Fold properties")
	return b
}

// height of the bar at a width.
func (b *bar) height(width float32) float32 { return flowRows(b.content.Objects, width, nil) }

// flow puts buttons side by side, in further rows where there is no room, and the
// last one at the right edge of its row.
type flow struct{}

func (flow) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	flowRows(objects, size.Width, func(o fyne.CanvasObject, x, y float32) {
		o.Move(fyne.NewPos(x, y))
		o.Resize(o.MinSize())
	})
}

// MinSize is that of one button: the rest wraps.
func (flow) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m := fyne.Size{}
	for _, o := range objects {
		m = m.Max(o.MinSize())
	}
	return m
}

func flowRows(objects []fyne.CanvasObject, width float32, place func(o fyne.CanvasObject, x, y float32)) float32 {
	x, y, row := float32(0), float32(0), float32(0)
	for i, o := range objects {
		m := o.MinSize()
		if x > 0 && x+m.Width > width {
			x, y = 0, y+row
		}
		row = m.Height
		at := x
		if i == len(objects)-1 {
			at = max(x, width-m.Width)
		}
		if place != nil {
			place(o, at, y)
		}
		x += m.Width + 4
	}
	return y + row
}

// reload says on each button what it does next.
func (b *bar) reload() {
	set := func(w *widgets.Button, text string) {
		if w.Text != text {
			w.SetText(text)
		}
	}
	set(b.wide, pick(b.s.wide, "Show both sheets (W)", "Show one sheet (W)"))
	set(b.signs, b.s.signsText())
	set(b.panel, pick(b.s.panelOpen(), "Fold properties", "Show properties"))
}

func (b *bar) recolour() { b.content.Refresh() }

func pick(on bool, yes, no string) string {
	if on {
		return yes
	}
	return no
}
