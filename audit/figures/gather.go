package figures

import (
	"math"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// SmallStep is the share of what comes in below which losses are drawn as one step.
const SmallStep = 0.01

// StepsBasis is the balance that loss steps are drawn from, over one cycle or a
// year; all in J, signs as in the balance.
type StepsBasis struct {
	Supply, Returned, WorkPositive, WorkNegative, Stored float64
	Losses                                               []audit.LossRow
}

// CycleBasis takes the balance of one cycle.
func CycleBasis(b *audit.Balance) StepsBasis {
	return StepsBasis{b.SupplyIn.Total(), b.Returned.Total(), b.WorkPositive().Total(), b.WorkNegative().Total(),
		b.StoredEnergy().Total(), b.Losses}
}

// YearBasis takes the balance of a year.
func YearBasis(y *audit.Year) StepsBasis {
	return StepsBasis{y.Drawn.Total(), y.Returned.Total(), y.WorkPositive().Total(), y.WorkNegative().Total(), y.Stored.Total(), y.Losses}
}

// Gather turns a balance into loss steps in unit u, and returns the losses behind
// each step. Losses below SmallStep are gathered, those that warm the oil apart from
// the others; what is left by rounding is left out.
func Gather(c *circuit.Circuit, subtitle string, u units.Unit, b StepsBasis) (StepsCircuit, [][]audit.LossRow) {
	f := StepsCircuit{Title: c.Name, Subtitle: subtitle, Supply: u.FromSI(b.Supply), Returned: u.FromSI(b.Returned),
		WorkPositive: u.FromSI(b.WorkPositive), WorkNegative: -u.FromSI(b.WorkNegative), Stored: u.FromSI(b.Stored)}
	in := b.Supply - b.WorkNegative
	var behind [][]audit.LossRow
	var small [2][]audit.LossRow
	for _, r := range audit.FromSupply(c, b.Losses) {
		e := r.Energy.Total()
		switch {
		case math.Abs(e) < 1e-9*in || e == 0:
		case e >= SmallStep*in || e < 0:
			f.Steps = append(f.Steps, stepOf(u, r))
			behind = append(behind, []audit.LossRow{r})
		case r.Sink == circuit.ToOil:
			small[0] = append(small[0], r)
		default:
			small[1] = append(small[1], r)
		}
	}
	for i, name := range []string{"other losses to the oil", "other losses"} {
		if len(small[i]) == 0 {
			continue
		}
		step := stepOf(u, small[i][0])
		if len(small[i]) > 1 {
			step = Step{Label: name, Heat: i == 0}
			for _, r := range small[i] {
				step.Value += u.FromSI(r.Energy.Total())
			}
		}
		f.Steps = append(f.Steps, step)
		behind = append(behind, small[i])
	}
	return f, behind
}

func stepOf(u units.Unit, r audit.LossRow) Step {
	return Step{Label: r.Block + ": " + r.Kind, Value: u.FromSI(r.Energy.Total()), Heat: r.Sink == circuit.ToOil}
}
