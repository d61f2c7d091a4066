package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// Engine is a diesel engine described by a Willans line: fuel power grows in a straight
// line with torque, from what the engine needs to turn itself.
type Engine struct {
	RatedPower float64 // shaft power, W, > 0
	RatedSpeed float64 // rad/s, > 0
	Idle       float64 // fuel power without load at rated speed over rated power, –, >= 0
	Slope      float64 // fuel power for each further watt at the shaft, –, >= 1
}

// Check returns nil or an error that names the first value out of range.
func (e Engine) Check() error {
	switch {
	case !positive(e.RatedPower):
		return fmt.Errorf("rated power is %s kW, must be above 0", units.Number(e.RatedPower/units.Kilowatt, 3))
	case !positive(e.RatedSpeed):
		return fmt.Errorf("rated speed is %s rpm, must be above 0", units.Number(e.RatedSpeed/units.RPM, 3))
	case !notNegative(e.Idle):
		return fmt.Errorf("idle fuel is %s of rated power, must not be below 0", units.Number(e.Idle, 3))
	case !(e.Slope >= 1):
		return fmt.Errorf("slope of the Willans line is %s, must be at least 1", units.Number(e.Slope, 3))
	}
	return nil
}

// Fuel returns the fuel power [W], >= 0, at shaft torque t [N·m] of any sign and speed w [rad/s], >= 0,
//
//	P_fuel = max(0, s·T·ω + k·PN·ω/ωN)
//
// k is Idle, s is Slope. What the engine needs to turn itself grows with speed (its torque is
// constant). A load that drives it harder than Drag finds the fuel shut off.
func (e Engine) Fuel(t, w float64) float64 {
	return math.Max(0, (e.Slope*t+e.Idle*e.RatedPower/e.RatedSpeed)*w)
}

// Drag returns the torque [N·m], >= 0, that turns the engine without fuel: where its Willans
// line meets zero.
func (e Engine) Drag() float64 { return e.Idle * e.RatedPower / e.RatedSpeed / e.Slope }
