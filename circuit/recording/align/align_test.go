package align

import (
	"math"
	"math/rand"
	"strings"
	"testing"
)

// course is a made-up pressure: strokes at uneven times, so that no shift but one fits.
func course(t float64) float64 {
	y := 0.0
	for k, at := range []float64{3, 11, 27.5, 40, 71, 78, 101, 140, 177, 181, 233, 260} {
		u := (t - at) / (1 + 0.3*float64(k%4))
		y += (1 + 0.2*float64(k%3)) * math.Exp(-u*u)
	}
	return y
}

// A second logger of another rate, another scale, noise, and a clock that is off by a known
// time and runs slow by a known share: both must be found, to a tenth of a step.
func TestKnownOffset(t *testing.T) {
	r := rand.New(rand.NewSource(1))
	for _, c := range []struct{ off, slow float64 }{{12.345, 0}, {-31.07, 0}, {5.5, 2e-3}} {
		var t1, v1, t2, v2 []float64
		for i := range 3000 {
			x := 0.1 * float64(i)
			t1, v1 = append(t1, x), append(v1, 100*course(x)+r.NormFloat64())
		}
		for i := range 900 {
			x := 20 + 0.25*float64(i) // true time
			t2, v2 = append(t2, (x-c.off)/(1+c.slow)), append(v2, 3+2*course(x)+0.02*r.NormFloat64())
		}
		f, err := Offset(t1, v1, t2, v2, 60)
		if err != nil {
			t.Fatal(err)
		}
		mid := c.off + c.slow*(t2[0]+t2[len(t2)-1])/2
		if tol := 0.025 + 0.5*c.slow*225/2; math.Abs(f.Offset-mid) > tol || !f.Sure() || c.slow == 0 && f.Height < 0.99 {
			t.Errorf("off by %g s: found %+v", mid, f)
		}
		if math.Abs(f.Drift-c.slow) > 4e-4 {
			t.Errorf("drift %g, made with %g", f.Drift, c.slow)
		}
		if s := f.String(); !strings.Contains(s, "s are added") || strings.Contains(s, "not clear") {
			t.Error(s)
		}
	}
}

// What repeats evenly fits at many shifts, and what has nothing in common at none: neither is called sure.
func TestUnclear(t *testing.T) {
	r := rand.New(rand.NewSource(2))
	var ts, sine, noise, other []float64
	for i := range 2000 {
		ts = append(ts, 0.1*float64(i))
		sine = append(sine, math.Sin(0.1*float64(i)*2*math.Pi/8))
		noise, other = append(noise, r.NormFloat64()), append(other, r.NormFloat64())
	}
	if f, err := Offset(ts, sine, ts, sine, 60); err != nil || f.Sure() || !strings.Contains(f.String(), "not clear") {
		t.Errorf("sine: %v, %+v", err, f)
	}
	if f, err := Offset(ts, noise, ts, other, 60); err != nil || f.Sure() {
		t.Errorf("noise: %v, %+v", err, f)
	}
	if _, err := Offset(ts, sine, ts, make([]float64, len(ts)), 60); err == nil {
		t.Error("a channel that does not change")
	}
	if _, err := Offset(ts[:5], sine[:5], ts, sine, 60); err == nil {
		t.Error("five rows")
	}
	far := make([]float64, len(ts))
	for i := range far {
		far[i] = ts[i] + 1e4
	}
	if _, err := Offset(ts, sine, far, sine, 10); err == nil {
		t.Error("recordings of other days")
	}
}
