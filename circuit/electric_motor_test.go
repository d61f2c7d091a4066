package circuit

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

const plainMotor = "M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm"

// A class gives what the table says: 22 kW, 4 poles, IE3: 93.0 % (IEC 60034-30-1); the balance is that of the typed
// value, and the value shows where it comes from.
func TestMotorOfClass(t *testing.T) {
	classed := strings.Replace(c1, "efficiency: 0.930", "efficiency_class: IE3", 1)
	typed, class := observe(t, c1, ramAxis, ramDuty), observe(t, classed, ramAxis, ramDuty)
	near(t, "energy drawn", class.ledger.in, typed.ledger.in, 1e-12)
	b := build(t, "M1 electric_motor; rated_power: 22 kW; efficiency_class: IE4; poles: 2").Block("M1")
	k := KindNamed(b.Kind)
	v, isDefault, ok := k.Value(b, "efficiency")
	if !ok || !isDefault || v.Note != "IE4: IEC 60034-30-1, by its interpolation formula with published coefficients" {
		t.Errorf("%+v, default %t, %t", v, isDefault, ok)
	}
	near(t, "IE4, 2 poles", v.SI, 0.940, 1e-12)
	n, _, _ := k.Value(b, "speed")
	near(t, "speed of 2 poles", n.SI, 2960*rpm, 1e-12)
}

func TestMotorRefusals(t *testing.T) {
	for _, c := range []struct{ motor, param, want string }{
		{"rated_power: 22 kW", "efficiency", "efficiency_class"},
		{"rated_power: 500 kW; efficiency_class: IE3", "efficiency_class", "0.75 to 200 kW"},
		{"rated_power: 22 kW; efficiency_class: IE3; poles: 8", "efficiency_class", "2, 4 and 6"},
		{"rated_power: 22 kW; efficiency_class: IE3; frequency: 60 Hz", "efficiency_class", "50 Hz"},
		{"rated_power: 22 kW; efficiency: 0.9; poles: 3", "poles", "even"},
		{"rated_power: 22 kW; efficiency: 0.9; slip: yes; speed: 2900 rpm", "speed", "does not belong"},
		{"rated_power: 22 kW; efficiency: 0.9; slip: yes; torque_limit: 200 N m", "torque_limit", "breakdown"},
		{"rated_power: 22 kW; efficiency: 0.9; commands: torque", "commands", "no command"},
		{"rated_power: 22 kW; efficiency: 0.9; idle_speed: 700 rpm", "idle_speed", "converter"},
		{"rated_power: 22 kW; efficiency: 0.9; type: permanent_magnet", "type", "converter"},
		{"rated_power: 22 kW; efficiency_class: IE3; type: permanent_magnet", "efficiency_class", "induction"},
		{"rated_power: 22 kW; efficiency: 0.9; torque_constant: 1 N m/A", "torque_constant", "go together"},
	} {
		text := throttled("M1 electric_motor; " + c.motor)
		k, found := Compile(build(t, text), ramAxis, pushing(0, 0))
		ok := false
		for _, f := range found {
			ok = ok || f.Level == Stops && f.Parameter == c.param && strings.Contains(f.Text, c.want)
		}
		if k != nil || !ok {
			t.Errorf("%s: want %q at %s, got %v", c.motor, c.want, c.param, found)
		}
	}
}

// Straight on the mains the speed is where the motor's line T = TN·(ωs − ω)/(ωs − ωN) meets what the throttled pump
// takes (textbook; found by bisection). Without load it turns at 1500 rpm.
func TestMotorSlips(t *testing.T) {
	r := steady(t, throttled(plainMotor+"; slip: yes"), ramAxis, pushing(0, 0))
	TN, ws, wN := 22e3/(1480*rpm), 1500*rpm, 1480*rpm
	// the relief valve at 160 bar takes what the orifice does not
	need := func(w float64) float64 { return math.Min(torqueAt(w), 45e-6/turn*160e5) }
	w := zero(1, ws, func(w float64) float64 { return need(w) - TN*(ws-w)/(ws-wN) })
	near(t, "speed", r.last(t, "M1.w"), w, 1e-7)
	near(t, "torque", r.last(t, "M1.T"), need(w), 1e-6)
	near(t, "loss", r.last(t, "M1.electric")-r.last(t, "M1.shaft"), 22e3*(1/0.93-1)*(0.35*w/wN+0.65*math.Pow(need(w)/TN, 2)), 1e-6)
	free := strings.Replace(throttled(plainMotor+"; slip: yes"), "crack: 160 bar", "crack: 0.0001 bar", 1)
	near(t, "without load", steady(t, free, ramAxis, pushing(0, 0)).last(t, "M1.w"), ws, 1e-6)
}

// Name plate: 22 kW, cos φ 0.86, 93 %, 400 V: I = PN/(η·cos φ·√3·U) = 39.70 A, by hand. At the load of the throttled
// pump P and Q as in machines.ReactivePower.
func TestMotorCurrentAndPowerFactor(t *testing.T) {
	r := steady(t, throttled(plainMotor+"; power_factor: 0.86"), ramAxis, pushing(0, 0))
	T, P := r.last(t, "M1.T"), r.last(t, "M1.electric")
	x := T * 1480 * rpm / 22e3
	Q := 22e3 / 0.93 * math.Tan(math.Acos(0.86)) * (0.7 + 0.3*x*x)
	near(t, "power factor", r.last(t, "M1.pf"), P/math.Hypot(P, Q), 1e-9)
	near(t, "current", r.last(t, "M1.I"), math.Hypot(P, Q)/(math.Sqrt(3)*400), 1e-9)
	o := observe(t, throttled(plainMotor+"; power_factor: 0.86"), ramAxis, pushing(0, 0))
	g := gateNamed(t, o.watch, "mean square current")
	near(t, "rated current", g.Limit, 39.70, 2e-4)
	near(t, "mean square current", g.Value, r.last(t, "M1.I"), 1e-9)
}

func gateNamed(t *testing.T, w *Watch, name string) Gate {
	t.Helper()
	for _, g := range w.Gates() {
		if g.Name == name {
			return g
		}
	}
	t.Fatalf("no gate %q in %v", name, w.Gates())
	return Gate{}
}

// servo is a pump on a servo motor that holds a ram of 80 mm bore under load.
const servo = `
U1 converter; rated_power: 15 kW
M1 electric_motor; rated_power: 11 kW; speed: 3000 rpm; max_speed: 3000 rpm; type: permanent_magnet; torque_constant: 1.6 N m/A; resistance: 0.2 ohm; speed_loss: 300 W; follows: ram; both_directions: yes; cooling: %s
P1 pump; displacement: 16 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
LP1 pressure_source; pressure: 0 bar
CK1 pilot_check; opens: 0 bar; nominal_drop: 0 bar
CK2 pilot_check; opens: 0 bar; nominal_drop: 0 bar
C1 cylinder; axis: ram; hold: pump; bore: 80 mm; rod: 56 mm
- U1.M M1.E
- M1.shaft P1.shaft
- P1.P C1.A CK1.C CK2.X
- P1.S C1.B CK2.C CK1.X
- LP1.P CK1.V CK2.V
`

// By hand: 60 kN on 80 mm are p = 119.37 bar, T = V·p/2π = 30.396 N m, I = T/1.6 = 18.998 A, copper 3·0.2 Ω·I² = 216.5 W,
// at standstill as well; at 0.1 m/s ω = A·v/D and 300 W·ω/ωN more. The holding gate: 35.01 N m rated, half of it with a fan on the shaft.
func TestServoMotor(t *testing.T) {
	d := points("hold", 0.1, []float64{0, 1, 1, 2},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0.1, 0.1, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{60e3, 60e3, 60e3, 60e3}})
	o := observe(t, fmt.Sprintf(servo, "self"), ramAxis, d)
	D := 16e-6 / turn
	T := D * 60e3 / boreArea
	I := T / 1.6
	w := boreArea * 0.1 / D
	near(t, "holding torque", o.last(t, "M1.T"), T, 1e-6)
	near(t, "current", o.last(t, "M1.I"), I, 1e-6)
	near(t, "holding loss", o.last(t, "M1.electric"), 0.6*I*I, 1e-6)
	near(t, "moving loss", o.sigAt(t, "M1.electric", 0.5)-o.sigAt(t, "M1.shaft", 0.5), 0.6*I*I+300*w/(3000*rpm), 1e-6)
	g := gateNamed(t, o.watch, "holding torque at standstill")
	near(t, "held", g.Value, T, 1e-6)
	near(t, "stood with a fan on the shaft", g.Limit, 0.5*11e3/(3000*rpm), 1e-9)
	if g.Passed {
		t.Errorf("passed: %+v", g)
	}
	if s := fmt.Sprint(o.watch.Findings()); !strings.Contains(s, "it holds 30.4") {
		t.Errorf("findings: %s", s)
	}
	o = observe(t, fmt.Sprintf(servo, "forced"), ramAxis, d)
	if g := gateNamed(t, o.watch, "holding torque at standstill"); !g.Passed {
		t.Errorf("with a fan of its own: %+v", g)
	}
	// Below half speed a fan on the shaft cools less: counted torque T/(0.5 + ω/ωN) over half of the cycle each.
	o = observe(t, fmt.Sprintf(servo, "self"), ramAxis, d)
	m := gateNamed(t, o.watch, "mean square torque")
	share := math.Min(1, 0.5+w/(3000*rpm))
	near(t, "torque counted", m.Value, math.Sqrt((T*T/share/share+T*T/0.25)/2), 1e-6)
}

// pulses sums what a run books at instants.
type pulses struct {
	c   *Compiled
	E   []float64
	n   int
	off bool
}

func (p *pulses) Sample(s *Sample) error {
	if p.E == nil {
		p.E = make([]float64, len(s.Pulse))
	}
	any := false
	for i, e := range s.Pulse {
		p.E[i] += e
		any = any || e != 0
	}
	if any {
		p.n++
	}
	return nil
}

func (p *pulses) of(role Role, block string) float64 {
	sum := 0.0
	for i, c := range p.c.channels {
		if c.Role == role && c.Block == block {
			sum += p.E[i]
		}
	}
	return sum
}

// starts runs a circuit over a duty that works twice and ends at rest.
func starts(t *testing.T, text string) (*pulses, *Watch) {
	t.Helper()
	d := points("twice", 0.1, []float64{0, 1, 1, 5, 5, 6, 6, 10},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0.1, 0.1, 0, 0, -0.1, -0.1, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{5e3, 5e3, 5e3, 5e3, 5e3, 5e3, 5e3, 5e3}})
	k, found := Compile(build(t, text), ramAxis, d)
	if k == nil {
		t.Fatalf("refused: %v", found)
	}
	p := &pulses{c: k}
	s := k.Series(d)
	w := k.NewWatch(k.Defaults(), s)
	if _, _, err := Run(context.Background(), k, k.Defaults(), s, trialOil, State{}, Receivers{p, w}); err != nil {
		t.Fatal(err)
	}
	return p, w
}

// Energy of motion ½·J·ω²; on the mains the rotor heats by as much (textbook) and the stator by about as much again
// (default 2). Two starts a cycle, the first of them where the cycle follows itself.
func TestMotorStarts(t *testing.T) {
	w := 1480 * rpm
	kin := 0.3 * w * w / 2
	text := strings.Replace(c1, "M1 electric_motor;", "M1 electric_motor; inertia: 0.3 kg m2;", 1)
	p, watch := starts(t, text+"at rest: stop\n")
	near(t, "starting", p.of(Loss, "M1"), 2*3*kin, 1e-12)
	near(t, "drawn for it", p.of(Supply, "M1"), 2*3*kin, 1e-12)
	if p.n != 2 {
		t.Errorf("%d starts", p.n)
	}
	// 2 starts in 10 s are 720 an hour; 22 kW stand 30·(22/0.7457)^−0.38 = 8.29 (NEMA MG 10, from memory).
	g := gateNamed(t, watch, "starts an hour")
	near(t, "starts an hour", g.Value, 720, 1e-9)
	near(t, "permitted", g.Limit, 8.29, 1e-3)
	if s := fmt.Sprint(watch.Findings()); g.Passed || !strings.Contains(s, "started 720 times an hour, more than the 8.29") {
		t.Errorf("%+v, %s", g, s)
	}
	if p, _ := starts(t, text); p.n != 0 {
		t.Errorf("kept turning, it starts %d times", p.n)
	}
	// The default inertia of 22 kW, 4 poles: 0.002·22^1.5 = 0.2064 kg m².
	p, _ = starts(t, c1+"at rest: stop\n")
	near(t, "with the usual inertia", p.of(Loss, "M1"), 2*3*0.20638*w*w/2, 1e-4)
}

// Behind a converter it idles at 500 rpm: the pump of C1 then circulates a third; a tenth of the heat of a start, and only
// the energy of motion between both speeds.
func TestMotorIdlesSoftly(t *testing.T) {
	text := strings.Replace(c1, "M1 electric_motor;", "U1 converter; rated_power: 30 kW\n- U1.M M1.E\nM1 electric_motor; idle_speed: 500 rpm; inertia: 0.3 kg m2; ", 1)
	text = strings.Replace(text, "; loss: power", "", 1)
	p, _ := starts(t, text)
	w, w0 := 1480*rpm, 500*rpm
	near(t, "starting", p.of(Loss, "M1"), 2*1.2*0.3*(w*w-w0*w0)/2, 1e-12)
	near(t, "drawn by the converter", p.of(Supply, "U1"), p.of(Loss, "M1"), 1e-12)
	o := observe(t, text, ramAxis, ramDuty)
	near(t, "idle speed", o.sigAt(t, "M1.w", 6), w0, 1e-12)
	near(t, "working speed", o.sigAt(t, "M1.w", 8), w, 1e-12)
	if soft, full := o.sigAt(t, "U1.electric", 6), observe(t, strings.Replace(text, "idle_speed: 500 rpm; ", "", 1), ramAxis, ramDuty).sigAt(t, "U1.electric", 6); !(soft < 0.45*full) {
		t.Errorf("idles at %g W, %g W at full speed", soft, full)
	}
}

// An engine idles at 900 rpm while all stand; stopped, a start takes 10 s of idling: k·PN·n1/n·10 s.
func TestEngineIdlesAndStarts(t *testing.T) {
	text := strings.Replace(c1, "M1 electric_motor; rated_power: 22 kW; efficiency: 0.930; speed: 1480 rpm; loss: power", "M1 engine; rated_power: 40 kW; speed: 1480 rpm; idle_speed: 900 rpm", 1)
	o := observe(t, text, ramAxis, ramDuty)
	near(t, "idle speed", o.sigAt(t, "M1.w", 6), 900*rpm, 1e-9)
	near(t, "working speed", o.sigAt(t, "M1.w", 8), 1480*rpm, 1e-9)
	p, _ := starts(t, text+"at rest: stop\n")
	near(t, "two starts", p.of(Supply, "M1"), 2*0.4*40e3*700/1480*10, 1e-9)
	near(t, "lost", p.of(Loss, "M1"), p.of(Supply, "M1"), 1e-12)
}
