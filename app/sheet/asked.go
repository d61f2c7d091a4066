package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
)

// asked sets what the duty at hand asks of the selected block against what it stands.
type asked struct {
	p       *panel
	content *fyne.Container
}

func newAsked(p *panel) *asked {
	return &asked{p: p, content: container.New(tight{})}
}

// bring makes the lines anew.
func (a *asked) bring() {
	a.content.Objects = nil
	c, b := a.p.at()
	if c != nil && b != nil {
		if run := a.p.s.runOf(c.Name); run != nil {
			for _, g := range run.Gates {
				if g.Block == b.ID {
					a.add(g)
				}
			}
		}
	}
	show(a.content, len(a.content.Objects) > 0)
}

// add makes the lines of a gate: name, value and limit with a verdict, reason.
func (a *asked) add(g circuit.Gate) {
	local := a.p.s.ctx.Local
	value, limit, passed := audit.GateText(g)
	line, importance := value+"; limit not given", widget.MediumImportance
	switch {
	case passed == "":
	case g.Passed:
		line, importance = "✓ "+value+" of "+limit+", "+passed, widget.SuccessImportance
	default:
		line, importance = "⚠ "+value+" of "+limit+", "+passed, widget.DangerImportance
	}
	for _, x := range []struct {
		text string
		is   widget.Importance
	}{{upper(g.Name), widget.MediumImportance}, {line, importance}, {g.Reason, widget.LowImportance}} {
		l := a.p.label(x.is)
		l.SetText(local(x.text))
		a.content.Add(l)
	}
	name := "sheet.gate." + g.Name
	widgets.Name(a.content.Objects[len(a.content.Objects)-2], name)
	a.content.Add(gapOf(5))
}
