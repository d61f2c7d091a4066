package machines

import "math"

// Limits of the flow regimes: laminar below, turbulent above, a smooth passage between.
// Source: textbook limits 2000 and 4000 (Sullivan, Fluid Power); in between nature is undecided.
const (
	LaminarLimit   = 2000.0
	TurbulentLimit = 4000.0
)

// Reynolds returns |v|·d·ρ/μ [–] of mean velocity v [m/s] in a pipe of inner diameter d [m], with
// density rho [kg/m³] and dynamic viscosity mu [Pa·s] > 0.
func Reynolds(v, d, rho, mu float64) float64 { return math.Abs(v) * d * rho / mu }

// MeanVelocity returns v [m/s] of flow q [m³/s] in a pipe of inner diameter d [m] > 0.
func MeanVelocity(q, d float64) float64 { return q / (math.Pi / 4 * d * d) }

// DiameterFor returns the inner diameter [m] in which flow q [m³/s] has the mean velocity v [m/s] > 0.
func DiameterFor(q, v float64) float64 { return math.Sqrt(4 * math.Abs(q) / (math.Pi * v)) }

// FrictionFactor returns Darcy's f [–] at Reynolds number re > 0 and relative roughness rel = ε/d, 0 to 0.05:
// 64/Re up to 2000, Colebrook from 4000, between them what PipeDrop uses.
func FrictionFactor(re, rel float64) float64 {
	h, _ := frictionHead(re, rel)
	return h / (re * re)
}

// frictionHead returns f·Re² and its slope by Re for re >= 0. This product is what the pressure
// drop is proportional to; it grows steadily through all regimes, f alone does not. Between the
// limits a cubic meets value and slope at both ends; both slopes are below three times the mean
// slope (worst 1.2 times at rel = 0.05), so that it is monotone (Fritsch and Carlson).
func frictionHead(re, rel float64) (h, slope float64) {
	switch {
	case re <= LaminarLimit:
		return 64 * re, 64
	case re >= TurbulentLimit:
		return turbulentHead(re, rel)
	}
	const width = TurbulentLimit - LaminarLimit
	h1, s1 := turbulentHead(TurbulentLimit, rel)
	h0, s0 := 64*LaminarLimit, 64.0
	t := (re - LaminarLimit) / width
	c2 := 3*(h1-h0) - width*(2*s0+s1)
	c3 := -2*(h1-h0) + width*(s0+s1)
	return h0 + t*(width*s0+t*(c2+t*c3)), s0 + t*(2*c2+t*3*c3)/width
}

// turbulentHead solves Colebrook's equation for x = 1/√f,
//
//	x = −2·log10(rel/3.7 + 2.51·x/Re)        (12)
//
// by Newton's method; from Swamee and Jain's start three steps reach rounding.
func turbulentHead(re, rel float64) (h, slope float64) {
	const c = 2 / math.Ln10
	x := -2 * math.Log10(rel/3.7+5.74/math.Pow(re, 0.9))
	for range 4 {
		g := rel/3.7 + 2.51*x/re
		x -= (x + c*math.Log(g)) / (1 + c*2.51/(re*g))
	}
	g := rel/3.7 + 2.51*x/re
	a := c * 2.51 / (re * g)
	dx := a * x / (re * (1 + a))
	y := re / x // f·Re² = (Re/x)²
	return y * y, 2 * y * (x - re*dx) / (x * x)
}

// PipeDrop returns the pressure drop [Pa] of flow q [m³/s] and its slope dΔp/dq [Pa·s/m³] in a straight pipe with
// fittings (Darcy-Weisbach),
//
//	Δp = (f·l/d + ζ)·ρ·v·|v|/2        (13)
//
// d, l and roughness are inner diameter, length and sand roughness [m], d > 0; zeta the sum of the loss coefficients of
// fittings [–] >= 0; rho [kg/m³] and mu [Pa·s] > 0. Odd in q, monotone, and the slope is exact. The slope at q = 0
// is that of Hagen-Poiseuille; without length it is 0. With l = 0 and zeta = 0 both are 0. Height is not
// included. It holds for developed flow; ζ of fittings grows in laminar flow, which is left out.
func PipeDrop(q, d, l, roughness, zeta, rho, mu float64) (dp, slope float64) {
	area := math.Pi / 4 * d * d
	if l > 0 {
		toRe := d * rho / (mu * area) // Re = toRe·|q|
		scale := l * mu * mu / (2 * rho * d * d * d)
		h, s := frictionHead(math.Abs(q)*toRe, roughness/d)
		dp, slope = scale*h, scale*s*toRe
	}
	k := zeta * rho / (2 * area * area)
	return Sign(q) * (dp + k*q*q), slope + 2*k*math.Abs(q)
}

// rounded is R(y) = y·√(y² + yl²) with its slope: a square law that turns linear below yl. R is odd and monotone,
// and its slope at 0 is yl.
func rounded(y, yl float64) (r, slope float64) {
	h := math.Hypot(y, yl)
	if h == 0 {
		return 0, 0
	}
	return y * h, h + y*y/h
}

// NominalDrop returns the pressure drop [Pa] and its slope [Pa·s/m³] at flow q [m³/s] of an orifice known by one
// point, dpN [Pa] at qN [m³/s], both > 0,
//
//	Δp = ΔpN·q·√(q² + ql²)/qN²        (14)
//
// ql [m³/s] >= 0 is the flow below which the drop turns linear, as it does in laminar flow; 1 to 3 % of qN
// is common practice. With ql = 0 it is the square law. An opening u multiplies qN. Odd in q.
func NominalDrop(q, qN, dpN, ql float64) (dp, slope float64) {
	r, s := rounded(q, ql)
	k := dpN / (qN * qN)
	return k * r, k * s
}

// NominalFlow is the inverse of NominalDrop: the flow [m³/s] and its slope [m³/(s·Pa)] at a drop dp [Pa]. With ql = 0
// the slope at dp = 0 is infinite.
func NominalFlow(dp, qN, dpN, ql float64) (q, slope float64) {
	y := math.Abs(dp) * qN * qN / dpN // q·√(q² + ql²) = y
	l2 := ql * ql
	if y > 0 {
		q = y * math.Sqrt(2/(l2+math.Hypot(l2, 2*y)))
	}
	_, s := rounded(q, ql)
	return Sign(dp) * q, qN * qN / (dpN * s)
}

// OrificeFlow returns the flow [m³/s] through an orifice of discharge coefficient cd [–] (0.6 to 0.65 for a sharp
// edge, from memory) and area [m²] > 0 at a drop dp [Pa] and density rho [kg/m³]; odd in dp:
//
//	q = Cd·A·√(2Δp/ρ)        (15)
func OrificeFlow(dp, cd, area, rho float64) float64 {
	return Sign(dp) * cd * area * math.Sqrt(2*math.Abs(dp)/rho)
}
