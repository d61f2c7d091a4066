package circuit

import (
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// flushed is trial circuit C4 with a flushing valve that opens 4 bar below the charge
// pressure of 20 bar.
func flushed(more string) string {
	return strings.NewReplacer("- P1.P HM1.A", "- FV1.A P1.P HM1.A", "- P1.S HM1.B", "- FV1.B P1.S HM1.B", "- CP1.T TK.T", "- FV1.T CP1.T TK.T").Replace(c4) +
		"FV1 flushing; opens: 16 bar; nominal_flow: 10 L/min; nominal_drop: 5 bar" + more
}

func hoist(load ...float64) *duty.Duty {
	return points("drum", 0.05, []float64{0, 1, 8, 9, 12, 13, 20, 21, 24},
		duty.Track{Of: "drum", What: duty.Speed, Values: []float64{0, 60, 60, 0, 0, -60, -60, 0, 0}},
		duty.Track{Of: "drum", What: duty.Load, Values: load})
}

// The low side stands at the charge pressure of 20 bar. Without override 4 bar are left
// for the orifice: 10·√(4/5) = 8.9443 L/min; with 20 bar per 100 L/min
// 0.05·q² + 0.2·q = 4 gives q = 7.1652 L/min (by hand).
func TestFlushing(t *testing.T) {
	for more, want := range map[string]float64{"; override: 0 bar per 100 L/min": 8.9443, "; override: 20 bar per 100 L/min": 7.1652} {
		for _, load := range []float64{180, -180} { // either side may be the low one
			o := observe(t, flushed(more), drumAxis, hoist(load, load, load, load, load, load, load, load, load))
			low, high := "B", "A"
			if load < 0 {
				low, high = high, low
			}
			for _, at := range []float64{5, 16} {
				within(t, "pressure of the low side", o.sigAt(t, "FV1."+low+".p", at), 20e5, 1e-6)
				within(t, "flushing flow", o.sigAt(t, "FV1."+low+".q", at), want/6e4, 1e-4)
				if q := o.sigAt(t, "FV1."+high+".q", at); q != 0 {
					t.Errorf("%g m³/s from the high side", q)
				}
			}
		}
	}
}

// Near equal pressures it is closed, half way it passes half; below its opening
// pressure it passes nothing.
func TestFlushingSpool(t *testing.T) {
	bench := `
TK tank
PA1 pressure_source; pressure: %A
PB1 pressure_source; pressure: %B
FV1 flushing; opens: 10 bar; override: 0 bar per 100 L/min; nominal_flow: 10 L/min; nominal_drop: 5 bar; shift: 4 bar
- PA1.P FV1.A
- PB1.P FV1.B
- FV1.T TK.T
`
	for _, c := range []struct {
		a, b   string
		qA, qB float64 // L/min
	}{
		{"20 bar", "20 bar", 0, 0}, {"20 bar", "22 bar", 0.5 * 10 * math.Sqrt(10./5), 0}, {"20 bar", "40 bar", 10 * math.Sqrt(10./5), 0},
		{"40 bar", "20 bar", 0, 10 * math.Sqrt(10./5)}, {"9 bar", "40 bar", 0, 0},
	} {
		o := observe(t, strings.NewReplacer("%A", c.a, "%B", c.b).Replace(bench), nil, still)
		for port, want := range map[string]float64{"A": c.qA, "B": c.qB} {
			if q := o.sigAt(t, "FV1."+port+".q", 1) * 6e4; math.Abs(q-want) > 1e-4 {
				t.Errorf("%s and %s: %g L/min from %s, want %g", c.a, c.b, q, port, want)
			}
		}
	}
}
