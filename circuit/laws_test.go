package circuit

import (
	"context"
	"math"
	"os"
	"strconv"
	"testing"
)

// Laws that hold for every sound circuit, on seeded random ones: the balance of
// every step, closure of energy, no block that makes energy, and how results
// scale with pressure, with size, and when a valve is plumbed the other way.

const laws = 300

func lawLedger(t *testing.T, seed uint64, want wish) (*ledger, Certificate, *Watch) {
	t.Helper()
	text, axes, d, oil := generate(seed, want)
	c := build(t, text)
	k, found := Compile(c, axes, d)
	if k == nil {
		t.Fatalf("seed %d refused: %v\n%s", seed, found, text)
	}
	l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
	series := k.Series(d)
	w := k.NewWatch(k.Defaults(), series)
	_, cert, err := Run(context.Background(), k, k.Defaults(), series, oil, State{}, Receivers{l, w})
	if err != nil {
		t.Fatalf("seed %d: %v\n%s", seed, err, text)
	}
	return l, cert, w
}

func TestRandomCircuitsBalanceAndClose(t *testing.T) {
	steps, fallbacks, unsolved := 0, 0, 0
	for seed := uint64(0); seed < laws; seed++ {
		l, cert, _ := lawLedger(t, seed, tame)
		steps += cert.Steps
		fallbacks += cert.Fallbacks
		unsolved += cert.Unbalanced
		if cert.Unbalanced > 0 {
			t.Logf("seed %d: %d of %d steps unbalanced: %+v", seed, cert.Unbalanced, cert.Steps, cert.Unsolved)
			continue
		}
		if c := l.closure(); c > 1e-6 {
			t.Errorf("seed %d: closure %g", seed, c)
		}
		for i, ch := range l.c.channels {
			if ch.Role == Loss && l.E[i] < -1e-6*l.in {
				t.Errorf("seed %d: %s %s makes energy: %g J", seed, ch.Block, ch.Kind, l.E[i])
			}
		}
	}
	t.Logf("%d steps, %d needed a fall-back, %d unsolved", steps, fallbacks, unsolved)
	// One in 10,000 may be left, marked as such: load-sensing pumps at full stroke
	// with a stalled actuator are the cases known to withstand every rung.
	if unsolved*10000 > steps {
		t.Errorf("%d of %d steps unsolved, at most 1 in 10000 may be", unsolved, steps)
	}
}

// same compares two energy balances, the second divided by k.
func same(t *testing.T, name string, seed uint64, a, b *ledger, k float64) {
	t.Helper()
	for i := range a.E {
		if d := math.Abs(a.E[i] - b.E[i]/k); d > 1e-7*a.in {
			t.Errorf("%s, seed %d: %s %s %g J against %g J", name, seed, a.c.channels[i].Block, a.c.channels[i].Kind, a.E[i], b.E[i]/k)
			return
		}
	}
}

func dry(w *Watch) bool {
	for _, v := range w.voids {
		if v.worst > 0 {
			return false
		}
	}
	return true
}

func TestScalingLaws(t *testing.T) {
	compared := 0
	for seed := uint64(0); seed < laws/3; seed++ {
		a, _, w := lawLedger(t, seed, tame)
		big, _, _ := lawLedger(t, seed, wish{pressure: 1, size: 8, decades: 1, actuators: 2})
		same(t, "eight times the size", seed, a, big, 8)
		if !dry(w) {
			continue // the floor of a node is a pressure of nature and does not scale
		}
		high, _, w2 := lawLedger(t, seed, wish{pressure: 2, size: 1, decades: 1, actuators: 2})
		if dry(w2) {
			same(t, "twice the pressure", seed, a, high, 2)
			compared++
		}
	}
	if compared < laws/10 {
		t.Errorf("only %d circuits could be compared at twice the pressure", compared)
	}
}

// Plumbing A and B of every valve the other way must change nothing but which
// edges work: the program finds out which way a valve moves its axis.
func TestCrossedValves(t *testing.T) {
	for seed := uint64(0); seed < laws/3; seed++ {
		a, _, _ := lawLedger(t, seed, tame)
		b, _, _ := lawLedger(t, seed, wish{pressure: 1, size: 1, crossed: true, decades: 1, actuators: 2})
		if d := math.Abs(a.in - b.in); d > 1e-7*a.in {
			t.Errorf("seed %d: supply %g J against %g J crossed", seed, a.in, b.in)
		}
		swap := map[string]string{"metering P-A": "metering P-B", "metering P-B": "metering P-A", "metering A-T": "metering B-T", "metering B-T": "metering A-T"}
		for i, ch := range a.c.channels {
			if k, ok := swap[ch.Kind]; ok && math.Abs(a.E[i]-b.energy(Loss, ch.Block, k)) > 1e-7*a.in {
				t.Errorf("seed %d: %s %s %g J, crossed %s %g J", seed, ch.Block, ch.Kind, a.E[i], k, b.energy(Loss, ch.Block, k))
			}
		}
	}
}

// TestHostileCircuits balances circuits with parameters over three decades, up to
// four actuators, steps and overrunning loads: nonsense, mostly. None may be wrong
// without saying so; a few steps in a thousand withstand the ladder and are marked.
// BARLITRE_LONG sets how many circuits; a few run always.
func TestHostileCircuits(t *testing.T) {
	count := uint64(12)
	if n, err := strconv.Atoi(os.Getenv("BARLITRE_LONG")); err == nil {
		count = uint64(n)
	}
	hostile := wish{pressure: 1, size: 1, decades: 3, actuators: 4, steps: true}
	steps, unsolved, wrong := 0, 0, 0
	for seed := uint64(1000); seed < 1000+count; seed++ {
		text, axes, d, oil := generate(seed, hostile)
		k, found := Compile(build(t, text), axes, d)
		if k == nil {
			t.Fatalf("seed %d refused: %v\n%s", seed, found, text)
		}
		l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
		_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), oil, State{}, l)
		steps += cert.Steps
		unsolved += cert.Unbalanced
		if err != nil || cert.Unbalanced > 0 {
			t.Logf("seed %d: %v, %d of %d steps unbalanced", seed, err, cert.Unbalanced, cert.Steps)
			continue
		}
		if limit := 1e-6 * k.flowScale(k.Defaults()); cert.Worst > limit || l.closure() > 1e-6 {
			wrong++
			t.Errorf("seed %d: a node is left with %g m³/s, closure %g", seed, cert.Worst, l.closure())
		}
	}
	t.Logf("%d circuits, %d steps, %d unsolved, %d wrong", count, steps, unsolved, wrong)
	if unsolved*100 > steps {
		t.Errorf("%d of %d steps unsolved; the ladder leaves fewer than 1 in 100 on such circuits", unsolved, steps)
	}
}
