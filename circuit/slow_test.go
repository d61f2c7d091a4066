package circuit

import (
	"context"
	"math"
	"testing"

	"barlitre/circuit/duty"
)

// Trial circuit C6: pump of 16 cm³/rev, unloading valve between 150 and 180 bar,
// accumulator of 20 L with 110 bar absolute, valve and cylinder of C1.
const c6 = `
TK tank
M1 electric_motor; rated_power: 7.5 kW; efficiency: 0.9; speed: 1480 rpm; loss: power
P1 pump; displacement: 16 cm3/rev; case_share: 0
UV1 unloading; unloads: 180 bar; loads: 150 bar; unloaded_drop: 3 bar; opens: 0 bar; nominal_drop: 0 bar
AC1 accumulator; volume: 20 L; precharge: 108.98675 bar; gas_temperature: 20 C; exponent: 1.3; start_pressure: 150 bar
RV1 relief; crack: 200 bar; override: 10 bar per 100 L/min
V1 valve; follows: ram; nominal_flow: 60 L/min; nominal_drop: 5 bar
F1 filter; nominal_flow: 60 L/min; nominal_drop: 1 bar; linear_share: 0
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; friction: 800 N; viscous: 1500 N s/m
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P UV1.P RV1.P
- UV1.T TK.T
- UV1.A AC1.P V1.P
- RV1.T TK.T
- V1.A C1.A
- V1.B C1.B
- V1.T F1.A
- F1.B TK.T
`

// The period of C6 is two cycles of 12 s, found by the program.
func TestAccumulatorCircuitFindsItsPeriod(t *testing.T) {
	k, found := Compile(build(t, c6), ramAxis, ramDuty)
	if k == nil {
		t.Fatal(found)
	}
	l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
	s := k.Series(ramDuty)
	w := k.NewWatch(k.Defaults(), s)
	n, _, cert, err := RunPeriodic(context.Background(), k, k.Defaults(), s, trialOil, Receivers{}, Receivers{l, w})
	if err != nil {
		t.Fatal(err)
	}
	if n != 2 {
		t.Errorf("the period has %d cycles, want 2 (independent dynamic calculation, trial circuit C6: it repeats after 24 s)", n)
	}
	if cert.Unbalanced > 0 || l.closure() > 1e-9 {
		t.Errorf("%d unbalanced, closure %g", cert.Unbalanced, l.closure())
	}
	// Over a period the gas gives back what it took, up to the step of the integration.
	if st := l.energy(Stored, "AC1", ""); math.Abs(st) > 2e-3*l.in {
		t.Errorf("%g J stay in the gas of %g J drawn", st, l.in)
	}
	lo, hi := math.Inf(1), 0.0
	for i, sig := range k.signals {
		if sig.Name == "AC1.P.p" {
			lo, hi = w.ext.min[i], w.ext.max[i]
		}
	}
	// It switches at 180 bar; below 150 bar it falls a little further while the cylinder takes more than the pump gives.
	if lo < 145e5 || lo > 150e5 || math.Abs(hi-180e5) > 1e3 {
		t.Errorf("accumulator between %g and %g bar, want just below 150 to 180", lo/1e5, hi/1e5)
	}
	// The first cycle alone, from 150 bar, draws far more: it also charges the accumulator.
	first, _ := run1(t, build(t, c6), ramAxis, ramDuty, trialOil)
	if share := first.in / (l.in / float64(n)); share < 1.3 || share > 1.5 {
		t.Errorf("the first cycle draws %g times the average of the period; an independent calculation has 1.41", share)
	}
}

// Usable volumes of an accumulator by the gas law with absolute pressures: 20 L,
// 110 bar absolute, from 150 to 180 bar gauge give 2.4145 L isothermal, 2.0393 L
// with n = 1.3 and 1.9363 L with n = 1.4 (by hand, 1.01325 bar).
func TestGasLaw(t *testing.T) {
	for _, c := range []struct{ n, want float64 }{{1, 2.4145e-3}, {1.3, 2.0393e-3}, {1.4, 1.9363e-3}} {
		g := gas{p0: 110e5, v0: 20e-3, n: c.n}
		if got := g.volumeAt(150e5) - g.volumeAt(180e5); math.Abs(got-c.want) > 1e-4*c.want {
			t.Errorf("n = %g: %.5g L, want %.5g L", c.n, got*1e3, c.want*1e3)
		}
	}
	// Sullivan, Fluid Power, 4th ed., ex. 12.5 p. 300: 5 gal between 3000 and 2000 psig from 1500 psig, n = 1.4: V1 = 5660.76 in³ of gas at pre-charge.
	const psi, in3 = 6894.757, 16.387064e-6
	atm := 14.7 * psi
	v2 := 1155 * in3 / (math.Pow((3000*psi+atm)/(2000*psi+atm), 1/1.4) - 1)
	v1 := v2 * math.Pow((3000*psi+atm)/(1500*psi+atm), 1/1.4)
	if math.Abs(v2/in3-3462.28) > 2 || math.Abs(v1/in3-5660.76) > 3 {
		t.Errorf("V2 = %.2f in³, V1 = %.2f in³, want 3462.28 and 5660.76", v2/in3, v1/in3)
	}
	g := gas{p0: 1500*psi + 101325, v0: v1, n: 1.4}
	if got := g.volumeAt(2000*psi) - g.volumeAt(3000*psi); math.Abs(got/in3-1155) > 1 {
		t.Errorf("delivers %.2f in³, want 1155", got/in3)
	}
}

// A flywheel on a free shaft runs down by friction alone: with only constant
// friction Tc the speed falls as Tc·t/J (Newton).
func TestFlywheelRunsDown(t *testing.T) {
	const text = `
TK tank
HM1 motor; displacement: 50 cm3/rev; slip: 0; friction: 0; viscous: 0; drag: 2 N m
HM2 motor; axis: turn; hold: brake; displacement: 10 cm3/rev
M1 electric_motor; rated_power: 4 kW; efficiency: 0.9
P1 pump; displacement: 10 cm3/rev
V1 valve; follows: turn; nominal_flow: 60 L/min
RV1 relief; crack: 100 bar
FW1 flywheel; inertia: 0.5 kg m2; start_speed: 1000 rpm
- HM1.shaft FW1.shaft
- HM1.A TK.T
- HM1.B TK.T
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P V1.P RV1.P
- RV1.T TK.T
- V1.A HM2.A
- V1.B HM2.B
- V1.T TK.T
`
	axes := []duty.Axis{{Name: "turn", Kind: duty.Rotary}}
	d := points("run down", 0.01, []float64{0, 10}, duty.Track{Of: "turn", What: duty.Speed, Values: []float64{0, 0}}, duty.Track{Of: "turn", What: duty.Load, Values: []float64{1, 1}})
	r := record(t, text, axes, d)
	for i, at := range r.t {
		want := 1000*2*math.Pi/60 - 2*at/0.5
		if math.Abs(r.sig["FW1.w"][i]-want) > 1e-6*want {
			t.Fatalf("%g rad/s at %g s, want %g", r.sig["FW1.w"][i], at, want)
		}
	}
}
