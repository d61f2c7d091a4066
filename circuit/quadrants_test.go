package circuit

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/machines"
)

// 150 N m at 40 rad/s come down: 6 kW at the shaft, less the loss of the motor by its law, go where the drive sends them:
// back through a motor on the mains, into the resistor of a plain converter, less its loss, or through an active
// front end. Slip lets the motor on the mains turn faster than its field. By hand.
func TestPowerComingBack(t *testing.T) {
	const drive = "M1 electric_motor; rated_power: 11 kW; efficiency: 0.914; speed: 1480 rpm"
	w := 1480 * rpm
	T := -6e3 / w
	back := 6e3 - 11e3*(1/0.914-1)*(0.35+0.65*math.Pow(T*w/11e3, 2))
	conv := 15e3 * (0.0178 + 0.0153*back/15e3 + 0.0005*math.Pow(back/15e3, 2)) // the row of 20 hp, typed
	const U = "\nU1 converter; rated_power: 15 kW; no_load: 0.0178; linear: 0.0153; square: 0.0005; returned: %s\n- U1.M M1.E"
	for _, c := range []struct {
		name, drive                 string
		returned, resistor, exactly float64
	}{
		{"mains", drive, back, 0, 1e-9},
		{"resistor", drive + fmt.Sprintf(U, "resistor"), 0, back - conv, 1e-9},
		{"active front end", drive + fmt.Sprintf(U, "mains"), back - conv, 0, 1e-9},
	} {
		o := observe(t, fmt.Sprintf(winchOn, c.drive), drumAxis, lowering(-40))
		if math.Abs(o.ledger.out-c.returned) > 1e-6*back {
			t.Errorf("%s: %g J returned, want %g J", c.name, o.ledger.out, c.returned)
		}
		if R := o.ledger.energy(Loss, "U1", "brake resistor"); math.Abs(R-c.resistor) > 1e-6*back {
			t.Errorf("%s: %g J in the resistor, want %g J", c.name, R, c.resistor)
		}
		near(t, c.name+": work", o.ledger.energy(Work, "HM1", ""), -6e3, 1e-9)
	}
	o := observe(t, fmt.Sprintf(winchOn, drive+"; slip: yes"), drumAxis, lowering(-40))
	TN := 11e3 / w
	want := zero(1500*rpm, 1600*rpm, func(x float64) float64 { return (x-1500*rpm)/(20*rpm)*TN - 6e3/x })
	near(t, "speed as a generator", o.last(t, "M1.w"), want, 1e-7)
	// The resistor's gate: mean power against what it stands.
	o = observe(t, fmt.Sprintf(winchOn, drive+fmt.Sprintf(U, "resistor; resistor_power: 4 kW")), drumAxis, lowering(-40))
	g := gateNamed(t, o.watch, "mean power of the brake resistor")
	near(t, "mean power of the resistor", g.Value, back-conv, 1e-9)
	if g.Passed || !strings.Contains(fmt.Sprint(o.watch.Findings()), "its brake resistor takes") {
		t.Errorf("%+v", g)
	}
}

// Two winches on one link, one down at 6 kW and one up at 6 kW: what comes back feeds the neighbour first; only the losses
// are drawn and nothing reaches the resistor. The converter loses by Σ|P|.
func TestNeighbourOnTheLink(t *testing.T) {
	one := fmt.Sprintf(winchOn, "M1 electric_motor; rated_power: 11 kW; efficiency: 0.914; speed: 1480 rpm")
	r := strings.NewReplacer("M1", "M2", "P1 ", "P2 ", "P1.", "P2.", "LP2", "LP2", "HM1", "HM2", "CV1", "CV3", "CV2", "CV4", "drum", "reel")
	two := r.Replace(one)
	two = strings.ReplaceAll(strings.ReplaceAll(two, "LP1 pressure", "LP2 pressure"), "LP1.P", "LP2.P")
	text := one + two + "U1 converter; rated_power: 15 kW\n- U1.M M1.E M2.E\n"
	axes := append(append([]duty.Axis(nil), drumAxis...), duty.Axis{Name: "reel", Kind: duty.Rotary})
	d := lowering(-40)
	d.Tracks = append(d.Tracks, duty.Track{Of: "reel", What: duty.Speed, Values: []float64{40, 40}}, duty.Track{Of: "reel", What: duty.Load, Values: []float64{150, 150}})
	o := observe(t, text, axes, d)
	loss := 11e3 * (1/0.914 - 1) * (0.35 + 0.65*math.Pow(6.0/11, 2))
	given, taken := 6e3-loss, 6e3+loss
	near(t, "given by the load", o.last(t, "M1.electric"), -given, 1e-6)
	near(t, "passed on the link", o.last(t, "U1.link"), given, 1e-6)
	if R := o.ledger.energy(Loss, "U1", "brake resistor"); R != 0 {
		t.Errorf("%g J in the resistor", R)
	}
	conv := o.ledger.energy(Loss, "U1", "converter")
	near(t, "drawn", o.ledger.in, taken-given+conv, 1e-6)
	if alone := 15e3 * 0.02; !(conv > alone) {
		t.Errorf("the converter loses %g W for %g W that pass", conv, given+taken)
	}
}

// rectified is a rig that a float drives: a double-rod cylinder, four check valves, a motor and a generator whose torque is
// commanded. No losses but those named.
const rectified = `
TK tank
C1 double_rod; axis: float; hold: valve; bore: 80 mm; rod: 40 mm; friction: 0 N; viscous: 0 N s/m
CK1 check; opens: 0 bar; nominal_drop: 0 bar
CK2 check; opens: 0 bar; nominal_drop: 0 bar
CK3 check; opens: 0 bar; nominal_drop: 0 bar
CK4 check; opens: 0 bar; nominal_drop: 0 bar
RV1 relief; crack: 300 bar
HM1 motor; displacement: 28 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
U1 converter; rated_power: 15 kW; returned: mains
M1 electric_motor; rated_power: 11 kW; efficiency: 0.914; speed: 1500 rpm; max_speed: 3000 rpm; torque_limit: 70 N m; commands: torque; follows: float
- C1.A CK1.in CK3.out
- C1.B CK2.in CK4.out
- CK1.out CK2.out HM1.A RV1.P
- CK3.in CK4.in HM1.B RV1.T TK.T
- HM1.shaft M1.shaft
- U1.M M1.E
`

var floatAxis = []duty.Axis{{Name: "float", Kind: duty.Linear}}

// swell is an irregular motion that turns back again and again, with a command to the generator.
func swell() *duty.Duty {
	var at, v, c []float64
	for i := range 121 {
		t := float64(i) / 4
		x := 2 * math.Pi * t / 30
		at, v = append(at, t), append(v, 0.12*math.Sin(5*x)+0.1*math.Sin(8*x+1)-0.1*math.Sin(1)*math.Cos(x)+0.06*math.Sin(11*x))
		c = append(c, -0.5-0.3*math.Sin(3*x))
	}
	v[120] = v[0]
	return points("swell", 0.05, at, duty.Track{Of: "float", What: duty.Speed, Values: v}, duty.Track{Of: "float", What: duty.Command, Values: c})
}

// Motion and control given, the load is found: p = T·2π/V with T = command·70 N m, F = −p·A·sign v; the shaft turns at
// ω = |v|·A/D whichever way the float moves. By hand.
func TestFloatDrivesGenerator(t *testing.T) {
	d := swell()
	o := observe(t, rectified, floatAxis, d)
	A, D := math.Pi/4*(0.08*0.08-0.04*0.04), 28e-6/turn
	turned, n := map[bool]bool{}, 0
	for i := range o.t {
		v, w, T, F := o.sig["C1.v"][i], o.sig["M1.w"][i], o.sig["M1.T"][i], o.sig["C1.F"][i]
		if math.Abs(v) < 0.01 {
			continue
		}
		n++
		turned[v > 0] = true
		near(t, "speed", w, math.Abs(v)*A/D, 1e-6)
		if p := -T / D; p < 295e5 {
			near(t, "load", F, -machines.Sign(v)*p*A, 1e-5)
		}
	}
	if n < 300 || len(turned) != 2 {
		t.Errorf("%d steps, both ways %v", n, turned)
	}
	k := o.sigAt(t, "M1.T", 5)
	near(t, "torque commanded", k, 70*(-0.5-0.3*math.Sin(3*2*math.Pi*5/30)), 1e-6)
	work := o.ledger.energy(Work, "", "")
	if !(work < 0 && o.ledger.out > 0.5*-work && o.ledger.out < -work) {
		t.Errorf("work %g J, returned %g J", work, o.ledger.out)
	}
	g := gateNamed(t, o.watch, "highest speed")
	if !g.Passed || g.Limit != 3000*rpm {
		t.Errorf("%+v", g)
	}
	// What the generator does not hold back runs away: a finding.
	fast := observe(t, strings.Replace(rectified, "max_speed: 3000 rpm", "max_speed: 1000 rpm", 1), floatAxis, d)
	if s := fmt.Sprint(fast.watch.Findings()); !strings.Contains(s, "above its highest speed of 1000") {
		t.Errorf("findings: %s", s)
	}
}

// The same float on a pump in a closed loop whose generator turns both ways, its torque against the motion: over centre
// without valves.
func TestFloatOverCentre(t *testing.T) {
	text := `
LP1 pressure_source; pressure: 10 bar
C1 double_rod; axis: float; hold: valve; bore: 80 mm; rod: 40 mm; friction: 0 N; viscous: 0 N s/m
CV1 check; opens: 0 bar; nominal_drop: 0 bar
CV2 check; opens: 0 bar; nominal_drop: 0 bar
P1 pump; displacement: 28 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
U1 converter; rated_power: 15 kW; returned: mains
M1 electric_motor; rated_power: 11 kW; efficiency: 0.914; speed: 1500 rpm; max_speed: 3000 rpm; torque_limit: 70 N m; commands: torque; follows: float; both_directions: yes
- P1.P C1.A CV1.out
- P1.S C1.B CV2.out
- LP1.P CV1.in CV2.in
- P1.shaft M1.shaft
- U1.M M1.E
`
	d := swell()
	v := d.Tracks[0].Values
	for i := range d.Tracks[1].Values {
		d.Tracks[1].Values[i] = -0.8 * math.Max(-1, math.Min(1, v[i]/0.05))
	}
	o := observe(t, text, floatAxis, d)
	A, D := math.Pi/4*(0.08*0.08-0.04*0.04), 28e-6/turn
	for i := range o.t {
		if v, T := o.sig["C1.v"][i], o.sig["M1.T"][i]; math.Abs(v) > 0.06 {
			near(t, "speed", o.sig["M1.w"][i], v*A/D, 1e-6)
			if T*v >= 0 || math.Abs(T) > 0.8*70*(1+1e-9) {
				t.Errorf("%g N m at %g m/s", T, v)
			}
			near(t, "load", o.sig["C1.F"][i], T/D*A, 1e-5)
		}
	}
	if work := o.ledger.energy(Work, "", ""); !(work < 0 && o.ledger.out > 0.5*-work && o.ledger.out < -work) {
		t.Errorf("work %g J, returned %g J", work, o.ledger.out)
	}
}

// No block makes energy in any quadrant, and every step closes: random circuits under drives that slip, idle, or hang on a
// converter.
func TestNewDrivesInRandomCircuits(t *testing.T) {
	for name, change := range map[string]string{
		"slip":  "M1 electric_motor; rated_power: 22 kW; efficiency_class: IE3; slip: yes",
		"class": "M1 electric_motor; rated_power: 30 kW; efficiency_class: IE2; poles: 4; speed: 1470 rpm",
		"idle":  "M1 electric_motor; rated_power: 22 kW; efficiency_class: IE4; idle_speed: 600 rpm\nU1 converter; rated_power: 30 kW\n- U1.M M1.E",
		"servo": "M1 electric_motor; rated_power: 22 kW; type: permanent_magnet; torque_constant: 2 N m/A; resistance: 0.1 ohm; speed_loss: 400 W\nU1 converter; rated_power: 30 kW\n- U1.M M1.E",
	} {
		for seed := uint64(0); seed < 25; seed++ {
			text, axes, d, oil := generate(seed, tame)
			text = motorRow.ReplaceAllString(text, change)
			k, found := Compile(build(t, text), axes, d)
			if k == nil {
				t.Fatalf("%s, seed %d refused: %v\n%s", name, seed, found, text)
			}
			c := &closesTo{c: k, q: k.flowScale(k.Defaults())}
			_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), oil, State{}, c)
			if err != nil || cert.Unbalanced > 0 || c.fault != "" {
				t.Errorf("%s, seed %d: %v, %d of %d steps unbalanced; %s\n%s", name, seed, err, cert.Unbalanced, cert.Steps, c.fault, text)
			}
		}
	}
}

// A winch of gear 30 at 95 % hoists 4 kN m with a motor of 63 cm³: T = 4000/(30·0.95) = 140.35 N m, at a starting torque of
// 0.8 of the ideal one Δp = T·2π/(V·0.8) = 174.97 bar. Relief valves at 280 bar let it, at 160 bar not. A load that
// drives asks for nothing.
func TestBreakAway(t *testing.T) {
	text := fmt.Sprintf(winchOn, "M1 electric_motor; rated_power: 18.5 kW; efficiency: 0.926")
	text = strings.Replace(text, "HM1 motor; axis: drum; hold: pump; displacement: 80 cm3/rev", "HM1 motor; axis: drum; hold: brake; gear: 30; gear_efficiency: 0.95; displacement: 63 cm3/rev", 1)
	text = strings.Replace(text, "P1.P HM1.A", "P1.P HM1.A RV1.P RV2.T", 1)
	text = strings.Replace(text, "P1.S HM1.B", "P1.S HM1.B RV1.T RV2.P", 1)
	duty := points("hoist", 0.1, []float64{0, 1, 1, 2, 5, 6, 6, 9},
		duty.Track{Of: "drum", What: duty.Speed, Values: []float64{0, 0, 0, 2.4, 2.4, 0, 0, 0}},
		duty.Track{Of: "drum", What: duty.Load, Values: []float64{4e3, 4e3, 4e3, 4e3, 4e3, 4e3, 4e3, 4e3}})
	need := 4000 / (30 * 0.95) / (63e-6 / turn * 0.8)
	for _, c := range []struct {
		bar    string
		passes bool
	}{{"280 bar", true}, {"160 bar", false}} {
		valves := "RV1 relief; crack: " + c.bar + "\nRV2 relief; crack: " + c.bar + "\n"
		o := observe(t, text+valves, drumAxis, duty)
		g := gateNamed(t, o.watch, "pressure to break away")
		near(t, "asked", g.Value, need, 1e-9)
		near(t, "there", g.Limit, map[bool]float64{true: 280e5, false: 160e5}[c.passes], 1e-12)
		if g.Passed != c.passes || strings.Contains(fmt.Sprint(o.watch.Findings()), "does not break away at 1.001") == c.passes {
			t.Errorf("%s: %+v, %v", c.bar, g, o.watch.Findings())
		}
	}
	down := *duty
	down.Tracks = append(down.Tracks[:0:0], duty.Tracks...)
	down.Tracks[0].Values = []float64{0, 0, 0, -2.4, -2.4, 0, 0, 0}
	o := observe(t, text+"RV1 relief; crack: 160 bar\nRV2 relief; crack: 160 bar\n", drumAxis, &down)
	for _, g := range o.watch.Gates() {
		if g.Name == "pressure to break away" {
			t.Errorf("lowering asks for %+v", g)
		}
	}
}
