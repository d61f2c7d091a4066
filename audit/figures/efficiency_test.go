package figures

import (
	"fmt"
	"image"
	"image/png"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/machines"
	"barlitre/machines/units"
)

// demoMachine is an invented axial piston pump with a duty at three states.
func demoMachine() *audit.MachineMap {
	law := machines.Displacement{D: 57e-6 / (2 * math.Pi), Cs: 7e-9, Kd: 2.4, K: 0.4, Cf: 0.0105, Cv: 4.9e4, Ch: 25, Tc: 3}
	return &audit.MachineMap{Name: "P1", Law: law, Fluid: machines.Fluid{Mu: 0.04, Rho: 870, Bulk: 1.4e9}, MinSpeed: 500 * units.RPM, MaxSpeed: 2600 * units.RPM, Rating: 350 * units.Bar,
		States: []audit.Operating{{W: 1480 * units.RPM, E: 1, DP: 160e5, Energy: 60e3}, {W: 1480 * units.RPM, E: 0.3, DP: 220e5, Energy: 25e3}, {W: 1490 * units.RPM, E: 0.1, DP: 20e5, Energy: 1e3}}}
}

// demoFit fits a law to invented points.
func demoFit(t testing.TB) *audit.MachineMap {
	m := demoMachine()
	var points []machines.Point
	for i, n := range []float64{500, 1000, 1500, 2500} {
		for j, e := range []float64{0.2, 0.6, 1} {
			for k, bar := range []float64{50, 120, 200, 300} {
				w, dp := n*units.RPM, bar*units.Bar
				off := 1 + 0.01*math.Sin(float64(7*i+3*j+k))
				points = append(points, machines.Point{W: w, E: e, DP: dp, Q: off * m.Law.Flow(e, w, dp, 0.04, 870, 1.4e9), T: m.Law.Torque(e, w, dp, 0.04, 870)})
			}
		}
	}
	f, err := machines.FitPoints(points, machines.FitOptions{D: m.Law.D, Fluid: m.Fluid})
	if err != nil {
		t.Fatal(err)
	}
	return audit.FitMap("pump.csv", f)
}

// A field that is known: efficiency equal to x. Its contours are upright lines at their value.
func TestContoursOfAKnownField(t *testing.T) {
	f := EfficiencyMap{X: "x", Y: "y", ToX: 100, ToY: 10, At: func(x, y float64) float64 { return x / 100 }}
	rec := pen.NewRecorder()
	area := f.Draw(rec, 600, 400, Light)
	found := map[float64]int{}
	for _, s := range rec.Shapes() {
		if len(s.Points) != 2 || s.Stroke.C != Light.Ink {
			continue
		}
		a, b := s.Points[0], s.Points[1]
		v := area.At(a.X)
		if math.Abs(a.X-b.X) > 1e-6 || math.Abs(v-math.Round(v)) > 1e-6 {
			t.Fatalf("a contour runs from %v to %v", a, b)
		}
		found[math.Round(v)]++
	}
	for _, level := range []float64{50, 60, 70, 80, 90, 95} {
		if found[level] != mapRows {
			t.Errorf("contour %g crosses %d of %d rows", level, found[level], mapRows)
		}
	}
}

func TestMapsFindRoom(t *testing.T) {
	m := demoMachine()
	for _, s := range []units.System{units.Metric, units.US, units.SI} {
		for _, f := range []EfficiencyMap{MapOverSpeed(m, 0, s), MapOverSetting(m, 0, s)} {
			for _, w := range []float64{280, 420, 700} {
				rec := pen.NewRecorder()
				f.Draw(rec, w, f.Height(w), Light)
				checkLabels(t, fmt.Sprintf("%s, system %v, width %v", f.Title, s, w), rec, w, f.Height(w))
			}
		}
		rec := pen.NewRecorder()
		FitResiduals(demoFit(t), s).Draw(rec, 420, 300, Light)
		checkLabels(t, "residuals", rec, 420, 300)
	}
	for _, v := range hostile { // nothing that is not a number breaks a picture
		f := MapOverSpeed(m, 1, units.Metric)
		f.ToX, f.Points = v, append(f.Points, MapPoint{v, v, v, true})
		f.Draw(pen.NewRecorder(), 400, 300, Light)
		f.ToX, f.At = 100, func(x, y float64) float64 { return v }
		rec := pen.NewRecorder()
		f.Draw(rec, 400, 300, Light)
		Residuals{Points: []ResidualPoint{{v, v, v}, {1, 2, 3}}}.Draw(rec, 400, 300, Light)
		if rec.Skipped() != 0 {
			t.Errorf("%v: %d calls refused", v, rec.Skipped())
		}
	}
}

// The disc of a state has an area by its energy, and lies where the axes say.
func TestStatesOfTheDuty(t *testing.T) {
	m := demoMachine()
	rec := pen.NewRecorder()
	area := MapOverSpeed(m, 1, units.Metric).Draw(rec, 600, 420, Light)
	var r []float64
	for _, s := range rec.Shapes() {
		if s.Stroke.C != Light.Heat {
			continue
		}
		centre, edge := s.Points[0], s.Points[1]
		r = append(r, edge.X-centre.X)
		if p := area.Lanes[0]; len(r) == 1 && (math.Abs(area.At(centre.X)-1480) > 1 || math.Abs((p.Y+p.H-centre.Y)/p.H*p.Hi-160) > 1) {
			t.Errorf("the largest state lies at %g rpm, %v", area.At(centre.X), centre)
		}
	}
	if len(r) != 3 || math.Abs(r[1]/r[0]-math.Sqrt(25.0/60)) > 0.01 {
		t.Errorf("discs have the radii %v", r)
	}
}

// Where nothing was measured the tint is paler.
func TestExtrapolationIsPale(t *testing.T) {
	f := EfficiencyMap{X: "x", Y: "y", ToX: 100, ToY: 10, At: func(x, y float64) float64 { return 0.9 }, Inside: func(x, y float64) bool { return x < 50 }}
	rec := pen.NewRecorder()
	area := f.Draw(rec, 600, 400, Light)
	contrastOf := map[bool]float64{}
	for _, s := range rec.Shapes() {
		lo, hi := s.Bounds()
		if len(s.Points) == 4 && lo.X >= area.X && hi.X <= area.X+area.W+1e-6 && hi.X-lo.X < 0.9*area.W {
			contrastOf[area.At((lo.X+hi.X)/2) < 50] = contrast(s.Fill, Light.Card)
		}
	}
	if !(contrastOf[true] > contrastOf[false]) || len(contrastOf) != 2 {
		t.Errorf("contrast to the card inside %g, outside %g", contrastOf[true], contrastOf[false])
	}
}

// BARLITRE_PICTURES names a folder for the pictures.
func TestMachinePictures(t *testing.T) {
	dir := os.Getenv("BARLITRE_PICTURES")
	if dir == "" {
		t.Skip("BARLITRE_PICTURES names no folder")
	}
	fit := demoFit(t)
	for name, pal := range map[string]Palette{"light": Light, "dark": Dark} {
		for what, draw := range map[string]func(pen.Pen){
			"speed":     func(p pen.Pen) { MapOverSpeed(demoMachine(), 0, units.Metric).Draw(p, 700, 500, pal) },
			"setting":   func(p pen.Pen) { MapOverSetting(demoMachine(), 0, units.Metric).Draw(p, 700, 500, pal) },
			"points":    func(p pen.Pen) { MapOverSpeed(fit, 0, units.Metric).Draw(p, 700, 500, pal) },
			"residuals": func(p pen.Pen) { FitResiduals(fit, units.Metric).Draw(p, 700, 400, pal) },
		} {
			r := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, 700, 500)))
			r.Clear(pal.Card)
			draw(r)
			f, err := os.Create(filepath.Join(dir, strings.Join([]string{"machine", what, name}, "-")+".png"))
			if err != nil {
				t.Fatal(err)
			}
			if err := png.Encode(f, r.Image()); err != nil {
				t.Fatal(err)
			}
			f.Close()
		}
	}
}

func BenchmarkMapOfPoints(b *testing.B) {
	f := MapOverSpeed(demoFit(b), 0, units.Metric)
	for range b.N {
		f.Draw(pen.NewRecorder(), 700, 500, Light)
	}
}
