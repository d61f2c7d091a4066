package circuit

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// switchedWinch is the closed-circuit winch with a cylinder-switched machine as its pump.
var switchedWinch = strings.Replace(c4, "P1 pump; displacement: 71 cm3/rev; case_share: 0; follows: drum; both_directions: yes",
	"P1 switched_machine; displacement: 72 cm3/rev; follows: drum; case_share: 0.7; events_idle: 0.3; outlet_volume: 3 L", 1)

// watched is all that the tests below want of a run.
type watched struct {
	*columns
	led   *ledger
	steps *stepClosure
	made  *gain
	watch *Watch
}

func watchRun(t *testing.T, text string, axes []duty.Axis, d *duty.Duty, oil Conditions) watched {
	t.Helper()
	k, found := Compile(build(t, text), axes, d)
	if k == nil {
		t.Fatalf("refused: %v\n%s", found, text)
	}
	s := k.Series(d)
	w := watched{columns: &columns{c: k, sig: map[string][]float64{}}, steps: &stepClosure{c: k}, made: &gain{c: k}, watch: k.NewWatch(k.Defaults(), s),
		led: &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}}
	_, cert, err := Run(context.Background(), k, k.Defaults(), s, oil, State{}, Receivers{w.columns, w.led, w.steps, w.made, w.watch})
	if err != nil || cert.Unbalanced > 0 || w.steps.worst > 1e-9 || w.made.worst < -1e-9 {
		t.Fatalf("%v, %d unbalanced, closure %g of a step, %s makes %g\n%s", err, cert.Unbalanced, w.steps.worst, w.made.where, -w.made.worst, text)
	}
	return w
}

// Flow, torque and losses of the block are those of the law in package machines, in all four quadrants.
func TestSwitchedLawInTheBalance(t *testing.T) {
	oil := Conditions{Density: 870, Viscosity: 0.030, BulkModulus: 1.5e9, Air: 0.01}
	w := watchRun(t, switchedWinch, drumAxis, drumDuty, oil)
	law, ok := SwitchedLaw(w.c.circuit.Block("P1"))
	if !ok || law.N != 12 || law.Idle != 1e5 || law.Switch != 0.3 {
		t.Fatalf("law of the block %+v", law)
	}
	fluid := machines.Fluid{Mu: oil.Viscosity, Rho: oil.Density, Bulk: oil.BulkModulus, Air: oil.Air}
	quadrants := map[[2]bool]bool{}
	for i := range w.t {
		at := func(s string) float64 { return w.sig["P1."+s][i] }
		x, speed, dp := at("e"), at("w"), at("P.p")-at("S.p")
		quadrants[[2]bool{x > 0, dp > 0}] = true
		// 0.7 of the slip goes to the case from both sides: the flow at P has the part of P alone
		slip := law.Cs * math.Abs(x) * law.D / oil.Viscosity * (0.3*dp + 0.7*at("P.p"))
		if q := x*law.D*speed - slip; math.Abs(q+at("P.q")) > 1e-9*law.D*157 {
			t.Fatalf("at %g s: flow %g, by the law %g", w.t[i], -at("P.q"), q)
		}
		if T := law.Torque(x, speed, dp, fluid); math.Abs(T-at("T")) > 1e-7*math.Abs(T)+1e-9 {
			t.Fatalf("at %g s: torque %g, by the law %g", w.t[i], at("T"), T)
		}
		if n := law.EventsOfOne(x, speed); math.Abs(n-at("events")) > 1e-9*n {
			t.Fatalf("at %g s: %g events a second, by the law %g", w.t[i], at("events"), n)
		}
		if v := law.PressureRipple(x, 3e-3, 1.5e9); x != 0 && (at("ripple") <= 0 || at("ripple") > v/0.99) {
			t.Fatalf("at %g s: ripple %g, without air %g", w.t[i], at("ripple"), v)
		}
	}
	if len(quadrants) != 4 {
		t.Errorf("%d of four quadrants were run through", len(quadrants))
	}
	for _, kind := range []string{"slip", "friction", "idle cylinders", "dead volume", "valve switching"} {
		if e := w.led.energy(Loss, "P1", kind); !(e > 0) {
			t.Errorf("%s books %g J", kind, e)
		}
	}
	if w.led.closure() > 1e-9 {
		t.Errorf("closure %g", w.led.closure())
	}
}

// twoServices lifts one load while the other comes down; both services sit on one shaft.
const twoServices = `
TK tank
M1 electric_motor; rated_power: 30 kW; efficiency: 0.93; speed: 1480 rpm
A1 switched_machine; displacement: 48 cm3/rev; cylinders: 6; follows: a
B1 switched_machine; displacement: 48 cm3/rev; cylinders: 6; follows: b
RA relief; crack: 250 bar
RB relief; crack: 250 bar
C1 plunger; axis: a; hold: brake; diameter: 60 mm
C2 plunger; axis: b; hold: brake; diameter: 60 mm
- M1.shaft A1.shaft B1.shaft
- A1.S B1.S TK.T RA.T RB.T
- A1.P C1.A RA.P
- B1.P C2.A RB.P
`

var twoAxes = []duty.Axis{{Name: "a", Kind: duty.Linear}, {Name: "b", Kind: duty.Linear}}

func twoDuty(fa, fb float64) *duty.Duty {
	at := []float64{0, 0.5, 4.5, 5, 6, 6.5, 10.5, 11, 12}
	return points("two", 0.05, at, duty.Track{Of: "a", What: duty.Speed, Values: []float64{0, .2, .2, 0, 0, -.2, -.2, 0, 0}},
		duty.Track{Of: "a", What: duty.Load, Values: []float64{fa, fa, fa, fa, fa, fa, fa, fa, fa}},
		duty.Track{Of: "b", What: duty.Speed, Values: []float64{0, -.2, -.2, 0, 0, .2, .2, 0, 0}},
		duty.Track{Of: "b", What: duty.Load, Values: []float64{fb, fb, fb, fb, fb, fb, fb, fb, fb}})
}

// What one service gives the shaft the other takes: the motor gives the sum, and that is what losses and net work come to.
func TestPowerPassesThroughTheShaft(t *testing.T) {
	w := watchRun(t, twoServices, twoAxes, twoDuty(40e3, 25e3), trialOil)
	passed := 0.0
	for i := range w.t {
		a, b, m := w.sig["A1.shaft"][i], w.sig["B1.shaft"][i], w.sig["M1.shaft"][i]
		if math.Abs(a+b-m) > 1e-9*(math.Abs(a)+math.Abs(b)+1) {
			t.Fatalf("at %g s the services take %g W and %g W, the motor gives %g W", w.t[i], a, b, m)
		}
		if a*b < 0 {
			passed = math.Max(passed, math.Min(math.Abs(a), math.Abs(b)))
		}
	}
	// 25 kN at 0.2 m/s is 5 kW, of which some part is lost in service B
	if passed < 3500 || passed > 5000*1.3 {
		t.Errorf("at most %.0f W pass between the services", passed)
	}
	if w.led.closure() > 1e-9 {
		t.Errorf("closure %g", w.led.closure())
	}
	// The net work is none, as both strokes close: all that is drawn is lost or goes back to the mains.
	net := w.led.energy(Supply, "", "")
	if got := w.led.energy(Loss, "", ""); math.Abs(got-net) > 1e-6*w.led.in {
		t.Errorf("drawn %g J, lost %g J", net, got)
	}
}

// Random services on one shaft, some under a held pressure and on a motor of limited torque, balance and make no energy.
func TestRandomServices(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 17))
	about := func(x float64) float64 { return x * math.Pow(10, 0.6*(r.Float64()-0.5)) }
	for seed := range 60 {
		text := twoServices
		service := func() string {
			return fmt.Sprintf("displacement: %g cm3/rev; cylinders: %d; slip: %g; friction: %g; idle_loss: %g bar; cylinder_dead_volume: %g; returned: %g; event_energy: %g J; events_idle: %g; case_share: %g",
				about(60), 2+r.IntN(20), about(6e-9), about(0.02), about(1), about(1), r.Float64(), about(0.3), r.Float64(), r.Float64())
		}
		text = strings.Replace(text, "displacement: 48 cm3/rev; cylinders: 6; follows: a", service()+"; follows: a", 1)
		text = strings.Replace(text, "displacement: 48 cm3/rev; cylinders: 6; follows: b", service()+"; follows: b", 1)
		if seed%2 == 1 {
			text = strings.Replace(text, "speed: 1480 rpm", fmt.Sprintf("speed: 1480 rpm; torque_limit: %g N m", about(250)), 1)
		}
		if seed%3 == 1 { // a third service feeds an orifice at a held pressure
			text += fmt.Sprintf("E1 switched_machine; %s; control: pressure; set_pressure: %g bar; min_setting: %g\nO1 orifice; nominal_flow: %g L/min; nominal_drop: 100 bar\n", service(), about(100), -r.Float64(), about(20))
			text = strings.Replace(text, "A1.shaft B1.shaft", "A1.shaft B1.shaft E1.shaft", 1)
			text += "- E1.P O1.A\n- E1.S O1.B TK.T"
			text = strings.Replace(text, "- A1.S B1.S TK.T", "- A1.S B1.S", 1) + " RA.T RB.T A1.S"
			text = strings.Replace(text, "- A1.S B1.S RA.T RB.T\n", "", 1)
			text = strings.Replace(text, "RB.T A1.S", "RB.T A1.S B1.S", 1)
		}
		w := watchRun(t, text, twoAxes, twoDuty(about(30e3), about(30e3)), Conditions{Density: 870, Viscosity: about(0.03), Air: 0.01 * r.Float64()})
		if w.led.closure() > 1e-9 {
			t.Errorf("closure %g\n%s", w.led.closure(), text)
		}
	}
}

// A service that holds a pressure takes oil back as a motor where its lowest fraction lets it.
func TestServiceTakesOilBack(t *testing.T) {
	const text = `
TK tank
M1 electric_motor; rated_power: 30 kW; efficiency: 0.93; speed: 1480 rpm
E1 switched_machine; displacement: 48 cm3/rev; control: pressure; set_pressure: 150 bar; min_setting: -1
F1 switched_machine; displacement: 24 cm3/rev; setting: 0.8
- M1.shaft E1.shaft F1.shaft
- E1.P F1.P
- E1.S F1.S TK.T
`
	w := watchRun(t, text, nil, points("rest", 1, []float64{0, 1, 2}), trialOil)
	if p := w.sig["E1.P.p"][1]; math.Abs(p-150e5) > 1 {
		t.Errorf("%g bar are held", p/1e5)
	}
	if e := w.sig["E1.e"][1]; !(e < -0.3 && e > -0.5) { // 24·0.8/48 = 0.4 less what both slip
		t.Errorf("fraction %g", e)
	}
	if P := w.sig["E1.shaft"][1]; P > 0 {
		t.Errorf("as a motor it takes %g W", P)
	}
}

// The findings: too small a fraction, soft oil, ripple; and the count of valve events by hand.
func TestSwitchedFindings(t *testing.T) {
	text := strings.Replace(twoServices, "follows: a", "follows: a; low_flow: 0.9; outlet_volume: 0.5 L; cylinder_dead_volume: 6", 1)
	oil := trialOil
	oil.Air = 0.02
	w := watchRun(t, text, twoAxes, twoDuty(40e3, 25e3), oil)
	all := ""
	for _, f := range w.watch.Findings() {
		all += string(f.Level) + " " + strings.ReplaceAll(f.Text, "\u202f", " ") + "\n"
	}
	for _, want := range []string{"warns A1: for 100 % of the time in which it works", "warns A1: 21 % of a stroke only compresses oil", "note A1: single strokes make the pressure at its outlet swing by up to 22"} {
		if !strings.Contains(all, want) {
			t.Errorf("no finding %q in\n%s", want, all)
		}
	}
	if strings.Contains(all, "B1: for") {
		t.Errorf("B1 keeps above its limit:\n%s", all)
	}
	uses := w.watch.SwitchedUses(1)
	if len(uses) != 2 || uses[0].Block != "A1" {
		t.Fatalf("%+v", uses)
	}
	// one valve: ∫|x|·n dt; the fraction is that of the flow, 0.2 m/s·area over 48 cm³·1480 rpm, and what slips besides
	area := math.Pi / 4 * 0.06 * 0.06
	way := 2 * 0.2 * 4.5 // m, both ways
	if want := way * area / 48e-6; math.Abs(uses[0].Events-want) > 0.03*want {
		t.Errorf("%g events of one valve, by hand about %g", uses[0].Events, want)
	}
	if math.Abs(uses[0].Busy-10) > 0.2 || uses[0].Low != uses[0].Busy {
		t.Errorf("at work for %g s, below the limit for %g s", uses[0].Busy, uses[0].Low)
	}
	if v := of(t, "A1 switched_machine; displacement: 48 cm3/rev; cylinders: 6", "low_flow"); v.SI != 1./6 || v.Origin != Assumed {
		t.Errorf("low-flow limit of six cylinders: %+v", v)
	}
	if v := of(t, "A1 switched_machine; displacement: 48 cm3/rev", "idle_loss"); v.Low != 0.4*units.Bar || v.High != 3*units.Bar || v.Origin != Assumed {
		t.Errorf("idle loss: %+v", v)
	}
}

// What cannot be is refused in words that name the parameter.
func TestSwitchedRefusals(t *testing.T) {
	for row, want := range map[string]string{
		"A1 switched_machine; displacement: 48 cm3/rev; cylinders: 6.5; follows: a":                  "whole number",
		"A1 switched_machine; displacement: 48 cm3/rev; control: pressure":                           "set_pressure",
		"A1 switched_machine; displacement: 48 cm3/rev; follows: a; control: pressure":               "keep one",
		"A1 switched_machine; displacement: 48 cm3/rev; control: load_sensing":                       "pilot line",
		"A1 switched_machine; displacement: 48 cm3/rev; follows: a; points_displacement: 57 cm3/rev": "name their file",
	} {
		text := strings.Replace(twoServices, "A1 switched_machine; displacement: 48 cm3/rev; cylinders: 6; follows: a", row, 1)
		said := ""
		for _, f := range Check(build(t, text), twoAxes, []*duty.Duty{twoDuty(1, 1)}) {
			if f.Level == Stops {
				said += f.Text + "\n"
			}
		}
		if !strings.Contains(said, want) {
			t.Errorf("%s: %q not in %q", row, want, said)
		}
	}
}
