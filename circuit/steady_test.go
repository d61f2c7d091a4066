package circuit

import (
	"context"
	"runtime/debug"
	"testing"

	"barlitre/circuit/duty"
)

// Once a circuit has met what a cycle asks of it, balancing further cycles allocates
// nothing and works out no elimination anew: what a long stretch allocates is what a short
// one does, to be begun and ended.
func TestSteadyStepsAllocateNothing(t *testing.T) {
	defer debug.SetGCPercent(debug.SetGCPercent(-1)) // a collection allocates on its own account
	many, axes, d := sections(2)
	for _, c := range []struct {
		name, text string
		axes       []duty.Axis
		d          *duty.Duty
	}{{"throttled", c1, ramAxis, ramDuty}, {"load sensing", c3, trialAxes, bothDuty}, {"two sections", many, axes, d}} {
		plain := *c.d
		plain.Sampled = true
		d := dithered(&plain, c.axes)
		cycles := repeated(d, 14)
		k, found := Compile(build(t, c.text), c.axes, cycles)
		if k == nil {
			t.Fatal(found)
		}
		s := k.Series(cycles)
		n := len(s.T) / 14
		r := newRun(k, k.Defaults(), trialOil, s)
		at := 0
		var st State
		balance := func(steps int) float64 {
			return testing.AllocsPerRun(1, func() { // twice, the first uncounted
				var err error
				if st, _, err = r.all(context.Background(), st, at, at+steps, nobody{}); err != nil {
					t.Fatal(c.name, err)
				}
				at += steps
			})
		}
		balance(4 * n)
		// The test program itself allocates now and then, but not in both of two cycles.
		if few, all := balance(8), min(balance(n), balance(n)); all > few {
			t.Errorf("%s: a cycle of %d steps allocates %g times, 8 steps %g times", c.name, n, all, few)
		}
	}
}

// repeated lays a sampled duty out n times, one after the other.
func repeated(d *duty.Duty, n int) *duty.Duty {
	out := &duty.Duty{Name: d.Name, Sampled: true}
	step := d.Time[1] - d.Time[0]
	cycle := d.Time[len(d.Time)-1] + step
	for i := range n {
		for _, t := range d.Time {
			out.Time = append(out.Time, t+float64(i)*cycle)
		}
	}
	for _, tr := range d.Tracks {
		values := tr.Values
		tr.Values = nil
		for range n {
			tr.Values = append(tr.Values, values...)
		}
		out.Tracks = append(out.Tracks, tr)
	}
	return out
}
