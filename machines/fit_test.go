package machines

import (
	"encoding/csv"
	"math"
	"math/rand"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"barlitre/machines/units"
)

// pump57 reads the measured points of a 57 cm³ axial piston pump, which are not part of the project.
func pump57(t *testing.T) []Point {
	t.Helper()
	dir := os.Getenv("BARLITRE_DATA")
	if dir == "" {
		t.Skip("set BARLITRE_DATA to the folder that holds piston_pump_57cm3_points.csv")
	}
	f, err := os.Open(filepath.Join(dir, "piston_pump_57cm3_points.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []Point
	for i, r := range rows[1:] {
		v := make([]float64, len(r))
		for j := range r {
			if v[j], err = strconv.ParseFloat(r[j], 64); err != nil {
				t.Fatal(err)
			}
		}
		out = append(out, Point{W: v[1] * units.RPM, E: v[2] / 57, DP: v[3] * 1e6, Q: v[4] * lpm, T: v[5], Line: i + 2})
	}
	return out
}

// oilOf57 is assumed: the data state no oil.
var oilOf57 = Fluid{Mu: 0.04, Rho: 870, Bulk: 1.4e9}

// Real points of a 57 cm³ pump, 500 to 4500 rpm. Plain least squares with five terms by an independent calculation:
// Cs 6.519e-9, dead volume 2.812, Cf 0.01124, Cv 7.541e4, Tc 3.082 N m, 2.4 points rms; tolerance 0.5 %.
func TestFitOfMeasuredPump(t *testing.T) {
	points := pump57(t)
	opt := FitOptions{D: 57 * cm3, Fluid: oilOf57, Terms: TermLaminar | TermDead | TermPressure | TermViscous | TermConstant, Plain: true}
	f, err := FitPoints(points, opt)
	if err != nil {
		t.Fatal(err)
	}
	expect(t, "Cs", f.Law.Cs, 6.519e-9, 5e-3)
	expect(t, "Kd", f.Law.Kd, 2.812, 5e-3)
	expect(t, "Cf", f.Law.Cf, 0.01124, 5e-3)
	expect(t, "Cv", f.Law.Cv, 7.541e4, 5e-3)
	expect(t, "Tc", f.Law.Tc, 3.082, 5e-3)
	expectAbs(t, "rms in points", 100*f.RMS, 2.4, 0.05)

	// As the program fits: all terms, each point by what it does to the efficiency. The aims of the project are 2.5 points
	// over all and 2.8 at speeds held out, no coefficient negative.
	f, err = FitPoints(points, FitOptions{D: 57 * cm3, Fluid: oilOf57})
	if err != nil {
		t.Fatal(err)
	}
	t.Logf("all terms: rms %.2f, held out %.2f points, %+v, %q", 100*f.RMS, 100*f.HeldOut, f.Law, f.Warnings)
	if !(f.RMS <= 0.025 && f.HeldOut <= 0.028) || f.Law.Check() != nil {
		t.Errorf("rms %.2f, at speeds held out %.2f points, %v", 100*f.RMS, 100*f.HeldOut, f.Law.Check())
	}
	if n := len(Speeds(points)); n != 7 {
		t.Errorf("%d speeds, the file has 7", n)
	}
	// 1000, 2000 and 4000 rpm held out together.
	var rest, held []Point
	for _, p := range points {
		if n := math.Round(p.W / units.RPM / 100); n == 10 || n == 20 || n == 40 {
			held = append(held, p)
		} else {
			rest = append(rest, p)
		}
	}
	g, err := FitPoints(rest, FitOptions{D: 57 * cm3, Fluid: oilOf57})
	if err != nil {
		t.Fatal(err)
	}
	r := rms(g.Law.residuals(held, oilOf57))
	t.Logf("1000, 2000 and 4000 rpm held out: %.2f points over %d points", 100*r, len(held))
	if len(held) == 0 || !(r <= 0.028) {
		t.Errorf("%.2f points at three speeds held out, at most 2.8", 100*r)
	}
}

// made are points of a known law, with flow and torque off by a share of noise.
func made(law Displacement, fluid Fluid, noise float64, rpm ...float64) []Point {
	r := rand.New(rand.NewSource(2))
	var out []Point
	for _, n := range rpm {
		for _, e := range []float64{0.3, 0.65, 1} {
			for _, dp := range []float64{5e6, 1.2e7, 2e7, 3e7} {
				w := n * units.RPM
				q, T := law.Flow(e, w, dp, fluid.Mu, fluid.Rho, fluid.modulus(dp)), law.Torque(e, w, dp, fluid.Mu, fluid.Rho)
				out = append(out, Point{W: w, E: e, DP: dp, Q: q * (1 + noise*r.NormFloat64()), T: T * (1 + noise*r.NormFloat64())})
			}
		}
	}
	return out
}

// Points that were made by a law give it back; with noise of 0.5 % the rms is that of the noise.
func TestFitFindsALaw(t *testing.T) {
	fluid := Fluid{Mu: 0.03, Rho: 860, Bulk: 1.5e9, Air: 0.01}
	law := Displacement{D: 71 * cm3, Cs: 8e-9, Cst: 4e-6, K: 0.7, Kd: 0.5, Cf: 0.02, Cv: 5e4, Ch: 30, Tc: 2}
	f, err := FitPoints(made(law, fluid, 0, 600, 1200, 1800, 2600), FitOptions{D: law.D, Fluid: fluid})
	if err != nil {
		t.Fatal(err)
	}
	for i, v := range [][2]float64{{f.Law.Cs, law.Cs}, {f.Law.Cst, law.Cst}, {f.Law.K, law.K}, {f.Law.Kd, law.Kd}, {f.Law.Cf, law.Cf}, {f.Law.Cv, law.Cv}, {f.Law.Ch, law.Ch}, {f.Law.Tc, law.Tc}} {
		expect(t, termNames[i], v[0], v[1], 1e-6)
	}
	f, err = FitPoints(made(law, fluid, 0.005, 600, 1200, 1800, 2600), FitOptions{D: law.D, Fluid: fluid})
	if err != nil || f.Law.Check() != nil {
		t.Fatal(err, f.Law.Check())
	}
	if f.RMS < 0.003 || f.RMS > 0.009 || !(f.HeldOut < 0.012) {
		t.Errorf("rms %.4f, held out %.4f with noise of 0.5 %%", f.RMS, f.HeldOut)
	}
}

// Two near speeds cannot tell what grows with speed from what does not; the fit says so and names the terms.
func TestFitWarnsOfNearSpeeds(t *testing.T) {
	fluid := Fluid{Mu: 0.03, Rho: 860, Bulk: 1.5e9}
	law := Displacement{D: 71 * cm3, Cs: 8e-9, Kd: 1.5, Cf: 0.02, Cv: 5e4, Tc: 2}
	f, err := FitPoints(made(law, fluid, 0, 1450, 1500), FitOptions{D: law.D, Fluid: fluid, Terms: TermLaminar | TermDead | TermPressure | TermViscous | TermConstant})
	if err != nil {
		t.Fatal(err)
	}
	said := strings.Join(f.Warnings, "\n")
	for _, want := range []string{"laminar slip Cs and dead volume kV", "viscous friction Cv and constant friction Tc", "2 speeds only"} {
		if !strings.Contains(said, want) {
			t.Errorf("says %q, want %q", said, want)
		}
	}
	if !math.IsNaN(f.HeldOut) {
		t.Error("a speed was held out of two")
	}
}

// Non-negative least squares against its conditions of optimality (Karush, Kuhn, Tucker): no unknown below zero, no gain
// by raising one that is zero.
func TestLeastSquaresOptimality(t *testing.T) {
	r := rand.New(rand.NewSource(8))
	for range 300 {
		var l least
		for range 12 {
			row := make([]float64, 4)
			for j := range row {
				row[j] = r.NormFloat64() * math.Pow(10, 3*r.Float64())
			}
			l.rows, l.right = append(l.rows, row), append(l.right, 100*r.NormFloat64())
		}
		x := l.solve()
		for j := range x {
			slope, size := 0.0, 0.0
			for i, row := range l.rows {
				left := -l.right[i]
				for k := range x {
					left += row[k] * x[k]
				}
				slope += row[j] * left
				size += math.Abs(row[j] * l.right[i])
			}
			if x[j] < 0 || slope < -1e-9*size || (x[j] > 0 && slope > 1e-9*size) {
				t.Fatalf("x %v: slope %g by unknown %d", x, slope, j)
			}
		}
	}
}
