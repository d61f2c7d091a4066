package circuit

import (
	"fmt"
	"math"

	"barlitre/circuit/duty"
)

// judge checks every balanced step of a run from its signals alone, by laws written
// here apart from the models: flow into every node, energy, losses, pressures, the
// characteristics of valves, the force on pistons, and what each control may do.
type judge struct {
	c       *Compiled
	s       *duty.Series
	cond    Conditions
	nodes   [][]int // signals of the flows that leave each node
	at      map[string]int
	laws    []func(x *Sample) error
	annulus map[string]float64 // by axis, the least share of the bore that a cylinder leaves beside its rod
	flow    float64            // largest flow of the run, m³/s
	peak    float64            // highest pressure
	left    float64            // largest flow that a node is left with
	where   string
	passed  float64 // largest power
	missing float64 // largest power that does not close
	lost    float64 // when
	wrong   error
}

func newJudge(k *Compiled, s *duty.Series, cond Conditions) *judge {
	j := &judge{c: k, s: s, cond: cond, at: map[string]int{}, annulus: map[string]float64{}}
	for i, g := range k.signals {
		j.at[g.Name] = i
	}
	nets, of := netsOf(k.circuit)
	row := map[int]int{}
	for _, n := range nets {
		if n.typ == Oil || n.typ == Pilot {
			row[n.id] = len(j.nodes)
			j.nodes = append(j.nodes, nil)
		}
	}
	for i, g := range k.signals {
		if g.What == "q" {
			n := of[PortRef{g.Block, g.Port}]
			if n.tank == "" && n.src == "" {
				j.nodes[row[n.id]] = append(j.nodes[row[n.id]], i)
			}
		}
	}
	j.flow = k.flowScale(k.defaults) // of its machines, also where a control keeps them from it
	j.lawsOfBlocks()
	return j
}

// Sample judges one step; one that is marked as unsolved claims nothing.
func (j *judge) Sample(x *Sample) error {
	if x.Unbalanced {
		return nil
	}
	for i, g := range j.c.signals {
		if v := x.Signals[i]; math.IsNaN(v) || math.IsInf(v, 0) {
			j.find(x, fmt.Errorf("%s is %g", g.Name, v))
		} else if g.What == "p" && v < floorPressure*(1+1e-6) {
			j.find(x, fmt.Errorf("%s at %g bar, below the floor", g.Name, v/1e5))
		}
		if g.What == "p" {
			j.peak = math.Max(j.peak, x.Signals[i])
		}
		if g.What == "q" {
			j.flow = math.Max(j.flow, math.Abs(x.Signals[i]))
		}
	}
	for i, node := range j.nodes {
		sum := -x.Void[i]
		for _, q := range node {
			sum += x.Signals[q]
		}
		if a := math.Abs(sum); a > j.left && len(node) > 0 {
			j.left, j.where = a, fmt.Sprintf("%s at %g s", j.c.nodes[i].name, x.T)
		}
	}
	j.energy(x)
	for _, law := range j.laws {
		j.find(x, law(x))
	}
	return nil
}

func (j *judge) find(x *Sample, err error) {
	if err != nil && j.wrong == nil {
		j.wrong = fmt.Errorf("at %g s: %w", x.T, err)
	}
}

func (j *judge) energy(x *Sample) {
	left, passed := 0.0, 0.0
	for i, ch := range j.c.channels {
		p := x.Power[i]
		passed += math.Abs(p)
		if ch.Role == Supply {
			left += p
		} else {
			left -= p
		}
		if ch.Role == Loss && p < 0 {
			sup := j.most(x)
			if i == j.c.void { // what holds shut chambers: a billionth of the machines' flow at 100 bar
				sup += 1e-3 * j.c.flowScale(j.c.defaults) * j.peak * (j.peak + j.asked(x)) / 100e5
			}
			if p < -1e-6*sup-j.tiny()*j.peak {
				j.find(x, fmt.Errorf("%s %s makes %g W of %g W", ch.Block, ch.Kind, -p, sup))
			}
		}
	}
	j.passed = math.Max(j.passed, passed)
	if a := math.Abs(left); a > j.missing {
		j.missing, j.lost = a, x.T
	}
}

func (j *judge) most(x *Sample) float64 {
	m := 1.0
	for _, p := range x.Power {
		m = math.Max(m, math.Abs(p))
	}
	return m
}

// asked is the highest pressure that a load alone asks for: on the bore where it pushes, on the
// annulus where it pulls at a cylinder with one rod.
func (j *judge) asked(x *Sample) float64 {
	p := 0.0
	for i, a := range x.Axes {
		area := j.c.movers[i].volume(j.c.defaults)
		if part := j.annulus[j.c.axes[i].Name]; a.Load < 0 && part > 0 {
			area *= part
		}
		p = math.Max(p, math.Abs(a.Load)/area)
	}
	return p
}

// verdict says in one error what is wrong with a run, nil if nothing is.
func (j *judge) verdict() error {
	switch {
	case j.wrong != nil:
		return j.wrong
	case j.left > 1e-6*j.flow*math.Max(1, j.peak/1e9): // what ties a shut chamber to a pressure shows above 10,000 bar
		return fmt.Errorf("node %s is left with %g of %g L/min", j.where, j.left*60000, j.flow*60000)
	case j.missing > 1e-6*j.passed+heldFlow*j.c.flowScale(j.c.defaults)*j.peak+1e-3: // slower than heldFlow is no motion
		return fmt.Errorf("%g of %g W do not close at %g s", j.missing, j.passed, j.lost)
	}
	return nil
}
