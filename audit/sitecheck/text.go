package sitecheck

import (
	"fmt"
	"math"
	"strings"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
)

// Intro says how the plan is used.
const Intro = "Bring the machine into the four states, one after the other, oil warm, and read every point in each. Values are means by state that a steady balance gives; where a range stands, the needle moves in it. A tenth up or down, or a few bar, means nothing."

// Cautions hold for the whole check.
const Cautions = "Only with the owner's permit and by the rules of the place. Guards stay closed, nobody reaches in, a person who knows the machine runs it. Before a fitting is opened: motor off and locked, loads lowered or propped, accumulators discharged, zero seen on a gauge. Relief and load-holding valves are not touched. An oil jet goes through gloves and skin: oil under the skin is for a surgeon at once."

// StateText says how the machine is brought into its states.
func StateText() string {
	var parts []string
	for _, s := range States() {
		parts = append(parts, s.Name+" ("+s.Text+")")
	}
	return strings.Join(parts, ", ") + "."
}

// Basis says of which machine the good values are.
func (p *Plan) Basis() string {
	if p.Drawn == nil {
		return "Good values are those of the machine as drawn: no fault is known of it."
	}
	return "Good values are not those of the machine as drawn, but of the machine with these known faults cured: " + p.Known +
		". Changed for that, on paper alone: " + strings.Join(p.Changed, "; ") + ". Where it differs, the value as drawn stands beside it: that is what the machine shows while the faults last."
}

// changes writes edits with the value before.
func changes(f *audit.File, edits fixfirst.Cure) []string {
	var out []string
	for _, e := range edits {
		text := e.Target + " " + e.Value
		name, param, inCircuit := strings.Cut(e.Target, "/")
		id, key, ok := strings.Cut(param, ".")
		if c := f.Circuit(name); inCircuit && ok && c != nil && c.Block(id) != nil {
			text = param + " " + e.Value
			if v, given := c.Block(id).Values[key]; given {
				text += " in place of " + units.FileText(v.SI, v.Unit)
			}
		}
		out = append(out, text)
	}
	return out
}

// AsDrawn writes what the machine as drawn shows at a point, "" where that is as good.
func (p *Plan) AsDrawn(pt Point, state string) string {
	if p.Drawn == nil {
		return ""
	}
	if text := p.shown(pt, p.Drawn[at(state, pt.Name)]); text != p.Shown(pt, state) {
		return text
	}
	return ""
}

// RowAsDrawn is what the machine as drawn shows at a point in each state, "" where it is as good; nil where it is in all.
func (p *Plan) RowAsDrawn(pt Point) []string {
	var row []string
	differs := false
	for _, s := range States() {
		text := p.AsDrawn(pt, s.Name)
		row, differs = append(row, text), differs || text != ""
	}
	if !differs {
		return nil
	}
	return row
}

// Shown writes what the model says of a point in a state.
func (p *Plan) Shown(pt Point, state string) string { return p.shown(pt, p.Sound[at(state, pt.Name)]) }

func (p *Plan) shown(pt Point, v Value) string {
	if math.IsNaN(v.Mean) {
		return "–"
	}
	u := units.Preferred(pt.Dim, p.System)
	if v.High-v.Low > spread(pt, v.Mean) && pt.Dim == units.Pressure {
		return units.Range(number(u.FromSI(math.Max(v.Low, 0))), number(u.FromSI(v.High))) + "\u202f" + u.Label()
	}
	return number(u.FromSI(v.Mean)) + "\u202f" + u.Label()
}

// number rounds as a gauge is read.
func number(x float64) string {
	switch a := math.Abs(x); {
	case a < 0.05:
		return "0"
	case a < 10:
		return units.Number(math.Round(10*x)/10, 2)
	case a < 1000:
		return fmt.Sprintf("%.0f", x)
	}
	return units.Number(x, 3)
}

// Bad says what the likeliest fault looks like at a point.
func (p *Plan) Bad(pt Point) string {
	var parts []string
	for _, s := range p.signs(pt) {
		if len(parts) == 2 || len(parts) == 1 && s.strength < 1e6 {
			break
		}
		parts = append(parts, fmt.Sprintf("%s %s: %s", s.state, p.shown(pt, Value{s.with, s.with, s.with}), s.fault.Name))
	}
	switch {
	case len(parts) > 0:
		return strings.Join(parts, "; ")
	case pt.Dim == units.Temperature && pt.Block != "":
		return "warmer than the tank: oil passes " + pt.Block
	case pt.Dim == units.Temperature:
		return "above 65 °C: cooler off or dirty; below 35 °C: overcooled"
	}
	switch pt.What {
	case "load pressure":
		return "much more: a guide jams or the load is heavier; much less: another load than in the duty"
	case "load signal":
		return "pressure while nothing moves: the signal line is not relieved"
	}
	return "far from the values beside it: compare drawing and settings"
}

// ReadTable sets the readings beside the model.
func (p *Plan) ReadTable(v Verdict) audit.Table {
	t := audit.Table{Title: "What was read", Head: []string{"state", "point", "read", "model", "says"}}
	for _, r := range v.Readings {
		pt, _ := p.point(r.Point)
		u := units.Preferred(pt.Dim, p.System)
		model := "–"
		if !math.IsNaN(r.Model) {
			model = units.Format(r.Model, u, 3)
		}
		t.Rows = append(t.Rows, audit.TableRow{Cells: []string{r.State, pt.What + " " + r.Point, units.Format(r.Read, u, 3), model, r.Words}})
	}
	return t
}
