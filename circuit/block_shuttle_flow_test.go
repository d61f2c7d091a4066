package circuit

import "testing"

const shuttled = rail + `
LP1 pressure_source; pressure: 50 bar
LP2 pressure_source; pressure: 20 bar
SH1 shuttle_flow; nominal_flow: 60 L/min; nominal_drop: 1 bar
V1 valve; follows: ram; nominal_flow: 20 L/min; nominal_drop: 5 bar
- P1.P RV1.P
- LP1.P SH1.X
- LP2.P SH1.Y
- SH1.A V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`

// The higher side feeds, with the drop of the nominal point; the other is shut.
// A load that pushes back drives the oil back into the higher side.
func TestShuttlePassesTheHigherSide(t *testing.T) {
	swapped := replaced(t, replaced(t, shuttled, "LP1.P SH1.X", "LP1.P SH1.Y"), "LP2.P SH1.Y", "LP2.P SH1.X")
	for text, ports := range map[string][2]string{shuttled: {"X", "Y"}, swapped: {"Y", "X"}} {
		for _, F := range []float64{5e3, 15e3, 30e3} {
			r := steady(t, text, ramAxis, pushing(F, 1))
			q := r.last(t, "SH1."+ports[0]+".q") / (60 * lpm)
			if (q > 0) != (F < 25e3) || q*q < 1e-3 {
				t.Errorf("flow %g at %g N", q, F)
			}
			drop := 1e5 * q * q
			if q < 0 {
				drop = -drop
			}
			near(t, "pressure at A", r.last(t, "SH1.A.p"), 50e5-drop, 1e-6)
			near(t, "flow out of A", r.last(t, "SH1.A.q"), -q*60*lpm, 1e-9)
			near(t, "flow at the other side", r.last(t, "SH1."+ports[1]+".q"), 0, 0)
		}
	}
}

func TestShuttleInRandomCircuits(t *testing.T) {
	for _, ports := range []string{"XY", "YX"} {
		change := toBore("shuttle_flow", ports[:1], "A")
		survive(t, func(text string) string { return change(text) + "- K1." + ports[1:] + " TK.T\n" })
	}
}
