package machines

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// Map is a fitted law with the measured points themselves: near them the losses are those measured, away from them
// those of the law. Slip and friction are each the law's times a factor > 0, so that no state makes energy.
//
// The logarithm of the factor is interpolated by simple kriging with a Gaussian correlation: zero mean, so it fades to the
// law within about its length. Points where a loss is small beside what was measured count for less.
type Map struct {
	Fit      *Fit
	slip     field
	friction field
	w, dp    float64 // largest of the points: rad/s, Pa
}

// Factor is by how much a loss differs from the law, and the slopes by setting, speed and pressure difference.
type Factor struct{ V, ByE, ByW, ByDP float64 }

// unity is the law itself.
var unity = Factor{V: 1}

// measuredNoise is what flow and torque of a test stand may be off, as shares of the ideal values: about class B of ISO
// 4409, from memory.
const measuredNoise = 0.005

// field interpolates a quantity of three coordinates.
type field struct {
	at     [][3]float64
	weight []float64
	length float64
}

// NewMap makes the map of a fit.
func NewMap(f *Fit) *Map {
	m := &Map{Fit: f}
	for _, p := range f.Points {
		m.w, m.dp = math.Max(m.w, math.Abs(p.W)), math.Max(m.dp, math.Abs(p.DP))
	}
	var at [][3]float64
	var slip, rub, slipNoise, rubNoise []float64
	for _, p := range f.Points {
		fluid := f.Fluid.at(p)
		derived, torque := p.E*f.Law.D*p.W, p.E*f.Law.D*p.DP
		s := Sign(p.DP) * f.Law.Slip(p.E, p.W, p.DP, fluid.Mu, fluid.Rho, fluid.modulus(p.DP))
		t := f.Law.FrictionTorque(p.E, p.W, p.DP, fluid.Mu, fluid.Rho)
		if !(s > 0 && t > 0) {
			continue
		}
		at = append(at, m.coordinates(p.E, p.W, p.DP))
		slip = append(slip, logRatio(Sign(p.DP)*(derived-p.Q), s))
		rub = append(rub, logRatio(Sign(p.W)*(p.T-torque), t))
		slipNoise = append(slipNoise, measuredNoise*math.Abs(derived)/s)
		rubNoise = append(rubNoise, measuredNoise*math.Abs(torque)/t)
	}
	m.slip, m.friction = krige(at, slip, slipNoise), krige(at, rub, rubNoise)
	return m
}

// logRatio is the logarithm of measured over law, within a factor of ten.
func logRatio(measured, law float64) float64 {
	return math.Log(math.Max(0.1, math.Min(10, measured/law)))
}

// coordinates are |ω|, |e| and |Δp| over the largest of the points: other quadrants mirror the one measured.
func (m *Map) coordinates(e, w, dp float64) [3]float64 {
	return [3]float64{math.Abs(w) / m.w, math.Abs(e), math.Abs(dp) / m.dp}
}

// Slip returns the factor of the slip, Friction that of the friction torque.
func (m *Map) Slip(e, w, dp float64) Factor     { return m.factor(&m.slip, e, w, dp) }
func (m *Map) Friction(e, w, dp float64) Factor { return m.factor(&m.friction, e, w, dp) }

func (m *Map) factor(f *field, e, w, dp float64) Factor {
	v, g := f.value(m.coordinates(e, w, dp))
	v = math.Exp(v)
	return Factor{v, v * g[1] * Sign(e), v * g[0] * Sign(w) / m.w, v * g[2] * Sign(dp) / m.dp}
}

// correlation is the kernel of two places.
func (f *field) correlation(a, b [3]float64) float64 {
	d := 0.0
	for i := range a {
		d += sq((a[i] - b[i]) / f.length)
	}
	return math.Exp(-d / 2)
}

// value returns the field and its gradient.
func (f *field) value(x [3]float64) (v float64, g [3]float64) {
	for i, w := range f.weight {
		k := w * f.correlation(x, f.at[i])
		v += k
		for j := range g {
			g[j] -= k * (x[j] - f.at[i][j]) / (f.length * f.length)
		}
	}
	return v, g
}

// krigeLengths are tried for the length of the correlation.
var krigeLengths = []float64{0.1, 0.2, 0.35, 0.6}

// krige finds the field of smallest error where each point in turn is left out; noise is that of the points.
func krige(at [][3]float64, y, noise []float64) field {
	n := len(at)
	spread := rms(y)
	best, least := field{}, math.Inf(1)
	if n == 0 || spread == 0 {
		return best
	}
	for _, length := range krigeLengths {
		f := field{at: at, length: length}
		k := mat.NewSymDense(n, nil)
		for i := range n {
			for j := range i {
				k.SetSym(i, j, f.correlation(at[i], at[j]))
			}
			k.SetSym(i, i, 1+sq(noise[i]/spread)+1e-6)
		}
		var c mat.Cholesky
		var inverse mat.SymDense
		if !c.Factorize(k) || c.InverseTo(&inverse) != nil {
			continue
		}
		var w mat.VecDense
		if c.SolveVecTo(&w, mat.NewVecDense(n, append([]float64(nil), y...))) != nil {
			continue
		}
		left := 0.0 // each point without itself: Rasmussen and Williams, Gaussian Processes (2006), eq. 5.12
		for i := range n {
			left += sq(w.AtVec(i)/inverse.At(i, i)) / (sq(noise[i]) + sq(0.1*spread))
		}
		if left < least {
			f.weight = append([]float64(nil), w.RawVector().Data...)
			best, least = f, left
		}
	}
	return best
}

// EfficiencyIn is the overall efficiency by the map with a law, that of the fit or a worn one; NaN where there is none.
func (m *Map) EfficiencyIn(law Displacement, e, w, dp float64, fluid Fluid) float64 {
	q := e*law.D*w - m.Slip(e, w, dp).V*law.Slip(e, w, dp, fluid.Mu, fluid.Rho, fluid.modulus(dp))
	t := e*law.D*dp + Sign(w)*m.Friction(e, w, dp).V*law.FrictionTorque(e, w, dp, fluid.Mu, fluid.Rho)
	return Point{W: w, E: e, DP: dp, Q: q, T: t}.Overall()
}
