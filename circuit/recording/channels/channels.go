package channels

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// Track is a derived channel.
type Track struct {
	Values  []float64 // SI, one a row
	Formula string    // with the numbers put in, for people
}

// atRest is the share of its top speed below which something counts as standing, as in a duty.
const atRest = 1e-3

// Slope returns the first and second derivative of x over t by least squares: at each row
// a parabola through the rows within half a window [s] on either side, five rows at least
// (Savitzky and Golay, Anal. Chem. 36 (1964) 1627, for rows that may be unevenly spaced).
// At the ends the rows of one side serve. A parabola is met exactly, noise falls with the
// window, and a change shorter than the window is blunted.
func Slope(t, x []float64, window float64) (first, second []float64) {
	n := len(t)
	first, second = make([]float64, n), make([]float64, n)
	a, b := 0, 0                    // rows of the window, b not with them
	half := window / 2 * (1 + 1e-6) // a row at its very end counts, however its time was rounded
	for i := range t {
		for a < i && t[a] < t[i]-half {
			a++
		}
		b = max(b, i+1)
		for b < n && t[b] <= t[i]+half {
			b++
		}
		from, to := min(a, max(0, i-2)), max(b, min(n, i+3))
		if to-from < 5 {
			from, to = max(0, min(from, n-5)), min(n, max(to, 5))
		}
		first[i], second[i] = parabola(t[from:to], x[from:to], t[i])
	}
	return first, second
}

// parabola fits c0 + c1·u + c2·u² with u = t − at and returns c1 and 2·c2.
func parabola(t, x []float64, at float64) (slope, bend float64) {
	var s [5]float64
	var y [3]float64
	scale := math.Max(math.Abs(t[0]-at), math.Abs(t[len(t)-1]-at))
	if scale == 0 {
		return 0, 0
	}
	base := x[0] // numbers stay small where a position is far from zero
	for i := range t {
		u := (t[i] - at) / scale
		p := 1.0
		for k := range s {
			s[k] += p
			if k < 3 {
				y[k] += p * (x[i] - base)
			}
			p *= u
		}
	}
	det := s[0]*(s[2]*s[4]-s[3]*s[3]) - s[1]*(s[1]*s[4]-s[3]*s[2]) + s[2]*(s[1]*s[3]-s[2]*s[2])
	if math.Abs(det) < 1e-9*s[0]*s[2]*s[4] || len(t) < 3 { // fewer than three times: a line
		if d := s[0]*s[2] - s[1]*s[1]; d > 0 {
			return (s[0]*y[1] - s[1]*y[0]) / d / scale, 0
		}
		return 0, 0
	}
	c1 := (s[0]*(y[1]*s[4]-y[2]*s[3]) - y[0]*(s[1]*s[4]-s[3]*s[2]) + s[2]*(s[1]*y[2]-y[1]*s[2])) / det
	c2 := (s[0]*(s[2]*y[2]-s[3]*y[1]) - s[1]*(s[1]*y[2]-s[2]*y[1]) + y[0]*(s[1]*s[3]-s[2]*s[2])) / det
	return c1 / scale, 2 * c2 / (scale * scale)
}

// SpeedOfPosition takes the speed from a position [m or rad].
func SpeedOfPosition(t, x []float64, window float64) Track {
	v, _ := Slope(t, x, window)
	return Track{v, fmt.Sprintf("v = dx/dt, parabolas by least squares over %s (Savitzky-Golay)", units.Seconds(window, 3))}
}

// SpeedOfFlow takes the speed from the flow into the side A of an actuator and what it
// swallows: an area [m²] or a displacement [m³/rad]. A leak is not seen: volumetric is the
// share of the flow that moves it, 1 = all.
func SpeedOfFlow(q []float64, swallows, volumetric float64) Track {
	v := make([]float64, len(q))
	for i := range q {
		v[i] = q[i] * volumetric / swallows
	}
	f := fmt.Sprintf("v = q/%.5g", swallows)
	if volumetric != 1 {
		f = fmt.Sprintf("v = %.4g·q/%.5g", volumetric, swallows)
	}
	return Track{v, f + " in SI, q into side A"}
}

// Cylinder is what turns chamber pressures into a load.
type Cylinder struct {
	A, B     float64 // m², areas of the sides that extend and retract it
	Friction float64 // N, against motion
	Damping  float64 // N s/m
	Mass     float64 // kg, moved with the rod and stated in the circuit too
}

// Load returns the force that the rod gives to the outside,
//
//	F = p_A·A − p_B·B − Fc·sgn v − b·v − m·dv/dt
//
// v may be nil where friction, damping and mass are 0. window [s] smooths the acceleration.
func (c Cylinder) Load(t, pA, pB, v []float64, window float64) (Track, error) {
	moving := c.Friction != 0 || c.Damping != 0 || c.Mass != 0
	if moving && v == nil {
		return Track{}, fmt.Errorf("friction and inertia need the speed; name the speed or the position of the rod")
	}
	var acc []float64
	still := 0.0
	if moving {
		acc, _ = Slope(t, v, window)
		still = atRest * top(v)
	}
	f := make([]float64, len(pA))
	for i := range f {
		f[i] = pA[i] * c.A
		if pB != nil {
			f[i] -= pB[i] * c.B
		}
		if moving {
			f[i] -= c.Friction*sign(v[i], still) + c.Damping*v[i] + c.Mass*acc[i]
		}
	}
	return Track{f, c.formula(pB != nil, window)}, nil
}

func (c Cylinder) formula(both bool, window float64) string {
	s := "F = p_A·" + times(c.A, "m²")
	if both {
		s += " − p_B·" + times(c.B, "m²")
	}
	if c.Friction != 0 {
		s += " − " + times(c.Friction, "N·sgn v")
	}
	if c.Damping != 0 {
		s += " − " + times(c.Damping, "N·s/m·v")
	}
	if c.Mass != 0 {
		s += " − " + times(c.Mass, "kg·dv/dt") + " (over " + units.Seconds(window, 3) + ")"
	}
	return s
}

// Motor is what turns the pressures of a hydraulic motor into a load torque.
type Motor struct {
	Displacement float64 // m³/rad
	Gear         float64 // turns of the motor for one of the axis, > 0
	Efficiency   float64 // hydraulic-mechanical, of motor and gear, 0..1; 1 = none taken off
	Inertia      float64 // kg m² at the axis, stated in the circuit too
}

// Load returns the torque at the axis: with dp = p_A − p_B and i the gear,
//
//	T = i·D·dp·η − J·dω/dt   while dp drives the motion
//	T = i·D·dp/η − J·dω/dt   while the load drives it
//
// w is the speed of the axis; nil where Efficiency is 1 and Inertia 0.
func (m Motor) Load(t, pA, pB, w []float64, window float64) (Track, error) {
	if w == nil && (m.Efficiency != 1 || m.Inertia != 0) {
		return Track{}, fmt.Errorf("the efficiency and the inertia of a motor need its speed; name it")
	}
	var acc []float64
	still := 0.0
	if w != nil {
		acc, _ = Slope(t, w, window)
		still = atRest * top(w)
	}
	out := make([]float64, len(pA))
	for i := range out {
		dp := pA[i]
		if pB != nil {
			dp -= pB[i]
		}
		out[i] = m.Gear * m.Displacement * dp
		if w == nil {
			continue
		}
		switch s := sign(w[i], still); {
		case s*dp > 0:
			out[i] *= m.Efficiency
		case s*dp < 0:
			out[i] /= m.Efficiency
		}
		out[i] -= m.Inertia * acc[i]
	}
	f := fmt.Sprintf("T = %.5g·%s·(p_A − p_B)", m.Gear, times(m.Displacement, "m³/rad"))
	if m.Efficiency != 1 {
		f += fmt.Sprintf("·%.4g, divided by it while the load drives", m.Efficiency)
	}
	if m.Inertia != 0 {
		f += " − " + times(m.Inertia, "kg·m²·dω/dt") + " (over " + units.Seconds(window, 3) + ")"
	}
	return Track{out, f}, nil
}

// times writes a factor of a formula with its unit, and what it stands before.
func times(x float64, unit string) string { return units.Join(fmt.Sprintf("%.5g", x), unit) }

func top(v []float64) (m float64) {
	for _, x := range v {
		m = math.Max(m, math.Abs(x))
	}
	return m
}

func sign(x, still float64) float64 {
	switch {
	case x > still:
		return 1
	case x < -still:
		return -1
	}
	return 0
}
