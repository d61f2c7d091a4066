package audit_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// text reads a file of testdata.
func text(t testing.TB, name string) string {
	t.Helper()
	data, err := os.ReadFile(filepath.Join("testdata", filepath.FromSlash(name)))
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

// parsed reads an audit file from its text; it must be free of faults.
func parsed(t testing.TB, data string) *audit.File {
	t.Helper()
	f, found := audit.Parse([]byte(data), nil, "test.yaml")
	if f == nil || circuit.AnyStops(found) {
		t.Fatalf("not readable: %v", found)
	}
	return f
}

// changed replaces a part of a text that must stand in it exactly once.
func changed(t testing.TB, s, old, new string) string {
	t.Helper()
	if n := strings.Count(s, old); n != 1 {
		t.Fatalf("%q stands %d times in the file, not once", old, n)
	}
	return strings.Replace(s, old, new, 1)
}

// without drops a line that must stand in a text exactly once.
func without(t testing.TB, s, line string) string {
	t.Helper()
	return changed(t, s, "\n"+line+"\n", "\n")
}

// solved solves a file; every circuit must be solved over every duty.
func solved(t testing.TB, f *audit.File) *audit.Solution {
	t.Helper()
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range s.Circuits {
		for _, d := range c.Duties {
			if d.Balance == nil {
				t.Fatalf("%s, %s: not solved: %v", c.Circuit.Name, d.Duty.Name, c.Findings)
			}
		}
	}
	return s
}

// sound fails when a run has unbalanced steps or its energies do not close. What may lack
// is what holds ideal parts apart in the balance, 1e-10 of 100 bar at full flow: up to
// 1e-8 of the supply in a circuit whose highest pressure is 1 bar.
func sound(t testing.TB, d *audit.DutyRun) {
	t.Helper()
	if n := d.Certificate.Unbalanced; n > 0 {
		t.Errorf("%s: %d steps are not balanced, the first: %+v", d.Duty.Name, n, d.Certificate.Unsolved[0])
	}
	if x := d.Balance.Closure(); x > 2e-8 {
		t.Errorf("%s: closure %.2g", d.Duty.Name, x)
	}
}

// run is a circuit over a duty with every time step kept, unlike a plot, which thins them.
type run struct {
	c       *circuit.Compiled
	t       []float64
	signals [][]float64 // by step
	powers  [][]float64
	axes    [][]circuit.AxisNow
	void    [][]float64
	cert    circuit.Certificate
	watch   *circuit.Watch
}

// Sample keeps one time step.
func (r *run) Sample(s *circuit.Sample) error {
	r.t = append(r.t, s.T)
	r.signals = append(r.signals, append([]float64(nil), s.Signals...))
	r.powers = append(r.powers, append([]float64(nil), s.Power...))
	r.axes = append(r.axes, append([]circuit.AxisNow(nil), s.Axes...))
	r.void = append(r.void, append([]float64(nil), s.Void...))
	return nil
}

// ran balances a circuit over a duty.
func ran(t testing.TB, f *audit.File, c *circuit.Circuit, d *duty.Duty) *run {
	t.Helper()
	k, found := circuit.Compile(c, f.Axes, d)
	if k == nil {
		t.Fatalf("refused: %v", found)
	}
	cond, err := f.Conditions()
	if err != nil {
		t.Fatal(err)
	}
	series := k.Series(d)
	r := &run{c: k, watch: k.NewWatch(k.Defaults(), series)}
	_, r.cert, err = circuit.Run(context.Background(), k, k.Defaults(), series, cond, circuit.State{}, circuit.Receivers{r, r.watch})
	if err != nil {
		t.Fatal(err)
	}
	if r.cert.Unbalanced > 0 {
		t.Errorf("%s: %d steps are not balanced, the first: %+v", c.Name, r.cert.Unbalanced, r.cert.Unsolved[0])
	}
	return r
}

// signal finds a signal by name.
func (r *run) signal(t testing.TB, name string) int {
	t.Helper()
	for i, s := range r.c.Signals() {
		if s.Name == name {
			return i
		}
	}
	t.Fatalf("no signal %q", name)
	return 0
}

// step returns the last time step at a time [s], which is the one after a jump.
func (r *run) step(t testing.TB, at float64) int {
	t.Helper()
	for k := len(r.t) - 1; k >= 0; k-- {
		if math.Abs(r.t[k]-at) < 1e-9 {
			return k
		}
	}
	t.Fatalf("no time step at %g s", at)
	return 0
}

// at returns signals at a time [SI]: "P1.P.p", "-P1.P.q", or a difference "C1.A.p-C1.B.p".
func (r *run) at(t testing.TB, expr string, at float64) float64 {
	t.Helper()
	sum, sign := 0.0, 1.0
	for i, name := range strings.Split(expr, "-") {
		if i > 0 {
			sign = -1
		}
		if name != "" {
			sum += sign * r.signals[r.step(t, at)][r.signal(t, name)]
		}
	}
	return sum
}

// extremes returns the range of a signal over the run and when its largest value stands first.
func (r *run) extremes(t testing.TB, name string) (low, high, tHigh float64) {
	t.Helper()
	i := r.signal(t, name)
	low, high = math.Inf(1), math.Inf(-1)
	for k, s := range r.signals {
		low = math.Min(low, s[i])
		if s[i] > high {
			high, tHigh = s[i], r.t[k]
		}
	}
	return low, high, tHigh
}

// integral sums f over the steps by trapezoid.
func (r *run) integral(f func(k int) float64) float64 {
	sum := 0.0
	for k := 1; k < len(r.t); k++ {
		sum += (r.t[k] - r.t[k-1]) * (f(k) + f(k-1)) / 2
	}
	return sum
}

// near fails unless got lies within a share rel of want, or within abs of it.
func near(t testing.TB, what string, got, want, rel, abs float64) {
	t.Helper()
	if d := math.Abs(got - want); !(d <= math.Max(rel*math.Abs(want), abs)) {
		t.Errorf("%s: %.8g, want %.8g within %g %% or %g (differs by %.3g)", what, got, want, 100*rel, abs, d)
	}
}

// said reports whether a finding of a level, or of any with "", has all the words.
func said(fs []circuit.Finding, l circuit.Level, words ...string) bool {
	for _, f := range fs {
		all := l == "" || f.Level == l
		for _, w := range words {
			all = all && strings.Contains(f.Text, w)
		}
		if all {
			return true
		}
	}
	return false
}

// says fails unless a finding of a level has all the words.
func says(t testing.TB, fs []circuit.Finding, l circuit.Level, words ...string) {
	t.Helper()
	if !said(fs, l, words...) {
		t.Errorf("no finding %s with %q among:", l, words)
		for _, f := range fs {
			t.Logf("  %s: %s", f.Level, f.Text)
		}
	}
}
