package sheet

import (
	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
)

// openSigns shows the switches of what the sheets show of the results, below their button.
func (s *Station) openSigns() {
	w := s.ctx.Window()
	if w == nil {
		return
	}
	box, first := container.NewVBox(), fyne.Focusable(nil)
	for _, sign := range figures.AllSigns {
		c := widgets.Name(widgets.NewCheck(sign.String(), nil), "sheet.sign."+sign.Word())
		c.Checked = s.ctx.View().Hide&sign == 0
		c.OnChanged = func(on bool) { s.setSign(sign, on) }
		if first == nil {
			first = c
		}
		box.Add(container.NewHBox(c)) // no wider than its words, which are what can be pressed
	}
	cycle := widgets.Name(widgets.NewCheck("Heat over the cycle, not at the clock", nil), "sheet.sign.cycle")
	cycle.Checked = s.ctx.View().Cycle
	cycle.OnChanged = s.setEnergy
	box.Add(container.NewHBox(cycle))
	pop := widget.NewPopUp(container.New(inset{6}, box), w.Canvas())
	at := fyne.CurrentApp().Driver().AbsolutePositionForObject(s.bar.signs)
	s.popAt(pop, at.AddXY(0, s.bar.signs.Size().Height), pop.MinSize())
	w.Canvas().Focus(first)
}

// setSign shows or hides a sign on both sheets.
func (s *Station) setSign(sign figures.Signs, on bool) {
	if on {
		s.ctx.View().Hide &^= sign
	} else {
		s.ctx.View().Hide |= sign
	}
	s.bringOptions()
	s.bar.reload()
	for _, e := range s.editors {
		e.redraw()
	}
}

// signsText is what the button of the switches says.
func (s *Station) signsText() string {
	n := 0
	for _, sign := range figures.AllSigns {
		if s.ctx.View().Hide&sign != 0 {
			n++
		}
	}
	if n == 0 {
		return "Results shown…"
	}
	return fmt.Sprintf("Results shown (%d off)…", n)
}
