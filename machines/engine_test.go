package machines

import (
	"math"
	"testing"
)

// The default Willans line lies where diesel engines do: 180 to 230 g/kWh at full load
// (published ranges of naturally aspirated and turbocharged engines), 250 to 350 g/kWh at a
// quarter of it (from memory); efficiency = 1/(BSFC·0.0119531 kWh/g). Without fuel it takes
// 15 to 30 % of its rating (common practice, no source: 20 to 30 %).
func TestWillansLine(t *testing.T) {
	e := Engine{RatedPower: 100e3, RatedSpeed: 200, Idle: 0.4, Slope: 2.2}
	if err := e.Check(); err != nil {
		t.Fatal(err)
	}
	bsfc := func(share float64) float64 {
		T := share * 500
		return e.Fuel(T, 200) / (T * 200) / 0.0119531
	}
	if b := bsfc(1); b < 180 || b > 230 {
		t.Errorf("%.0f g/kWh at full load", b)
	}
	if b := bsfc(0.25); b < 250 || b > 350 {
		t.Errorf("%.0f g/kWh at a quarter of it", b)
	}
	// by hand: 2.2·100 kW + 0.4·100 kW; 0.4·100 kW at no load; a tenth of it at a tenth of the speed
	for _, c := range []struct{ T, w, want float64 }{{500, 200, 260e3}, {0, 200, 40e3}, {0, 20, 4e3}, {-200, 200, 0}} {
		if got := e.Fuel(c.T, c.w); math.Abs(got-c.want) > 1e-6 {
			t.Errorf("fuel at %g N m, %g rad/s: %g W, want %g W", c.T, c.w, got, c.want)
		}
	}
	if d := e.Drag() / 500; d < 0.15 || d > 0.30 {
		t.Errorf("drag is %g of the rated torque", d)
	}
	if f := e.Fuel(-e.Drag(), 200); math.Abs(f) > 1e-6 {
		t.Errorf("%g W of fuel where the drag carries it", f)
	}
	for _, bad := range []Engine{{RatedSpeed: 1, Slope: 2}, {RatedPower: 1, Slope: 2}, {RatedPower: 1, RatedSpeed: 1, Slope: 0.9}, {RatedPower: 1, RatedSpeed: 1, Slope: 2, Idle: -1}} {
		if bad.Check() == nil {
			t.Errorf("%+v passed", bad)
		}
	}
}
