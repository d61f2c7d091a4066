package pen

import "math"

// limit is the largest coordinate or size a pen accepts after scaling. Far
// beyond any page, yet small enough for the fixed-point glyph arithmetic.
const limit = 1e7

// transform maps user units to the units of the back end: d + s·p.
type transform struct{ dx, dy, s float64 }

// base is what all back ends share: the stack of transforms and the count of
// refused calls.
type base struct {
	cur     transform
	stack   []transform
	skipped int
}

func newBase() base { return base{cur: transform{s: 1}} }

// Push moves and scales what follows. A scale that is not above 0 makes
// everything up to the matching Pop refused.
func (b *base) Push(dx, dy, scale float64) {
	b.stack = append(b.stack, b.cur)
	if !(scale > 0) {
		scale = math.NaN()
	}
	b.cur = transform{b.cur.dx + dx*b.cur.s, b.cur.dy + dy*b.cur.s, b.cur.s * scale}
}

// Pop ends the last Push.
func (b *base) Pop() {
	n := len(b.stack) - 1
	if n < 0 {
		b.skipped++
		return
	}
	b.cur, b.stack = b.stack[n], b.stack[:n]
}

// Skipped returns how many calls drew nothing because a number in them could
// not be drawn, or because they had no partner.
func (b *base) Skipped() int { return b.skipped }

// at maps a point; a refused one comes back as NaN.
func (b *base) at(p Pt) Pt {
	return Pt{b.cur.dx + p.X*b.cur.s, b.cur.dy + p.Y*b.cur.s}
}

// all maps the points into a new slice.
func (b *base) all(p []Pt) []Pt {
	out := make([]Pt, len(p))
	for i, q := range p {
		out[i] = b.at(q)
	}
	return out
}

// stroke maps width and dashes; a width below 0 becomes 0.
func (b *base) stroke(s Stroke) Stroke {
	out := Stroke{W: max(0, s.W*b.cur.s), C: s.C}
	for _, d := range s.Dash {
		out.Dash = append(out.Dash, d*b.cur.s)
	}
	if !dashable(out.Dash) {
		out.Dash = nil
	}
	return out
}

// dashable reports whether the pattern has only finite lengths ≥ 0 and is not all zero.
func dashable(dash []float64) bool {
	sum := 0.0
	for _, d := range dash {
		if !(d >= 0) || d > limit {
			return false
		}
		sum += d
	}
	return sum > 0
}

// ok reports whether all values can be drawn, and counts the call as skipped if not.
func (b *base) ok(values ...float64) bool {
	for _, v := range values {
		if !(math.Abs(v) <= limit) { // also false for NaN
			b.skipped++
			return false
		}
	}
	return true
}

// okPts is ok for points and a stroke width.
func (b *base) okPts(w float64, pts ...Pt) bool {
	for _, p := range pts {
		if !(math.Abs(p.X) <= limit && math.Abs(p.Y) <= limit) {
			b.skipped++
			return false
		}
	}
	return b.ok(w)
}

// curve maps the pieces of a Bezier curve.
func (b *base) curve(pieces []Cubic) []Cubic {
	out := make([]Cubic, len(pieces))
	for i, c := range pieces {
		out[i] = Cubic{b.at(c.C1), b.at(c.C2), b.at(c.To)}
	}
	return out
}

// okCurve is okPts for a curve.
func (b *base) okCurve(w float64, start Pt, pieces []Cubic) bool {
	pts := make([]Pt, 0, 3*len(pieces)+1)
	pts = append(pts, start)
	for _, c := range pieces {
		pts = append(pts, c.C1, c.C2, c.To)
	}
	return b.okPts(w, pts...)
}

// sweep limits an arc to one turn.
func sweep(a0, a1 float64) float64 { return max(-360, min(360, a1-a0)) }

// arcCubics returns the start and the pieces, at most a quarter turn each, of
// the arc about c from a0 over turn degrees.
func arcCubics(c Pt, r, a0, turn float64) (Pt, []Cubic) {
	n := max(1, int(math.Ceil(math.Abs(turn)/90-1e-9)))
	step := turn * math.Pi / 180 / float64(n)
	k := 4.0 / 3 * math.Tan(step/4) * r // arm length for an arc of this step
	on := func(a float64) (p, tangent Pt) {
		sin, cos := math.Sincos(a)
		return Pt{c.X + r*cos, c.Y + r*sin}, Pt{-sin * k, cos * k}
	}
	a := a0 * math.Pi / 180
	start, t0 := on(a)
	p0, out := start, make([]Cubic, n)
	for i := range out {
		a += step
		p1, t1 := on(a)
		out[i] = Cubic{Pt{p0.X + t0.X, p0.Y + t0.Y}, Pt{p1.X - t1.X, p1.Y - t1.Y}, p1}
		p0, t0 = p1, t1
	}
	return start, out
}

// flatten turns a curve into points that leave it by less than tol.
func flatten(start Pt, pieces []Cubic, tol float64) []Pt {
	out := []Pt{start}
	p0 := start
	for _, c := range pieces {
		// The second difference bounds how far a chord leaves the curve.
		d := math.Max(math.Hypot(p0.X-2*c.C1.X+c.C2.X, p0.Y-2*c.C1.Y+c.C2.Y),
			math.Hypot(c.C1.X-2*c.C2.X+c.To.X, c.C1.Y-2*c.C2.Y+c.To.Y))
		n := int(max(1, min(64, math.Ceil(math.Sqrt(0.75*d/tol)))))
		if c.C1 == p0 && c.C2 == c.To { // a straight piece
			n = 1
		}
		for i := 1; i <= n; i++ {
			t := float64(i) / float64(n)
			u := 1 - t
			a, b, cc, dd := u*u*u, 3*u*u*t, 3*u*t*t, t*t*t
			out = append(out, Pt{a*p0.X + b*c.C1.X + cc*c.C2.X + dd*c.To.X, a*p0.Y + b*c.C1.Y + cc*c.C2.Y + dd*c.To.Y})
		}
		p0 = c.To
	}
	return out
}
