package circuit

import (
	"context"
	"fmt"
	"math"
	"regexp"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// A pump of 45 cm³ without losses presses oil through an orifice of 30 L/min at 100 bar,
// beside a ram that stands: p = 100 bar·(V·n/30 L/min)², T = V/2π·p.
func throttled(drive string) string {
	text := strings.Replace(rail, "M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm", drive, 1)
	return text + `
V1 valve; directs: ram; nominal_flow: 100 L/min
OR1 orifice; nominal_flow: 30 L/min; nominal_drop: 100 bar
- P1.P RV1.P V1.P OR1.A
- V1.A C1.A
- V1.B C1.B
- V1.T OR1.B TK.T
`
}

const turn = 2 * math.Pi

// torqueAt is what the throttled pump needs at a speed [rad/s].
func torqueAt(w float64) float64 {
	return 45e-6 / turn * 100e5 * math.Pow(45e-6*w/turn/(30*lpm), 2)
}

// By hand: T = TL where 45 cm³·p/2π = 80 N m, p = 111.70 bar, q = 30 L/min·√1.117 = 31.706 L/min,
// n = q/V = 704.6 rpm.
func TestMotorSlowsAtItsTorqueLimit(t *testing.T) {
	const motor = "M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm"
	o := observe(t, throttled(motor+"; torque_limit: 80 N m"), ramAxis, pushing(0, 0))
	near(t, "speed", o.last(t, "M1.w"), 704.6*rpm, 1e-4)
	near(t, "torque", o.last(t, "M1.T"), 80, 1e-9)
	near(t, "pressure", o.last(t, "P1.P.p"), 80*turn/45e-6, 1e-9)
	if s := fmt.Sprint(o.watch.Findings()); !strings.Contains(s, "at its torque limit for 1.000 s a cycle") || strings.Contains(s, "stalls") {
		t.Errorf("findings: %s", s)
	}
	// At 110 N m it still turns slower, at 120 N m the relief valve (114.6 N m) keeps it from the limit.
	o = observe(t, throttled(motor+"; torque_limit: 120 N m"), ramAxis, pushing(0, 0))
	near(t, "speed below the limit", o.last(t, "M1.w"), 1480*rpm, 1e-9)
	near(t, "torque below the limit", o.last(t, "M1.T"), 45e-6/turn*160e5, 1e-9)
	if s := fmt.Sprint(o.watch.Findings()); strings.Contains(s, "torque limit") {
		t.Errorf("findings: %s", s)
	}
	// Dry friction asks for its part: T = D·p + Cf·D·p + Tc.
	text := strings.Replace(throttled(motor+"; torque_limit: 80 N m"), "friction: 0; viscous: 0; drag: 0 N m", "friction: 0.05; viscous: 0; drag: 3 N m", 1)
	o = observe(t, text, ramAxis, pushing(0, 0))
	near(t, "pressure with friction", o.last(t, "P1.P.p"), (80-3)/1.05*turn/45e-6, 1e-9)
}

// Only a relief valve at 160 bar, 114.6 N m, lets the oil go: the motor of 80 N m stands.
func TestMotorStalls(t *testing.T) {
	text := throttled("M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm; torque_limit: 80 N m")
	text = strings.NewReplacer(" OR1.A", "", " OR1.B", "", "OR1 orifice; nominal_flow: 30 L/min; nominal_drop: 100 bar\n", "").Replace(text)
	o := observe(t, text, ramAxis, pushing(0, 0))
	if w := o.last(t, "M1.w"); math.Abs(w) > 1e-6 {
		t.Errorf("it turns at %g rad/s", w)
	}
	near(t, "torque", o.last(t, "M1.T"), 80, 1e-6)
	if s := fmt.Sprint(o.watch.Findings()); !strings.Contains(s, "the motor stalls at 0 s") {
		t.Errorf("no finding of the stall: %s", s)
	}
}

// A motor that follows an axis, at its limit: D·p = TL, and behind an open valve
// v = √((p·A − F)/(k·(A³ + B³))), k = ΔpN/qN².
func TestFollowingMotorAtItsTorqueLimit(t *testing.T) {
	text := strings.Replace(rail, "speed: 1480 rpm", "speed: 1480 rpm; follows: ram; max_speed: 3000 rpm; torque_limit: 80 N m", 1) + `
V1 valve; directs: ram; nominal_flow: 20 L/min; nominal_drop: 5 bar
- P1.P RV1.P V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`
	d := points("follow", 0.1, []float64{0, 1, 1, 2},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0.3, 0.3, 0.05, 0.05}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{30e3, 30e3, 30e3, 30e3}})
	r := steady(t, text, ramAxis, d)
	k, p := 5e5/(20*lpm)/(20*lpm), 80*turn/45e-6
	v := math.Sqrt((p*boreArea - 30e3) / (k * (math.Pow(boreArea, 3) + math.Pow(rodArea, 3))))
	near(t, "speed at the limit", r.sig["C1.v"][3], v, 1e-4)
	near(t, "torque", r.sig["M1.T"][3], 80, 1e-9)
	near(t, "speed as asked", r.last(t, "C1.v"), 0.05, 1e-9)
}

// A limit that is never reached changes nothing, for a motor that turns both ways too.
func TestTorqueLimitOutOfReach(t *testing.T) {
	for name, c := range map[string]string{"c1": c1, "c5": c5} {
		a := observe(t, c, ramAxis, ramDuty)
		b := observe(t, strings.Replace(c, "M1 electric_motor;", "M1 electric_motor; torque_limit: 900 N m;", 1), ramAxis, ramDuty)
		if d := math.Abs(a.ledger.in - b.ledger.in); d > 1e-6*a.ledger.in {
			t.Errorf("%s draws %g J, with a limit %g J", name, a.ledger.in, b.ledger.in)
		}
	}
}

const engine = "M1 engine; rated_power: 12 kW; speed: 1480 rpm"

// Engine against the throttled pump, found by bisection on T(ω) = torque curve.
func TestEngine(t *testing.T) {
	n, Tn := 1480*rpm, 12e3/(1480*rpm)
	for _, c := range []struct {
		name, text string
		free       func(w float64) float64 // rises through zero at the speed
	}{
		{"constant limit", engine, func(w float64) float64 { return torqueAt(w) - Tn }},
		{"falling line", engine + "; torque_rise: 0.6", func(w float64) float64 { return torqueAt(w) - Tn*(1+0.6*(1-w/n)) }},
		{"governed", engine + "; torque_limit: 200 N m; droop: 0.06; speed: 800 rpm", func(w float64) float64 {
			y := (torqueAt(w) + 0.4*12e3/(800*rpm)/2.2) / (200 + 0.4*12e3/(800*rpm)/2.2)
			return w - 800*rpm*(1+0.06*(1-y))
		}},
		{"isochronous", engine + "; torque_limit: 200 N m; speed: 800 rpm", func(w float64) float64 { return w - 800*rpm }},
	} {
		t.Run(c.name, func(t *testing.T) {
			text := throttled(c.text)
			if strings.Contains(c.text, "800") { // build takes the last of two
				text = strings.Replace(text, "speed: 1480 rpm; ", "", 1)
			}
			r := steady(t, text, ramAxis, pushing(0, 0))
			w := zero(1, 300, c.free)
			near(t, "speed", r.last(t, "M1.w"), w, 1e-4)
			T, ref := r.last(t, "M1.T"), n
			near(t, "torque", T, torqueAt(w), 1e-3)
			if strings.Contains(c.text, "800") {
				ref = 800 * rpm
			}
			near(t, "fuel", r.last(t, "M1.fuel"), 2.2*T*r.last(t, "M1.w")+0.4*12e3*r.last(t, "M1.w")/ref, 1e-9)
		})
	}
	// A low speed is a finding, and below the lowest one a stall.
	o := observe(t, throttled(engine), ramAxis, pushing(0, 0))
	if s := fmt.Sprint(o.watch.Findings()); !strings.Contains(s, "the engine stalls") { // 693 rpm
		t.Errorf("findings: %s", s)
	}
	o = observe(t, throttled(engine+"; min_speed: 500 rpm"), ramAxis, pushing(0, 0))
	if s := fmt.Sprint(o.watch.Findings()); !strings.Contains(s, "at its torque limit") || strings.Contains(s, "stalls") {
		t.Errorf("findings: %s", s)
	}
	near(t, "fuel is what is drawn", o.ledger.in, o.ledger.energy(Supply, "M1", "fuel"), 1e-12)
}

// A winch lowers its load over the engine, without losses: up to the drag k·PN/s of the engine
// its governor keeps the speed and fuel = k·PN − s·P; beyond it the speed rises until the drag
// takes the power.
func TestEngineOverrun(t *testing.T) {
	text := fmt.Sprintf(winchOn, "M1 engine; rated_power: 30 kW; speed: 1480 rpm")
	n := 1480 * rpm
	for _, c := range []struct{ speed, fuel, over float64 }{{-20, 12e3 - 2.2*3e3, 1}, {-60, 0, 9e3 / (0.4 * 30e3 / 2.2)}, {40, 12e3 + 2.2*6e3, 1}} {
		o := observe(t, text, drumAxis, lowering(c.speed))
		near(t, "drum", o.last(t, "HM1.w"), c.speed, 1e-9)
		near(t, "engine", o.last(t, "M1.w"), n*c.over, 1e-9)
		if got := o.last(t, "M1.fuel"); math.Abs(got-c.fuel) > 1e-3 {
			t.Errorf("%g W of fuel at %g rad/s, want %g W", got, c.speed, c.fuel)
		}
		if s := fmt.Sprint(o.watch.Findings()); strings.Contains(s, "a load drives the engine") != (c.over > 1) {
			t.Errorf("findings at %g rad/s: %s", c.speed, s)
		}
	}
}

// Switched off it neither turns nor burns; kept on it idles: k·PN and what the pump takes.
func TestEngineAtRest(t *testing.T) {
	text := throttled("M1 engine; rated_power: 100 kW; speed: 1480 rpm")
	r := steady(t, text+"at rest: stop\n", ramAxis, pushing(0, 0))
	if w, f, T := r.last(t, "M1.w"), r.last(t, "M1.fuel"), r.last(t, "M1.T"); w != 0 || f != 0 || math.Abs(T) > 1e-6 {
		t.Errorf("%g rad/s, %g W, %g N m while off", w, f, T)
	}
	r = steady(t, text, ramAxis, pushing(0, 0))
	near(t, "fuel", r.last(t, "M1.fuel"), 0.4*100e3+2.2*66.6*lpm*160e5, 1e-6)
}

func TestDrivesRefused(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{throttled(engine) + "FW1 flywheel; inertia: 1 kg m2\n", "is not described"},
		{strings.Replace(throttled(engine), "- M1.shaft P1.shaft", "M2 electric_motor; rated_power: 5 kW; efficiency: 0.9\n- M1.shaft M2.shaft P1.shaft", 1), "each give the same shaft a speed"},
	} {
		text := strings.Replace(c.text, "- M1.shaft P1.shaft", "- M1.shaft P1.shaft"+map[bool]string{true: " FW1.shaft"}[strings.Contains(c.text, "FW1")], 1)
		if k, found := Compile(build(t, text), ramAxis, pushing(0, 0)); k != nil || !strings.Contains(fmt.Sprint(found), c.want) {
			t.Errorf("want %q, got %v", c.want, found)
		}
	}
}

var motorRow = regexp.MustCompile(`M1 electric_motor; [^\n]*`)

// closesTo is a receiver that holds every step to a closure of 1e-9, beside what the leak
// that the balance ties its nodes with may take: a drive near its stall has no power
// to hide that in.
type closesTo struct {
	c     *Compiled
	q     float64 // flow scale
	fault string
}

func (r *closesTo) Sample(s *Sample) error {
	sum, size, top := 0.0, 1.0, 0.0
	for i, ch := range r.c.channels {
		size += math.Abs(s.Power[i])
		if ch.Role == Supply {
			sum += s.Power[i]
		} else {
			sum -= s.Power[i]
		}
		if ch.Role == Loss && s.Power[i] < -1e-3 {
			r.fault = fmt.Sprintf("%s %s makes %g W at %g s", ch.Block, ch.Kind, -s.Power[i], s.T)
		}
	}
	for i, g := range r.c.signals {
		if g.What == "p" {
			top = math.Max(top, math.Abs(s.Signals[i])/pressureScale)
		}
	}
	leaks := leak * top * top * pressureScale * r.q * float64(len(r.c.nodes))
	if math.Abs(sum) > 1e-9*size+leaks {
		r.fault = fmt.Sprintf("%g W of %g W missing at %g s", sum, size, s.T)
	}
	return nil
}

func TestDrivesInRandomCircuits(t *testing.T) {
	for name, change := range map[string]string{
		"motor":          "M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; torque_limit: 60 N m",
		"engine":         "M1 engine; rated_power: 10 kW; speed: 1480 rpm",
		"drooping":       "M1 engine; rated_power: 6 kW; speed: 1800 rpm; droop: 0.05; torque_rise: 0.5",
		"limited pumps":  "M1 engine; rated_power: 10 kW; speed: 1480 rpm",
		"strong engines": "M1 engine; rated_power: 90 kW; speed: 1480 rpm; droop: 0.04",
	} {
		slow, steps := 0, 0
		for seed := uint64(0); seed < 40; seed++ {
			text, axes, d, oil := generate(seed, tame)
			text = motorRow.ReplaceAllString(text, change)
			if name == "limited pumps" && strings.Contains(text, "control:") {
				text = strings.Replace(text, "P1 pump;", "P1 pump; power_limit: 9 kW;", 1)
			}
			k, found := Compile(build(t, text), axes, d)
			if k == nil {
				t.Fatalf("%s, seed %d refused: %v\n%s", name, seed, found, text)
			}
			c := &closesTo{c: k, q: k.flowScale(k.Defaults())}
			s := k.Series(d)
			w := k.NewWatch(k.Defaults(), s)
			_, cert, err := Run(context.Background(), k, k.Defaults(), s, oil, State{}, Receivers{c, w})
			if err != nil || cert.Unbalanced > 0 || c.fault != "" {
				t.Errorf("%s, seed %d: %v, %d of %d steps unbalanced; %s\n%s", name, seed, err, cert.Unbalanced, cert.Steps, c.fault, text)
			}
			steps += cert.Steps
			if w.drives[0].seconds > 0 {
				slow++
			}
		}
		t.Logf("%s: %d steps, %d of 40 circuits ask for more than the drive gives", name, steps, slow)
		if weak := name != "strong engines"; weak != (slow > 3) {
			t.Errorf("%s: %d circuits at the limit", name, slow)
		}
	}
}
