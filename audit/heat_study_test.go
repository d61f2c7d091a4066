package audit

import (
	"bytes"
	"context"
	"encoding/csv"
	"math"
	"strings"
	"testing"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/machines/units"
)

func sampleWith(t *testing.T, name string, set map[string]string) *Solution {
	t.Helper()
	f, found := Read("../samples/" + name)
	if circuit.AnyStops(found) {
		t.Fatal(found)
	}
	for target, quantity := range set {
		if err := f.Put(target, quantity); err != nil {
			t.Fatal(err)
		}
	}
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// The heat that the curves give at the temperature they lead to is that of the whole audit solved with the oil at that very
// temperature, time step by time step; the tolerance is the one that is stated, and the few time steps besides.
func TestViscosityFeedsBack(t *testing.T) {
	for _, name := range []string{"quayside-winch.yaml", "handling-machine.yaml"} {
		s := sampleWith(t, name, nil)
		for i, c := range s.Circuits {
			h := c.Warmth
			if h == nil || h.Week == nil {
				t.Fatalf("%s: %+v", name, h)
			}
			at := sampleWith(t, name, map[string]string{"oil.temperature": units.FileText(h.Week.Ran, units.Preferred(units.Temperature, units.Metric))})
			heat, drawn, hours := 0.0, 0.0, 0.0
			for _, d := range at.Circuits[i].Duties {
				for _, l := range d.Balance.Losses {
					if l.Sink == circuit.ToOil && l.Block != coolingBlock {
						heat += l.Energy.Total() / d.Balance.Cycle * d.Duty.Hours
					}
				}
				own := d.Balance.SupplyIn.Total()
				for _, l := range d.Balance.Losses {
					if l.Block == coolingBlock {
						own -= l.Energy.Total()
					}
				}
				drawn += own / d.Balance.Cycle * d.Duty.Hours
				hours += d.Duty.Hours
			}
			got, err := h.Loads[Mix].HeatAt(h.Week.Ran)
			if err != nil || math.Abs(got-heat/hours) > 2*HeatTolerance*heat/hours {
				t.Errorf("%s, %s: at %.1f °C the curves have %.1f W, solved there it is %.1f W (%v)", name, c.Circuit.Name, h.Week.Ran-273.15, got, heat/hours, err)
			}
			if p, err := h.Loads[Mix].DrawnAt(h.Week.Ran); err != nil || math.Abs(p-drawn/hours) > 2*HeatTolerance*drawn/hours {
				t.Errorf("%s, %s: it draws %.1f W by the curves, solved there %.1f W (%v)", name, c.Circuit.Name, p, drawn/hours, err)
			}
			for _, course := range []*thermal.Course{h.Week, h.Hot, h.Start} {
				if gap := course.Gap(); gap > 1e-6 {
					t.Errorf("%s, %s: the heat misses by %.2g", name, c.Circuit.Name, gap)
				}
			}
		}
	}
}

// What the lines carry is what the circuit puts into the oil, and what flows back is what the pump draws from the tank: at the
// winch that waits nothing comes back in the return line, and all heat leaves by the case drain.
func TestLinesWhileWaiting(t *testing.T) {
	s := sampleWith(t, "quayside-winch.yaml", nil)
	h := s.Circuits[0].Warmth
	for i, l := range h.Loads[1:] {
		for _, p := range l.At {
			back, heatBack := p.Lines[thermal.ReturnLine].Mean()
			drain, heatDrain := p.Lines[thermal.CaseDrain].Mean()
			if sum := heatBack + heatDrain; math.Abs(sum-p.Heat) > 0.02*p.Heat {
				t.Errorf("%s at %.0f °C: lines carry %.1f W of %.1f W", l.Name, p.Theta-273.15, sum, p.Heat)
			}
			if i == 1 && (back > units.LitrePerMinute/10 || drain <= 0) {
				t.Errorf("%s at %.0f °C: %.2f L/min come back, %.2f L/min drain", l.Name, p.Theta-273.15, back*60e3, drain*60e3)
			}
		}
	}
}

// The electricity of the cooling is power times hours, in the balance of each duty, in the year, and of both circuits; the
// balances still close. An off-line pump warms the oil by what it draws.
func TestCoolingIsBooked(t *testing.T) {
	s := sampleWith(t, "quayside-winch.yaml", nil)
	without := sampleWith(t, "quayside-winch.yaml", map[string]string{"heat.fan_power": "0 W", "heat.loop_power": "0 W"})
	for i, c := range s.Circuits {
		want := (550.0 + 400) * c.Year.Hours
		if got := c.coolingDrawn(); math.Abs(got-want) > 1e-6*want {
			t.Errorf("%s: %.1f kWh a year for cooling, want %.1f", c.Circuit.Name, got/3.6e6, want/3.6e6)
		}
		o := without.Circuits[i]
		if d := c.Year.Drawn.Total() - o.Year.Drawn.Total(); math.Abs(d-want) > 1e-6*want {
			t.Errorf("%s: the year draws %.1f kWh more, want %.1f", c.Circuit.Name, d/3.6e6, want/3.6e6)
		}
		if d := c.Year.HeatToOil().Total() - o.Year.HeatToOil().Total(); math.Abs(d-400*c.Year.Hours) > 1e-6*want {
			t.Errorf("%s: the oil gets %.1f kWh more", c.Circuit.Name, d/3.6e6)
		}
		for _, d := range c.Duties {
			if d.Balance.Closure() > ClosureLimit {
				t.Errorf("%s, %s: closure %.2g", c.Circuit.Name, d.Duty.Name, d.Balance.Closure())
			}
		}
	}
	// On a machine off the mains an engine burns for its fan: slope 2.2 over 0.6 of an alternator.
	s = sampleWith(t, "ramp-carrier.yaml", nil)
	for _, c := range s.Circuits {
		slope := 2.2
		for i := range c.Circuit.Blocks {
			if b := &c.Circuit.Blocks[i]; b.Kind == "engine" {
				if v, _, ok := circuit.KindNamed("engine").Value(b, "slope"); ok {
					slope = v.SI
				}
			}
		}
		want := 600 * slope / 0.6 * c.Year.Hours
		if got := c.coolingDrawn(); math.Abs(got-want) > 1e-6*want || c.Year.Drawn.Total() != c.Year.Fuel.Total() {
			t.Errorf("%s: %.1f kWh of fuel for cooling, want %.1f", c.Circuit.Name, got/3.6e6, want/3.6e6)
		}
	}
}

// The cooler that the needs name, put into the file, holds the oil at the temperature wanted under that load; a smaller one
// does not, and a fouled one is warmer than a clean one.
func TestNeededCoolerHolds(t *testing.T) {
	s := sampleWith(t, "handling-machine.yaml", nil)
	h := s.Circuits[0].Warmth
	n := h.Needs[len(h.Needs)-1]
	p := h.With(n.Load, h.HotDay)
	p.Cooler.Rate, p.Cooler.RateFlow, p.Cooler.Opens = n.Rate, n.Flow, 0
	if err := p.Prepare(); err != nil {
		t.Fatal(err)
	}
	if got := p.Steady(n.Load, n.Air); math.Abs(got-h.Wanted) > 0.01 {
		t.Errorf("with %.1f W/K the oil comes to %.2f °C, wanted %.2f °C", n.Rate, got-273.15, h.Wanted-273.15)
	}
	if h.Checks[3].Highest <= h.Checks[2].Highest {
		t.Errorf("fouled %.1f °C, clean %.1f °C", h.Checks[3].Highest-273.15, h.Checks[2].Highest-273.15)
	}
	// Time to the alarm, by hand: the rise at the mean heat less walls, over the heat capacity, within a fifth.
	relief := h.Checks[5]
	theta, _ := h.Hot.Highest()
	if hand := h.Plant.Body.Capacity() * (h.Alarm - theta) / h.Peak; relief.Time < hand || relief.Time > 2*hand {
		t.Errorf("the relief valve brings the alarm after %.0f s, all power alone after %.0f s", relief.Time, hand)
	}
}

// A section is written, changed and taken out; what is wrong is said with its key.
func TestHeatSection(t *testing.T) {
	s := sampleWith(t, "baling-press.yaml", map[string]string{"Pump-controlled/heat.cooler_rate": "0.05 kW/K", "heat.tank_volume": "380 L", "heat.tank_volume.origin": "measured"})
	f := s.File
	if v := f.Heat.Values["tank_volume"]; v.SI != 0.38 || v.Origin != circuit.Measured {
		t.Errorf("the tank is %+v", v)
	}
	if a, b := f.HeatOf(&f.Circuits[0]).stated(), f.HeatOf(&f.Circuits[1]).stated(); a != 360 || b != 50 {
		t.Errorf("coolers of %g and %g W/K", a, b)
	}
	if err := f.Drop("heat.fan_power"); err != nil || f.Heat.Words["fan"] == "" {
		t.Errorf("the fan power stays: %v", err)
	}
	if v, given, ok := f.Heat.Value("fan_power", nil); given || !ok || v.SI != 360 { // 1 kW for each kW/K
		t.Errorf("the default is %+v", v)
	}
	for target, bad := range map[string]string{"heat.tank_volume": "0 L", "heat.fan": "sometimes", "heat.shift_days": "8", "heat.cooler_points": "20 L/min", "heat.fouling": "0.5", "heat.alarm": "3 bar", "heat.shift_hours": "25 h"} {
		before := string(f.Bytes())
		if err := f.Put(target, bad); err == nil || string(f.Bytes()) != before {
			t.Errorf("%s: %s was taken", target, bad)
		}
	}
}

// Without what it needs a study says what to give, and the audit is drawn up all the same.
func TestHeatMissing(t *testing.T) {
	for target, want := range map[string]string{"heat.tank_volume": "tank_volume", "heat.cooler_rate": "cooler_rate"} {
		f, _ := Read("../samples/baling-press.yaml")
		if err := f.Drop(target); err != nil {
			t.Fatal(err)
		}
		s, err := Solve(context.Background(), f, Options{})
		if err != nil {
			t.Fatal(err)
		}
		c := s.Circuits[0]
		if c.Warmth == nil || !strings.Contains(c.Warmth.Fault, want) || c.Year.Drawn.Total() <= 0 {
			t.Errorf("without %s: %+v", target, c.Warmth)
		}
		if r := s.Requests(units.Metric)[0]; r.Missing == "" || len(r.Groups) > 0 {
			t.Errorf("without %s there is a sheet", target)
		}
	}
}

// The request sheet names what a maker of coolers asks for, as numbers of the study or as blanks for somebody.
func TestRequestSheet(t *testing.T) {
	s := sampleWith(t, "transfer-station.yaml", nil)
	sheets := s.Requests(units.Metric)
	h := s.Circuits[0].Warmth
	need := h.Needs[len(h.Needs)-1]
	found := map[string]RequestRow{}
	for _, g := range sheets[0].Groups {
		for _, r := range g.Rows {
			found[r.Name] = r
			if (r.Value == "") != r.Blank || r.Blank && r.Note == "" {
				t.Errorf("%q is neither a value nor a blank for somebody: %+v", r.Name, r)
			}
		}
	}
	p := printer{system: units.Metric}
	for name, want := range map[string]string{
		"Heat to be taken, mean": p.power(need.Heat), "Capacity, clean": p.cooler(need.Asked()), "Capacity asked for": p.cooler(1.2 * need.Asked()),
		"Grade": "ISO VG 46", "Water entering": "18.0\u202f°C", "Position": "return line",
	} {
		if found[name].Value != want {
			t.Errorf("%s is %q, want %q", name, found[name].Value, want)
		}
	}
	for _, name := range []string{"Pressure drop allowed, cold", "Quality: hardness, chloride, sea or river water", "Highest static pressure of the line", "Danger of frost"} {
		if !found[name].Blank {
			t.Errorf("%s is not left open", name)
		}
	}
	var buf bytes.Buffer
	if err := WriteRequestCSV(&buf, sheets); err != nil {
		t.Fatal(err)
	}
	rows, err := csv.NewReader(&buf).ReadAll()
	if err != nil || len(rows) < 50 || rows[0][2] != "item" {
		t.Errorf("the table has %d rows: %v", len(rows), err)
	}
}

// A trial that changes nothing is the study; twice the cooler is colder, no cooler hotter, and a bigger tank swings less.
func TestTrial(t *testing.T) {
	h := sampleWith(t, "handling-machine.yaml", nil).Circuits[0].Warmth
	top := func(x Trial) (high, swing float64) {
		t.Helper()
		r, err := h.Try(x)
		if err != nil {
			t.Fatal(err)
		}
		high, _ = r.Hot.Highest()
		low := high
		for _, v := range r.Hot.Oil {
			low = math.Min(low, v)
		}
		return high, high - low
	}
	same, swing := top(h.Untried())
	if was, _ := h.Hot.Highest(); math.Abs(same-was) > 0.01 {
		t.Errorf("untried %.2f, the study has %.2f", same, was)
	}
	more, none, big, warm := h.Untried(), h.Untried(), h.Untried(), h.Untried()
	more.Rate *= 2
	none.Rate = 0
	big.Tank = 4
	warm.Air = 5
	a, _ := top(more)
	b, _ := top(none)
	_, c := top(big)
	d, _ := top(warm)
	if !(a < same-1 && b > same+20 && c < swing && d > same+3 && d < same+7) {
		t.Errorf("hot day %.1f; larger cooler %.1f, none %.1f, warm air %.1f; swing %.1f, big tank %.1f", same, a, b, d, swing, c)
	}
}

func BenchmarkTry(b *testing.B) {
	f, _ := Read("../samples/handling-machine.yaml")
	s, err := Solve(context.Background(), f, Options{})
	if err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		for _, c := range s.Circuits {
			if _, err := c.Warmth.Try(c.Warmth.Untried()); err != nil {
				b.Fatal(err)
			}
		}
	}
}
