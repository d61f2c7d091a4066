package sitecheck

import (
	"context"
	"math"
	"sort"

	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/machines/units"
)

// Plan is what to measure at a circuit, and what the model says of it, sound and with faults.
type Plan struct {
	Title, Circuit string
	System         units.System
	Points         []Point
	Sound          Model
	Faults         []*Fault
}

// Options of NewPlan; the zero value is good.
type Options struct {
	System   units.System
	Cache    *Cache
	Progress func(done, total int) // from any goroutine, one call at a time
}

// NewPlan writes the plan of a solved circuit; nil where it was not solved. The error is that of the context.
func NewPlan(ctx context.Context, s *audit.Solution, run *audit.CircuitRun, opt Options) (*Plan, error) {
	if run.Year == nil || !run.Year.Complete || len(run.Year.Duties) == 0 {
		return nil, nil
	}
	key := keyOf(s.File, run.Circuit.Name, opt.System)
	if p := opt.Cache.get(key); p != nil {
		return p, nil
	}
	p := look.New(s, run, opt.System)
	out := &Plan{Title: s.File.Title, Circuit: run.Circuit.Name, System: opt.System, Points: points(p), Faults: faults(p)}
	out.Sound = modelOf(p, out.Points)
	if err := solve(ctx, s.File, run.Circuit.Name, out.Points, out.Faults, opt.System, opt.Progress); err != nil {
		return nil, err
	}
	opt.Cache.put(key, out)
	return out, nil
}

// All writes a plan for every circuit as found of a solution.
func All(ctx context.Context, s *audit.Solution, opt Options) ([]*Plan, error) {
	var out []*Plan
	for _, run := range s.Circuits {
		if run.Proposal {
			continue
		}
		p, err := NewPlan(ctx, s, run, opt)
		if err != nil {
			return nil, err
		}
		if p != nil {
			out = append(out, p)
		}
	}
	return out, nil
}

// sign is what a fault shows at a point: in one state, from sound to faulty.
type sign struct {
	fault       *Fault
	state       string
	sound, with float64
	strength    float64 // how far apart, in spreads of the reading
}

// signs lists how the faults show at a point, the plainest first; those that nobody would see are left out.
func (p *Plan) signs(pt Point) []sign {
	var out []sign
	for _, x := range p.Faults {
		best := sign{}
		for _, m := range x.model[:min(1, len(x.model))] { // in the strength met most
			for _, s := range States() {
				k := at(s.Name, pt.Name)
				a, b := p.Sound[k].Mean, m[k].Mean
				if d := math.Abs(b-a) / spread(pt, a); m != nil && !math.IsNaN(d) && d > 1.05*best.strength {
					best = sign{x, s.Name, a, b, d}
				}
			}
		}
		if best.strength >= 1.5 {
			if x.Point == pt.Name {
				best.strength += 1e6 // it is meant to be seen here
			}
			out = append(out, best)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].strength > out[j].strength })
	return out
}

// spread is by how much a reading may well differ from the model in a sound machine [SI]: a tenth, of a pressure a
// twentieth, and what gauges and meters leave at small values. Common practice, no source.
func spread(pt Point, model float64) float64 {
	floor := map[units.Dim]float64{units.Pressure: 3e5, units.Power: 300, units.Flow: 0.7 * units.LitrePerMinute, units.Temperature: 5}[pt.Dim]
	if pt.minus != "" {
		floor = 0.4e5
	}
	if pt.Dim == units.Temperature {
		return floor
	}
	share := 0.1
	if pt.Dim == units.Pressure {
		share = 0.05
	}
	return math.Max(floor, share*math.Abs(model))
}
