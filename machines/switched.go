package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// Switched is the loss law of one service of a cylinder-switched machine: a radial piston machine in which a controller
// times the valves of each cylinder, so that over a turn some cylinders make a full stroke and the rest idle with
// both sides at low pressure. The fraction x (−1..1, < 0 as a motor) is taken as continuous; in the machine it is a mean of
// whole strokes, one of which is Step of the flow.
type Switched struct {
	D float64 // displacement with every cylinder working, m³/rad, > 0
	N float64 // cylinders, each one stroke a turn, >= 1

	Cs float64 // laminar slip of the working cylinders, –, >= 0
	Cf float64 // friction of the working cylinders, proportional to pressure, –, >= 0
	Cv float64 // viscous friction, whatever the fraction, –, >= 0
	Tc float64 // constant friction torque, whatever the fraction, N·m, >= 0

	Idle     float64 // loss of an idle cylinder a turn over its swept volume, Pa, >= 0
	Dead     float64 // dead volume of a cylinder over its swept volume, –, >= 0
	Returned float64 // share of the work of compressing it that comes back, 0..1
	Switch   float64 // energy of a valve event, J, >= 0
	Active   float64 // valve events a turn of a working cylinder, >= 0
	Rest     float64 // and of an idle one, >= 0
}

// Check returns nil or an error that names the first number out of range.
func (m Switched) Check() error {
	switch {
	case !positive(m.D):
		return fmt.Errorf("displacement is %s cm3/rev, must be above 0", units.Number(m.D/units.CubicCentimetrePerRev, 3))
	case !(m.N >= 1) || m.N != math.Trunc(m.N) || math.IsInf(m.N, 1):
		return fmt.Errorf("number of cylinders is %s, must be a whole number from 1", units.Number(m.N, 3))
	case !(m.Returned >= 0 && m.Returned <= 1):
		return fmt.Errorf("returned share is %s, must be 0 to 1", units.Number(m.Returned, 3))
	}
	for _, c := range []struct {
		name string
		v    float64
	}{{"slip Cs", m.Cs}, {"pressure friction Cf", m.Cf}, {"viscous friction Cv", m.Cv}, {"constant torque Tc", m.Tc}, {"idle loss", m.Idle},
		{"dead volume", m.Dead}, {"energy of a valve event", m.Switch}, {"valve events of a working cylinder", m.Active}, {"valve events of an idle cylinder", m.Rest}} {
		if !notNegative(c.v) {
			return fmt.Errorf("%s is %s, must be 0 or above", c.name, units.Number(c.v, 3))
		}
	}
	return nil
}

// Stroke returns the swept volume of one cylinder [m³], 2π·D/N.
func (m Switched) Stroke() float64 { return units.Revolution * m.D / m.N }

// Flow returns the flow leaving the outlet port [m³/s],
//
//	Q = x·D·ω − Cs·|x|·D·Δp/μ        (S1)
//
// Only working cylinders slip. Signs are those of Displacement: w the speed [rad/s], dp outlet minus inlet [Pa], mu the
// dynamic viscosity [Pa·s], > 0.
//
// Source: the laminar slip of Wilson (1950), scaled with the working cylinders: the general principle of the literature.
func (m Switched) Flow(x, w, dp, mu float64) float64 {
	return x*m.D*w - m.Slip(x, dp, mu)
}

// Slip returns the flow lost inside the machine [m³/s], the second term of equation (S1), with the sign of dp.
func (m Switched) Slip(x, dp, mu float64) float64 { return m.Cs * math.Abs(x) * m.D * dp / mu }

// Drag is what opposes the motion of the shaft besides viscous and constant friction [N·m], each part >= 0.
type Drag struct{ Pressure, Idle, Compression, Valves float64 }

// Sum returns the whole [N·m].
func (d Drag) Sum() float64 { return d.Pressure + d.Idle + d.Compression + d.Valves }

// Drag returns the torques that oppose the motion,
//
//	pressure friction   Cf·|x|·D·|Δp|
//	idle cylinders      (1 − |x|)·D·Δpi
//	dead volume         (1 − ρ)·|x|·kV·D·Δp·ε/2
//	valves              Ev·N·(na·|x| + ni·(1 − |x|))/2π        (S2)
//
// ε is the compression by Δp (see Compression), Δp/B without air, so that a stroke at full pressure costs V0·Δp²/(2B), of
// which the share ρ comes back. The coils are counted as if the shaft drove what feeds them.
// bulk is the modulus free of air [Pa], air the entrained share.
func (m Switched) Drag(x, dp, bulk, air float64) Drag {
	a, strain := math.Abs(x), m.strain(dp, bulk, air)
	return Drag{
		Pressure:    m.Cf * a * m.D * math.Abs(dp),
		Idle:        (1 - a) * m.D * m.Idle,
		Compression: (1 - m.Returned) * a * m.Dead * m.D * dp * strain / 2,
		Valves:      m.Switch * m.eventsPerTurn(x) / units.Revolution,
	}
}

func (m Switched) strain(dp, bulk, air float64) float64 {
	share, _ := Compression(dp, bulk, air)
	return share
}

// DragSlopes returns the slopes of the sum of equation (S2) by x and by dp; 0 by x at x = 0.
func (m Switched) DragSlopes(x, dp, bulk, air float64) (byX, byDP float64) {
	a := math.Abs(x)
	strain, slope := Compression(dp, bulk, air)
	lost := (1 - m.Returned) * m.Dead / 2
	byX = Sign(x) * (m.D*(m.Cf*math.Abs(dp)-m.Idle+lost*dp*strain) + m.Switch*m.N*(m.Active-m.Rest)/units.Revolution)
	return byX, a * m.D * (m.Cf*Sign(dp) + lost*(strain+dp*slope))
}

// FrictionTorque returns all torque that opposes the motion [N·m], >= 0: equation (S2) with Cv·D·μ·|ω| + Tc.
func (m Switched) FrictionTorque(x, w, dp float64, f Fluid) float64 {
	return m.Drag(x, dp, f.Bulk, f.Air).Sum() + m.Cv*m.D*f.Mu*math.Abs(w) + m.Tc
}

// Torque returns the torque the shaft must be given [N·m], x·D·Δp and the friction against the motion; < 0 as a motor.
func (m Switched) Torque(x, w, dp float64, f Fluid) float64 {
	return x*m.D*dp + Sign(w)*m.FrictionTorque(x, w, dp, f)
}

// Loss returns the power lost [W], >= 0: shaft power less hydraulic power.
func (m Switched) Loss(x, w, dp float64, f Fluid) float64 {
	return m.Slip(x, dp, f.Mu)*dp + m.FrictionTorque(x, w, dp, f)*math.Abs(w)
}

// Efficiency returns the efficiencies, as Displacement.Efficiency does.
func (m Switched) Efficiency(x, w, dp float64, f Fluid) (eff Efficiency, ok bool) {
	q, t := m.Flow(x, w, dp, f.Mu), m.Torque(x, w, dp, f)
	if t*w > 0 {
		return PumpEfficiency(x*m.D, w, q, dp, t)
	}
	return MotorEfficiency(x*m.D, w, q, -dp, -t)
}

// FractionFor returns the fraction that gives a flow q [m³/s] at the outlet; it may lie beyond −1..1. NaN where the
// shaft stands, or slip takes all that a cylinder delivers.
func (m Switched) FractionFor(q, w, dp, mu float64) float64 {
	x := q / (m.D*w - Sign(q)*Sign(w)*m.Cs*m.D*dp/mu)
	if math.IsInf(x, 0) || x*q*w < 0 {
		return math.NaN()
	}
	return x
}
