package circuit

import (
	"math"
	"strings"
	"testing"
)

// A high-low pair on one shaft: 60 and 16 cm³ × 1480 rpm = 88.8 and 23.68 L/min, unloading
// at 60 bar.
const highLow = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
PL pump; displacement: 60 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
PH pump; displacement: 16 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
CV1 check; opens: 0 bar; nominal_drop: 0 bar
UV1 unloading_pilot; setting: 60 bar; range: 5 bar; nominal_flow: 100 L/min; nominal_drop: 3 bar
RV1 relief; crack: 250 bar; override: 0 bar per 100 L/min
V1 valve; directs: ram; nominal_flow: 100000 L/min
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm
- M1.shaft PL.shaft PH.shaft
- PL.S PH.S TK.T
- PL.P CV1.in UV1.P
- CV1.out PH.P RV1.P V1.P UV1.X
- UV1.T RV1.T V1.T TK.T
- V1.A C1.A
- V1.B C1.B
`

func TestHighLowPair(t *testing.T) {
	large, small := 88.8*lpm, 23.68*lpm
	for _, c := range []struct {
		name             string
		pressure         float64 // of the load
		opening, flow    float64 // of the unloading valve
		speed, low, high float64 // of the ram; pressures of the two pumps
	}{
		{"fast", 20e5, 0, 0, (large + small) / boreArea, 20e5, 20e5},
		// Half open: 62.5 bar/2 = 3 bar·x² + 100 bar/2·x, x = q/100 L/min, gives x = 0.60312.
		{"between", 62.5e5, 0.5, 60.312 * lpm, (large + small - 60.312*lpm) / boreArea, 62.5e5, 62.5e5},
		// Open: the large pump stands at 3 bar·0.888² = 2.3656 bar.
		{"pressing", 160e5, 1, large, small / boreArea, 2.365632e5, 160e5},
	} {
		t.Run(c.name, func(t *testing.T) {
			r := steady(t, highLow, ramAxis, pushing(c.pressure*boreArea, 1))
			near(t, "opening", r.last(t, "UV1.u"), c.opening, 1e-4)
			near(t, "unloaded flow", r.last(t, "UV1.P.q"), c.flow, 1e-4)
			near(t, "speed", r.last(t, "C1.v"), c.speed, 1e-4)
			near(t, "pressure of the large pump", r.last(t, "PL.P.p"), c.low, 1e-4)
			near(t, "pressure of the small pump", r.last(t, "PH.P.p"), c.high, 1e-4)
			near(t, "shaft power", r.last(t, "M1.shaft"), large*c.low+small*c.high, 1e-4)
		})
	}
}

// The other way nothing passes, whatever the pilot says.
func TestUnloadingPilotBlocksBackwards(t *testing.T) {
	text := replaced(t, highLow, "- UV1.T RV1.T V1.T TK.T", "LP1 pressure_source; pressure: 30 bar\n- UV1.T LP1.P\n- RV1.T V1.T TK.T")
	text = strings.Replace(text, "setting: 60 bar", "setting: 20 bar", 1)
	r := steady(t, text, ramAxis, pushing(160e5*boreArea, 1)) // open, 130 bar above T
	near(t, "pressure of the large pump", r.last(t, "PL.P.p"), 30e5+2.365632e5, 1e-4)
	r = steady(t, text, ramAxis, pushing(20e5*boreArea, 1)) // 20 bar against 30 bar
	if q := math.Abs(r.last(t, "UV1.P.q")); q > 1e-9 {
		t.Errorf("%g m³/s run back", q)
	}
}

func TestUnloadingPilotInRandomCircuits(t *testing.T) {
	survive(t, func(text string) string {
		return strings.Replace(text, "- P1.P RV1.P", "K1 unloading_pilot; setting: 80 bar\n- K1.T TK.T\n- P1.P K1.P K1.X RV1.P", 1)
	})
}
