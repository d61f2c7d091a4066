package audit

import (
	"bytes"
	"context"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"math"
	"math/rand"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

func readTest(t *testing.T, name string) *File {
	t.Helper()
	f, found := Read(filepath.Join("testdata", name))
	if f == nil || circuit.AnyStops(found) {
		t.Fatalf("%s: %v", name, found)
	}
	return f
}

// solved solves a file of testdata.
func solved(t *testing.T, name string, opt Options) *Solution {
	t.Helper()
	s, err := Solve(context.Background(), readTest(t, name), opt)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// Energies of one cycle in kJ, independent calculation with scipy, trial circuits C1
// (throttled) and C5 (pump-controlled). Tolerance 0.05 %; what is zero must be below 1 J.
func TestTrialEnergies(t *testing.T) {
	s := solved(t, "trial_press.yaml", Options{})
	for i, want := range []map[string]float64{
		{"in": 251.53288, "returned": 0, "work+": 5.12970, "work-": -2.18150, "stored": 0, "oil": 231.44709,
			"M1 electric motor": 17.13759, "P1 slip": 8.76476, "P1 friction": 14.74664, "RV1 relief spill": 162.22537,
			"V1 metering P-A": 23.29279, "V1 metering B-T": 3.08981, "V1 metering P-B": 2.14294, "V1 metering A-T": 16.15471,
			"F1 filter": 0.20943, "C1 friction": 0.82063},
		{"in": 11.85354, "returned": 0.13603, "work+": 5.12970, "work-": -2.18150, "stored": 0.01232, "oil": 4.35352,
			"M1 electric motor": 4.40348, "P1 slip": 1.28521, "P1 friction": 2.24767, "C1 friction": 0.82063},
	} {
		b := s.Circuits[i].Duties[0].Balance
		if b == nil {
			t.Fatalf("%s: not solved: %v", s.Circuits[i].Circuit.Name, s.Circuits[i].Findings)
		}
		got := map[string]float64{"in": b.SupplyIn.Total(), "returned": b.Returned.Total(), "work+": b.WorkPositive().Total(),
			"work-": b.WorkNegative().Total(), "stored": b.StoredEnergy().Total(), "oil": b.HeatToOil().Total()}
		for _, l := range b.Losses {
			got[l.Block+" "+l.Kind] = l.Energy.Total()
		}
		for k, w := range want {
			if g := got[k] / 1000; math.Abs(g-w) > 5e-4*math.Abs(w)+1e-3*boolTo(w == 0)+1e-5 {
				t.Errorf("%s, %s: %.5f kJ, want %.5f", s.Circuits[i].Circuit.Name, k, g, w)
			}
		}
		if b.Closure() > 1e-9 {
			t.Errorf("%s: closure %g", s.Circuits[i].Circuit.Name, b.Closure())
		}
	}
	// peak shaft power of the same calculation
	wants(t, "peak shaft, throttled", s.Circuits[0].Duties[0].Balance.PeakShaft, 19703.3, 1e-5)
	wants(t, "peak electric, throttled", s.Circuits[0].Duties[0].Balance.PeakSupply, 21146.3, 1e-5)
	wants(t, "peak shaft, pump-controlled", s.Circuits[1].Duties[0].Balance.PeakShaft, 2281.5, 1e-4)
	wants(t, "heat, throttled", s.Circuits[0].Heat.Year.Mean, 19287.26, 1e-5)
}

func boolTo(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

// scaled is a ledger that one loss of a real run reaches 1 % too high.
type scaled struct {
	*Ledger
	channel int
	power   []float64
}

func (s *scaled) Sample(x *circuit.Sample) error {
	y := *x
	y.Power = append(s.power[:0], x.Power...)
	y.Power[s.channel] *= 1.01
	return s.Ledger.Sample(&y)
}

// Whatever loss of a real run is booked 1 % too high shows in the closure, by a hundredth
// of its share of what came in.
func TestEveryLossOfARunBreaksClosure(t *testing.T) {
	f := readTest(t, "trial_press.yaml")
	cond, err := f.Conditions()
	if err != nil {
		t.Fatal(err)
	}
	seen := 0
	for _, e := range f.Circuits {
		c, found := circuit.Compile(e.Circuit, f.Axes, f.Duties[0])
		if c == nil {
			t.Fatal(found)
		}
		series := c.Series(f.Duties[0])
		run := func(r circuit.Receiver) {
			t.Helper()
			if _, _, err := circuit.Run(context.Background(), c, c.Defaults(), series, cond, circuit.State{}, r); err != nil {
				t.Fatal(err)
			}
		}
		plain := NewLedger(c.Channels(), nil, len(series.T))
		run(plain)
		b := plain.Balance(true)
		in := b.SupplyIn.Total() - b.WorkNegative().Total() + math.Abs(b.StoredEnergy().Total())
		for i, ch := range c.Channels() {
			share := plain.item(i).Total() / in
			if ch.Role != circuit.Loss || share < 100*ClosureLimit {
				continue
			}
			seen++
			l := &scaled{Ledger: NewLedger(c.Channels(), nil, len(series.T)), channel: i}
			run(l)
			got := l.Balance(true).Closure()
			if math.Abs(got-share/100) > ClosureLimit/10 {
				t.Errorf("%s, %s of %s × 1.01: closure %g, want %g", e.Name, ch.Kind, ch.Block, got, share/100)
			}
		}
	}
	if seen < 12 {
		t.Errorf("only %d losses tried", seen)
	}
}

// A circuit with a fault keeps its findings; the other one is solved, and there is no comparison.
func TestOneFaultyCircuit(t *testing.T) {
	f := readTest(t, "trial_press.yaml")
	delete(f.Circuits[1].Block("P1").Values, "displacement")
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if s.Circuits[0].Duties[0].Balance == nil {
		t.Error("the sound circuit was not solved")
	}
	if s.Circuits[1].Duties[0].Balance != nil || !circuit.AnyStops(s.Circuits[1].Findings) {
		t.Errorf("the faulty circuit: %v", s.Circuits[1].Findings)
	}
	c := s.Comparisons[0]
	if c.Missing == "" || !math.IsNaN(c.SavedDrawn) || c.Payback.None == "" {
		t.Errorf("comparison with a circuit that was not solved: %+v", c)
	}
	r := s.Result()
	if len(r.Circuits[1].Duties) != 0 || r.Circuits[1].Year.Complete {
		t.Errorf("result of the faulty circuit: %+v", r.Circuits[1])
	}
	var buf bytes.Buffer
	if err := r.Write(&buf); err != nil {
		t.Error(err)
	}
}

func TestSolveStopsWithItsContext(t *testing.T) {
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	_, err := Solve(ctx, readTest(t, "trial_press.yaml"), Options{Progress: func(done, total int) { cancel() }})
	if !errors.Is(err, context.Canceled) {
		t.Errorf("error %v", err)
	}
}

func TestProgressReachesTheEnd(t *testing.T) {
	last, total := 0, 0
	solved(t, "trial_press.yaml", Options{Progress: func(d, n int) {
		if d < last {
			t.Errorf("progress falls from %d to %d", last, d)
		}
		last, total = d, n
	}})
	if total == 0 || last != total {
		t.Errorf("ends at %d of %d", last, total)
	}
}

type closing struct {
	bytes.Buffer
	closed bool
	fail   error
}

func (c *closing) Write(p []byte) (int, error) {
	if c.fail != nil {
		return 0, c.fail
	}
	return c.Buffer.Write(p)
}
func (c *closing) Close() error { c.closed = true; return nil }

func TestTables(t *testing.T) {
	var mu sync.Mutex
	files := map[string]*closing{}
	s := solved(t, "trial_press.yaml", Options{CSV: func(name string) (io.WriteCloser, error) {
		mu.Lock()
		defer mu.Unlock()
		files[name] = &closing{}
		return files[name], nil
	}})
	w := files["1-as-found-1-day-shift.csv"]
	if w == nil || files["2-pump-controlled-1-day-shift.csv"] == nil || !w.closed {
		t.Fatalf("%d files, as found: %v", len(files), w != nil)
	}
	rows, err := csv.NewReader(&w.Buffer).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	head := map[string]int{}
	for i, h := range rows[0] {
		head[h] = i
	}
	for _, h := range []string{"t [s]", "RV1.P.p [Pa]", "RV1.P.q [m3/s]", "C1.v [m/s]", "P1.shaft [W]", "C1.F [N]"} {
		if _, ok := head[h]; !ok {
			t.Errorf("no column %q in %v", h, rows[0])
		}
	}
	if got := len(rows) - 1; got != s.Circuits[0].Duties[0].Balance.Steps {
		t.Errorf("%d rows for %d time steps", got, s.Circuits[0].Duties[0].Balance.Steps)
	}
	// P at t = 1 s of the independent calculation with scipy, trial circuit C1: 161.875 bar
	for _, r := range rows[1:] {
		if r[0] == "1" {
			p, _ := strconv.ParseFloat(r[head["RV1.P.p [Pa]"]], 64)
			wants(t, "pressure at 1 s", p, 161.875e5, 1e-5)
			return
		}
	}
	t.Error("no row at 1 s")
}

func TestTableThatCannotBeWritten(t *testing.T) {
	_, err := Solve(context.Background(), readTest(t, "trial_press.yaml"), Options{CSV: func(string) (io.WriteCloser, error) {
		return &closing{fail: os.ErrPermission}, nil
	}})
	if !errors.Is(err, os.ErrPermission) || !strings.Contains(err.Error(), ".csv") {
		t.Errorf("error %v", err)
	}
	if _, err := Solve(context.Background(), readTest(t, "trial_press.yaml"), Options{CSV: func(string) (io.WriteCloser, error) {
		return nil, os.ErrExist
	}}); !errors.Is(err, os.ErrExist) {
		t.Errorf("error %v", err)
	}
}

func TestTableNamesAreSafe(t *testing.T) {
	for in, want := range map[string]string{
		"As found": "as-found", "../../etc/passwd": "etc-passwd", "C:\\x": "c-x", "": "unnamed", "Überdruck 1": "berdruck-1",
		"***": "unnamed", strings.Repeat("ab ", 40): "ab-ab-ab-ab-ab-ab-ab-ab-ab-ab-ab-ab-ab-a", "CON.": "con",
	} {
		if got := plainName(in); got != want {
			t.Errorf("%q: %q, want %q", in, got, want)
		}
	}
	if a, b := TableName(1, "A/B", 1, "x"), TableName(2, "A?B", 1, "x"); a == b {
		t.Errorf("two circuits, one name %q", a)
	}
}

// A long run is thinned, and no peak is lost.
func TestPlotIsThinnedWithoutLosingPeaks(t *testing.T) {
	for _, n := range []int{3, PlotPoints, PlotPoints + 1, 12345} {
		sig := []circuit.Signal{{Name: "x"}}
		r := newRecorder(sig, nil, n)
		for k := 0; k < n; k++ {
			v := math.Sin(float64(k) / 50)
			if k == n/2 {
				v = 9
			}
			if err := r.Sample(&circuit.Sample{T: float64(k), Signals: []float64{v}}); err != nil {
				t.Fatal(err)
			}
		}
		k := r.done().Signals[0]
		if len(k.T) > PlotPoints || len(k.T) != len(k.V) {
			t.Errorf("%d steps: %d points", n, len(k.T))
		}
		if n <= PlotPoints && len(k.T) != n {
			t.Errorf("%d steps: thinned to %d", n, len(k.T))
		}
		if k.T[0] != 0 || k.T[len(k.T)-1] != float64(n-1) {
			t.Errorf("%d steps: from %g to %g", n, k.T[0], k.T[len(k.T)-1])
		}
		top := math.Inf(-1)
		for i, v := range k.V {
			top = math.Max(top, v)
			if i > 0 && k.T[i] < k.T[i-1] {
				t.Fatalf("%d steps: time falls at %d", n, i)
			}
		}
		if top != 9 {
			t.Errorf("%d steps: the peak is lost, top %g", n, top)
		}
		wants(t, fmt.Sprintf("%d steps, at the peak", n), k.At(float64(n/2)), 9, 1e-12)
	}
}

// Where a thinned plot is read at its steps, values of one step stay together, also from parts: two pressures that keep one
// distance keep it there, though each leaps about on its own.
func TestStepsOfAThinnedPlotBelongTogether(t *testing.T) {
	const n, cut = 12345, 5000
	sig := []circuit.Signal{{Name: "a"}, {Name: "b"}}
	r := rand.New(rand.NewSource(1))
	samples := make([]circuit.Sample, n)
	for k := range samples {
		v := 100 * r.Float64()
		samples[k] = circuit.Sample{T: float64(k), Signals: []float64{v, v - 3}}
	}
	take := func(to circuit.Receiver, list []circuit.Sample) {
		for k := range list {
			if err := to.Sample(&list[k]); err != nil {
				t.Fatal(err)
			}
		}
	}
	whole, joined := newRecorder(sig, nil, n), newRecorder(sig, nil, n)
	take(whole, samples)
	take(joined, samples[:cut])
	part := joined.Part(cut, n, &samples[cut-1])
	take(part, samples[cut:])
	if err := joined.Join(part); err != nil {
		t.Fatal(err)
	}
	p, q := whole.done(), joined.done()
	a, b := &p.Signals[0], &p.Signals[1]
	if len(p.Steps) < PlotPoints/3 || len(a.Steps) != len(p.Steps) || p.Steps[len(p.Steps)-1] != n-1 {
		t.Fatalf("%d steps, to %g", len(p.Steps), p.Steps[len(p.Steps)-1])
	}
	for i, x := range p.Steps {
		if want := samples[int(x)].Signals; a.Steps[i] != want[0] || b.Steps[i] != want[1] {
			t.Fatalf("at %g: %g and %g, want %v", x, a.Steps[i], b.Steps[i], want)
		}
	}
	if !slices.Equal(q.Steps, p.Steps) || !slices.Equal(q.Signals[0].Steps, a.Steps) || !slices.Equal(q.Signals[1].Steps, b.Steps) {
		t.Error("from parts, other steps are kept")
	}
}

// Two circuits that do other work are told apart, even by a little more than 0.5 %.
func TestSameDuty(t *testing.T) {
	make2 := func(pos, neg float64) *CircuitRun {
		ch := []circuit.Channel{{Role: circuit.Supply, Block: "M1", Kind: "supply"}, {Role: circuit.Work, Block: "C1", Kind: "ram"}}
		l := NewLedger(ch, nil, 4)
		feed(t, l, []circuit.Sample{{T: 0, Power: []float64{pos, pos}}, {T: 5, Power: []float64{pos, pos}},
			{T: 5, Power: []float64{neg, neg}}, {T: 10, Power: []float64{neg, neg}}})
		r := &CircuitRun{Circuit: &circuit.Circuit{Name: "x"}, Duties: []*DutyRun{{Duty: &duty.Duty{Name: "d", Hours: 3600}, Balance: l.Balance(true)}}}
		r.Year = year(r.Duties, nil, 0)
		r.Heat = heatOf(r.Duties, r.Year, 330, 300)
		return r
	}
	base := make2(1000, -400)
	for _, c := range []struct {
		pos, neg float64
		same     int
	}{{1000, -400, 0}, {1004.9, -400, 0}, {1005.5, -400, 1}, {1000, -402.5, 1}, {900, -300, 2}} {
		got := compareTwo(base, make2(c.pos, c.neg))
		if len(got.Differences) != c.same || got.SameDuty() != (c.same == 0) {
			t.Errorf("%g and %g: %v", c.pos, c.neg, got.Differences)
		}
		for _, d := range got.Differences {
			if !strings.HasPrefix(d, "not the same duty") {
				t.Errorf("words: %q", d)
			}
		}
	}
}
