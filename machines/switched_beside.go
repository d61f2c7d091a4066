package machines

import "math"

// Sized returns the law for another displacement [m³/rad]: the coefficients stay, Tc grows with size.
func (m Displacement) Sized(d float64) Displacement {
	m.Tc *= d / m.D
	m.D = d
	return m
}

// SettingFor returns the setting that gives a flow q [m³/s] at the outlet, by equation (2); it may lie beyond −1..1. NaN
// where the shaft stands.
func (m Displacement) SettingFor(q, w, dp float64, f Fluid) float64 {
	bulk := f.modulus(dp)
	q0 := q + m.Slip(0, w, dp, f.Mu, f.Rho, bulk) // K alone grows with the setting
	e := q0 / (m.D*w - Sign(q0)*Sign(w)*m.K*m.D*math.Abs(w)*dp/bulk)
	if math.IsInf(e, 0) || e*q0*w < 0 {
		return math.NaN()
	}
	return e
}

// Loss returns the power lost [W], >= 0, in a fluid.
func (m Displacement) Loss(e, w, dp float64, f Fluid) float64 {
	return m.SlipLoss(e, w, dp, f.Mu, f.Rho, f.modulus(dp)) + m.FrictionLoss(e, w, dp, f.Mu, f.Rho)
}

// Beside adds up what a cylinder-switched and another machine lose while both deliver the same flow at the same pressure
// and speed. The sums are J where Add is given seconds.
type Beside struct {
	Switched Switched
	Other    Displacement
	Fluid    Fluid

	Seconds   float64 // with a shaft that turns
	Lost      float64 // by the switched machine
	LostOther float64
	PerIdle   float64 // growth of Lost by Switched.Idle [J/Pa]
	PerSwitch float64 // and by Switched.Switch
	Flow      float64 // Σ |q|·dt [m³]
	Pressure  float64 // Σ |Δp|·|q|·dt
	Speed     float64 // Σ |ω|·|q|·dt
	Beyond    float64 // seconds in which the other machine would have to displace more than it has
}

// Add books dt seconds of flow q [m³/s] at the outlet, speed w [rad/s] and pressure difference dp [Pa]. Where the shaft
// stands, or one of the two cannot do it, nothing is booked.
func (b *Beside) Add(q, w, dp, dt float64) {
	x, e := b.Switched.FractionFor(q, w, dp, b.Fluid.Mu), b.Other.SettingFor(q, w, dp, b.Fluid)
	if math.IsNaN(x) || math.IsNaN(e) || dt == 0 {
		return
	}
	b.Seconds += dt
	b.Lost += dt * b.Switched.Loss(x, w, dp, b.Fluid)
	b.LostOther += dt * b.Other.Loss(e, w, dp, b.Fluid)
	b.PerIdle += dt * (1 - math.Abs(x)) * b.Switched.D * math.Abs(w)
	b.PerSwitch += dt * b.Switched.Events(x, w)
	b.Flow += dt * math.Abs(q)
	b.Pressure += dt * math.Abs(dp*q)
	b.Speed += dt * math.Abs(w*q)
	if math.Abs(e) > 1 {
		b.Beyond += dt
	}
}

// Plus adds another sum of the same machines, k times.
func (b Beside) Plus(o Beside, k float64) Beside {
	b.Seconds += k * o.Seconds
	b.Lost += k * o.Lost
	b.LostOther += k * o.LostOther
	b.PerIdle += k * o.PerIdle
	b.PerSwitch += k * o.PerSwitch
	b.Flow += k * o.Flow
	b.Pressure += k * o.Pressure
	b.Speed += k * o.Speed
	b.Beyond += k * o.Beyond
	return b
}

// Advantage returns by how much less the switched machine loses [J], with another idle loss [Pa] and energy of a valve
// event [J]; < 0 when it loses more. Its loss is linear in both.
func (b Beside) Advantage(idle, event float64) float64 {
	return b.LostOther - b.Lost - (idle-b.Switched.Idle)*b.PerIdle - (event-b.Switched.Switch)*b.PerSwitch
}

// Gone returns the idle loss [Pa] at which the advantage is gone, < 0 when there is none even without it. NaN when no
// cylinder ever idles.
func (b Beside) Gone() float64 {
	if b.PerIdle == 0 {
		return math.NaN()
	}
	return b.Switched.Idle + b.Advantage(b.Switched.Idle, b.Switched.Switch)/b.PerIdle
}

// MeanPressure and MeanSpeed are the means over the flow delivered; NaN without any.
func (b Beside) MeanPressure() float64 { return b.Pressure / b.Flow }

// MeanSpeed returns the mean speed [rad/s] over the flow delivered.
func (b Beside) MeanSpeed() float64 { return b.Speed / b.Flow }
