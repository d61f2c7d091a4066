package circuit

import (
	"testing"
)

const sequenced = rail + `
SQ1 sequence; set: 100 bar; band: 5 bar; nominal_flow: 40 L/min; nominal_drop: 5 bar
V1 valve; follows: ram; nominal_flow: 600 L/min; nominal_drop: 5 bar
- P1.P RV1.P SQ1.P
- SQ1.A V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`

// Hand calculation: all of the pump flow q passes, so the inlet stands where
// Δp·s = ΔpN·(q/qN)² + (1 − s)·100 bar·q/qN, s = (pP − ps)/Δpb, is met; with s = 1
// where the load asks for more than the setting.
func TestSequenceOpensAtItsSetting(t *testing.T) {
	q := 45e-6 * 1480 / 60
	x := q / (40 * lpm)
	for _, F := range []float64{2e3, 20e3, 45e3, 65e3} {
		r := steady(t, sequenced, ramAxis, pushing(F, 1))
		pA := r.last(t, "SQ1.A.p")
		want := zero(100e5, 155e5, func(p float64) float64 {
			s := min((p-100e5)/5e5, 1)
			return (p-pA)*s - 5e5*x*x - (1-s)*100e5*x
		})
		near(t, "inlet", r.last(t, "SQ1.P.p"), want, 1e-5)
		near(t, "flow", r.last(t, "SQ1.P.q"), q, 1e-6)
	}
	r := steady(t, replaced(t, sequenced, "crack: 160 bar", "crack: 90 bar"), ramAxis, pushing(2e3, 1))
	if v := r.last(t, "SQ1.P.q"); v > 1e-9 {
		t.Errorf("%g m³/s pass below the setting", v)
	}
}

// A pilot elsewhere opens it, pressure in its drain holds it shut.
func TestSequencePilotAndDrain(t *testing.T) {
	text := replaced(t, sequenced, "set: 100 bar;", "set: 40 bar; pilot: external;") + "LP1 pressure_source; pressure: 50 bar\n- LP1.P SQ1.X\n"
	r := steady(t, text, ramAxis, pushing(20e3, 1))
	q := 45e-6 * 1480 / 60
	near(t, "flow", r.last(t, "SQ1.P.q"), q, 1e-6)
	near(t, "drop", r.last(t, "SQ1.P.p")-r.last(t, "SQ1.A.p"), 5e5*(q/(40*lpm))*(q/(40*lpm)), 1e-4)
	for _, shut := range []string{replaced(t, text, "pressure: 50 bar", "pressure: 38 bar"), text + "LP2 pressure_source; pressure: 12 bar\n- LP2.P SQ1.D\n"} {
		r = steady(t, shut, ramAxis, pushing(20e3, 1))
		if v := r.last(t, "SQ1.P.q"); v > 1e-9 {
			t.Errorf("%g m³/s pass", v)
		}
		near(t, "inlet", r.last(t, "SQ1.P.p"), 160e5, 1e-9)
	}
}

func TestSequenceSaysWhatItsPilotLacks(t *testing.T) {
	for _, text := range []string{replaced(t, sequenced, "set: 100 bar;", "set: 40 bar; pilot: external;"), sequenced + "LP1 pressure_source; pressure: 50 bar\n- LP1.P SQ1.X\n"} {
		if !AnyStops(Check(build(t, text), ramAxis, nil)) {
			t.Errorf("not refused: %s", text)
		}
	}
}

func TestSequenceInRandomCircuits(t *testing.T) {
	survive(t, toBore("sequence; set: 20 bar; reverse: free", "P", "A"))
	survive(t, onRail("sequence; set: 50 bar", "P", "A"))
}
