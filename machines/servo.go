package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// PermanentMagnetMotor is a synchronous servo motor behind a converter: it turns without slip, and its current
// is its torque over its torque constant.
type PermanentMagnetMotor struct {
	RatedPower     float64 // shaft power, W, > 0
	RatedSpeed     float64 // rad/s, > 0
	TorqueConstant float64 // kT, N·m per A (rms, of a phase), > 0
	Resistance     float64 // of a phase, warm, Ω, >= 0
	SpeedLoss      float64 // iron, friction and windage at rated speed, W, >= 0
}

// Check returns nil or an error that names the first value out of range.
func (m PermanentMagnetMotor) Check() error {
	switch {
	case !positive(m.RatedPower):
		return fmt.Errorf("rated power is %s kW, must be above 0", units.Number(m.RatedPower/units.Kilowatt, 3))
	case !positive(m.RatedSpeed):
		return fmt.Errorf("rated speed is %s rpm, must be above 0", units.Number(m.RatedSpeed/units.RPM, 3))
	case !positive(m.TorqueConstant):
		return fmt.Errorf("torque constant is %s N m/A, must be above 0", units.Number(m.TorqueConstant, 3))
	case !notNegative(m.Resistance):
		return fmt.Errorf("phase resistance is %s ohm, must not be below 0", units.Number(m.Resistance, 3))
	case !notNegative(m.SpeedLoss):
		return fmt.Errorf("speed loss is %s W, must not be below 0", units.Number(m.SpeedLoss, 3))
	}
	return nil
}

// Current returns the rms current of a phase [A], >= 0, at shaft torque t [N·m], |T|/kT.
func (m PermanentMagnetMotor) Current(t float64) float64 { return math.Abs(t) / m.TorqueConstant }

// LossTorqueSpeed returns the loss [W], >= 0, at shaft torque t [N·m] and speed w [rad/s] of any signs,
//
//	P_loss = 3·R·(T/kT)² + P0·|ω|/ωN        (7a)
//
// the copper part is there at standstill, the rest grows with speed. Field weakening and the torque that iron and
// friction take inside the motor are left out of the current.
//
// Source: synchronous machine with current in quadrature, textbook.
func (m PermanentMagnetMotor) LossTorqueSpeed(t, w float64) float64 {
	i := m.Current(t)
	return 3*m.Resistance*i*i + m.SpeedLoss*math.Abs(w)/m.RatedSpeed
}
