package fixfirst

import (
	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// plant is a solved circuit as the rules look at it.
type plant struct{ *look.Plant }

func newPlant(s *audit.Solution, run *audit.CircuitRun, system units.System) *plant {
	return &plant{look.New(s, run, system)}
}

func (p *plant) bar(pa float64) string { return p.Shown(pa, units.Pressure) }

func percent(x float64) string { return units.Format(x, units.Percent, 2) }

func kilowattHours(j float64) string {
	u, _ := units.ParseUnit("kWh", units.Energy)
	return units.Format(j, u, 3)
}

// target names a parameter of the circuit for an edit.
func (p *plant) target(b *circuit.Block, key string) string {
	return p.C.Name + "/" + b.ID + "." + key
}

// found begins a finding at a block.
func (p *plant) found(b *circuit.Block, rule string, class Class, effort Effort) *Finding {
	f := &Finding{Rule: rule, Class: class, Effort: effort, Circuit: p.C.Name}
	if b != nil {
		f.Block = b.ID
	}
	return f
}

// cracks is the pressure at which a relief valve begins to open.
func cracks(b *circuit.Block) float64 {
	if _, ok := b.Values["crack"]; ok {
		return look.Value(b, "crack")
	}
	return look.Value(b, "set") - look.Value(b, "set_flow")*look.Value(b, "override")
}
