package audit

import (
	"context"
	"errors"
	"math"
	"slices"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Of the table of heat by temperature.
const (
	coarseSteps = 100  // time steps of a duty that is solved again at another temperature
	hottest     = 90.0 // °C, up to which a circuit is solved
	apart       = 2.0  // K: nearer temperatures are not solved again
	thickest    = 2500e-6
	// HeatTolerance is by how much, as a share, the heat of the table may miss that of the circuit solved at the very
	// temperature which the table leads to; where it misses more, that temperature is added to the table.
	HeatTolerance = 0.005
)

// heatTable solves duties of a circuit at several oil temperatures. The duty is laid out in fewer time steps than for the
// energy balance; so that this says only how the heat changes with temperature, what comes out is scaled to the balance at the
// working temperature.
type heatTable struct {
	s      *Solution
	run    *CircuitRun
	duties []*DutyRun
	loads  []thermal.Load // by duty
	whole  []float64      // by duty: heat of the balance over that of the few time steps, at the working temperature
	drawn  []float64
	tried  int
	Misses float64 // largest share by which the table missed, before the last temperature was added
	Few    string  // why fewer temperatures than wanted were solved, or ""
}

// newHeatTable solves the duties that the balance could be drawn up for.
func newHeatTable(ctx context.Context, s *Solution, run *CircuitRun, coldest float64) (*heatTable, error) {
	t := &heatTable{s: s, run: run}
	for _, d := range run.Duties {
		if d.Balance != nil && d.Balance.Cycle > 0 {
			t.duties = append(t.duties, d)
			t.loads = append(t.loads, thermal.Load{Name: d.Duty.Name})
		}
	}
	if err := t.add(ctx, s.Oil); err != nil {
		return nil, err
	}
	if _, err := s.File.ConditionsAt(s.Oil + 1); err != nil {
		t.Few = "the oil is known at its working temperature only, so its viscosity changes nothing here; give its grade"
		return t, nil
	}
	for _, theta := range t.wanted(coldest) {
		if err := t.add(ctx, theta); err != nil {
			return nil, err
		}
	}
	return t, nil
}

// wanted lists the temperatures to begin with.
func (t *heatTable) wanted(coldest float64) []float64 {
	var out []float64
	for _, theta := range []float64{coldest, units.ZeroCelsius + 20, units.ZeroCelsius + 40, units.ZeroCelsius + 65, units.ZeroCelsius + hottest} {
		c, err := t.s.File.ConditionsAt(theta)
		if theta < coldest || err != nil || c.Viscosity/c.Density > thickest || math.Abs(theta-t.s.Oil) < 12 {
			continue
		}
		out = append(out, theta)
	}
	return out
}

// add solves all duties at a temperature; one at which a duty cannot be balanced is left out and said.
func (t *heatTable) add(ctx context.Context, theta float64) error {
	t.tried++
	cond, err := t.s.File.ConditionsAt(theta)
	if err != nil {
		return nil
	}
	points := make([]thermal.Point, len(t.duties))
	for i, d := range t.duties {
		p, ok, err := t.solve(ctx, d.Duty, cond)
		if err != nil {
			return err
		}
		if !ok {
			t.Few = "at " + units.Format(theta, units.Preferred(units.Temperature, units.Metric), 3) + " the circuit could not be balanced over " + d.Duty.Name
			if theta != t.s.Oil {
				return nil
			}
			p = thermal.Point{Heat: d.Balance.HeatToOil().Total() / d.Balance.Cycle, Drawn: drawnOf(d.Balance)}
		}
		p.Theta = theta
		points[i] = p
	}
	if t.whole == nil {
		t.scale(points)
	}
	for i := range points {
		p, l := &points[i], &t.loads[i]
		p.Heat *= t.whole[i]
		p.Drawn *= t.drawn[i]
		for k := range p.Lines {
			for j := range p.Lines[k] {
				p.Lines[k][j].Heat *= t.whole[i]
			}
		}
		at, _ := slices.BinarySearchFunc(l.At, theta, func(p thermal.Point, x float64) int {
			return int(math.Copysign(1, p.Theta-x))
		})
		l.At = slices.Insert(l.At, at, *p)
	}
	return nil
}

// drawnOf is the mean power drawn of a machine without its cooling.
func drawnOf(b *Balance) float64 { return b.SupplyIn.Total() / b.Cycle }

// scale sets what few time steps say at the working temperature against the balance.
func (t *heatTable) scale(points []thermal.Point) {
	t.whole, t.drawn = make([]float64, len(points)), make([]float64, len(points))
	for i, d := range t.duties {
		t.whole[i], t.drawn[i] = 1, 1
		if h := d.Balance.HeatToOil().Total() / d.Balance.Cycle; points[i].Heat > leastHeat && h > leastHeat {
			t.whole[i] = h / points[i].Heat
		}
		if e := drawnOf(d.Balance); points[i].Drawn > leastHeat && e > leastHeat {
			t.drawn[i] = e / points[i].Drawn
		}
	}
}

// solve balances a duty in few time steps; ok is false where too many of them stay unbalanced.
func (t *heatTable) solve(ctx context.Context, d *duty.Duty, cond circuit.Conditions) (p thermal.Point, ok bool, err error) {
	few := coarse(d)
	c, _ := circuit.Compile(t.run.Circuit, t.s.File.Axes, few)
	if c == nil {
		return p, false, nil
	}
	series := c.Series(few)
	ledger, lines := NewLedger(c.Channels(), nil, len(series.T)), newLineFlows(c)
	to := circuit.Receivers{ledger, lines}
	cycles, cert := 1, circuit.Certificate{}
	if d.Repeats {
		cycles, _, cert, err = circuit.RunPeriodic(ctx, c, c.Defaults(), series, cond, circuit.Receivers{}, to)
	} else {
		_, cert, err = circuit.Run(ctx, c, c.Defaults(), series, cond, circuit.State{}, to)
	}
	if ctx.Err() != nil {
		return p, false, ctx.Err()
	}
	if err != nil && !errors.Is(err, circuit.ErrNoPeriod) || cert.Unbalanced*50 > cert.Steps {
		return p, false, nil
	}
	b := ledger.Balance(d.Repeats).average(cycles)
	p.Heat, p.Drawn = b.HeatToOil().Total()/b.Cycle, drawnOf(b)
	for _, place := range []thermal.Place{thermal.ReturnLine, thermal.CaseDrain, thermal.Flushing} {
		p.Lines[place] = lines.line(place)
	}
	return p, true, nil
}

// coarse returns a duty in about coarseSteps time steps: rows are left out of long recordings, which are straight between
// those that stay.
func coarse(d *duty.Duty) *duty.Duty {
	out := *d
	if n := len(d.Time); n > 2*coarseSteps {
		stride := (n + coarseSteps - 1) / coarseSteps
		keep := func(v []float64) []float64 {
			var few []float64
			for i := 0; i < n-1; i += stride {
				few = append(few, v[i])
			}
			return append(few, v[n-1])
		}
		out.Time, out.Step, out.Tracks = keep(d.Time), 0, nil
		for _, t := range d.Tracks {
			if !t.What.Measured() {
				t.Values = keep(t.Values)
				out.Tracks = append(out.Tracks, t)
			}
		}
		return &out
	}
	if out.Step > 0 {
		out.Step = math.Max(out.Step, d.Cycle()/coarseSteps)
	}
	return &out
}

// refine solves the circuit where the table leads to, until the table is right there.
func (t *heatTable) refine(ctx context.Context, leadsTo func() ([]float64, error)) error {
	for range 3 {
		thetas, err := leadsTo()
		if err != nil || t.Few != "" && len(t.loads) > 0 && len(t.loads[0].At) < 3 {
			return nil // what is wrong with the plant is said elsewhere
		}
		added := false
		for _, theta := range thetas {
			if t.near(theta) {
				continue
			}
			before := t.loads
			guess := heatAt(before, theta)
			t.loads = cloneLoads(before)
			n := len(t.loads[0].At)
			if err := t.add(ctx, theta); err != nil {
				return err
			}
			if len(t.loads[0].At) == n {
				continue
			}
			if off := missed(guess, heatAt(t.loads, theta)); off > HeatTolerance {
				added = true
			}
			t.Misses = math.Max(t.Misses, missed(guess, heatAt(t.loads, theta)))
		}
		if !added {
			return nil
		}
	}
	return nil
}

// near reports whether the circuit was solved about there, or cannot be.
func (t *heatTable) near(theta float64) bool {
	if len(t.loads) == 0 || len(t.loads[0].At) == 0 {
		return true
	}
	low, high := t.loads[0].Range()
	if theta <= low || theta >= high {
		return true
	}
	return slices.ContainsFunc(t.loads[0].At, func(p thermal.Point) bool { return math.Abs(p.Theta-theta) < apart })
}

func cloneLoads(in []thermal.Load) []thermal.Load {
	out := slices.Clone(in)
	for i := range out {
		out[i].At = slices.Clone(out[i].At)
	}
	return out
}

// heatAt returns the heat of each load at a temperature.
func heatAt(loads []thermal.Load, theta float64) []float64 {
	var out []float64
	for i := range loads {
		h, err := loads[i].HeatAt(theta)
		if err != nil {
			return nil
		}
		out = append(out, h)
	}
	return out
}

func missed(guess, is []float64) (worst float64) {
	for i := range guess {
		if i < len(is) && is[i] > leastHeat {
			worst = math.Max(worst, math.Abs(guess[i]-is[i])/is[i])
		}
	}
	return worst
}
