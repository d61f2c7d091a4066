package energy

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
)

// calculation shows how a number came about.
type calculation struct {
	widget.BaseWidget
	title, value             *widgets.Text
	formula, numbers, source *widgets.Text
	box                      fyne.CanvasObject
}

func newCalculation() *calculation {
	c := &calculation{title: paragraph(true), value: paragraph(true), formula: paragraph(false), numbers: paragraph(false), source: paragraph(false)}
	c.value.Importance = widget.HighImportance
	c.source.Importance = widget.LowImportance
	c.title.SetText("Calculation")
	c.numbers.SetText("Click a step, a row of the table or a figure: its formula, the numbers in it and their sources stand here.")
	c.box = widgets.Spaced(container.NewVBox(c.title, c.value, c.formula, c.numbers, c.source))
	c.ExtendBaseWidget(c)
	return c
}

func paragraph(bold bool) *widgets.Text {
	t := widgets.Wrapped("")
	t.TextStyle.Bold = bold
	return t
}

// show opens a calculation.
func (c *calculation) show(title, value string, calc audit.Calculation) {
	c.title.SetText("Calculation: " + title)
	c.value.SetText(value)
	c.formula.SetText(calc.Formula)
	c.numbers.SetText(calc.Numbers)
	c.source.SetText("Source: " + calc.Source)
	c.Refresh()
}

// DumpText is all of it, for scripts.
func (c *calculation) DumpText() string {
	return strings.Join([]string{c.title.Text, c.value.Text, c.formula.Text, c.numbers.Text, c.source.Text}, " | ")
}

// CreateRenderer is for the toolkit.
func (c *calculation) CreateRenderer() fyne.WidgetRenderer { return widget.NewSimpleRenderer(c.box) }
