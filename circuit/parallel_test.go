package circuit

import (
	"context"
	"errors"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// long repeats a sampled duty of points times over, dithered.
func long(d *duty.Duty, axes []duty.Axis, times int) *duty.Duty {
	plain := *d
	plain.Sampled = true
	one := plain.Series(axes, false)
	length := one.T[len(one.T)-1] + 0.01
	out := &duty.Duty{Name: "long", Sampled: true}
	for i := range times {
		for _, t := range one.T {
			out.Time = append(out.Time, t+float64(i)*length)
		}
	}
	for i, a := range axes {
		var speed, load []float64
		for k, t := range out.Time {
			speed = append(speed, one.Axes[i].Speed[k%len(one.T)]*(1+0.05*math.Sin(2*math.Pi*2.3*t)))
			load = append(load, one.Axes[i].Load[k%len(one.T)]*(1+0.05*math.Sin(2*math.Pi*1.7*t)))
		}
		out.Tracks = append(out.Tracks, duty.Track{Of: a.Name, What: duty.Speed, Values: speed}, duty.Track{Of: a.Name, What: duty.Load, Values: load})
	}
	return out
}

// all keeps every number of a run.
type all struct{ t, pow, sig [][]float64 }

func (a *all) Sample(s *Sample) error {
	a.t = append(a.t, []float64{s.T})
	a.pow = append(a.pow, append([]float64(nil), s.Power...))
	a.sig = append(a.sig, append([]float64(nil), s.Signals...))
	return nil
}

// furthest is the largest difference of two tables, relative to the largest number of the first.
func furthest(a, b [][]float64) float64 {
	if len(a) != len(b) {
		return math.Inf(1)
	}
	top, most := 0.0, 0.0
	for k := range a {
		for i, v := range a[k] {
			top, most = math.Max(top, math.Abs(v)), math.Max(most, math.Abs(v-b[k][i]))
		}
	}
	return most / top
}

// stroked gives the cylinder of C1 a stroke and a place to start.
func stroked(stroke, start string) string {
	return strings.Replace(c1, "axis: ram; ", "axis: ram; stroke: "+stroke+"; start: "+start+"; ", 1)
}

// A long duty gives the same on any number of goroutines, and the same as in one go.
// Where the supply leaves the axes behind their duty, a chunk must be done again only if
// an end of their stroke is near.
func TestChunksOnManyGoroutines(t *testing.T) {
	for _, c := range []struct {
		name, text string
		axes       []duty.Axis
		d          *duty.Duty
		crack      float64 // of the relief valve [Pa], 0 = as it is
		behind     bool
	}{
		{"C1", c1, ramAxis, ramDuty, 0, false},
		{"C1 falls behind", c1, ramAxis, ramDuty, 60e5, false},
		{"C1 falls behind, ends far", stroked("30 m", "15 m"), ramAxis, ramDuty, 60e5, false},
		{"C1 falls behind, to an end", stroked("900 mm", "300 mm"), ramAxis, ramDuty, 60e5, true},
		{"C3", c3, trialAxes, bothDuty, 0, false},
	} {
		d := long(c.d, c.axes, 18)
		k, found := Compile(build(t, c.text), c.axes, d)
		if k == nil {
			t.Fatal(found)
		}
		s, p := k.Series(d), k.Defaults()
		if c.crack > 0 {
			i, _ := k.Index("RV1", "crack")
			p[i] = c.crack
		}
		var whole, one all
		st, cert, err := Run(context.Background(), k, p, s, trialOil, State{}, &whole)
		if err != nil || cert.Unbalanced > 0 {
			t.Fatal(c.name, err, cert)
		}
		for _, workers := range []int{1, 2, 3} {
			var got all
			par := newParallel(k, p, s, trialOil)
			end, cut, err := par.all(context.Background(), workers, &got)
			if err != nil || cut.Steps != cert.Steps || cut.Unbalanced > 0 {
				t.Fatal(c.name, err, cut)
			}
			if c.behind != (par.redone > 0) {
				t.Errorf("%s: %d of %d chunks done again", c.name, par.redone, len(par.cuts)-1)
			}
			t.Logf("%s, %d goroutines: powers differ by %.1e from one go, signals %.1e, %d of %d chunks done again",
				c.name, workers, furthest(whole.pow, got.pow), furthest(whole.sig, got.sig), par.redone, len(par.cuts)-1)
			if e := furthest(whole.pow, got.pow); e > 1e-9 || furthest(whole.t, got.t) != 0 {
				t.Errorf("%s, %d goroutines: powers differ by %g", c.name, workers, e)
			}
			if e := math.Abs(end.Travel(0) - st.Travel(0)); e > 1e-9 {
				t.Errorf("%s, %d goroutines: way differs by %g", c.name, workers, e)
			}
			if workers == 1 {
				one = got
			} else if furthest(one.pow, got.pow) != 0 || furthest(one.sig, got.sig) != 0 {
				t.Errorf("%s: %d goroutines give other numbers than one", c.name, workers)
			}
		}
	}
}

type failing struct{ left int }

var errFull = errors.New("full")

func (f *failing) Sample(*Sample) error {
	if f.left--; f.left < 0 {
		return errFull
	}
	return nil
}

// A receiver that fails, and a caller that gives up, end a run on many goroutines.
func TestChunksEnd(t *testing.T) {
	d := long(ramDuty, ramAxis, 30)
	k, _ := Compile(build(t, c1), ramAxis, d)
	s := k.Series(d)
	if _, _, err := RunParallel(context.Background(), k, k.Defaults(), s, trialOil, 2, &failing{left: 9000}); !errors.Is(err, errFull) {
		t.Errorf("error of the receiver: %v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, _, err := RunParallel(ctx, k, k.Defaults(), s, trialOil, 2, nobody{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
	if _, _, err := RunParallel(context.Background(), k, nil, s, trialOil, 2, nobody{}); !errors.Is(err, ErrParameters) {
		t.Errorf("no parameters: %v", err)
	}
}
