// Package energy is the Energy station: where the energy of all circuits goes, as
// loss steps on one scale, as a table, and number by number as calculations.
package energy

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
)

// Station is the Energy station.
type Station struct {
	ctx     station.Context
	content fyne.CanvasObject
	filled  fyne.CanvasObject
	empty   *widget.Label
	scope   *widgets.Select
	caption *widget.Label
	steps   *widgets.Figure
	table   *widgets.Table
	figures *widgets.FigureTable
	calc    *calculation
	grounds []*canvas.Rectangle
	loading bool

	year   bool // the scope is the year, else one cycle of the duty at hand
	duty   int  // that is shown
	shown  *audit.Solution
	drawn  drawn
	lines  []line
	opened opened
	about  map[string]opened // what each part of the figure opens
}

// opened names what the calculation is about, so that it stays open when the
// numbers change.
type opened struct {
	circuit int
	name    string // of a row, a step or a figure
	kind    openedKind
}

type openedKind int

const (
	nothing openedKind = iota
	aRow
	aGathering // a step that stands for several losses
	aFigure
)

// New makes the station.
func New(ctx station.Context) station.Station {
	s := &Station{ctx: ctx, duty: -1}
	s.build()
	return s
}

// Name is the word on the job rail.
func (s *Station) Name() string { return "Energy" }

// Content is the page.
func (s *Station) Content() fyne.CanvasObject { return s.content }

func (s *Station) build() {
	s.scope = widgets.Name(widgets.NewSelect(nil, nil), "energy.scope")
	s.scope.OnChanged = func(string) {
		if i := s.scope.SelectedIndex(); !s.loading && i >= 0 {
			s.pick(i)
		}
	}
	s.caption = widgets.Name(widget.NewLabel(""), "energy.caption")
	s.caption.Truncation = fyne.TextTruncateEllipsis
	s.steps = widgets.Name(widgets.NewFigure(fyne.NewSize(280, 120), s.draw), "energy.steps")
	s.steps.Tapped = func(p widgets.Part, _, _ float64) { s.openPart(p) }
	s.figures = widgets.NewFigureTable(s.ctx.Palette, s.Explain, s.ctx.Local)
	widgets.Name(s.figures.Table, "energy.figures")
	s.table = widgets.Name(widgets.NewTable(fyne.NewSize(260, 110), s.ctx.Palette), "energy.table")
	s.table.ByRow = true
	s.table.Selected = func(row, _ int) { s.openLine(row) }
	s.table.Tapped = func(row, _ int) { s.openLine(row) }
	s.calc = widgets.Name(newCalculation(), "energy.calculation")
	s.filled = s.lay()
	s.empty = widgets.Name(widget.NewLabelWithStyle("", fyne.TextAlignCenter, fyne.TextStyle{}), "energy.empty")
	s.content = container.NewStack(s.filled, container.NewCenter(s.empty))
}

// lay puts the parts together.
func (s *Station) lay() fyne.CanvasObject {
	left := container.NewVScroll(widgets.Spaced(container.NewVBox(s.steps, s.figures.Table)))
	s.figures.In(left)
	right := container.NewVSplit(s.table, s.paper(container.NewVScroll(s.calc), true))
	right.Offset = 0.6
	split := container.NewHSplit(s.paper(left, false), right)
	split.Offset = 0.44
	head := container.NewBorder(nil, nil, container.New(widgets.Wide(250), s.scope), nil, s.caption)
	return widgets.Spaced(container.NewBorder(head, nil, nil, nil, split))
}

// paper puts a ground behind an object: that of the page, or of a card.
func (s *Station) paper(o fyne.CanvasObject, page bool) fyne.CanvasObject {
	r := canvas.NewRectangle(nil)
	r.CornerRadius = 6
	if page {
		r.StrokeWidth = 1
	}
	s.grounds = append(s.grounds, r)
	return container.NewStack(r, o)
}

func (s *Station) colour() {
	p := s.ctx.Palette()
	for _, r := range s.grounds {
		r.FillColor = p.Card
		if r.StrokeWidth > 0 {
			r.FillColor, r.StrokeColor = p.Ground, p.Edge
		}
		r.Refresh()
	}
}

// Changed shows what changed.
func (s *Station) Changed(w station.What) {
	if w.Has(station.Solution|station.Settings) || (w.Has(station.Selection) && s.ctx.Duty() != s.duty) {
		s.reload()
	}
}

func (s *Station) reload() {
	s.shown, s.duty = s.ctx.Solution(), s.ctx.Duty()
	if text := s.lacking(); text != "" {
		s.empty.SetText(text)
		s.empty.Show()
		s.filled.Hide()
		return
	}
	s.empty.Hide()
	s.filled.Show()
	s.colour()
	s.fillScope()
	s.fillSteps()
	s.fillTable()
	s.fillFigures()
	s.reopen()
}

// lacking says in words why there is nothing to show, or "".
func (s *Station) lacking() string {
	switch {
	case s.shown == nil:
		return "Nothing is solved yet. As soon as a circuit is balanced over a duty, its energy stands here."
	case len(s.shown.Circuits) == 0:
		return "There is no circuit yet. Open an audit, or take one from File > New."
	case len(s.shown.File.Duties) == 0:
		return "There is no duty yet, so no energy flows. Give what the axes must do in the Duty station."
	}
	for _, c := range s.shown.Circuits {
		for _, d := range c.Duties {
			if d.Balance != nil {
				return ""
			}
		}
	}
	return "No circuit could be solved. The findings in the Circuit station say what to mend."
}

const wholeYear = "The whole year"

// fillScope offers a cycle of each duty, and the year.
func (s *Station) fillScope() {
	options := []string{}
	for _, d := range s.shown.File.Duties {
		options = append(options, "One cycle: "+d.Name)
	}
	options = append(options, wholeYear)
	s.loading = true
	s.scope.SetOptions(options)
	if s.year {
		s.scope.SetSelectedIndex(len(options) - 1)
	} else {
		s.scope.SetSelectedIndex(s.scopeDuty())
	}
	s.loading = false
}

// pick takes another scope.
func (s *Station) pick(i int) {
	s.year = i == len(s.scope.Options)-1
	if !s.year && i != s.ctx.Duty() {
		s.ctx.SetDuty(i)
	}
	s.reload()
}

// scopeDuty is the duty shown, as the functions of audit take it.
func (s *Station) scopeDuty() int {
	if s.year {
		return audit.WholeYear
	}
	return max(0, min(s.duty, len(s.shown.File.Duties)-1))
}

// Mend reports whether a balance does not close, or was not solved at every step.
func (s *Station) Mend() bool {
	sol := s.ctx.Solution()
	if sol == nil {
		return false
	}
	for _, c := range sol.Circuits {
		for _, d := range c.Duties {
			if d.Balance != nil && (d.Certificate.Unbalanced > 0 || d.Balance.Closure() > audit.ClosureLimit) {
				return true
			}
		}
	}
	return false
}

// Help is the short help.
func (s *Station) Help() string {
	return "The loss steps begin at the full width of what a circuit draws from the supply and step down, loss by loss, to the useful work at the load. All circuits have one scale. " +
		"Amber steps, with a disc, warm the oil; grey ones end elsewhere. What a load gives back when it is lowered or braked, and what goes back to the supply, are outlined steps with an arrow. " +
		"Losses below one hundredth of what comes in are drawn as one step, “other”.\n\n" +
		"Choose at the top: one cycle of a duty, or the whole year.\n\n" +
		"The table has every loss: energy, share of what is drawn, money; then the part of it that falls into the time while a load drives an axis, while the machine works, while it holds a load, and while it idles. " +
		"The last three add up to the energy. Move with the arrow keys; left and right scroll.\n\n" +
		"A click on a step, a row or a figure opens its calculation: the formula in symbols, the numbers in it with the origin of each, and where the formula comes from. Figures can be reached with Tab and opened with Enter.\n\n" +
		"A loss that is avoided may change others: change the circuit to know by how much."
}
