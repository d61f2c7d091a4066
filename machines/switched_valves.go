package machines

import (
	"math"

	"barlitre/machines/units"
)

// Valve events. A cylinder has two valves, one to each side. An event is one valve opening and closing once. While a
// cylinder works each of its valves does so once a turn, so that na = 2; while it idles its low-pressure valve stays
// open and the other shut, so that ni = 0. Schemes that move a valve of an idle cylinder have a larger ni.

// eventsPerTurn is the number of valve events a turn of the whole service.
func (m Switched) eventsPerTurn(x float64) float64 {
	a := math.Abs(x)
	return m.N * (m.Active*a + m.Rest*(1-a))
}

// Events returns the valve events a second of all 2·N valves [1/s],
//
//	N·(na·|x| + ni·(1 − |x|))·|ω|/2π        (S3)
func (m Switched) Events(x, w float64) float64 {
	return m.eventsPerTurn(x) * math.Abs(w) / units.Revolution
}

// EventsOfOne returns the valve events a second of one valve [1/s] when the controller wears all alike.
func (m Switched) EventsOfOne(x, w float64) float64 { return m.Events(x, w) / (2 * m.N) }

// Step returns by how much the mean flow over a turn changes when one cylinder more works [m³/s], D·|ω|/N.
func (m Switched) Step(w float64) float64 { return m.D * math.Abs(w) / m.N }

// Strokes returns the working strokes a second [1/s], |x|·N·|ω|/2π: the frequency of the ripple at low fraction.
func (m Switched) Strokes(x, w float64) float64 { return math.Abs(x*w) * m.N / units.Revolution }

// StrokePeak returns the highest flow of one stroke [m³/s], a half sine: Vc·|ω|/2 with the swept volume Vc of a cylinder.
func (m Switched) StrokePeak(w float64) float64 { return m.Stroke() * math.Abs(w) / 2 }

// Ripple returns the volume by which evenly spaced strokes run ahead of and behind their mean flow [m³], peak to peak,
//
//	ΔV = Vc·(cos φ − (π/2 − φ)·sin φ), sin φ = |x|·N/π        (S4)
//
// in a line that takes up the mean flow steadily. It holds while strokes follow one another without overlap, |x|·N <= 2; beyond
// that its value there is an upper bound. It is the whole stroke as x goes to 0, and 0 at x = 0.
func (m Switched) Ripple(x float64) float64 {
	if x == 0 {
		return 0
	}
	s := math.Min(math.Abs(x)*m.N, 2) / math.Pi
	phi := math.Asin(s)
	return m.Stroke() * (math.Cos(phi) - (math.Pi/2-phi)*s)
}

// PressureRipple returns the pressure ripple peak to peak [Pa] in an oil volume [m³] at the outlet, B·ΔV/V.
func (m Switched) PressureRipple(x, volume, bulk float64) float64 { return bulk * m.Ripple(x) / volume }

// Squeezed returns the share of a stroke that passes before the oil of a cylinder has come to pressure dp [Pa], (1 + kV)·ε.
func (m Switched) Squeezed(dp, bulk, air float64) float64 {
	return (1 + m.Dead) * math.Abs(m.strain(dp, bulk, air))
}
