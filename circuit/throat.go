package circuit

import "math"

// throat is a turbulent restriction, scaled: drop = q·√(q²+ql²)/k², laminar below
// ql, so that its slope at zero flow is finite. ql is the flow at 1e-6 bar: at
// 0.01 bar the flow is 2.5e-5 below that of the square-root law.
type throat struct {
	k2, ql2 float64
	perK2   float64 // 1/k², 0 of an ideal opening
}

// laminar is ql²/k², twice the drop at which a throat turns from laminar to turbulent.
const laminar = 1e-8

// throatOf makes a throat from a nominal point: qN at dpN, both scaled. Without a
// drop, or without flow limit, it is an ideal opening.
func throatOf(qN, dpN float64) throat {
	if dpN <= 0 || math.IsInf(qN, 1) {
		return throat{k2: math.Inf(1)}
	}
	k2 := qN * qN / dpN
	return throat{k2, laminar * k2, 1 / k2}
}

// at returns the drop at flow q of the fully open throat and its slope.
func (t *throat) at(q float64) (r, dr float64) {
	if t.perK2 == 0 {
		return 0, 0
	}
	h := math.Sqrt(q*q + t.ql2)
	if h == 0 {
		return 0, 0
	}
	return q * h * t.perK2, (h + q*q/h) * t.perK2
}

// flow is the inverse of at: the flow of the fully open throat at a drop, and its
// slope. With s = √(d² + 4Δp²), d = ql²/k², it is q²+ql² = h² = k²(s + d)/2.
func (t *throat) flow(dp float64) (q, dq float64) {
	s := math.Sqrt(laminar*laminar + 4*dp*dp)
	h := math.Sqrt(0.5 * t.k2 * (s + laminar))
	return dp * t.k2 / h, h / s
}

// first is a flow for a cold start: what passes at some 10 bar, at most a twentieth of
// the flow scale. A small throat that starts with more has a drop beyond all measure.
func (t throat) first() float64 { return math.Min(0.05, 0.3*math.Sqrt(t.k2)) }

// chord is the slope that leads from a drop with its flow to the drop that a flow q
// belongs to, where the two lie far apart: at flows near zero the tangent, which a root
// makes flat, would lead far past it. Elsewhere it is the tangent.
func (t *throat) chord(dp, full, q, tangent float64) float64 {
	if r := q / full; r > 0.75 && r < 1.33 { // so are the drops not far apart
		return tangent
	}
	to, _ := t.at(q)
	if d := dp - to; math.Abs(d) > 0.5*max(math.Abs(dp), math.Abs(to)) && d != 0 {
		if s := (full - q) / d; s > 0 {
			return s
		}
	}
	return tangent
}

// steer is chord for rows that are drops: the slope that leads from a flow q with its drop r to
// the flow that a drop dp belongs to, or to the least flow there may be.
func (t *throat) steer(q, r, dp, tangent, least float64) float64 {
	if math.Abs(dp-r) <= 0.5*max(math.Abs(dp), math.Abs(r)) || t.perK2 == 0 || (q <= least && dp <= 0) {
		return tangent
	}
	to, _ := t.flow(dp)
	if s := (dp - r) / (max(to, least) - q); s > 0 && !math.IsInf(s, 1) {
		return s
	}
	return tangent
}

// throttle adds the flow unknown q through a throat from a to b, and its row: Δp(q) = pa − pb − opens,
// with q >= least by its bounds. Nodes are as those of branch.
func (e *eval) throttle(a, b, q slot, t *throat, opens, least float64) {
	v, dp := e.val(q), e.val(a)-e.val(b)
	r, dr := t.at(v)
	e.add(a, v)
	e.add(b, -v)
	e.add(q, opens+r+minResistance*v-dp)
	if e.slopes == nil {
		return
	}
	if !e.slopes.Tangent {
		dr = t.steer(v, r, dp-opens, dr, least)
	}
	e.slopes.Add(int(q), int(q), dr+minResistance)
	if e.steady != nil {
		e.same(a, q, 1)
		e.same(b, q, -1)
		e.same(q, a, -1)
		e.same(q, b, 1)
	}
}
