package audit

import (
	"math"
	"testing"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Channels of a made-up circuit: two motors on one mains, one axis, three losses, one store.
var testChannels = []circuit.Channel{
	{Role: circuit.Supply, Block: "M1", Kind: "supply"},
	{Role: circuit.Supply, Block: "M2", Kind: "supply"},
	{Role: circuit.Work, Block: "C1", Kind: "ram"},
	{Role: circuit.Stored, Block: "C1", Kind: "moved mass"},
	{Role: circuit.Loss, Block: "M1", Kind: "electric motor", Sink: circuit.ToAir},
	{Role: circuit.Loss, Block: "RV1", Kind: "relief", Sink: circuit.ToOil},
	{Role: circuit.Loss, Block: "V1", Kind: "metering", Sink: circuit.ToOil},
}

func wants(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(1, math.Abs(want))) {
		t.Errorf("%s: %.12g, want %.12g", what, got, want)
	}
}

func feed(t *testing.T, l *Ledger, samples []circuit.Sample) {
	t.Helper()
	for i := range samples {
		if err := l.Sample(&samples[i]); err != nil {
			t.Fatal(err)
		}
	}
}

// testSamples: 0 to 2 s working with a ramp, a step to holding 2 to 5 s, a step to a
// driving load 5 to 6 s, idle 6 to 10 s. Every time step balances.
var testSamples = []circuit.Sample{
	{T: 0, Power: []float64{600, 400, 300, 100, 100, 400, 100}},
	{T: 2, Power: []float64{1200, 800, 700, -100, 200, 1000, 200}},
	{T: 2, Power: []float64{900, 100, 0, 0, 100, 900, 0}, Standing: true, Holding: true},
	{T: 5, Power: []float64{900, 100, 0, 0, 100, 900, 0}, Standing: true, Holding: true},
	{T: 5, Power: []float64{-500, 300, -600, 0, 50, 250, 100}, Driving: true},
	{T: 6, Power: []float64{-100, 300, -200, 0, 50, 250, 100}, Driving: true},
	{T: 6, Power: []float64{150, 50, 0, 0, 50, 150, 0}, Standing: true},
	{T: 10, Power: []float64{150, 50, 0, 0, 50, 150, 0}, Standing: true},
}

// Energies worked out by hand from the samples: trapezoids of each stretch.
func TestLedgerByHand(t *testing.T) {
	l := NewLedger(testChannels, nil, len(testSamples))
	feed(t, l, testSamples)
	b := l.Balance(true)
	// supply summed first: 1000→2000 over 2 s, 1000 over 3 s, −200→200 over 1 s, 200 over 4 s
	wants(t, "supply in", b.SupplyIn.Total(), 3000+3000+0.5*200+800, 1e-12)
	wants(t, "returned", b.Returned.Total(), 0.5*200, 1e-12)
	wants(t, "supply while working", b.SupplyIn.Working, 3000+100, 1e-12)
	wants(t, "supply while holding", b.SupplyIn.Holding, 3000, 1e-12)
	wants(t, "supply while idle", b.SupplyIn.Idle, 800, 1e-12)
	wants(t, "supply while driving", b.SupplyIn.Driving, 100, 1e-12)
	wants(t, "work positive", b.WorkPositive().Total(), 1000, 1e-12)
	wants(t, "work negative", b.WorkNegative().Total(), -400, 1e-12)
	wants(t, "stored", b.StoredEnergy().Total(), 0, 1e-12)
	wants(t, "relief", b.Losses[1].Energy.Total(), 1400+2700+250+600, 1e-12)
	wants(t, "relief while the load drives", b.Losses[1].Energy.Driving, 250, 1e-12)
	wants(t, "metering", b.Losses[2].Energy.Total(), 300+100, 1e-12)
	wants(t, "heat to oil", b.HeatToOil().Total(), 4950+400, 1e-12)
	wants(t, "cycle", b.Cycle, 10, 0)
	wants(t, "seconds", b.Seconds.Total(), 10, 1e-12)
	for _, c := range []struct {
		what      string
		got, want float64
	}{{"working", b.Seconds.Working, 3}, {"holding", b.Seconds.Holding, 3}, {"idle", b.Seconds.Idle, 4}, {"driving", b.Seconds.Driving, 1}} {
		wants(t, c.what, c.got, c.want, 1e-12)
	}
	wants(t, "peak supply", b.PeakSupply, 2000, 0)
	wants(t, "peak supply at", b.PeakSupplyAt, 2, 0)
	wants(t, "closure", b.Closure(), 0, 1e-15)
	wants(t, "worst gap", b.WorstGap, 0, 1e-12)
}

// Two motors on one mains exchange power before the meter: split after the sum.
func TestSupplyIsSummedBeforeTheSplit(t *testing.T) {
	l := NewLedger(testChannels[:2], nil, 2)
	feed(t, l, []circuit.Sample{{T: 0, Power: []float64{500, -300}}, {T: 1, Power: []float64{500, -300}}})
	b := l.Balance(true)
	wants(t, "in", b.SupplyIn.Total(), 200, 1e-12)
	wants(t, "returned", b.Returned.Total(), 0, 0)
}

// Work of two axes does not cancel, work of two blocks on one axis does.
func TestWorkIsSplitByAxis(t *testing.T) {
	ch := []circuit.Channel{{Role: circuit.Work, Block: "C1", Kind: "boom"}, {Role: circuit.Work, Block: "C2", Kind: "arm"}, {Role: circuit.Work, Block: "C3", Kind: "arm"}}
	l := NewLedger(ch, nil, 2)
	feed(t, l, []circuit.Sample{{T: 0, Power: []float64{100, -80, 30}}, {T: 2, Power: []float64{100, -80, 30}}})
	b := l.Balance(true)
	wants(t, "positive", b.WorkPositive().Total(), 200, 1e-12)
	wants(t, "negative", b.WorkNegative().Total(), -100, 1e-12)
	wants(t, "arm", b.axis("arm").Negative.Total(), -100, 1e-12)
	wants(t, "boom", b.axis("boom").Negative.Total(), 0, 0)
}

// A loss that is booked 1 % too high must show, whichever it is.
func TestEveryLossBreaksClosure(t *testing.T) {
	for i, c := range testChannels {
		if c.Role != circuit.Loss {
			continue
		}
		l := NewLedger(testChannels, nil, len(testSamples))
		for _, s := range testSamples {
			p := append([]float64(nil), s.Power...)
			p[i] *= 1.01
			s.Power = p
			if err := l.Sample(&s); err != nil {
				t.Fatal(err)
			}
		}
		if got := l.Balance(true).Closure(); got < 100*ClosureLimit {
			t.Errorf("%s × 1.01: closure %g stays below %g", c.Kind, got, 100*ClosureLimit)
		}
	}
}

func TestLedgerRefusals(t *testing.T) {
	ch := testChannels[:1]
	bad := map[string][]circuit.Sample{
		"not a number":   {{T: 0, Power: []float64{math.NaN()}}},
		"infinite":       {{T: 0, Power: []float64{math.Inf(1)}}},
		"time backwards": {{T: 1, Power: []float64{0}}, {T: 0.5, Power: []float64{0}}},
		"time NaN":       {{T: 1, Power: []float64{0}}, {T: math.NaN(), Power: []float64{0}}},
		"count":          {{T: 0, Power: []float64{0, 0}}},
	}
	for name, samples := range bad {
		l := NewLedger(ch, nil, 2)
		var err error
		for i := range samples {
			if err == nil {
				err = l.Sample(&samples[i])
			}
		}
		if err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}

func TestLedgerDoesNotAllocate(t *testing.T) {
	const n = 1000
	l := NewLedger(testChannels, nil, 3*n)
	s := testSamples[0]
	k := 0.0
	if a := testing.AllocsPerRun(n, func() { s.T = k; k++; _ = l.Sample(&s) }); a != 0 {
		t.Errorf("%g allocations a time step", a)
	}
}

func TestShaftPowerIsThatOfThePrimeMovers(t *testing.T) {
	c := &circuit.Circuit{Blocks: []circuit.Block{{ID: "M1", Kind: "electric_motor"}, {ID: "M2", Kind: "electric_motor"}, {ID: "P1", Kind: "pump"}}}
	sig := []circuit.Signal{
		{Name: "P1.shaft", Block: "P1", What: "shaft", Dim: units.Power},
		{Name: "M1.shaft", Block: "M1", What: "shaft", Dim: units.Power},
		{Name: "M2.shaft", Block: "M2", What: "shaft", Dim: units.Power},
		{Name: "M1.w", Block: "M1", What: "w", Dim: units.AngularSpeed},
	}
	l := NewLedger(nil, ShaftSignals(c, sig), 3)
	feed(t, l, []circuit.Sample{{T: 0, Signals: []float64{9, 3, 4, 150}}, {T: 1, Signals: []float64{9, 5, 4, 150}}, {T: 2, Signals: []float64{9, 7, 1, 150}}})
	b := l.Balance(true)
	wants(t, "peak shaft", b.PeakShaft, 9, 0)
	wants(t, "at", b.PeakShaftAt, 1, 0)
	if got := ShaftSignals(&circuit.Circuit{Blocks: c.Blocks[2:]}, sig[:1]); len(got) != 1 || got[0] != 0 {
		t.Errorf("without a motor the pumps count: %v", got)
	}
}

// Parts by state add up to the whole for any samples.
func TestPartsAddUp(t *testing.T) {
	l := NewLedger(testChannels, nil, len(testSamples))
	feed(t, l, testSamples)
	b := l.Balance(true)
	whole := NewLedger(testChannels, nil, len(testSamples))
	for _, s := range testSamples {
		s.Standing, s.Holding, s.Driving = false, false, false
		if err := whole.Sample(&s); err != nil {
			t.Fatal(err)
		}
	}
	w := whole.Balance(true)
	wants(t, "in", b.SupplyIn.Total(), w.SupplyIn.Working, 1e-14)
	for i := range b.Losses {
		wants(t, b.Losses[i].Kind, b.Losses[i].Energy.Total(), w.Losses[i].Energy.Working, 1e-14)
	}
}
