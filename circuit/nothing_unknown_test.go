package circuit

import (
	"context"
	"testing"

	"barlitre/circuit/duty"
)

// A pump that turns in its tank leaves nothing to be found: all is known, and it is booked all the same.
func TestNothingUnknown(t *testing.T) {
	text := "TK tank\nM1 electric_motor; rated_power: 5 kW; efficiency: 0.9\nP1 pump; displacement: 20 cm3/rev\n- M1.shaft P1.shaft\n- P1.S P1.P TK.T"
	d := &duty.Duty{Name: "idle", Time: []float64{0, 1, 2}, Sampled: true}
	k, found := Compile(build(t, text), nil, d)
	if k == nil {
		t.Fatal(found)
	}
	if k.n != 0 {
		t.Fatalf("%d unknowns", k.n)
	}
	drawn := &powers{of: k}
	_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), trialOil, State{}, drawn)
	if err != nil || cert.Steps != 3 || cert.Unbalanced > 0 {
		t.Fatal(err, cert)
	}
	if drawn.steps != 3 || !(drawn.loss > 0) {
		t.Errorf("%d steps, %g W lost", drawn.steps, drawn.loss)
	}
}

// powers adds up what channels of loss say.
type powers struct {
	of    *Compiled
	steps int
	loss  float64
}

func (p *powers) Sample(s *Sample) error {
	p.steps++
	for i, c := range p.of.channels {
		if c.Role == Loss {
			p.loss += s.Power[i]
		}
	}
	return nil
}
