package energy

import (
	"fmt"
	"image/color"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// drawn are the loss steps as they are shown.
type drawn struct {
	figure   figures.LossSteps
	circuits []int               // of the solution, by circuit of the figure
	behind   [][][]audit.LossRow // losses of each step, by circuit of the figure
}

// unit is that of the energies shown.
func (s *Station) unit() units.Unit {
	if s.year {
		return audit.YearUnit()
	}
	return audit.CycleUnit(s.ctx.System())
}

func (s *Station) number(v float64, digits int) string { return s.ctx.Local(units.Number(v, digits)) }

func (s *Station) fillSteps() {
	u := s.unit()
	s.drawn = drawn{figure: figures.LossSteps{Unit: u.Label(), Format: func(v float64) string { return s.number(v, 4) }}}
	for i, c := range s.shown.Circuits {
		basis, ok := s.basis(c)
		if !ok {
			continue
		}
		f, behind := figures.Gather(c.Circuit, s.subtitle(basis, u), u, basis)
		s.drawn.figure.Circuits = append(s.drawn.figure.Circuits, f)
		s.drawn.circuits = append(s.drawn.circuits, i)
		s.drawn.behind = append(s.drawn.behind, behind)
	}
	s.caption.SetText(s.captionText())
	s.steps.SetMin(fyne.NewSize(280, float32(max(s.drawn.figure.Height(), 120))+4))
	s.steps.Refresh()
}

// basis is the balance of a circuit in the scope.
func (s *Station) basis(c *audit.CircuitRun) (figures.StepsBasis, bool) {
	if s.year {
		if c.Year == nil || c.Year.Hours <= 0 {
			return figures.StepsBasis{}, false
		}
		return figures.YearBasis(c.Year), true
	}
	i := s.scopeDuty()
	if i >= len(c.Duties) || c.Duties[i].Balance == nil {
		return figures.StepsBasis{}, false
	}
	return figures.CycleBasis(c.Duties[i].Balance), true
}

func (s *Station) subtitle(b figures.StepsBasis, u units.Unit) string {
	return s.ctx.Local(units.Format(b.Supply, u, 4)) + " from the supply"
}

func (s *Station) captionText() string {
	if !s.year {
		d := s.shown.File.Duties[s.scopeDuty()]
		return fmt.Sprintf("%s in one cycle of %s, all circuits on one scale", s.unit().Label(), s.ctx.Text(d.Cycle(), units.Time, 4))
	}
	text := s.unit().Label() + " a year, all circuits on one scale"
	for _, c := range s.shown.Circuits {
		if c.Year != nil && !c.Year.Complete {
			text += fmt.Sprintf("; %s lacks duties that could not be solved", c.Circuit.Name)
		}
	}
	return text
}

// rows of the figure besides losses: the row of the table that opens each.
var terms = map[figures.Kind]string{
	figures.KindSupply: "drawn from the supply", figures.KindReturned: "returned to the supply", figures.KindWork: "work against loads",
	figures.KindFromLoad: "work taken from driving loads", figures.KindStored: "put into store",
}

// draw draws the steps, and a frame round the one whose calculation is open.
func (s *Station) draw(p pen.Pen, w, h float64) []widgets.Part {
	pal := s.ctx.Palette()
	var parts []widgets.Part
	s.about = map[string]opened{}
	for _, r := range s.drawn.figure.Draw(p, w, min(h, s.drawn.figure.Height()), pal) {
		part, about := s.part(r)
		if about == s.opened && about.kind != nothing {
			pen.RoundRect(p, r.X+0.5, r.Y-2.5, r.W-1, r.H-0.5, 3, color.NRGBA{}, pen.Stroke{W: 1.2, C: pal.Gain})
		}
		parts = append(parts, part)
		s.about[part.Name] = about
	}
	return parts
}

// part names a row of the figure for scripts and clicks, and what it opens.
func (s *Station) part(r figures.Region) (widgets.Part, opened) {
	c := s.drawn.figure.Circuits[r.Group]
	about := opened{circuit: s.drawn.circuits[r.Group], kind: aRow, name: terms[r.Kind]}
	p := widgets.Part{X: r.X, Y: r.Y, W: r.W, H: r.H, Click: true}
	switch r.Kind {
	case figures.KindStep:
		about.name = c.Steps[r.Index].Label
		p.Text = about.name + " " + s.number(c.Steps[r.Index].Value, 4)
		if len(s.drawn.behind[r.Group][r.Index]) > 1 {
			about.kind = aGathering
		}
	case figures.KindUnaccounted:
		about, p.Click = opened{}, false
		about.name = "not accounted for"
	case figures.KindSupply:
		p.Text = about.name + " " + s.number(c.Supply, 4)
	case figures.KindWork:
		p.Text = about.name + " " + s.number(c.WorkPositive, 4)
	case figures.KindReturned:
		p.Text = about.name + " " + s.number(c.Returned, 4)
	case figures.KindFromLoad:
		p.Text = about.name + " " + s.number(c.WorkNegative, 4)
	case figures.KindStored:
		p.Text = about.name + " " + s.number(c.Stored, 4)
	}
	p.Name = fmt.Sprintf("%d.%s", r.Group+1, about.name)
	return p, about
}

// openPart opens what was clicked.
func (s *Station) openPart(p widgets.Part) {
	if about, ok := s.about[p.Name]; ok && p.Click {
		s.take(about)
	}
}
