package fixfirst

import (
	"context"
	"fmt"
	"math"
	"sync"

	"barlitre/audit"
	"barlitre/circuit"
)

// Saving is what a cure, or a proposal, takes less of in a year; negative where it takes more. NaN where not known.
type Saving struct {
	Energy float64 // J drawn
	Money  float64
	CO2    float64 // kg
	Heat   float64 // W, mean heat to the oil
}

// less is what the year after takes less than the year before.
func less(before, after outcome) Saving {
	return Saving{before.drawn - after.drawn, before.money - after.money, before.co2 - after.co2, before.heat - after.heat}
}

// Plus adds two savings; heat is a mean power, and adds as such.
func (s Saving) Plus(o Saving) Saving {
	return Saving{s.Energy + o.Energy, s.Money + o.Money, s.CO2 + o.CO2, s.Heat + o.Heat}
}

var unknown = Saving{math.NaN(), math.NaN(), math.NaN(), math.NaN()}

// outcome is the year of a circuit.
type outcome struct {
	drawn, money, co2, heat float64
	short                   float64 // s by which axes fall short in a cycle, summed
	motion                  motion
	fault                   string // why there is none
}

func outcomeOf(run *audit.CircuitRun) outcome {
	if run.Year == nil || !run.Year.Complete {
		return outcome{fault: "a duty could not be solved"}
	}
	o := outcome{drawn: run.Year.Drawn.Total(), money: run.Money.Net(), co2: run.Money.CO2, heat: run.Heat.Year.Mean, motion: motionOf(run)}
	for _, d := range run.Duties {
		if d.Certificate.Unbalanced > 0 {
			o.fault = fmt.Sprintf("%d time steps of %s could not be balanced", d.Certificate.Unbalanced, d.Duty.Name)
		}
		for _, s := range d.Shortfalls {
			o.short += s.Seconds
		}
	}
	if circuit.AnyStops(run.Findings) {
		o.fault = "it cannot be solved so"
	}
	return o
}

// Cache keeps the years of circuits by the fingerprint of their file, so that what was solved once is not solved again. The
// zero value is good, for any number of goroutines.
type Cache struct {
	mu    sync.Mutex
	known map[[32]byte]outcome
	order [][32]byte
}

// cached is the largest number of outcomes kept: some ladders of a dozen findings.
const cached = 1024

func (c *Cache) get(k [32]byte) (outcome, bool) {
	c.mu.Lock()
	defer c.mu.Unlock()
	o, ok := c.known[k]
	return o, ok
}

func (c *Cache) put(k [32]byte, o outcome) {
	c.mu.Lock()
	defer c.mu.Unlock()
	if c.known == nil {
		c.known = map[[32]byte]outcome{}
	}
	if _, ok := c.known[k]; !ok {
		c.order = append(c.order, k)
	}
	c.known[k] = o
	for len(c.order) > cached {
		delete(c.known, c.order[0])
		c.order = c.order[1:]
	}
}

// solve returns the year of one circuit of a file; the error is that of the context.
func (c *Cache) solve(ctx context.Context, f *audit.File, name string) (outcome, error) {
	k := f.Fingerprint(name)
	if o, ok := c.get(k); ok {
		return o, nil
	}
	_, run, err := SolveOne(ctx, f, name)
	if err != nil {
		return outcome{}, err
	}
	o := outcome{fault: "it cannot be solved so"}
	if run != nil {
		o = outcomeOf(run)
	}
	c.put(k, o)
	return o, nil
}

// choose takes the first cure of a finding that can be solved and leaves the machine doing all that it did before: no axis
// slower, no gate missed that was passed. A repair cured alone may miss gates, for other faults may drive the sound part
// harder than the worn one; it may not once they are cured. Where gates are missed as it is, a cure that leaves fewer of them goes first.
func (c *Cache) choose(ctx context.Context, f *audit.File, before outcome, x *Finding, alone bool) (*audit.File, Cure, outcome, string, error) {
	why := "no edit of the drawing stands for its cure"
	var best *audit.File
	var with Cure
	var found outcome
	for _, edits := range x.Cures {
		g, err := Apply(f, edits)
		if err != nil {
			why = err.Error()
			continue
		}
		o, err := c.solve(ctx, g, x.Circuit)
		if err != nil {
			return nil, nil, o, "", err
		}
		if o.fault != "" {
			why = o.fault
			continue
		}
		if spoilt := o.motion.spoils(before.motion, !alone || x.Class != Repair); spoilt != "" {
			why = "of every cure tried the machine would do less than it does: " + spoilt
			continue
		}
		if best == nil || len(o.motion.missed) < len(found.motion.missed) {
			best, with, found = g, edits, o
		}
		if len(o.motion.missed) == 0 {
			break
		}
	}
	if best != nil {
		return best, with, found, "", nil
	}
	return nil, nil, outcome{}, why, nil
}
