package fixfirst

import (
	"fmt"
	"math"

	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// cylinderBores are piston diameters of ISO 3320 [mm], from memory.
var cylinderBores = []float64{25, 32, 40, 50, 63, 80, 100, 125, 160, 200, 250, 320}

// sizedApart finds, on one load-sensing pump, a cylinder so large for its load that it works far below its neighbours:
// their pressure times its flow is burnt in its compensator.
func sizedApart(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		if look.Word(pump, "control") != "load_sensing" {
			continue
		}
		sections := p.sections(pump)
		for _, s := range sections {
			if s.cylinder == nil || len(sections) < 2 {
				continue
			}
			neighbour := 0.0
			for _, o := range sections {
				if o.comp != s.comp {
					neighbour = math.Max(neighbour, o.top.V)
				}
			}
			burnt := p.Lost("", s.comp.ID).Total()
			if s.top.V <= 0 || s.top.V > 0.35*neighbour || burnt < 0.08*p.Drawn() {
				continue
			}
			out = append(out, p.apart(s, neighbour, burnt))
		}
	}
	return out
}

func (p *plant) apart(s section, neighbour, burnt float64) *Finding {
	f := p.found(s.cylinder, "sized apart from its neighbours", Repair, Invest)
	f.Param, f.Duty, f.Time = "bore", s.top.Duty, s.top.T
	f.Text = fmt.Sprintf("%s works at no more than %s beside a neighbour at %s on the same pump; %s burns the difference times its flow.", s.cylinder.ID, p.bar(s.top.V), p.bar(neighbour), s.comp.ID)
	f.Evidence = []Quantity{
		{"highest pressure of " + s.cylinder.ID, p.bar(s.top.V), "above 35 % of its neighbours"},
		{"highest pressure of its neighbours", p.bar(neighbour), ""},
		{"burnt in " + s.comp.ID + " a year", kilowattHours(burnt), "below 8 % of energy drawn; found " + percent(burnt/p.Drawn())},
		{"bore", p.Shown(look.Value(s.cylinder, "bore"), units.Length), ""},
	}
	f.Do = "When the cylinder is due, fit one of smaller bore that brings its pressure near that of its neighbours: it takes less flow. Else give it a pump of its own, or move it in a phase in which the others stand."
	f.Caution = "A smaller bore means more pressure, a thinner rod buckles earlier: strength, buckling and relief settings are to be proven anew by a qualified person."
	f.Basis = "35 % and 8 %: common practice, no source; the loss is inherent to load sensing (Siebert and Geimer, Energies 2017, 10, 941)"
	bore := look.Value(s.cylinder, "bore")
	ratio := look.Value(s.cylinder, "rod") / bore
	for _, d := range cylinderBores { // the smallest that stays below nine tenths of the neighbour's pressure
		if x := d * 1e-3; x < 0.99*bore && s.top.V*bore*bore/(x*x) < 0.9*neighbour {
			f.Cures = append(f.Cures, Cure{
				{set, p.target(s.cylinder, "rod"), fmt.Sprintf("%.3g mm", math.Round(1e3*ratio*x))},
				{set, p.target(s.cylinder, "bore"), fmt.Sprintf("%g mm", d)},
			})
		}
	}
	return f
}

// section is a compensator with the valve behind it and what that moves.
type section struct {
	comp, valve, cylinder *circuit.Block
	top                   look.Moment // highest load signal while it moves
}

func (p *plant) sections(pump *circuit.Block) []section {
	var out []section
	for _, r := range p.Supply(pump) {
		comp := p.C.Block(r.Block)
		if comp == nil || comp.Kind != "compensator" || r.Port != "P" {
			continue
		}
		for _, v := range p.At(circuit.PortRef{Block: comp.ID, Port: "A"}, "valve", "P") {
			s := section{comp: comp, valve: v, top: p.Highest(v.ID+".LS.p", look.Moving)}
			axis := v.Word("follows") + v.Word("directs")
			for _, c := range p.Blocks("cylinder") {
				if axis != "" && c.Word("axis") == axis {
					s.cylinder = c
				}
			}
			out = append(out, s)
		}
	}
	return out
}
