package duty

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

func move(axis string, stroke, speed, load, end float64) Move {
	return Move{axis, stroke, speed, load, end}
}

var nan = math.NaN()

func way(d *Duty, axis string, from, to float64) float64 {
	v, s := d.Track(axis, Speed), 0.0
	for i := 1; i < len(d.Time); i++ {
		if mid := (d.Time[i] + d.Time[i-1]) / 2; mid > from && mid < to {
			s += (d.Time[i] - d.Time[i-1]) * (v.Values[i] + v.Values[i-1]) / 2
		}
	}
	return s
}

// A stroke from rest to rest with equal ramps takes the speed s/(T − r), as textbooks of
// motion profiles have it (trapezoidal speed, from memory).
func TestBuildTrapezoid(t *testing.T) {
	d, err := Build([]Stage{
		{"out", 2, 0.1, []Move{move("ram", 0.3, nan, 5e3, nan)}},
		{"hold", 1, 0.1, []Move{move("ram", nan, nan, 60e3, nan)}},
		{"back", 1.5, 0, []Move{move("ram", -0.3, nan, 2e3, 4e3)}},
	}, []string{"ram"}, true)
	if err != nil {
		t.Fatal(err)
	}
	if got := fmt.Sprintf("%.4g", d.Time); got != "[0 0.1 1.9 2 2.1 3 3 4.5]" {
		t.Errorf("time %s", got)
	}
	if got, want := fmt.Sprintf("%.6g", d.Track("ram", Speed).Values), fmt.Sprintf("%.6g", []float64{0, 0.3 / 1.9, 0.3 / 1.9, 0, 0, 0, -0.2, -0.2}); got != want {
		t.Errorf("speed %s, want %s", got, want)
	}
	if got := fmt.Sprintf("%.4g", d.Track("ram", Load).Values); got != "[4000 5000 5000 5000 6e+04 6e+04 2000 4000]" {
		t.Errorf("load %s", got)
	}
	if got := fmt.Sprint(d.Phases); got != "[{out 0} {hold 2} {back 3}]" {
		t.Errorf("phases %s", got)
	}
	if p := d.Check(); len(p) > 0 {
		t.Error(p)
	}
}

// A fast stage gives way to a slow one that follows in the same direction, without a stop.
func TestBuildTwoSpeeds(t *testing.T) {
	d, err := Build([]Stage{
		{"fast", 2, 0.2, []Move{move("ram", 0.3, nan, 0, nan)}},
		{"slow", 3, 0.2, []Move{move("ram", 0.09, nan, 0, nan)}},
		{"wait", 1, 0.2, nil},
		{"back", 2, 0.2, []Move{move("ram", nan, -0.2, 0, nan)}},
	}, []string{"ram"}, true)
	if err != nil {
		t.Fatal(err)
	}
	// By hand: slow ends at rest, 0.09 = v·(3 − 0.2) + 0.1·(v + 0), since it begins at its own speed v;
	// fast: 0.3 = V·(2 − 0.2) + 0.1·v.
	slow := 0.09 / 2.9
	fast := (0.3 - 0.1*slow) / 1.8
	v := d.Track("ram", Speed).Values
	if math.Abs(v[1]-fast) > 1e-9 || math.Abs(v[3]-slow) > 1e-9 {
		t.Errorf("speeds %v, want %g and %g", v, fast, slow)
	}
	for _, c := range [][3]float64{{0, 2, 0.3}, {2, 5, 0.09}, {6, 8, -0.2 * 1.8}} {
		if got := way(d, "ram", c[0], c[1]); math.Abs(got-c[2]) > 1e-9 {
			t.Errorf("from %g to %g s it goes %g m, want %g", c[0], c[1], got, c[2])
		}
	}
}

// Whatever the strokes and ramps, each is met, and the table is sound.
func TestBuildMeetsStrokes(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	for range 2000 {
		var stages []Stage
		for i := range 1 + r.IntN(6) {
			s := Stage{Name: fmt.Sprint(i), Lasts: 0.1 + 5*r.Float64()}
			s.Ramp = s.Lasts / 2 * math.Min(1, 1.3*r.Float64()) * float64(r.IntN(3)) / 2
			for _, a := range []string{"a", "b"} {
				if r.IntN(3) > 0 {
					s.Moves = append(s.Moves, move(a, r.Float64()-0.5, nan, 1e4*r.NormFloat64(), nan))
				}
			}
			stages = append(stages, s)
		}
		d, err := Build(stages, []string{"a", "b"}, r.IntN(2) == 0)
		if err != nil {
			t.Fatal(err)
		}
		if p := d.Check(); len(p) > 0 {
			t.Fatalf("%v\n%+v", p, stages)
		}
		for i, s := range stages {
			for _, m := range s.Moves {
				got := way(d, m.Axis, d.Phases[i].From, d.Phases[i].From+s.Lasts)
				if math.Abs(got-m.Stroke) > 1e-7 {
					t.Fatalf("stage %d, %s: %g, want %g\n%+v", i, m.Axis, got, m.Stroke, stages)
				}
			}
		}
	}
}

func TestBuildRefuses(t *testing.T) {
	for _, s := range []Stage{{Name: "x"}, {Name: "x", Lasts: 1, Ramp: 0.6}, {Name: "x", Lasts: nan}, {Name: "x", Lasts: 1, Ramp: -1}} {
		if _, err := Build([]Stage{s}, nil, true); err == nil {
			t.Errorf("%+v was taken", s)
		}
	}
}
