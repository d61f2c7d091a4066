package duty

import (
	"math"
	"slices"
	"testing"
)

var ram = []Axis{{Name: "ram", Kind: Linear}}

func ramDuty(t, v, f []float64) *Duty {
	return &Duty{Name: "d", Time: t, Tracks: []Track{{Of: "ram", What: Speed, Values: v}, {Of: "ram", What: Load, Values: f}}}
}

// Where rows are the time steps, nothing of a long duty is copied; a step at an end has
// nothing on its other side and is left out.
func TestRowsAreShared(t *testing.T) {
	d := ramDuty([]float64{0, 0, 1, 2, 2, 3, 3}, []float64{9, 0, 1, 1, 1e-4, 0.5, 9}, []float64{0, 1, 2, 3, 4, 5, 6})
	d.Sampled = true
	s := d.Series(ram, true)
	if !slices.Equal(s.T, []float64{0, 1, 2, 2, 3}) || &s.T[0] != &d.Time[1] || &s.Axes[0].Load[0] != &d.Tracks[1].Values[1] {
		t.Errorf("times %v", s.T)
	}
	a := s.Axes[0]
	if !slices.Equal(a.Standing, []bool{true, false, false, true, false}) || a.SpeedAt(3) != 0 || a.SpeedAt(4) != 0.5 || a.TopLoad != 6 {
		t.Errorf("%+v", a)
	}
	if !slices.Equal(a.Accel, []float64{0, 1, 0, 0, 0.5 - 1e-4}) {
		t.Errorf("accelerations %v", a.Accel)
	}
	if cap(s.Part(1, 3).T) > cap(s.T) || len(s.Part(1, 3).Axes[0].Command) != 0 {
		t.Error("part")
	}
}

// By hand: speed rises from 0 to 1 m/s over 1 s, so the threshold of 0.001 m/s is passed
// at 1 ms, and stands as two time steps there; with Step the multiples come in between.
func TestInstantsBetweenRows(t *testing.T) {
	d := ramDuty([]float64{0, 1, 2}, []float64{0, 1, 1}, []float64{10, 10, 30})
	s := d.Series(ram, false)
	if !slices.Equal(s.T, []float64{0, 0.001, 0.001, 1, 2}) || !slices.Equal(s.Axes[0].Standing, []bool{true, true, false, false, false}) {
		t.Errorf("%v %v", s.T, s.Axes[0].Standing)
	}
	if a := s.Axes[0]; a.SpeedAt(1) != 0 || math.Abs(a.SpeedAt(2)-0.001) > 1e-15 || a.Accel != nil {
		t.Errorf("%v", a.Speed)
	}
	d.Step = 0.4
	if s := d.Series(ram, false); !slices.Equal(s.T, []float64{0, 0.001, 0.001, 0.4, 0.8, 1, 1.2000000000000002, 1.6, 2}) {
		t.Errorf("%v", s.T)
	}
	// with a moved mass the acceleration jumps at 1 s, and at the threshold
	d.Step = 0
	if s := d.Series(ram, true); !slices.Equal(s.T, []float64{0, 0.001, 0.001, 1, 1, 2}) || !slices.Equal(s.Axes[0].Accel, []float64{0, 0, 1, 1, 0, 0}) {
		t.Errorf("%v %v", s.T, s.Axes[0].Accel)
	}
}

func TestWhatIsAskedOnTheWay(t *testing.T) {
	d := ramDuty([]float64{0, 1, 2, 3, 4}, []float64{0, 1, -2, 0, 0}, []float64{1, 10, 8, 0, 0.05})
	if at := d.Busiest(ram); at != 2 {
		t.Errorf("busiest at %g", at)
	}
	if top, given := d.TopSpeed("ram"); top != 2 || !given {
		t.Errorf("top speed %g", top)
	}
	if _, given := d.TopSpeed("boom"); given {
		t.Error("no such axis")
	}
	for _, c := range []struct {
		share float64
		want  bool
	}{{0.9, true}, {0.95, false}} { // between rows, at 1.333 s, it turns under 9.33 of 10 N
		if got := d.StandsUnder(ram[0], c.share); got != c.want {
			t.Errorf("stands under more than %g of the load: %v", c.share, got)
		}
	}
	if d.StandsUnder(Axis{Name: "boom"}, 0) {
		t.Error("no such axis")
	}
}
