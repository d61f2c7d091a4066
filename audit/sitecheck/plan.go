package sitecheck

import (
	"context"
	"math"
	"sort"
	"strings"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/look"
	"barlitre/machines/units"
)

// Plan is what to measure at a circuit, and what the model says of it, sound and with faults.
type Plan struct {
	Circuit string
	System  units.System
	Points  []Point
	Sound   Model  // with the known faults cured
	Drawn   Model  // as drawn; nil where no fault is known, and sound is as drawn
	Known   string // those faults
	Changed []string
	Faults  []*Fault
}

// Options of NewPlan; the zero value is good.
type Options struct {
	System   units.System
	Cache    *Cache
	Ladders  []*fixfirst.Ladder    // of the circuits as found, if there are any: good is what is read with their faults cured
	Progress func(done, total int) // from any goroutine, one call at a time
}

// NewPlan writes the plan of a solved circuit; nil where it was not solved. The error is that of the context.
func NewPlan(ctx context.Context, s *audit.Solution, run *audit.CircuitRun, opt Options) (*Plan, error) {
	if run.Year == nil || !run.Year.Complete || len(run.Year.Duties) == 0 {
		return nil, nil
	}
	key := s.File.Fingerprint(run.Circuit.Name, opt.System)
	if p := opt.Cache.get(key); p != nil {
		return p, nil
	}
	sound, asDrawn, edits, err := cured(ctx, s, run, opt)
	if err != nil {
		return nil, err
	}
	p := look.New(s, run, opt.System)
	out := &Plan{Circuit: run.Circuit.Name, System: opt.System, Points: points(p), Faults: faults(sound)}
	out.Sound = modelOf(sound, out.Points)
	if err := solve(ctx, sound.S.File, run.Circuit.Name, out.Points, out.Faults, opt.System, opt.Progress); err != nil {
		return nil, err
	}
	if asDrawn != "" {
		out.Drawn, out.Known, out.Changed = modelOf(p, out.Points), asDrawn, changes(s.File, edits)
		out.Faults = append(out.Faults, &Fault{Name: "the machine is as drawn, with " + asDrawn, Do: "What to do stands under Fix first.", model: []Model{out.Drawn}})
	}
	opt.Cache.put(key, out)
	return out, nil
}

// cured is the circuit with its known faults cured by settings and repairs, what they are, and the edits; the circuit as it is
// where none is known. A part of another size is not in it: it is not the machine that is read.
func cured(ctx context.Context, s *audit.Solution, run *audit.CircuitRun, opt Options) (*look.Plant, string, fixfirst.Cure, error) {
	as := look.New(s, run, opt.System)
	for _, l := range opt.Ladders {
		edits, names := l.Restored()
		if l.Circuit != run.Circuit.Name || len(edits) == 0 {
			continue
		}
		g, err := fixfirst.Apply(s.File, edits)
		if err != nil {
			continue // two cures of one thing: the circuit as it is
		}
		sol, other, err := fixfirst.SolveOne(ctx, g, run.Circuit.Name)
		if err != nil {
			return nil, "", nil, err
		}
		if other != nil {
			return look.New(sol, other, opt.System), strings.Join(names, "; "), edits, nil
		}
	}
	return as, "", nil, nil
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
