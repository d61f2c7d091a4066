package audit

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
	"barlitre/samples"
)

func station(t *testing.T, change func(*File)) *Solution {
	t.Helper()
	data, err := samples.Read("transfer-station.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, found := Parse(data, nil, "transfer-station.yaml")
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	if change != nil {
		change(f)
	}
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// With the idle loss at which the advantage is said to be gone, the audit solved anew finds none; and the idle loss
// shows in the balance by what it is, (1 − |x|)·D·Δpi·|ω|.
func TestAdvantageIsGoneWhereItSays(t *testing.T) {
	s := station(t, nil)
	before := s.Circuits[1].Services
	if len(before) != 3 || len(s.Circuits[0].Services) != 0 {
		t.Fatalf("%d services, %d in the circuit as found", len(before), len(s.Circuits[0].Services))
	}
	gone := before[0].Beside.Gone()
	again := station(t, func(f *File) {
		v := circuit.Given(gone)
		v.Origin = circuit.Assumed
		f.Circuits[1].Block("S1").Values["idle_loss"] = v
	})
	after := again.Circuits[1].Services[0]
	if gain := after.Gain[1]; math.Abs(gain) > 1e-6*after.Beside.LostOther/after.Beside.Seconds {
		t.Errorf("at %g bar it still gains %g W", gone/units.Bar, gain)
	}
	one, other := s.Circuits[1].Duties[0].Balance, again.Circuits[1].Duties[0].Balance
	e, _ := lossIn(one.Losses, "S1", "idle cylinders")
	g, _ := lossIn(other.Losses, "S1", "idle cylinders")
	if math.Abs(g-e*gone/1e5) > 1e-6*g {
		t.Errorf("idle cylinders lose %g J with 1 bar and %g J with %g bar", e, g, gone/1e5)
	}
	if !(other.SupplyIn.Total() > one.SupplyIn.Total()+g-e) { // the motor loses besides
		t.Errorf("drawn %g J, then %g J", one.SupplyIn.Total(), other.SupplyIn.Total())
	}
	if other.Closure() > ClosureLimit {
		t.Errorf("closure %g", other.Closure())
	}
}

// What the law in the comparison loses is what the balance books for the block, year and cycle alike.
func TestServicesAgreeWithTheBalance(t *testing.T) {
	s := station(t, nil)
	for _, v := range s.Circuits[1].Services {
		booked := 0.0
		for _, l := range s.Circuits[1].Year.Losses {
			if l.Block == v.Block {
				booked += l.Energy.Total()
			}
		}
		if math.Abs(booked-v.Beside.Lost) > 1e-3*booked {
			t.Errorf("%s: %g J booked in a year, %g J in the comparison", v.Block, booked, v.Beside.Lost)
		}
		for i := range 2 {
			if !(v.Gain[i] > v.Gain[i+1]) {
				t.Errorf("%s: advantage for low, likely, high losses %v", v.Block, v.Gain)
			}
		}
	}
	// the fan works at one fraction all the time: its events by hand, |x|·n a second and valve, x = 35.7 L/min over 32 cm³·n and slip
	fan := s.Circuits[1].Services[2]
	mean := fan.Events / (2400 * 3600)
	if x := mean / (1475. / 60); math.Abs(x-0.765) > 0.01 {
		t.Errorf("fan: %g events a second and valve, a fraction of %g", mean, x)
	}
	if math.Abs(fan.Life-1e9/fan.Events) > 1e-9*fan.Life {
		t.Errorf("%g years", fan.Life)
	}
}

// The lift coming down drives its service; what packer and fan take of that is named, and stands on no side of the balance.
func TestExchangeIsNamed(t *testing.T) {
	s := station(t, nil)
	d := s.Circuits[1].Duties[0]
	if len(d.Exchanges) != 1 || strings.Join(d.Exchanges[0].Blocks, " ") != "S1 S2 S3" {
		t.Fatalf("%+v", d.Exchanges)
	}
	// The load gives 22 kN · 0.9 m = 19.8 kJ; cylinder friction and the losses of S1 take their part.
	if e := d.Exchanged(); !(e > 0.7*19.8e3 && e < 19.8e3) {
		t.Errorf("%g J passed", e)
	}
	if d.Balance.Closure() > ClosureLimit {
		t.Errorf("closure %g", d.Balance.Closure())
	}
	found := false
	for _, f := range s.Report(units.Metric).Circuits[1].Duties[0].Figures {
		found = found || strings.Contains(f.Name, "passed between S1, S2 and S3")
	}
	if !found || s.Result().Circuits[1].Duties[0].Energy.Passed != d.Exchanged() {
		t.Error("the report or the result file does not name it")
	}
}

// A valve that wears out soon, and an advantage that the high losses take away, are findings.
func TestServiceRemarks(t *testing.T) {
	s := station(t, func(f *File) {
		b := f.Circuits[1].Block("S3")
		b.Values["endurance"] = circuit.Given(2e8)
		high := circuit.Given(1e5)
		high.High, high.Origin = 40e5, circuit.Assumed
		b.Values["idle_loss"] = high
	})
	all := ""
	for _, f := range s.Circuits[1].Findings {
		all += string(f.Level) + " " + f.Text + "\n"
	}
	for _, want := range []string{"warns S3: each of its valves opens and closes 162", "note S3: with the high end of its idle and switching losses it loses more"} {
		if !strings.Contains(all, want) {
			t.Errorf("no %q in\n%s", want, all)
		}
	}
}

// Points of a swashplate machine, named by the block, take the place of the usual one.
func TestServiceBesideMeasuredPoints(t *testing.T) {
	law := machines.Displacement{D: 57 * units.CubicCentimetrePerRev, Cs: 6.5e-9, K: 2.8, Cf: 0.011, Cv: 7.5e4, Tc: 3}
	s := station(t, func(f *File) {
		b := f.Circuits[1].Block("S1")
		b.Fit = &machines.Fit{Law: law}
		b.Words["points"] = circuit.Word{Text: "bench.csv"}
	})
	v := s.Circuits[1].Services[0]
	if !v.Fitted || !strings.Contains(v.Verdict(units.Metric), "a swashplate machine fitted to the points of bench.csv") {
		t.Errorf("%+v", v.Verdict(units.Metric))
	}
	if o := v.Beside.Other; o.D != v.Law.D || o.Cf != law.Cf || math.Abs(o.Tc-3*64./57) > 1e-9 {
		t.Errorf("beside it %+v", o)
	}
	c, ok := v.Curve()
	if !ok || len(c.Flow) < 20 {
		t.Fatal("no curve")
	}
	for i := range c.Flow {
		if !(c.Switched[0][i] >= c.Switched[1][i] && c.Switched[1][i] >= c.Switched[2][i]) || c.Switched[0][i] > 1 || c.Other[i] > 1 {
			t.Errorf("at %g m³/s: %g, %g, %g beside %g", c.Flow[i], c.Switched[0][i], c.Switched[1][i], c.Switched[2][i], c.Other[i])
		}
	}
}

// The file of points beside the audit file is read with the displacement of the machine it was measured on.
func TestPointsOfAnotherMachine(t *testing.T) {
	dir := t.TempDir()
	data, err := samples.Read("transfer-station.yaml")
	if err != nil {
		t.Fatal(err)
	}
	text := strings.Replace(string(data), "cylinders: {value: 8, origin: data sheet}", "cylinders: {value: 8, origin: data sheet}\n      points: bench.csv\n      points_displacement: 57 cm3/rev\n      points_viscosity: 30 mPa s", 1)
	law := machines.Displacement{D: 57 * units.CubicCentimetrePerRev, Cs: 8e-9, Cf: 0.02, Cv: 5e4, Tc: 2}
	rows := "speed [rpm],pressure [bar],displacement [cm3/rev],flow [L/min],torque [N m]\n"
	for _, rpm := range []float64{600, 1000, 1500, 2000} {
		for _, bar := range []float64{60, 140, 220} {
			for _, e := range []float64{0.3, 1} {
				w, dp := rpm*units.RPM, bar*units.Bar
				rows += fmt.Sprintf("%g,%g,%g,%.9g,%.9g\n", rpm, bar, 57*e, law.Flow(e, w, dp, 0.030, 870, 1.4e9)/units.LitrePerMinute, law.Torque(e, w, dp, 0.030, 870))
			}
		}
	}
	for name, content := range map[string]string{"a.yaml": text, "bench.csv": rows} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(content), 0o600); err != nil {
			t.Fatal(err)
		}
	}
	f, found := Read(filepath.Join(dir, "a.yaml"))
	if f == nil || circuit.AnyStops(found) {
		t.Fatal(found)
	}
	b := f.Circuits[1].Block("S1")
	if b.Fit == nil {
		t.Fatal("nothing was fitted")
	}
	wants(t, "Cs", b.Fit.Law.Cs, law.Cs, 1e-3)
	wants(t, "Cf", b.Fit.Law.Cf, law.Cf, 1e-3)
	wants(t, "Cv", b.Fit.Law.Cv, law.Cv, 1e-3)
	if own, ok := circuit.SwitchedLaw(b); !ok || own.Cs != 5e-9 {
		t.Errorf("the points of another machine changed the law of the block: %+v", own)
	}
}

// Of three axes only the lift stands under its load; the packer and the fan never do.
func TestSuspendedLoadIsTheAxisThatStandsUnderIt(t *testing.T) {
	for _, c := range station(t, nil).Circuits {
		for _, x := range c.cautions() {
			if x.Topic == "Suspended load" && c.Circuit.Block(x.Block).Word("axis") != "lift" {
				t.Errorf("%s: %s: %s", c.Circuit.Name, x.Block, x.Text)
			}
		}
		if !c.mayFall("lift") || c.mayFall("fan") {
			t.Errorf("%s: lift and fan are taken for one another", c.Circuit.Name)
		}
	}
	s := station(t, func(f *File) { // whose load is not given may stand on any axis
		for _, d := range f.Duties {
			d.Tracks = slices.DeleteFunc(d.Tracks, func(tr duty.Track) bool { return tr.Of == "fan" && tr.What == duty.Load })
		}
	})
	for _, d := range s.Circuits[0].Duties {
		if d.Balance != nil && d.Balance.Seconds.Holding > 0 && !s.Circuits[0].mayFall("fan") {
			t.Error("an axis without a load in the duty counts as safe")
		}
	}
}
