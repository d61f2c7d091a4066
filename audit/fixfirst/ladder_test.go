package fixfirst_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
)

func near(a, b, scale float64) bool { return math.Abs(a-b) <= 1e-6*math.Abs(scale) }

// whole is a twin with two faults, its proposal, and what was climbed.
func whole(t *testing.T, cache *fixfirst.Cache) (*audit.Solution, *fixfirst.Ladder) {
	t.Helper()
	s := solve(t, twins["winch, two at once"].file(t, sources(t)))
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{Cache: cache})
	if err != nil || len(l) != 1 {
		t.Fatal(l, err)
	}
	return s, l[0]
}

// Prices in order add up to what all cures save together, and that to what the audit finds when the cures are typed in by
// hand: the edits are applied here one by one to the text, and the whole is audited anew.
func TestPricesSumToTheWhole(t *testing.T) {
	s, l := whole(t, nil)
	if l.Faults() != 2 {
		t.Fatalf("%d faults", l.Faults())
	}
	var sum, money float64
	for _, x := range l.Steps {
		sum += x.InOrder.Energy
		money += x.InOrder.Money
	}
	f := twins["winch, two at once"].file(t, sources(t))
	for _, e := range l.Edits {
		switch text := e.String(); {
		case strings.HasPrefix(text, "-set "):
			target, quantity := e.Target, e.Value
			if err := f.Set(target, quantity); err != nil {
				t.Fatal(err)
			}
		default:
			if err := f.SetDuty(e.Target, "hours", e.Value); err != nil {
				t.Fatal(err)
			}
		}
	}
	cured := solve(t, f)
	before, after := s.Circuits[0], cured.Circuits[0]
	if got := before.Year.Drawn.Total() - after.Year.Drawn.Total(); !near(sum, got, got) {
		t.Errorf("prices in order sum to %g J, the audit of the cured file saves %g J", sum, got)
	}
	if got := before.Money.Net() - after.Money.Net(); !near(money, got, got) {
		t.Errorf("money in order sums to %g, the audit says %g", money, got)
	}
	if got := after.Year.Drawn.Total(); !near(l.Cured.Drawn, got, got) {
		t.Errorf("cured %g J, the audit says %g J", l.Cured.Drawn, got)
	}
}

// The split adds up to the saving that the verdict names.
func TestSplit(t *testing.T) {
	s, l := whole(t, nil)
	if len(l.Splits) != 1 {
		t.Fatalf("%d splits", len(l.Splits))
	}
	x := l.Splits[0]
	sum := x.Architecture
	for _, c := range fixfirst.Classes() {
		sum = sum.Plus(x.Class[c])
	}
	verdict := s.Comparisons[0]
	if !near(sum.Energy, verdict.SavedDrawn, verdict.SavedDrawn) || !near(sum.Money, verdict.MoneySaved, verdict.MoneySaved) || !near(sum.Heat, verdict.SavedHeat, verdict.SavedHeat) {
		t.Errorf("split %+v, verdict %g J, %g, %g W", sum, verdict.SavedDrawn, verdict.MoneySaved, verdict.SavedHeat)
	}
	if cost := verdict.Proposal.Cost.Likely; !near(x.Payback.Likely, cost/x.Architecture.Money, x.Payback.Likely) || x.Payback.Likely <= verdict.Payback.Likely {
		t.Errorf("payback of what it adds %g years, cost %g, verdict %g years", x.Payback.Likely, cost, verdict.Payback.Likely)
	}
	for _, c := range fixfirst.Classes() {
		if x.Class[c].Energy == 0 {
			t.Errorf("nothing by %s", c)
		}
	}
	if x.Besides.Energy <= 0 || x.Besides.Energy >= x.Class[fixfirst.StopStart].Energy*2 {
		t.Errorf("besides %g", x.Besides.Energy)
	}
}

// Free cures stand before service, service before parts; within each the largest first.
func TestOrder(t *testing.T) {
	_, l := whole(t, nil)
	for i := 1; i < len(l.Steps); i++ {
		a, b := l.Steps[i-1], l.Steps[i]
		if a.Effort > b.Effort || a.Effort == b.Effort && a.Alone.Energy < b.Alone.Energy {
			t.Errorf("%s stands before %s", a.Name(), b.Name())
		}
	}
}

// What was solved once is not solved again: a second climb over the same text, or with a reading typed in,
// takes no time worth naming, and says the same.
func TestCache(t *testing.T) {
	cache := &fixfirst.Cache{}
	s, l := whole(t, cache)
	ctx, cancel := context.WithCancel(context.Background())
	cancel() // nothing can be solved any more
	again, err := fixfirst.Climb(ctx, s, s.Circuits[0], fixfirst.Options{Cache: cache})
	if err != nil {
		t.Fatal(err)
	}
	if again.Total() != l.Total() || len(again.Steps) != len(l.Steps) {
		t.Errorf("%+v, before %+v", again.Total(), l.Total())
	}
	read := *s
	read.File = s.File.Clone()
	if err := read.File.SetReading("idling", "M1.power", "5 kW"); err != nil {
		t.Fatal(err)
	}
	if _, err := fixfirst.Climb(ctx, &read, s.Circuits[0], fixfirst.Options{Cache: cache}); err != nil {
		t.Error("a reading typed has everything solved again")
	}
	if _, err := fixfirst.Climb(ctx, s, s.Circuits[0], fixfirst.Options{}); err == nil {
		t.Error("a cancelled climb without cache gave an answer")
	}
}

// The price of a relief valve at its compensator is what energy says it must be: the spill while nothing moves is gone.
// Reference: spill power = Δp·q of the sound circuit's own law, checked against the ledger of the faulty one.
func TestReliefPriceCoversTheSpill(t *testing.T) {
	s := solve(t, asFound(twins["winch, relief low"].file(t, sources(t))))
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	spill := 0.0
	for _, row := range s.Circuits[0].Year.Losses {
		if row.Block == "RV1" && row.Kind == "relief spill" {
			spill += row.Energy.Total()
		}
	}
	for _, x := range l[0].Steps {
		if x.Rule == "relief at or below compensator" && x.Alone.Energy < spill {
			t.Errorf("cured alone %g J, the spill alone is %g J", x.Alone.Energy, spill)
		}
	}
	if spill <= 0 {
		t.Error("nothing is spilled")
	}
}

// The circuit with its faults cured can be added to the file; audited there it draws what the ladder says it would with the
// habit left as it is.
func TestAddCured(t *testing.T) {
	s, l := whole(t, nil)
	f := s.File.Clone()
	if !l.Changes() {
		t.Fatal("nothing to change")
	}
	if err := l.AddCured(f, "Put right"); err != nil {
		t.Fatal(err)
	}
	got := solve(t, f)
	want, err := fixfirst.Apply(s.File, l.Faultless())
	if err != nil {
		t.Fatal(err)
	}
	cured := solve(t, want).Circuits[0].Year.Drawn.Total()
	for _, c := range got.Circuits {
		if c.Circuit.Name == "Put right" {
			if x := c.Year.Drawn.Total(); !near(x, cured, cured) || !c.Proposal {
				t.Errorf("the added circuit draws %g J, cured it draws %g J (proposal %t)", x, cured, c.Proposal)
			}
			return
		}
	}
	t.Error("it was not added")
}

// A winch whose relief valve has sunk to 200 bar must still lift its load once the price is taken: the cure that is priced
// leaves every gate passed that the machine passes as found. At 173 bar, 15 % below the valve, its motor does not break away.
func TestCureLeavesTheMachineWorking(t *testing.T) {
	f := asFound(twins["winch, relief low"].file(t, sources(t)))
	s := solve(t, f)
	passed := func(run *audit.CircuitRun) map[string]bool {
		out := map[string]bool{}
		for _, d := range run.Duties {
			for _, g := range d.Gates {
				out[d.Duty.Name+g.Block+g.Name] = g.Passed
			}
		}
		return out
	}
	before := passed(s.Circuits[0])
	tooLow := f.Clone()
	if err := tooLow.Set("As found/P1.set_pressure", "173 bar"); err != nil {
		t.Fatal(err)
	}
	spoilt := false
	for k, ok := range passed(solve(t, tooLow).Circuits[0]) {
		spoilt = spoilt || before[k] && !ok
	}
	if !spoilt {
		t.Fatal("173 bar spoils nothing: the case tells nothing")
	}
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil || len(l[0].Edits) == 0 {
		t.Fatal(err)
	}
	g, err := fixfirst.Apply(f, l[0].Faultless())
	if err != nil {
		t.Fatal(err)
	}
	for k, ok := range passed(solve(t, g).Circuits[0]) {
		if before[k] && !ok {
			t.Errorf("%s is no longer passed with %s", k, l[0].Faultless())
		}
	}
}

// A worn pump that cannot reach the speed saves nothing that could be compared: the page says first that motion is missing.
func TestMissingMotionIsSaidFirst(t *testing.T) {
	f := twins["press, pump worn"].file(t, sources(t))
	if err := f.Set("As found/P1.wear", "12"); err != nil {
		t.Fatal(err)
	}
	s := solve(t, f)
	short := 0.0
	for _, d := range s.Circuits[0].Duties {
		for _, x := range d.Shortfalls {
			short += x.Seconds
		}
	}
	if short < 0.1 {
		t.Fatalf("%g s are missing: the case tells nothing", short)
	}
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	p := l[0].Page(units.Metric)
	if !strings.HasPrefix(p.Verdict, `The circuit "As found" as it stands does not do its work`) || strings.Contains(p.Verdict, "less,") {
		t.Errorf("verdict %q", p.Verdict)
	}
	if len(p.Splits) != 1 {
		t.Errorf("%d proposals are set beside it", len(p.Splits))
	}
	for _, x := range p.Splits {
		if !strings.HasPrefix(x.Text, x.Proposal+" cannot be compared with As found as it stands") {
			t.Errorf("split %q", x.Text)
		}
	}
	if text := p.Rows[len(p.Rows)-1].Cells[3].Text; text != "not comparable" {
		t.Errorf("all, in order: %q", text)
	}
}
