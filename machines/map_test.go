package machines

import (
	"math"
	"math/rand"
	"testing"

	"barlitre/machines/units"
)

// wavy are points of a law whose slip and friction differ from any of the fitted form.
func wavy(rpm ...float64) []Point {
	law := Displacement{D: 71 * cm3, Cs: 8e-9, Kd: 1.5, Cf: 0.02, Cv: 5e4, Tc: 2}
	fluid := Fluid{Mu: 0.03, Rho: 860, Bulk: 1.5e9}
	points := made(law, fluid, 0, rpm...)
	for i, p := range points {
		more := 0.4 * math.Sin(p.DP/6e6)
		points[i].Q -= more * (p.E*law.D*p.W - p.Q)
		points[i].T += more * (p.T - p.E*law.D*p.DP)
	}
	return points
}

func mapOf(t *testing.T, points []Point) *Map {
	t.Helper()
	f, err := FitPoints(points, FitOptions{D: 71 * cm3, Fluid: Fluid{Mu: 0.03, Rho: 860, Bulk: 1.5e9}})
	if err != nil {
		t.Fatal(err)
	}
	return NewMap(f)
}

// A map meets its points better than any law does, is the law far from them, and has the slopes it says.
func TestMapMeetsItsPoints(t *testing.T) {
	m := mapOf(t, wavy(600, 1000, 1500, 2000, 2600))
	var left []float64
	for _, p := range m.Fit.Points {
		left = append(left, m.EfficiencyIn(m.Fit.Law, p.E, p.W, p.DP, m.Fit.Fluid)-p.Overall())
	}
	t.Logf("law leaves %.2f points, map %.2f", 100*m.Fit.RMS, 100*rms(left))
	if rms(left) > 0.3*m.Fit.RMS {
		t.Errorf("the map leaves %.2f points, its law %.2f", 100*rms(left), 100*m.Fit.RMS)
	}
	if f := m.Slip(1, 6*m.w, 6*m.dp); math.Abs(f.V-1) > 1e-6 {
		t.Errorf("far from the points the slip is %g of the law's", f.V)
	}
	e, w, dp := 0.7, 1700*units.RPM, 1.5e7
	for _, f := range []func(e, w, dp float64) Factor{m.Slip, m.Friction} {
		v := f(e, w, dp)
		expectSlope(t, "by e", func(x float64) float64 { return f(x, w, dp).V }, v.ByE, e, 1e-4, 1e-5)
		expectSlope(t, "by w", func(x float64) float64 { return f(e, x, dp).V }, v.ByW, w, 1e-2, 1e-5)
		expectSlope(t, "by dp", func(x float64) float64 { return f(e, w, x).V }, v.ByDP, dp, 1e3, 1e-5)
		if !(v.V > 0) || f(-e, w, -dp).V != v.V {
			t.Errorf("factor %g, mirrored %g", v.V, f(-e, w, -dp).V)
		}
	}
}

// The real pump: at speeds held out the map must not be worse than the law by more than a tenth.
func TestMapOfMeasuredPump(t *testing.T) {
	var rest, held []Point
	for _, p := range pump57(t) {
		if n := math.Round(p.W / units.RPM / 100); n == 10 || n == 20 || n == 40 {
			held = append(held, p)
		} else {
			rest = append(rest, p)
		}
	}
	f, err := FitPoints(rest, FitOptions{D: 57 * cm3, Fluid: oilOf57})
	if err != nil {
		t.Fatal(err)
	}
	m := NewMap(f)
	left := func(points []Point) (law, chart float64) {
		var a, b []float64
		for _, p := range points {
			a = append(a, f.Law.EfficiencyIn(p.E, p.W, p.DP, oilOf57)-p.Overall())
			b = append(b, m.EfficiencyIn(m.Fit.Law, p.E, p.W, p.DP, oilOf57)-p.Overall())
		}
		return 100 * rms(a), 100 * rms(b)
	}
	l1, m1 := left(rest)
	l2, m2 := left(held)
	t.Logf("given points: law %.2f, map %.2f; held out: law %.2f, map %.2f points", l1, m1, l2, m2)
	if m1 > l1/2 || m2 > 1.1*l2 {
		t.Errorf("given points: law %.2f, map %.2f; held out: law %.2f, map %.2f", l1, m1, l2, m2)
	}
}

// Points of a grid contain what lies between its corners, and nothing beyond or in another quadrant.
func TestInsideTheHull(t *testing.T) {
	f := NewHull(made(Displacement{D: 1e-5, Cs: 1e-9}, Fluid{Mu: 0.03, Rho: 860, Bulk: 1e9}, 0, 600, 2600)) // e 0.3 to 1, 50 to 300 bar
	if !f.Inside(1, 600*units.RPM, 3e7) || !f.Inside(1, 1500*units.RPM, 5e6) {
		t.Error("a corner or an edge of the points is taken as not measured")
	}
	rnd := rand.New(rand.NewSource(3))
	for range 2000 {
		e, n, bar := 0.1+rnd.Float64(), 300+2700*rnd.Float64(), 20+330*rnd.Float64()
		near := func(x, edge, range_ float64) bool { return math.Abs(x-edge) < 0.05*range_ }
		if near(e, 0.3, 1) || near(e, 1, 1) || near(n, 600, 2600) || near(n, 2600, 2600) || near(bar, 50, 300) || near(bar, 300, 300) {
			continue
		}
		want := e > 0.3 && e < 1 && n > 600 && n < 2600 && bar > 50 && bar < 300
		if got := f.Inside(e, n*units.RPM, bar*1e5); got != want {
			t.Fatalf("e %.2f, %.0f rpm, %.0f bar: inside is %v", e, n, bar, got)
		}
		if f.Inside(e, n*units.RPM, -bar*1e5) {
			t.Fatalf("e %.2f, %.0f rpm, −%.0f bar is taken as measured", e, n, bar)
		}
	}
}
