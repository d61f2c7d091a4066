package circuit

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

const gearBench = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
RV1 relief; crack: 150 bar; override: 0 bar per 100 L/min
- P1.S TK.T
- P1.P RV1.P
- RV1.T TK.T
`

const rpm = 2 * math.Pi / 60

// A pump of 40 cm³ without losses at 150 bar needs 40e-6/2π·150e5 = 95.493 N·m. Through
// a gearbox of 2 : 1 and 95 % (by hand): half the speed, 50.259 N·m at the motor, 5 % of
// the input lost.
func TestGearboxDrivesPump(t *testing.T) {
	text := gearBench + "P1 pump; displacement: 40 cm3/rev; case_share: 0" + lossless + "\nG1 gearbox; ratio: 2; efficiency: 95 %\n- M1.shaft G1.in\n- G1.out P1.shaft\n"
	o := observe(t, text, nil, still)
	within(t, "speed of the pump", o.sigAt(t, "P1.w", 1), 740*rpm, 1e-12)
	within(t, "speed of the motor", o.sigAt(t, "M1.w", 1), 1480*rpm, 1e-12)
	within(t, "torque of the motor", o.sigAt(t, "M1.T", 1), 40e-6/(2*math.Pi)*150e5/2/0.95, 1e-9)
	within(t, "torque at the output", o.sigAt(t, "G1.T_out", 1), 95.493, 1e-5)
	within(t, "loss", o.ledger.energy(Loss, "G1", "gearbox"), 0.05*o.sigAt(t, "M1.shaft", 1), 1e-9)
}

// Two gearboxes in a row act as one of the product, a gearbox turned round as one of
// the reciprocal; efficiencies multiply.
func TestGearboxesInARow(t *testing.T) {
	pump := gearBench + "P1 pump; displacement: 40 cm3/rev; case_share: 0\n"
	one := observe(t, pump+"G1 gearbox; ratio: 3; efficiency: 90 %\n- M1.shaft G1.in\n- G1.out P1.shaft\n", nil, still)
	for name, text := range map[string]string{
		"two in a row": "G1 gearbox; ratio: 1.5; efficiency: 100 %\nZ1 gearbox; ratio: 2; efficiency: 90 %\n- M1.shaft Z1.in\n- Z1.out G1.in\n- G1.out P1.shaft\n",
		"other names":  "Z1 gearbox; ratio: 1.5; efficiency: 90 %\nG1 gearbox; ratio: 2; efficiency: 100 %\n- M1.shaft Z1.in\n- Z1.out G1.in\n- G1.out P1.shaft\n",
	} {
		o := observe(t, pump+text, nil, still)
		for _, s := range []string{"M1.T", "P1.w", "P1.P.q", "M1.electric"} {
			if a, b := one.sigAt(t, s, 1), o.sigAt(t, s, 1); math.Abs(a-b) > 1e-9*math.Abs(a) {
				t.Errorf("%s: %s %g, want %g", name, s, b, a)
			}
		}
	}
	// Driven from its output it passes 2 − 1/η = 0.88889 of the power.
	round := observe(t, pump+"G1 gearbox; ratio: 0.3333333333333333; efficiency: 90 %\n- M1.shaft G1.out\n- G1.in P1.shaft\n", nil, still)
	within(t, "speed of the pump", round.sigAt(t, "P1.w", 1), one.sigAt(t, "P1.w", 1), 1e-9)
	within(t, "power passed", round.sigAt(t, "P1.shaft", 1)/round.sigAt(t, "M1.shaft", 1), 2-1/0.9, 1e-9)
}

// A lowered load drives the pump, and the pump the motor through the gearbox.
func TestGearboxDrivenBackwards(t *testing.T) {
	text := strings.Replace(c4, "- M1.shaft P1.shaft CP1.shaft", "G1 gearbox; ratio: 1; efficiency: 90 %\n- M1.shaft G1.in\n- G1.out P1.shaft CP1.shaft", 1)
	axes := drumAxis
	d := points("drum", 0.05, []float64{0, 1, 8, 9, 12, 13, 20, 21, 24},
		duty.Track{Of: "drum", What: duty.Speed, Values: []float64{0, 60, 60, 0, 0, -60, -60, 0, 0}},
		duty.Track{Of: "drum", What: duty.Load, Values: []float64{180, 180, 180, 180, 180, 180, 180, 180, 180}})
	o := observe(t, text, axes, d)
	for _, c := range []struct{ at, factor float64 }{{5, 1 / 0.9}, {16, 2 - 1/0.9}} {
		need := o.sigAt(t, "P1.T", c.at) + o.sigAt(t, "CP1.T", c.at)
		within(t, "torque of the motor", o.sigAt(t, "M1.T", c.at), need*c.factor, 1e-9)
		if want := math.Abs(need) * (1/0.9 - 1); math.Abs(math.Abs(o.sigAt(t, "M1.T", c.at)-need)-want) > 1e-9*want {
			t.Errorf("loss torque at %g s is not %g N·m", c.at, want)
		}
	}
	if o.sigAt(t, "M1.T", 16) >= 0 {
		t.Error("the load does not drive the motor")
	}
}

// A hydraulic motor behind a gearbox of its own kind and one with a gear in its data
// are one and the same: valve, gearbox, and a light motor that carries the axis.
const gearedDrive = `
TK tank
M1 electric_motor; rated_power: 30 kW; efficiency: 0.93
P1 pump; displacement: 45 cm3/rev; case_share: 0
RV1 relief; crack: 180 bar
V1 valve; follows: turn; nominal_flow: 60 L/min
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P
- RV1.T V1.T TK.T
- V1.A HM1.A CV1.out
- V1.B HM1.B CV2.out
CV1 check; opens: 0 bar
CV2 check; opens: 0 bar
- CV1.in CV2.in TK.T
`

const idler = "\nHM2 motor; axis: turn; hold: brake; displacement: 0.01 cm3/rev; case_share: 0" + lossless + "\n- HM2.A HM2.B TK.T\n"

var turnAxis = []duty.Axis{{Name: "turn", Kind: duty.Rotary}}

func turns() *duty.Duty {
	return points("turn", 0.02, []float64{0, 0.2, 2, 2.2, 3, 3.2, 5, 5.2, 6},
		duty.Track{Of: "turn", What: duty.Speed, Values: []float64{0, 12, 12, 0, 0, -12, -12, 0, 0}},
		duty.Track{Of: "turn", What: duty.Load, Values: []float64{300, 300, 400, 400, 300, 200, 150, 150, 300}})
}

func TestGearboxIsAGear(t *testing.T) {
	const motor = "HM1 motor; displacement: 50 cm3/rev; case_share: 0"
	a := observe(t, gearedDrive+motor+"; axis: turn; hold: brake; gear: 5; gear_efficiency: 0.92", turnAxis, turns())
	for name, text := range map[string]string{
		"gearbox":       "\nG1 gearbox; ratio: 5; efficiency: 0.92\n- HM1.shaft G1.in\n- G1.out HM2.shaft\n",
		"two gearboxes": "\nG1 gearbox; ratio: 2; efficiency: 1\nG2 gearbox; ratio: 2.5; efficiency: 0.92\n- HM1.shaft G1.in\n- G1.out G2.in\n- G2.out HM2.shaft\n",
	} {
		o := observe(t, gearedDrive+motor+idler+text, turnAxis, turns())
		for _, s := range []string{"HM1.A.p", "HM1.B.p", "HM1.w", "M1.electric", "V1.u"} {
			scale := 0.0
			for _, v := range a.sig[s] {
				scale = math.Max(scale, math.Abs(v))
			}
			for i, v := range a.sig[s] {
				// With its valve all but closed, what is left is the leak of the nodes, a share of the largest machine.
				if !a.axes[i][0].Standing && math.Abs(v-o.sig[s][i]) > 1e-4*scale {
					t.Fatalf("%s: %s is %g at %g s, with a gear in the motor %g", name, s, o.sig[s][i], a.t[i], v)
				}
			}
		}
		within(t, name+": loss", o.ledger.energy(Loss, "", "gearbox"), a.ledger.energy(Loss, "", "gearbox"), 1e-5)
	}
}

// With motion and command given, the load found behind a gearbox is that which was
// given with the motion before; whichever of the machines on the shaft is booked first.
func TestLoadBehindAGearbox(t *testing.T) {
	for _, id := range []string{"HM2", "AX"} {
		text := strings.ReplaceAll(gearedDrive+"HM1 motor; displacement: 50 cm3/rev; case_share: 0"+idler+"\nG1 gearbox; ratio: 5; efficiency: 0.92\n- HM1.shaft G1.in\n- G1.out HM2.shaft\n", "HM2", id)
		d := turns()
		d.Sampled = true
		base := observe(t, text, turnAxis, d)
		var speed []float64
		for _, a := range base.axes {
			speed = append(speed, a[0].Speed)
		}
		md := &duty.Duty{Name: "driven", Time: base.t, Sampled: true, Tracks: []duty.Track{
			{Of: "turn", What: duty.Speed, Values: speed}, {Of: "turn", What: duty.Command, Values: base.sig["V1.u"]}}}
		got := observe(t, text, turnAxis, md)
		compared := 0
		for i, a := range base.axes {
			if a[0].Standing {
				continue
			}
			compared++
			if v := got.axes[i][0].Load; math.Abs(v-a[0].Load) > 1e-3 {
				t.Fatalf("%s: at %g s the load is %g N·m, was %g", id, base.t[i], v, a[0].Load)
			}
		}
		if compared < 150 {
			t.Errorf("only %d steps compared", compared)
		}
	}
}

// A free shaft with a flywheel on the fast side of a gearbox runs down as one with
// i² times its inertia on the slow side (Newton; kinetic energy).
func TestFlywheelBehindAGearbox(t *testing.T) {
	bench := `
TK tank
HM1 motor; displacement: 50 cm3/rev; slip: 0; friction: 0; viscous: 0; drag: 2 N m
HM3 motor; axis: turn; hold: brake; displacement: 10 cm3/rev
M1 electric_motor; rated_power: 4 kW; efficiency: 0.9
P1 pump; displacement: 10 cm3/rev
V1 valve; follows: turn; nominal_flow: 60 L/min
RV1 relief; crack: 100 bar
- HM1.A HM1.B P1.S RV1.T V1.T TK.T
- M1.shaft P1.shaft
- P1.P V1.P RV1.P
- V1.A HM3.A
- V1.B HM3.B
`
	d := points("run down", 0.01, []float64{0, 10}, duty.Track{Of: "turn", What: duty.Speed, Values: []float64{0, 0}}, duty.Track{Of: "turn", What: duty.Load, Values: []float64{1, 1}})
	for name, text := range map[string]string{
		"outward": "FW1 flywheel; inertia: 0.5 kg m2; start_speed: 1000 rpm\nG1 gearbox; ratio: 0.5; efficiency: 1\n- HM1.shaft G1.in\n- G1.out FW1.shaft\n",
		"inward":  "FW1 flywheel; inertia: 0.5 kg m2; start_speed: 1000 rpm\nG1 gearbox; ratio: 2; efficiency: 1\n- HM1.shaft G1.out\n- G1.in FW1.shaft\n",
	} {
		k, found := Compile(build(t, bench+text), turnAxis, d)
		if k == nil {
			t.Fatalf("refused: %v", found)
		}
		r := &columns{c: k, sig: map[string][]float64{}}
		if _, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), trialOil, State{}, r); err != nil || cert.Unbalanced > 0 {
			t.Fatalf("%v %+v", err, cert)
		}
		for i, at := range r.t { // 2 N·m on the slow side are 1 N·m at the flywheel
			want := 1000*rpm - 1*at/0.5
			if math.Abs(r.sig["FW1.w"][i]-want) > 1e-6*want || math.Abs(r.sig["HM1.w"][i]-want/2) > 1e-6*want {
				t.Fatalf("%s: %g and %g rad/s at %g s, want %g and %g", name, r.sig["FW1.w"][i], r.sig["HM1.w"][i], at, want, want/2)
			}
		}
	}
}

func TestGearboxesAreChecked(t *testing.T) {
	pump := gearBench + "P1 pump; displacement: 40 cm3/rev\n"
	for text, want := range map[string]string{
		"G1 gearbox; ratio: 2\nG2 gearbox; ratio: 3\n- M1.shaft G1.in G2.in\n- G1.out G2.out P1.shaft\n":                                                                                     "closes a ring",
		"G1 gearbox; ratio: 2\n- M1.shaft P1.shaft G1.in G1.out\n":                                                                                                                           "closes a ring",
		"M2 electric_motor; rated_power: 4 kW; efficiency: 0.9\nG1 gearbox; ratio: 2\n- M1.shaft G1.in\n- G1.out M2.shaft P1.shaft\n":                                                        "keep one",
		"P2 pump; displacement: 10 cm3/rev\nG1 gearbox; ratio: 2\n- M1.shaft P1.shaft\n- G1.in P2.shaft\n- P2.S P2.P TK.T\n":                                                                 "not connected",
		"P2 pump; displacement: 10 cm3/rev\nP3 pump; displacement: 10 cm3/rev\nG1 gearbox; ratio: 2\n- M1.shaft P1.shaft\n- G1.in P2.shaft\n- G1.out P3.shaft\n- P2.S P2.P P3.S P3.P TK.T\n": "nothing drives",
		"G1 gearbox; ratio: 2; efficiency: 0.5\n- M1.shaft G1.in\n- G1.out P1.shaft\n":                                                                                                       "must be above",
	} {
		_, found := Compile(build(t, pump+text), nil, still)
		all := ""
		for _, f := range found {
			if f.Level == Stops {
				all += f.Text + "\n"
			}
		}
		if !strings.Contains(all, want) {
			t.Errorf("%s\ngives %q, want %q", text, all, want)
		}
	}
}

// An engine at its torque limit slows down behind a gearbox too: 40 cm³ at 150 bar need
// 95.493 N·m, 2 : 1 and 95 % make 50.259 N·m of it at the engine, which gives 45 N·m at
// its set speed and 30 % more at standstill: 45·(1 + 0.3·(1 − ω/n)) = 50.259 at
// ω = 0.61041·n.
func TestGearboxBehindAnEngine(t *testing.T) {
	text := strings.Replace(gearBench, "M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm", "M1 engine; rated_power: 10 kW; speed: 1500 rpm; torque_limit: 45 N m; torque_rise: 0.3", 1)
	o := observe(t, text+"P1 pump; displacement: 40 cm3/rev; case_share: 0"+lossless+"\nG1 gearbox; ratio: 2; efficiency: 95 %\n- M1.shaft G1.in\n- G1.out P1.shaft\n", nil, still)
	within(t, "torque of the engine", o.sigAt(t, "M1.T", 1), 50.2593, 1e-5)
	within(t, "speed of the engine", o.sigAt(t, "M1.w", 1), 0.610411*1500*rpm, 1e-4)
}
