package audit

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// remarks are the findings that the energy balance itself gives rise to.
func (c *CircuitRun) remarks() []circuit.Finding {
	var out []circuit.Finding
	for _, d := range c.Duties {
		if d.Balance != nil {
			out = append(out, c.dutyRemarks(d)...)
		}
	}
	out = append(out, c.shutIn()...)
	if c.Heat.Fault != "" {
		out = append(out, circuit.Finding{Level: circuit.Warns, Circuit: c.Circuit.Name, Text: c.Heat.Fault})
	}
	return out
}

// shutIn notes, once for all duties, where the pressure shown at standstill is a convention.
func (c *CircuitRun) shutIn() []circuit.Finding {
	var loose []string
	for _, d := range c.Duties {
		for _, n := range d.Certificate.Loose {
			if !slices.Contains(loose, n) {
				loose = append(loose, n)
			}
		}
	}
	if len(loose) == 0 {
		return nil
	}
	var places []string
	for _, p := range c.Circuit.Pockets(loose) {
		place := circuit.Names(p.Nodes)
		if len(p.By) > 0 {
			place += " (shut in by " + circuit.Names(p.By) + ")"
		}
		places = append(places, place)
	}
	return []circuit.Finding{{Level: circuit.Note, Circuit: c.Circuit.Name, Text: "while axes stand, leakage alone sets the pressure at " + strings.Join(places, "; ") +
		": what is shown there is a convention. In the machine it drifts, and oil that is shut in can stay under pressure long after the pump has stopped: prove it zero before any work"}}
}

func (c *CircuitRun) dutyRemarks(d *DutyRun) []circuit.Finding {
	var out []circuit.Finding
	b := d.Balance
	say := func(level circuit.Level, block string, t float64, format string, args ...any) {
		out = append(out, circuit.Finding{Level: level, Circuit: c.Circuit.Name, Duty: d.Duty.Name, Block: block, Time: t,
			Text: fmt.Sprintf(format, args...)})
	}
	if n := d.Certificate.Unbalanced; n > 0 {
		text := fmt.Sprintf("%d of %d time steps could not be balanced, and the energies hold what was nearest", n, b.Steps)
		var at float64
		if u := d.Certificate.Unsolved; len(u) > 0 {
			at = u[0].T
			text += fmt.Sprintf("; the first at %s, where %s is left with %s after %d ways were tried (the last: %s). Likely cause: %s", seconds(at), u[0].Where, u[0].Residual,
				len(u[0].Tried), u[0].Tried[len(u[0].Tried)-1], u[0].Cause)
		}
		say(circuit.Warns, "", at, "%s", text)
	}
	if x := b.Closure(); x > ClosureLimit {
		say(circuit.Warns, "", b.WorstGapAt, "the energy balance lacks %s of %s that came in (%s); most at %s. Trust no figure of this duty before this is explained",
			kilojoules(math.Abs(b.Gap())), kilojoules(b.SupplyIn.Total()), units.Format(x, units.Percent, 2), seconds(b.WorstGapAt))
	}
	for _, l := range b.Losses {
		if e := l.Energy.Total(); e < -1e-9*b.SupplyIn.Total() {
			say(circuit.Warns, l.Block, 0, "%s of %s gains %s a cycle instead of losing energy: an error of the model; please report it with this file",
				l.Kind, l.Block, kilojoules(-e))
		}
	}
	if s := b.StoredEnergy().Total(); math.Abs(s) > storedShare*b.SupplyIn.Total() {
		say(circuit.Note, "", 0, "at the end of the cycle %s more is stored than at its start, so the next cycle does not start as this one did; "+
			"the year counts every cycle alike. Close the strokes of the duty", kilojoules(s))
	}
	if what := d.Certificate.Sequential; what != "" {
		say(circuit.Note, "", 0, "its %d time steps were balanced one after another, on one processor: each starts from what %s is left with. "+
			"Circuits that remember nothing are balanced in stretches at the same time", d.Certificate.Steps, what)
	}
	if d.Duty.Hours <= 0 {
		say(circuit.Note, "", 0, "duty %s has no hours a year and is left out of the year; give its hours", d.Duty.Name)
	}
	return out
}

// storedShare is the stored part of what a cycle draws that is worth a note (our choice).
const storedShare = 0.005

func seconds(t float64) string {
	return units.Format(t, units.Preferred(units.Time, units.Metric), 4)
}

// Shares of the energy at states outside measured points that are worth a note, and a warning (our choice).
const (
	notedOutside  = 0.01
	warnedOutside = 0.20
)

// extrapolations says how much of the energy passes machines at states that nobody measured.
func (s *Solution) extrapolations(c *CircuitRun) []circuit.Finding {
	var out []circuit.Finding
	for i := range c.Circuit.Blocks {
		b := &c.Circuit.Blocks[i]
		if b.Fit == nil {
			continue
		}
		share := s.MachineMap(c, b.ID).Extrapolated()
		if c.Extrapolated == nil {
			c.Extrapolated = map[string]float64{}
		}
		c.Extrapolated[b.ID] = share
		if share < notedOutside {
			continue
		}
		level := circuit.Note
		if share > warnedOutside {
			level = circuit.Warns
		}
		out = append(out, circuit.Finding{Level: level, Circuit: c.Circuit.Name, Block: b.ID, Parameter: "points", Line: b.Words["points"].Line,
			Text: fmt.Sprintf("%s: %s of the energy passes it at states outside its measured points, where the fitted law is extrapolated; measure there, or trust its losses less", b.ID, units.Format(share, units.Percent, 2))})
	}
	return out
}
