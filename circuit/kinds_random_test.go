package circuit

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// openCircuit draws a valve and a cylinder of any kind, with or without ends to its
// stroke, behind a gearbox; cooler and meter in the return; a flow divider before or
// behind the valve. n is what the parameters spread about 1 by.
func openCircuit(r *rand.Rand) (text string, d *duty.Duty) {
	about := func(x float64) float64 { return x * math.Pow(10, 0.8*(r.Float64()-0.5)) }
	var t strings.Builder
	row := func(format string, args ...any) { fmt.Fprintf(&t, format+"\n", args...) }
	row("TK tank")
	row("M1 electric_motor; rated_power: 30 kW; efficiency: 0.93")
	row("G1 gearbox; ratio: %g; efficiency: %g", about(1), 0.9+0.1*r.Float64())
	row("P1 pump; displacement: %g cm3/rev; case_share: 0", about(45))
	row("RV1 relief; crack: %g bar; override: %g bar per 100 L/min", 100+150*r.Float64(), about(10))
	row("CO1 cooler; nominal_flow: %g L/min%s", about(60), []string{"", "; bypass: 1 bar"}[r.IntN(2)])
	row("Q1 flow_point; nominal_drop: %g bar", 0.3*float64(r.IntN(2)))
	row("X1 pressure_point")
	row("V1 valve; follows: ram; nominal_flow: %g L/min", about(60))
	row("- M1.shaft G1.in\n- G1.out P1.shaft\n- P1.S RV1.T TK.T\n- V1.T Q1.A\n- Q1.B CO1.A\n- CO1.B TK.T")
	pump, a := "V1.P", "V1.A"
	if side := r.IntN(3); side > 0 { // a divider whose other side goes over a relief valve
		row("FD1 flow_divider; displacement: %g cm3/rev; ratio: %g", about(15), 0.2+0.6*r.Float64())
		row("RV2 relief; crack: %g bar\nMU1 check; opens: 0 bar\n- FD1.B RV2.P MU1.out\n- RV2.T MU1.in TK.T", 20+100*r.Float64())
		if side == 1 {
			row("- FD1.A V1.P")
			pump = "FD1.P"
		} else {
			row("- V1.A FD1.P")
			a = "FD1.A"
		}
	}
	row("- P1.P RV1.P X1.P %s", pump)
	bore := about(80)
	ends := ""
	if r.IntN(2) == 0 {
		stroke := about(0.3)
		ends = fmt.Sprintf("; stroke: %g m; start: %g m", stroke, stroke*r.Float64())
	}
	common := fmt.Sprintf("axis: ram; hold: %s; friction: %g N; viscous: 1500 N s/m; pressure_friction: %g; mass: %g kg%s", []string{"valve", "brake"}[r.IntN(2)], 800*float64(r.IntN(2)), 0.02*float64(r.IntN(2)), 300*float64(r.IntN(2)), ends)
	row("MA1 check; opens: 0 bar\n- %s C1.A MA1.out", a)
	switch r.IntN(3) {
	case 0:
		row("C1 plunger; %s; diameter: %g mm", common, bore)
		row("- V1.B MA1.in TK.T")
	case 1:
		row("C1 double_rod; %s; bore: %g mm; rod: %g mm; back_rod: %g mm", common, bore, bore*(0.1+0.7*r.Float64()), bore*0.8*r.Float64())
		row("MB1 check; opens: 0 bar\n- V1.B C1.B MB1.out\n- MA1.in MB1.in TK.T")
	default:
		row("C1 cylinder; %s; bore: %g mm; rod: %g mm", common, bore, bore*(0.1+0.7*r.Float64()))
		row("MB1 check; opens: 0 bar\n- V1.B C1.B MB1.out\n- MA1.in MB1.in TK.T")
	}
	v1, v2 := about(0.1), -about(0.1)
	f := about(3 * bore * bore)
	f1, f2 := f*r.Float64(), f*(r.Float64()-0.2)
	return t.String(), points("random", 0.05, []float64{0, 0.1, 1, 1.1, 2, 2.1, 3, 3.1, 4},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, v1, v1, 0, 0, v2, v2, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{f1, f1, f2, f2, f2, f1, f1, f2, f2}})
}

// closedCircuit draws a winch in a closed circuit with flushing, and gearboxes on either side.
func closedCircuit(r *rand.Rand) (text string, d *duty.Duty) {
	about := func(x float64) float64 { return x * math.Pow(10, 0.6*(r.Float64()-0.5)) }
	text = fmt.Sprintf(`
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.930
G1 gearbox; ratio: %g; efficiency: %g
P1 pump; displacement: %g cm3/rev; follows: drum; both_directions: yes
CP1 charge_pump; displacement: %g cm3/rev; charge: 20 bar
CV1 check; opens: 0 bar
CV2 check; opens: 0 bar
FV1 flushing; opens: %g bar; override: %g bar per 100 L/min; nominal_flow: %g L/min
RV1 relief; crack: 300 bar
RV2 relief; crack: 300 bar
HM1 motor; displacement: %g cm3/rev
G2 gearbox; ratio: %g; efficiency: %g
HM2 motor; axis: drum; hold: %s; displacement: 0.1 cm3/rev; drag: 0.1 N m
- M1.shaft G1.in
- G1.out P1.shaft CP1.shaft
- HM1.shaft G2.in
- G2.out HM2.shaft
- CP1.S CP1.T FV1.T HM2.A HM2.B TK.T
- CP1.P CV1.in CV2.in
- P1.P HM1.A CV1.out FV1.A RV1.P RV2.T
- P1.S HM1.B CV2.out FV1.B RV2.P RV1.T
`, about(1), 0.9+0.1*r.Float64(), about(71), about(16), 10+9*r.Float64(), about(10), about(8), about(80), about(3), 0.85+0.15*r.Float64(), []string{"pump", "brake"}[r.IntN(2)])
	w, load := about(15), about(300)
	l1, l2 := load*(r.Float64()-0.3), load*(r.Float64()-0.3)
	return text, points("drum", 0.1, []float64{0, 1, 3, 4, 5, 6, 8, 9, 10},
		duty.Track{Of: "drum", What: duty.Speed, Values: []float64{0, w, w, 0, 0, -w, -w, 0, 0}},
		duty.Track{Of: "drum", What: duty.Load, Values: []float64{l1, l1, l2, l2, l2, l1, l1, l2, l2}})
}

// Every step of random circuits is balanced and closes, no block makes energy, and no
// piston leaves its stroke.
func TestRandomCircuitsOfMoreKinds(t *testing.T) {
	const seeds = 60
	steps, unsolved, stopped := 0, 0, 0
	for seed := uint64(0); seed < 2*seeds; seed++ {
		r := rand.New(rand.NewPCG(seed/2, 11))
		draw, axes := openCircuit, ramAxis
		if seed%2 == 1 {
			draw, axes = closedCircuit, drumAxis
		}
		text, d := draw(r)
		k, found := Compile(build(t, text), axes, d)
		if k == nil {
			t.Fatalf("seed %d refused: %v\n%s", seed, found, text)
		}
		s := k.Series(d)
		closure, w := &stepClosure{c: k}, k.NewWatch(k.Defaults(), s)
		l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
		_, cert, err := Run(context.Background(), k, k.Defaults(), s, trialOil, State{}, Receivers{closure, w, l})
		if err != nil {
			t.Fatalf("seed %d: %v\n%s", seed, err, text)
		}
		steps, unsolved = steps+cert.Steps, unsolved+cert.Unbalanced
		if cert.Unbalanced > 0 {
			t.Logf("seed %d: %+v\n%s", seed, cert.Unsolved, text)
			continue
		}
		if closure.worst > 1e-9 {
			t.Errorf("seed %d: closure %g at %g s\n%s", seed, closure.worst, closure.at, text)
		}
		for i, ch := range k.channels {
			if ch.Role == Loss && l.E[i] < -1e-6*l.in {
				t.Errorf("seed %d: %s %s makes energy: %g J", seed, ch.Block, ch.Kind, l.E[i])
			}
		}
		b := k.circuit.Block("C1")
		if b == nil || b.Values["start"].SI == 0 {
			continue
		}
		stroke, start := b.Values["stroke"].SI, b.Values["start"].SI
		if a := w.axes[0]; start+a.lo < -2*endSlack*stroke || start+a.hi > stroke*(1+2*endSlack) {
			t.Errorf("seed %d: from %g to %g m, stroke %g m", seed, start+a.lo, start+a.hi, stroke)
		}
		if w.axes[0].end != 0 {
			stopped++
		}
	}
	t.Logf("%d steps, %d unsolved; %d pistons ran against an end", steps, unsolved, stopped)
	if unsolved > 0 {
		t.Errorf("%d of %d steps unsolved", unsolved, steps)
	}
	if stopped < 5 {
		t.Errorf("only %d pistons ran against an end", stopped)
	}
}
