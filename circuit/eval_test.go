package circuit

import (
	"math"
	"testing"
)

// A throat follows the square-root law of its nominal point, its two forms are inverse
// to each other, and so are their slopes.
func TestThroat(t *testing.T) {
	h := throatOf(0.6, 0.05) // nominal flow and drop, scaled
	for _, dp := range []float64{1e-12, 1e-9, 1e-8, 1e-6, 1e-4, 0.05, 1, 30} {
		for _, side := range []float64{1, -1} {
			q, dq := h.flow(side * dp)
			back, slope := h.at(q)
			if math.Abs(back-side*dp) > 1e-13*(1+dp) || math.Abs(back-side*dp) > 1e-6*dp {
				t.Errorf("drop %g gives flow %g and that gives drop %g", side*dp, q, back)
			}
			if math.Abs(dq*slope-1) > 1e-9 {
				t.Errorf("drop %g: slopes %g and %g are not inverse", side*dp, dq, slope)
			}
			if law := side * 0.6 * math.Sqrt(dp/0.05); dp > 0.9e-4 && math.Abs(q-law) > 2.6e-5*math.Abs(law) {
				t.Errorf("drop %g: flow %g, square-root law %g", side*dp, q, law)
			}
		}
	}
	ideal := throatOf(0.6, 0)
	if r, dr := ideal.at(0.3); r != 0 || dr != 0 {
		t.Errorf("an ideal opening drops %g, slope %g", r, dr)
	}
}

// Where flow and drop lie far apart the slope leads to the flow that the drop belongs to, or to the
// least there may be; near by it is the tangent.
func TestSteer(t *testing.T) {
	h := throatOf(0.6, 0.05)
	for _, c := range []struct{ q, dp, least float64 }{{0, 0.02, 0}, {1e-7, 0.3, 0}, {-0.2, 0.3, math.Inf(-1)}, {0.4, -0.1, math.Inf(-1)}, {0.4, -0.1, 0}} {
		r, tangent := h.at(c.q)
		want, _ := h.flow(c.dp)
		want = max(want, c.least)
		if got := c.q + (c.dp-r)/h.steer(c.q, r, c.dp, tangent, c.least); math.Abs(got-want) > 1e-12 {
			t.Errorf("from flow %g to drop %g: %g, want %g", c.q, c.dp, got, want)
		}
	}
	r, tangent := h.at(0.3)
	if got := h.steer(0.3, r, 1.1*r, tangent, 0); got != tangent {
		t.Errorf("near by: %g, tangent %g", got, tangent)
	}
}
