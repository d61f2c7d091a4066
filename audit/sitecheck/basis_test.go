package sitecheck_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/sitecheck"
)

// planOf is the plan of a sample with values set, beside what is to be put right, and the solution.
func planOf(t *testing.T, name string, set ...string) (*sitecheck.Plan, *audit.Solution) {
	t.Helper()
	f := file(t, name)
	for _, x := range set {
		target, quantity, _ := strings.Cut(x, "=")
		if err := f.Set(target, quantity); err != nil {
			t.Fatal(err)
		}
	}
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	ladders, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	plans, err := sitecheck.All(context.Background(), s, sitecheck.Options{Ladders: ladders})
	if err != nil || len(plans) != 1 {
		t.Fatal(plans, err)
	}
	return plans[0], s
}

// A plan says of which machine its good values are, what was changed for them, and what the machine as drawn shows.
func TestGoodSaysOfWhichMachine(t *testing.T) {
	p, _ := planOf(t, "quayside-winch.yaml", "As found/RV1.crack=200 bar")
	for _, want := range []string{"RV1: relief at or below compensator", "in place of 210", "not those of the machine as drawn"} {
		if !strings.Contains(p.Basis(), want) {
			t.Errorf("%q is not in %q", want, p.Basis())
		}
	}
	differs := false
	for _, pt := range p.Points {
		differs = differs || p.RowAsDrawn(pt) != nil
	}
	if !differs {
		t.Error("a relief valve that spills shows nowhere")
	}
	p, _ = planOf(t, "quayside-winch.yaml")
	if !strings.Contains(p.Basis(), "as drawn: no fault") || p.Drawn != nil {
		t.Errorf("sound: %q", p.Basis())
	}
}

// A pump that is too large stays as large in the good values: no other pump stands there.
func TestGoodHasThePartsThatStandThere(t *testing.T) {
	p, _ := planOf(t, "baling-press.yaml", "As found/P1.displacement=140 cm3/rev", "As found/V1.flow_centre=250 L/min", "As found/M1.rated_power=90 kW",
		"As found/F1.nominal_flow=500 L/min", "As found/L1.diameter=50 mm")
	if strings.Contains(strings.Join(p.Changed, ";"), "displacement") {
		t.Errorf("changed: %v", p.Changed)
	}
}

// The feed of a motor is the channel of the motor alone: what its powers integrate to in a state, fan and loop pump left out.
func TestFeedIsTheMotorsOwn(t *testing.T) {
	p, s := planOf(t, "quayside-winch.yaml")
	y := s.Circuits[0].Year
	if y.CoolingDrawn().Total() <= 0 {
		t.Fatal("nothing is drawn for cooling: the case tells nothing")
	}
	want, time := 0.0, 0.0 // by the courses of the motor's own supply, over all states
	for _, d := range s.Circuits[0].Duties {
		for k, ch := range d.Plot.Channels {
			if ch.Block == "M1" && ch.Kind == "supply" {
				e := 0.0
				x := &d.Plot.Powers[k]
				for i := 1; i < len(x.T); i++ {
					e += (x.V[i] + x.V[i-1]) / 2 * (x.T[i] - x.T[i-1])
				}
				want += e / d.Balance.Cycle * d.Duty.Hours
			}
		}
		time += d.Duty.Hours
	}
	got := 0.0
	for state, seconds := range map[string]float64{"idling": y.Seconds.Idle, "holding": y.Seconds.Holding, "working": y.Seconds.Working} {
		if v := p.Sound[state+".M1.power"].Mean; seconds > 0 && !math.IsNaN(v) {
			got += v * seconds
		}
	}
	if math.Abs(got-want) > 0.02*want || time <= 0 {
		t.Errorf("the feed of M1 takes %g J a year in all states, its own channel %g J", got, want)
	}
}
