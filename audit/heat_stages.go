package audit

import (
	"context"
	"slices"

	"barlitre/audit/thermal"
)

// heatSectionOf returns what the file says of tank and cooler of a circuit that was solved.
func (s *Solution) heatSectionOf(c *CircuitRun) (section HeatSection, ok bool) {
	section = s.File.HeatOf(s.File.Circuit(c.Circuit.Name))
	solved := slices.ContainsFunc(c.Duties, func(d *DutyRun) bool { return d.Balance != nil })
	if section.Word("cooler_place") == placeOffLine && section.Drawn.Block != "" {
		section.loopAsDrawn(c)
	}
	return section, section.Given && solved
}

// coolerOf is the cooler that a section describes; ok is false where the section lacks what a study needs.
func (s *Solution) coolerOf(section HeatSection) (c thermal.Cooler, ok bool) {
	h := &HeatStudy{Section: section, Heating: Heating{Oil: s.Conditions}}
	if h.missing(s) != "" {
		return c, false
	}
	return h.plant(s.Air).Cooler, true
}

// expectCooling books what the cooling draws as far as it is known without the oil temperature: all of it but that of a fan
// that the thermostat switches, which is booked as it was before.
func (s *Solution) expectCooling(c *CircuitRun, before *Solution) {
	section, ok := s.heatSectionOf(c)
	if !ok {
		return
	}
	cooler, ok := s.coolerOf(section)
	if !ok {
		return
	}
	c.fanShare = 1
	if cooler.Switched {
		c.fanShare = before.fanShareOf(c.Circuit.Name)
	}
	c.bookCooling(c.fanShare*cooler.Fan, cooler.LoopPower)
}

// fanShareOf is the share that a fan of a circuit is booked with, 0 where that is not known.
func (s *Solution) fanShareOf(name string) float64 {
	if s != nil {
		for _, c := range s.Circuits {
			if c.Circuit.Name == name {
				return c.fanShare
			}
		}
	}
	return 0
}

// EnergyMayChange reports whether Warm may change the energy of a pending solution: where a thermostat switches a fan.
func (s *Solution) EnergyMayChange() bool {
	return s.Pending && slices.ContainsFunc(s.Circuits, func(c *CircuitRun) bool {
		section, ok := s.heatSectionOf(c)
		if !ok {
			return false
		}
		cooler, ok := s.coolerOf(section)
		return ok && cooler.Switched && cooler.Fan > 0
	})
}

// Warm returns the solution with the oil temperatures worked out, and what the cooling draws booked as they have it. It shares what
// stays with s, which is unchanged; where nothing is pending it is s itself. The error is that of the context.
func (s *Solution) Warm(ctx context.Context) (*Solution, error) {
	if !s.Pending {
		return s, nil
	}
	out := *s
	out.Pending, out.Circuits = false, nil
	for _, c := range s.Circuits {
		out.Circuits = append(out.Circuits, c.unbooked())
	}
	err := out.onAll(ctx, func(ctx context.Context, i int, c *CircuitRun) error {
		return (&job{solution: &out, run: c, number: i + 1}).warm(ctx)
	})
	if err != nil {
		return nil, err
	}
	out.conclude()
	return &out, nil
}

// unbooked is the run before anything was booked for its cooling.
func (c *CircuitRun) unbooked() *CircuitRun {
	out := *c
	out.Findings, out.Duties = slices.Clip(c.noted), nil
	for _, d := range c.Duties {
		bare := *d
		bare.Balance, bare.Plot = d.machine, d.courses
		out.Duties = append(out.Duties, &bare)
	}
	return &out
}

// warm works out how warm the oil gets, and books what the cooling draws.
func (j *job) warm(ctx context.Context) error {
	s, r := j.solution, j.run
	section, ok := s.heatSectionOf(r)
	if !ok {
		return nil
	}
	var err error
	j.guard("", func() { r.Warmth, err = studyHeat(ctx, s, r, section) })
	r.noted = r.Findings
	if err != nil {
		return err
	}
	if r.Warmth == nil || r.Warmth.Week == nil {
		s.expectCooling(r, nil)
		return nil
	}
	if w := r.Warmth.Week; w.On > 0 {
		fan := w.Fan / w.On
		r.fanShare = ratio(fan, r.Warmth.Plant.Cooler.Fan)
		r.bookCooling(fan, w.Loop/w.On)
	}
	return nil
}
