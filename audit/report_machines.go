package audit

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// MachinePage is what the report says of one machine or drive of a circuit.
type MachinePage struct {
	Block, Kind string
	Figures     []Figure // of the same names in every circuit, so that they stand side by side
	Fit         []Figure // how well its law meets its measured points; none without points
	Warnings    []string // of the fit
	Loss        float64  // J a year, or over a cycle of each duty where none has hours
}

// Machine returns the page of a block, nil where there is none.
func (c *CircuitPage) Machine(block string) *MachinePage {
	for i := range c.Machines {
		if c.Machines[i].Block == block {
			return &c.Machines[i]
		}
	}
	return nil
}

// machinePages are those of the machines and drives that run, most loss first.
func (s *Solution) machinePages(p printer, c *CircuitRun) []MachinePage {
	var out []MachinePage
	for i := range c.Circuit.Blocks {
		b := &c.Circuit.Blocks[i]
		if b.Passes() != circuit.NoPassage {
			out = append(out, c.machinePage(p, b))
		}
	}
	slices.SortStableFunc(out, func(a, b MachinePage) int { return cmp.Compare(b.Loss, a.Loss) })
	return out
}

func (c *CircuitRun) machinePage(p printer, b *circuit.Block) MachinePage {
	page := MachinePage{Block: b.ID, Kind: circuit.KindNamed(b.Kind).Title}
	var sum Throughput
	for _, d := range c.Duties {
		if d.Balance == nil {
			continue
		}
		x, times := d.Throughput[b.ID], d.times()
		sum.In, sum.Out = sum.In+times*x.In, sum.Out+times*x.Out
		sum.Running, sum.Part = sum.Running+times*x.Running, sum.Part+times*x.Part
		for _, l := range d.Balance.Losses {
			if l.Block == b.ID {
				page.Loss += times * float64(max(1, d.Cycles)) * l.Energy.Total()
			}
		}
	}
	basis := "over its rated power"
	if _, rated := b.Values["rated_power"]; !rated {
		sum.Part, basis = partOfHighest(c.states(b.ID)), "over the highest shaft power it has in the duties, as it has no rated power"
	}
	span, energy := "a year", p.kWh
	if c.Year.Hours == 0 {
		span, energy = "a cycle of each duty", p.energy
	}
	share := func(name string, v float64, formula, numbers, source string) Figure {
		f := Figure{name, v, "n/a", Calculation{formula, numbers, source}}
		if known(v) {
			f.Text = p.share(v)
		}
		return f
	}
	page.Figures = []Figure{
		{"runs " + span, sum.Running, p.hours(sum.Running), Calculation{"time with power or a loss", p.hours(sum.Running), fromBalance}},
		{"takes in " + span, sum.In, energy(sum.In), Calculation{"what enters it on either side", energy(sum.In), fromBalance}},
		share("mean efficiency, by energy", over(sum.Out, sum.In), "Σ out / Σ in", energy(sum.Out)+" / "+energy(sum.In), fromBalance+"; in four quadrants, a start left out"),
		share("time at part load, below "+units.Format(PartLoad, units.Percent, 2), over(sum.Part, sum.Running), "t(P < 0.3·P_N) / t(running)", p.hours(sum.Part)+" / "+p.hours(sum.Running), basis),
		{"loses " + span, page.Loss, energy(page.Loss), Calculation{yearFormula, energy(page.Loss), "losses of the block, starts with them"}},
	}
	if b.Fit != nil {
		page.Fit, page.Warnings = fitFigures(p, b.Fit, c.Extrapolated[b.ID]), b.Fit.Warnings
	}
	return page
}

// over is a/b, not known when b is 0.
func over(a, b float64) float64 {
	if b == 0 {
		return math.NaN()
	}
	return a / b
}

// partOfHighest is the time that a machine spends below PartLoad of its highest shaft power [s].
func partOfHighest(states []Operating) float64 {
	top, t := 0.0, 0.0
	power := func(x Operating) float64 { return ratio(x.Energy, x.Seconds) }
	for _, x := range states {
		top = math.Max(top, power(x))
	}
	for _, x := range states {
		if x.Energy > 0 && power(x) < PartLoad*top {
			t += x.Seconds
		}
	}
	return t
}

// fitFigures say how well a law meets the points it was fitted to.
func fitFigures(p printer, f *machines.Fit, outside float64) []Figure {
	points := func(x float64) string {
		if !known(x) {
			return "n/a"
		}
		return units.Number(100*x, 2) + "\u202fpoints"
	}
	const from = "the measured points; least squares"
	return []Figure{
		{"measured points", float64(len(f.Points)), fmt.Sprint(len(f.Points)), Calculation{"rows of the table", fmt.Sprint(len(f.Points)), from}},
		{"fit leaves, rms", f.RMS, points(f.RMS), Calculation{"√(Σ (η_law − η)² / n)", points(f.RMS) + " of overall efficiency", from}},
		{"at speeds held out, rms", f.HeldOut, points(f.HeldOut), Calculation{"√(Σ (η_law − η)² / n), each speed in turn left out of the fit", points(f.HeldOut), from + "; needs three speeds"}},
		{"energy outside the points", outside, p.share(outside), Calculation{"Σ E outside / Σ E", p.share(outside), "states of the duties outside the hull of the points, where the law is extrapolated"}},
	}
}
