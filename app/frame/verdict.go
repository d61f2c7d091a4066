package frame

import (
	"fmt"
	"slices"
	"strings"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

const verdictHeight = 54

// newVerdict makes the verdict line. A field without a computed number is not
// drawn, and fields drop from the right when there is no room.
func (f *Frame) newVerdict() *widgets.Figure {
	v := widgets.Name(widgets.NewFigure(fyne.NewSize(500, verdictHeight), f.drawVerdict), "verdict")
	v.Tapped = func(p widgets.Part, _, _ float64) {
		for _, field := range f.verdictFields() {
			if field.name == p.Name && field.figure.Calculation.Formula != "" {
				f.Explain(field.figure)
			}
		}
	}
	return v
}

// verdictFields takes the fields from the report's decision on the proposal picked.
func (f *Frame) verdictFields() []verdictField {
	r := f.Report()
	if r == nil {
		return nil
	}
	if len(r.Decisions) == 0 {
		return f.aloneFields(r)
	}
	d := r.Decisions[0]
	var out []verdictField
	row := func(name, title, of string) {
		for _, x := range d.Rows {
			if x.Name == of && x.Before.Text != "" && x.After.Text != "" && x.After.Text != "n/a" {
				out = append(out, verdictField{name, title, x.Before.Text, x.After.Text, "", x.After})
			}
		}
	}
	single := func(name, title, of string) {
		for _, x := range d.Outcome {
			if x.Name == of && x.Text != "" && x.Text != "n/a" {
				text, beside, _ := strings.Cut(x.Text, " (")
				out = append(out, verdictField{name, title, "", text, strings.TrimSuffix(beside, ")"), x})
			}
		}
	}
	row("energy", "Energy a year", "energy drawn a year")
	single("saving", "Saving", "saved share")
	row("heat", "Heat to the oil", "mean heat to the oil")
	row("cooler", f.coolerTitle(), "cooler for it")
	single("payback", "Payback", "simple payback")
	return out
}

// ofSeveral names the circuit that the verdict is about, where there are several: that picked beside the one as found; where
// nothing is proposed for that, as with two machines as found, the first.
func (f *Frame) ofSeveral() string {
	r := f.Report()
	switch {
	case r != nil && len(r.Decisions) == 0 && len(r.Circuits) > 1:
		return r.Circuits[0].Name
	case len(f.doc.File().Besides()) < 2:
		return ""
	}
	return f.Beside()
}

func (f *Frame) coolerTitle() string {
	if s := f.Solution(); s != nil && s.Oil > 0 && s.Air > 0 {
		degrees := func(t float64) string { return station.TrimZeros(f.Text(t, units.Temperature, 3)) }
		return "Cooler at " + degrees(s.Oil) + " / " + degrees(s.Air)
	}
	return "Cooler"
}

// aloneFields are those of a circuit without a proposal: the first.
func (f *Frame) aloneFields(r *audit.Report) []verdictField {
	if len(r.Circuits) == 0 {
		return nil
	}
	var out []verdictField
	for _, x := range slices.Concat(r.Circuits[0].Year, r.Circuits[0].Heat) {
		switch x.Name {
		case "drawn a year":
			out = append(out, verdictField{"energy", "Energy a year", "", x.Text, "", x})
		case "mean heat to the oil, all running hours":
			out = append(out, verdictField{"heat", "Heat to the oil", "", x.Text, "", x})
		case "cooler for it, all running hours":
			out = append(out, verdictField{"cooler", f.coolerTitle(), "", x.Text, "", x})
		}
	}
	return out
}

// stateText says whether the figures belong to what is on the sheet.
func (f *Frame) stateText() (text string, good bool) {
	running, done, total := f.doc.Solving()
	file := f.doc.File()
	switch {
	case file != nil && len(file.Circuits) == 0:
		return "nothing drawn yet", false
	case running && total > 0 && done > 0:
		return fmt.Sprintf("solving %d %%", 100*done/total), false
	case running, f.doc.Current() && f.solved != f.doc.Revision(): // solved, but not on the sheets yet
		return "solving", false
	case !f.doc.Current() && f.solution != nil:
		return "out of date", false
	case f.solution == nil:
		if n := f.tally().Faults; n > 0 {
			return "cannot be solved: " + plural(n, "fault", "faults"), false
		}
		return "not solved", false
	}
	for _, c := range f.solution.Circuits {
		for _, d := range c.Duties {
			if d.Balance == nil {
				return c.Circuit.Name + " cannot be solved: " + plural(max(1, f.tally().Faults), "fault", "faults"), false
			}
			if d.Certificate.Unbalanced > 0 {
				return "steps left unbalanced", false
			}
		}
	}
	switch {
	case f.doc.Warming():
		return "oil temperature follows", false
	case f.solution.Pending:
		return "oil temperature cancelled", false
	}
	if n := f.tally().Faults; n > 0 {
		return "cannot be solved: " + plural(n, "fault", "faults"), false
	}
	if n := f.tally().ToMend; n > 0 {
		return "up to date, " + plural(n, "finding", "findings") + " to mend", true
	}
	return "up to date", true
}

// tally counts the findings, as the list beside the circuits does.
func (f *Frame) tally() circuit.Tally {
	all, _ := f.doc.Listed(f.settings.system)
	return circuit.TallyOf(all)
}

func (f *Frame) drawVerdict(p pen.Pen, w, h float64) []widgets.Part {
	pal := f.Palette()
	pen.Rect(p, 0, 0, w, h, pal.Card, pen.Stroke{})
	p.Text(pen.Pt{X: 14, Y: 32}, "Barlitre", 14, pal.Ink, pen.Left, true)
	if name := f.ofSeveral(); name != "" {
		p.Text(pen.Pt{X: 14, Y: 46}, pen.Shorten(name, 10, false, 72), 10, pal.Secondary, pen.Left, false)
	}
	var parts []widgets.Part
	state, good := f.stateText()
	sw := p.TextWidth(state, 11, false)
	dot := pal.Heat
	if good {
		dot = pal.Gain
	}
	p.Circle(pen.Pt{X: w - sw - 26, Y: h/2 - 1}, 4, dot, pen.Stroke{})
	p.Text(pen.Pt{X: w - 16, Y: h/2 + 3}, state, 11, pal.Secondary, pen.Right, false)
	parts = append(parts, widgets.Part{Name: "state", Text: state, X: w - sw - 32, Y: 0, W: sw + 32, H: h})
	const from, gap = 92.0, 28.0
	x := from
	for _, v := range f.fittingFields(p, w-sw-52-from, gap) {
		width := v.draw(p, x, pal)
		text := strings.TrimSpace(strings.TrimPrefix(v.before+" → "+v.after+" "+v.beside, " → "))
		parts = append(parts, widgets.Part{Name: v.name, Text: text, X: x, Y: 0, W: width, H: h, Click: true})
		x += width + gap
	}
	return parts
}
