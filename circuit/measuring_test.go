package circuit

import (
	"math"
	"strings"
	"testing"
)

const coolerBench = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 40 cm3/rev; case_share: 0; slip: 0
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P CO1.%IN
- CO1.%OUT TK.T
`

// 59.2 L/min through a cooler of 1.2 bar at 40 L/min, 30 % laminar: by hand
// 1.2·(0.3·1.48 + 0.7·1.48²) = 2.372736 bar, both ways. A bypass at 1.5 bar takes what
// the core would need more pressure for, a hundredth of it on top; it does not open backwards.
func TestCooler(t *testing.T) {
	const core = 2.372736e5
	for _, c := range []struct {
		in, out, more string
		dp            float64
	}{
		{"A", "B", "", core}, {"B", "A", "", core},
		{"A", "B", "; bypass: 1.5 bar", 1.5e5 + 0.01*(core-1.5e5)}, {"B", "A", "; bypass: 1.5 bar", core},
	} {
		o := observe(t, strings.NewReplacer("%IN", c.in, "%OUT", c.out).Replace(coolerBench)+"CO1 cooler; nominal_flow: 40 L/min; nominal_drop: 1.2 bar"+c.more, nil, still)
		within(t, "pressure before", o.sigAt(t, "CO1."+c.in+".p", 1), c.dp, 1e-6)
		within(t, "loss", o.ledger.energy(Loss, "CO1", "cooler"), c.dp*59.2e-3/60, 1e-6)
	}
}

// Measuring points read what is there and change nothing but the drop they are given;
// a pressure point also reads a signal line.
func TestMeasuringPoints(t *testing.T) {
	bare := observe(t, ramBench+bothPorts+"C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm", ramAxis, ramDuty)
	read := func(meter string) *observed {
		text := strings.Replace(ramBench, "- V1.T TK.T", "- V1.T Q1.A\n- Q1.B TK.T", 1) + "- V1.A C1.A X1.P\n- V1.B C1.B\n- V1.LS X2.P\nX1 pressure_point\nX2 pressure_point\nQ1 flow_point" + meter
		return observe(t, text+"\nC1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm", ramAxis, ramDuty)
	}
	o := read("")
	for _, s := range []string{"C1.A.p", "C1.B.p", "C1.v", "M1.electric"} {
		for i, v := range bare.sig[s] {
			if math.Abs(v-o.sig[s][i]) > 1e-8*(1e5+math.Abs(v)) {
				t.Fatalf("%s is %g at %g s, without measuring points %g", s, o.sig[s][i], o.t[i], v)
			}
		}
	}
	for i := range o.t {
		if o.sig["X1.P.p"][i] != o.sig["C1.A.p"][i] {
			t.Fatalf("the point reads %g, the cylinder has %g", o.sig["X1.P.p"][i], o.sig["C1.A.p"][i])
		}
		if a, b := o.sig["Q1.A.q"][i], -o.sig["V1.T.q"][i]; math.Abs(a-b) > 1e-15 || a != -o.sig["Q1.B.q"][i] {
			t.Fatalf("the meter reads %g, the valve gives %g", a, b)
		}
	}
	if v := o.sigAt(t, "X2.P.p", 1); v != o.sigAt(t, "C1.A.p", 1) {
		t.Errorf("the signal line reads %g", v)
	}
	if E := o.ledger.energy(Loss, "Q1", ""); math.Abs(E) > 1e-3 {
		t.Errorf("a lossless meter loses %g J", E)
	}
	// 0.5 bar at 30 L/min: the drop goes with the square.
	o = read("; nominal_flow: 30 L/min; nominal_drop: 0.5 bar")
	q := o.sigAt(t, "Q1.A.q", 1)
	within(t, "drop", o.sigAt(t, "Q1.A.p", 1)-o.sigAt(t, "Q1.B.p", 1), 0.5e5*math.Pow(q*6e4/30, 2), 1e-5)
}
