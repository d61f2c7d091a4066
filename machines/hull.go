package machines

import (
	"math"
	"slices"
)

// Hull is the convex hull of measured points over speed, setting and pressure difference.
type Hull struct {
	at     [][3]float64 // over top
	top    [3]float64
	centre [3]float64
}

// NewHull takes the hull of points.
func NewHull(points []Point) *Hull {
	h := &Hull{}
	for _, p := range points {
		x := hullPlace(p.E, p.W, p.DP)
		h.at = append(h.at, x)
		for j, v := range x {
			h.top[j] = math.Max(h.top[j], math.Abs(v))
		}
	}
	for i := range h.at {
		for j := range h.top {
			h.at[i][j] /= h.top[j]
			h.centre[j] += h.at[i][j] / float64(len(points))
		}
	}
	for i := 0; i < len(h.at); { // a point within the others only costs time
		p := h.at[i]
		h.at = slices.Delete(h.at, i, i+1)
		if len(h.at) > 0 && h.reaches(p) {
			continue
		}
		h.at = slices.Insert(h.at, i, p)
		i++
	}
	return h
}

// hullPlace makes turning backwards and a negative setting one with the mirrored state, but not pump with motor.
func hullPlace(e, w, dp float64) [3]float64 {
	return [3]float64{math.Abs(w), math.Abs(e), dp * Sign(e*w)}
}

// hullSlack is the share of the way to the centre by which a state may lie outside and still count as inside: full setting
// or the highest pressure, measured once, must not be lost to rounding.
const hullSlack = 0.02

// Inside reports whether a state lies within the hull, in the quadrant that was measured; elsewhere a law is extrapolated.
func (h *Hull) Inside(e, w, dp float64) bool {
	x := hullPlace(e, w, dp)
	for j := range x {
		x[j] /= h.top[j]
		x[j] += hullSlack * (h.centre[j] - x[j])
	}
	return h.reaches(x)
}

// reaches reports whether the hull comes to x: Frank and Wolfe's method, each step towards the point that lies furthest
// against the way from x, until a plane parts x from all points or the way is as good as nothing.
func (h *Hull) reaches(x [3]float64) bool {
	const near = 1e-3
	dot := func(a, b [3]float64) float64 { return a[0]*b[0] + a[1]*b[1] + a[2]*b[2] }
	less := func(a, b [3]float64) [3]float64 { return [3]float64{a[0] - b[0], a[1] - b[1], a[2] - b[2]} }
	v := less(h.centre, x)
	for range 200 {
		if dot(v, v) <= near*near {
			return true
		}
		least, s := math.Inf(1), x
		for _, p := range h.at {
			if d := dot(v, p); d < least {
				least, s = d, p
			}
		}
		s = less(s, x)
		if dot(v, s) > 0 {
			return false
		}
		d := less(s, v)
		step := math.Min(1, -dot(v, d)/dot(d, d))
		for j := range v {
			v[j] += step * d[j]
		}
	}
	return true // no plane was found: it touches a face
}
