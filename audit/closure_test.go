package audit_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// skewed is a ledger that one loss of a run reaches 1 % too high.
type skewed struct {
	*audit.Ledger
	channel int
	power   []float64
}

// Sample books a changed copy of s.
func (l *skewed) Sample(s *circuit.Sample) error {
	l.power = append(l.power[:0], s.Power...)
	l.power[l.channel] *= 1.01
	x := *s
	x.Power = l.power
	return l.Ledger.Sample(&x)
}

// No loss is a difference of the others: whichever is booked 1 % too high opens the
// balance by a hundredth of its share of what came in. Tried for every loss of at least
// 1e-4 of the supply, in the trial circuits and the sample audits.
func TestNoLossIsADifference(t *testing.T) {
	var files []string
	for _, pattern := range []string{"testdata/trials/*.yaml", "../samples/*.yaml", "../samples/*/*.yaml"} {
		found, err := filepath.Glob(pattern)
		if err != nil {
			t.Fatal(err)
		}
		files = append(files, found...)
	}
	if len(files) < len(trials) {
		t.Fatalf("only %d files", len(files))
	}
	for _, path := range files {
		t.Run(filepath.Base(path), func(t *testing.T) {
			f, found := audit.Read(path)
			if f == nil || circuit.AnyStops(found) {
				t.Fatalf("not readable: %v", found)
			}
			tried := 0
			for _, e := range f.Circuits {
				for _, d := range f.Duties {
					tried += noDifference(t, f, e.Circuit, d)
				}
			}
			if tried < 3 {
				t.Errorf("only %d losses tried", tried)
			}
		})
	}
}

// noDifference returns how many losses of one run it tried.
func noDifference(t *testing.T, f *audit.File, circ *circuit.Circuit, d *duty.Duty) (tried int) {
	t.Helper()
	c, found := circuit.Compile(circ, f.Axes, d)
	if c == nil {
		t.Fatalf("%s, %s: refused: %v", circ.Name, d.Name, found)
	}
	cond, err := f.Conditions()
	if err != nil {
		t.Fatal(err)
	}
	series := c.Series(d)
	plain := audit.NewLedger(c.Channels(), nil, len(series.T))
	all := circuit.Receivers{plain}
	var ledgers []*skewed
	for i, ch := range c.Channels() {
		if ch.Role == circuit.Loss {
			l := &skewed{Ledger: audit.NewLedger(c.Channels(), nil, len(series.T)), channel: i}
			ledgers, all = append(ledgers, l), append(all, l)
		}
	}
	if _, _, err := circuit.Run(context.Background(), c, c.Defaults(), series, cond, circuit.State{}, all); err != nil {
		t.Fatal(err)
	}
	b := plain.Balance(d.Repeats)
	if x := b.Closure(); x > 1e-6 {
		t.Errorf("%s, %s: closure %.2g before any change", circ.Name, d.Name, x)
	}
	in := b.SupplyIn.Total() - b.WorkNegative().Total() + math.Abs(b.StoredEnergy().Total())
	for i, l := range ledgers {
		// The losses of a balance stand in the order of their channels.
		row := b.Losses[i]
		if ch := c.Channels()[l.channel]; ch.Block != row.Block || ch.Kind != row.Kind {
			t.Fatalf("loss %d is %s of %s, not %s of %s", i, row.Kind, row.Block, ch.Kind, ch.Block)
		}
		share := row.Energy.Total() / in
		if share < 1.01e-4 {
			continue
		}
		tried++
		got := l.Balance(d.Repeats).Closure()
		if got <= 1e-6 || math.Abs(got-share/100) > 1e-3*share/100 {
			t.Errorf("%s, %s: %s of %s × 1.01 gives a closure of %g, want %g", circ.Name, d.Name, row.Kind, row.Block, got, share/100)
		}
	}
	return tried
}

// The samples are looked for by pattern; where there is a folder of them, some must be found.
func TestSamplesAreFound(t *testing.T) {
	if _, err := os.Stat("../samples"); err != nil {
		t.Fatal("no sample audits beside this package")
	}
	found, _ := filepath.Glob("../samples/*.yaml")
	deeper, _ := filepath.Glob("../samples/*/*.yaml")
	if len(found)+len(deeper) == 0 {
		t.Error("no sample audits in ../samples or its folders")
	}
}
