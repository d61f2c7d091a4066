package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// DefaultFixedShare is the part of the full-load losses of an induction motor that does
// not depend on torque (iron, friction, windage). Assumed, common practice; against published
// part-load curves of motors from 22 kW up it is good to 3 points from 25 % load up, for older ones of
// 15 kW it is up to 5 points too kind, and below 20 % load it is too kind for all.
const DefaultFixedShare = 0.35

// InductionMotor is an electric motor described by its name plate.
type InductionMotor struct {
	RatedPower float64 // shaft power, W, > 0
	RatedSpeed float64 // rad/s, > 0
	Efficiency float64 // at rated power, 0..1
	FixedShare float64 // of the full-load losses, 0..1; default DefaultFixedShare
}

// Check returns nil or an error that names the first value out of range.
func (m InductionMotor) Check() error {
	switch {
	case !positive(m.RatedPower):
		return fmt.Errorf("rated power is %s kW, must be above 0", units.Number(m.RatedPower/units.Kilowatt, 3))
	case !positive(m.RatedSpeed):
		return fmt.Errorf("rated speed is %s rpm, must be above 0", units.Number(m.RatedSpeed/units.RPM, 3))
	case !(m.Efficiency > 0 && m.Efficiency <= 1):
		return fmt.Errorf("efficiency is %s %%, must be above 0 and at most 100 %%", units.Number(100*m.Efficiency, 3))
	case !(m.FixedShare >= 0 && m.FixedShare <= 1):
		return fmt.Errorf("fixed share of the losses is %s %%, must be 0 to 100 %%", units.Number(100*m.FixedShare, 3))
	}
	return nil
}

// FullLoadLoss returns the loss at rated power [W], PN·(1/η − 1).
func (m InductionMotor) FullLoadLoss() float64 { return m.RatedPower * (1/m.Efficiency - 1) }

// LossTorqueSpeed returns the loss [W], >= 0, at shaft torque t [N·m] and speed w [rad/s] of any signs,
//
//	P_loss = PN·(1/η − 1)·(a·|ω|/ωN + (1 − a)·(T/TN)²),  TN = PN/ωN        (5)
//
// a is the fixed share. The copper part is there at standstill too: a motor that holds a torque
// heats. At rated torque and speed the name-plate efficiency results.
// The linear growth with speed is a simplification (eddy currents and windage grow faster). Field weakening
// is not described: above rated speed the copper part is too small.
func (m InductionMotor) LossTorqueSpeed(t, w float64) float64 {
	load := t * m.RatedSpeed / m.RatedPower
	return m.FullLoadLoss() * (m.FixedShare*math.Abs(w)/m.RatedSpeed + (1-m.FixedShare)*load*load)
}

// LossPower returns the loss [W] at shaft power p [W] of any sign near rated speed,
//
//	P_loss = PN·(1/η − 1)·(a + (1 − a)·(P/PN)²)        (6)
//
// For a drive of variable speed it is wrong: use LossTorqueSpeed.
func (m InductionMotor) LossPower(p float64) float64 {
	load := p / m.RatedPower
	return m.FullLoadLoss() * (m.FixedShare + (1-m.FixedShare)*load*load)
}

// SynchronousSpeed returns the speed of the rotating field [rad/s],
//
//	ωs = 2π·f/(p/2)        (6a)
//
// of a motor with p poles on mains of frequency f [Hz]; 4 poles at 50 Hz: 1500 rpm.
func SynchronousSpeed(f float64, poles int) float64 { return 4 * math.Pi * f / float64(poles) }

// DefaultReactiveShare is the part of the rated reactive power that an induction motor draws without
// load to magnetize itself. Assumed, common practice; it makes a power factor of 0.86 at rated load
// one of 0.73 at half load and 0.54 at a quarter.
const DefaultReactiveShare = 0.7

// ReactivePower returns the reactive power [var] of an induction motor at shaft torque t [N·m], either way,
//
//	Q = QN·(q0 + (1 − q0)·(T/TN)²),  QN = PN/η·tan φN        (6b)
//
// with its power factor at rated load, cos φN in (0, 1], and q0 = DefaultReactiveShare: magnetizing and leakage
// part of the usual equivalent circuit, at rated voltage and frequency.
func (m InductionMotor) ReactivePower(t, powerFactor float64) float64 {
	return m.RatedReactivePower(powerFactor) * m.ReactiveShare(t)
}

// RatedReactivePower is QN of equation (6b) [var].
func (m InductionMotor) RatedReactivePower(powerFactor float64) float64 {
	return m.RatedPower / m.Efficiency * math.Tan(math.Acos(powerFactor))
}

// ReactiveShare is the reactive power at shaft torque t over the rated one, equation (6b).
func (m *InductionMotor) ReactiveShare(t float64) float64 {
	load := t * m.RatedSpeed / m.RatedPower
	return DefaultReactiveShare + (1-DefaultReactiveShare)*load*load
}

// Inertia returns the moment of inertia [kg·m²] that a motor of rated power p [W] with a number of poles usually has,
//
//	J = 0.002 kg·m²·(P/kW)^1.5·(poles/4)²        (6c)
//
// From memory of motors of 4 to 110 kW, good to a factor of 1.5; ask for the name plate where starts matter.
func Inertia(p float64, poles int) float64 {
	k := float64(poles) / 4
	return 0.002 * math.Pow(p/units.Kilowatt, 1.5) * k * k
}

// StartsPerHour returns how often an hour a motor of rated power p [W] may be started straight on the mains,
//
//	N = 30·(P/hp)^−0.38        (6d)
//
// with 4 poles, half of it with 2, 1.14 times with 6: a fit, within 5 %, to the table of NEMA MG 10 for 1 to
// 100 hp, itself from memory. It holds for small driven inertias, as pumps have.
func StartsPerHour(p float64, poles int) float64 {
	n := 30 * math.Pow(p/units.Horsepower, -0.38)
	switch {
	case poles <= 2:
		return n / 2
	case poles >= 6:
		return n * 1.14
	}
	return n
}
