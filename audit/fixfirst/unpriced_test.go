package fixfirst_test

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
)

// Where nothing that was found has a price, no saving of zero is shown: here the calendar has a break that is too short.
func TestUnpricedIsNotZero(t *testing.T) {
	f := asFound(parse(t, sources(t)["handling-machine"]))
	if err := f.SetShift(0, "breaks", "09:30 - 09:45"); err != nil {
		t.Fatal(err)
	}
	s := solve(t, asFound(f))
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	p := l[0].Page(units.Metric)
	if len(l[0].Steps) != 1 || l[0].Steps[0].Unpriced == "" {
		t.Fatalf("%+v", l[0].Steps)
	}
	if strings.Contains(p.Verdict, "less") || !strings.Contains(p.Verdict, "is not known") {
		t.Error(p.Verdict)
	}
	all := p.Rows[len(p.Rows)-1].Cells
	if e := all[len(all)-2]; !math.IsNaN(e.Value) || e.Text != "n/a" {
		t.Errorf("all cures save %+v", e)
	}
}

// Where some have a price and others none, the sum says that it is of those with a price.
func TestPricedInPart(t *testing.T) {
	w := twin{of: "handling-machine", set: []string{"As found/P1.margin=45 bar"}}
	f := asFound(w.file(t, sources(t)))
	if err := f.SetShift(0, "breaks", "09:30 - 09:45"); err != nil {
		t.Fatal(err)
	}
	l, err := fixfirst.All(context.Background(), solve(t, asFound(f)), fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	none := 0
	for _, x := range l[0].Steps {
		if x.Unpriced != "" {
			none++
		}
	}
	p := l[0].Page(units.Metric)
	if none != 1 || len(l[0].Steps) < 2 || !strings.Contains(p.Verdict, "What one of them would save is not known and not counted") {
		t.Errorf("%d of %d without a price: %s", none, len(l[0].Steps), p.Verdict)
	}
	if sum := p.Rows[len(p.Rows)-1]; sum.Name != "all with a price, in order" {
		t.Error(sum.Name)
	}
}

// By the calendar the hours of waiting become hours off: by hand, what waiting draws less the standby over its 1200 h
// (750 h within shifts, and 0.5 h of break in 3 shifts on 6 days of 50 weeks).
func TestIdleByCalendar(t *testing.T) {
	f := asFound(parse(t, sources(t)["handling-machine"]))
	if err := f.Put("heat.fan", "with the machine"); err != nil { // by thermostat it draws more at work when there is less waiting
		t.Fatal(err)
	}
	s := solve(t, asFound(f))
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	x, waiting := l[0].Steps[0], s.Circuits[0].Duties[1]
	hours := 750 + 0.5*3*6*50.0
	if math.Abs(waiting.Duty.Hours/units.Hour-hours) > 1e-6 {
		t.Fatalf("%s has %g h", waiting.Duty.Name, waiting.Duty.Hours/units.Hour)
	}
	want := hours * units.Hour * (waiting.Balance.SupplyIn.Total()/waiting.Balance.Cycle - 60)
	if x.Unpriced != "" || !near(x.Alone.Energy, want, want) || !near(x.Alone.Money, want/units.KilowattHour*0.18, 1000) {
		t.Errorf("%q: %g kWh, %g EUR, by hand %g kWh", x.Unpriced, x.Alone.Energy/units.KilowattHour, x.Alone.Money, want/units.KilowattHour)
	}
}

// Switched off in the same hours a proposal draws the standby of its circuit in them, too: by hand, the mean of its waiting less
// the 60 W, over the 1200 h.
func TestProposalOffBesides(t *testing.T) {
	s := solve(t, parse(t, sources(t)["handling-machine"]))
	l, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	waiting := s.Circuits[1].Duties[1]
	want := 1200 * units.Hour * (waiting.Balance.SupplyIn.Total()/waiting.Balance.Cycle - 60)
	if got := l[0].Splits[0].Besides.Energy; want <= 0 || !near(got, want, want) {
		t.Errorf("%g kWh less besides, by hand %g", got/units.KilowattHour, want/units.KilowattHour)
	}
}

// Hours that are off already under the same name stay off.
func TestSwitchedOffAgain(t *testing.T) {
	f := asFound(parse(t, sources(t)["handling-machine"]))
	if err := f.SetStop("switched off while idle", "120 h"); err != nil {
		t.Fatal(err)
	}
	l, err := fixfirst.All(context.Background(), solve(t, asFound(f)), fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if f, err = fixfirst.Apply(f, l[0].Steps[0].Cure); err != nil {
		t.Fatal(err)
	}
	kept := 0.0
	for _, s := range f.Calendar.Stops {
		if s.Name == "switched off while idle" {
			kept = s.Hours
		}
	}
	if math.Abs(kept-120*3600) > 1 {
		t.Errorf("%g h of the 120 h are left: %+v", kept/3600, f.Calendar.Stops)
	}
}
