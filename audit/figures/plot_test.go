package figures

import (
	"fmt"
	"image"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/audit/pen"
)

func randomPlot(r *rand.Rand) Plot {
	f := Plot{Axis: "time", AxisUnit: "s"}
	for range 1 + r.IntN(5) {
		l := Lane{Title: pick(r), Unit: "bar", Zero: r.IntN(2) == 0}
		offset, gain := extreme(r)*float64(r.IntN(3)-1), extreme(r)
		for range 1 + r.IntN(4) {
			s := Series{Name: pick(r), Role: Role(r.IntN(6)), Fill: r.IntN(3) == 0}
			for i := range r.IntN(200) {
				s.X = append(s.X, float64(i)*0.1)
				s.Y = append(s.Y, offset+gain*r.NormFloat64())
				if r.IntN(30) == 0 {
					s.Y[i] = math.NaN()
				}
			}
			l.Series = append(l.Series, s)
		}
		f.Lanes = append(f.Lanes, l)
	}
	t := 0.0
	for range r.IntN(12) {
		d := r.Float64() * r.Float64() * 5
		f.Phases = append(f.Phases, Phase{pick(r), t, t + d})
		t += d
	}
	return f
}

func TestPlotLabels(t *testing.T) {
	for seed := range uint64(120) {
		r := rand.New(rand.NewPCG(seed, 3))
		f := randomPlot(r)
		w, h := 160+r.Float64()*1000, 60+r.Float64()*700
		if seed%3 == 0 {
			h = f.Height(w)
		}
		rec := pen.NewRecorder()
		a := f.Draw(rec, w, h, Light)
		checkLabels(t, fmt.Sprintf("seed %d", seed), rec, w, h)
		if len(a.Lanes) != len(f.Lanes) {
			t.Fatalf("seed %d: %d lanes", seed, len(a.Lanes))
		}
		for i, l := range a.Lanes {
			if l.H <= 0 || l.Y < 0 || l.Y+l.H > h || i > 0 && l.Y < a.Lanes[i-1].Y+a.Lanes[i-1].H {
				t.Errorf("seed %d: lane %d at %v, height %v of %v", seed, i, l.Y, l.H, h)
			}
		}
	}
}

func TestHostilePlot(t *testing.T) {
	one := []float64{1}
	series := []Series{{}, {X: one, Y: one}, {X: one}, {X: []float64{0, 1, 2}, Y: []float64{5, 5, 5}}, {X: []float64{0, 0, 0}, Y: []float64{1, 2, 3}}, {X: []float64{3, 2, 1}, Y: []float64{1, 2, 3}},
		{X: []float64{1e12, 1e12 + 1}, Y: []float64{1e-12, 2e-12}}}
	for _, v := range hostile {
		series = append(series, Series{X: []float64{0, 1, v, 3}, Y: []float64{v, v, 2, v}, Fill: true}, Series{X: []float64{v, v}, Y: []float64{v, v}})
	}
	for i, s := range series {
		for _, lane := range []Lane{{Series: []Series{s}}, {Title: "t", Unit: "u", Series: []Series{s, s}, Zero: true}, {Series: []Series{s}, Range: [2]float64{0, 1}}} {
			f := Plot{Lanes: []Lane{lane}, Phases: []Phase{{"a", math.NaN(), 1}, {"b", 2, 1}, {"c", -1, math.Inf(1)}}}
			rec := pen.NewRecorder()
			f.Draw(rec, 500, 200, Dark)
			checkLabels(t, fmt.Sprintf("series %d", i), rec, 500, 200)
			f.Draw(rec, 0, 5, Dark)
			f.Draw(rec, math.Inf(1), math.NaN(), Dark)
		}
	}
	Plot{}.Draw(pen.NewRecorder(), 100, 100, Light)
}

// TestPlotPlacesValues compares drawn points with the scale that is reported.
func TestPlotPlacesValues(t *testing.T) {
	f := Plot{Lanes: []Lane{{Unit: "bar", Range: [2]float64{0, 200}, Series: []Series{{X: []float64{0, 5, 10}, Y: []float64{0, 160, 40}, Role: RoleGain}}}}, Axis: "time", AxisUnit: "s"}
	rec := pen.NewRecorder()
	a := f.Draw(rec, 800, 200, Light)
	l := a.Lanes[0]
	var line []pen.Pt
	for _, s := range rec.Shapes() {
		if s.Stroke.C == Light.Gain {
			line = s.Points
		}
	}
	want := []pen.Pt{{X: a.X, Y: l.Y + l.H}, {X: a.X + a.W/2, Y: l.Y + 0.2*l.H}, {X: a.X + a.W, Y: l.Y + 0.8*l.H}}
	if len(line) != 3 {
		t.Fatalf("%d points drawn", len(line))
	}
	for i := range want {
		if math.Hypot(line[i].X-want[i].X, line[i].Y-want[i].Y) > 1e-9 {
			t.Errorf("point %d at %v, want %v", i, line[i], want[i])
		}
	}
	if x := a.XAt(5); a.At(x) != 5 || a.At(-10) != 0 || a.At(1e4) != 10 {
		t.Errorf("time at %v is %v", x, a.At(x))
	}
	if y := a.YAt(0, 160); y != want[1].Y {
		t.Errorf("160 bar at %v, want %v", y, want[1].Y)
	}
}

func TestRunsBreakAndEnterTheWindow(t *testing.T) {
	nan := math.NaN()
	got := runs([]float64{0, 1, 2, 3, 4, 5, 6, 5.5, 6}, []float64{0, 10, 20, nan, 40, 50, 60, 1, 2}, 0.5, 5.5, 1000)
	want := "[[{0.5 5} {1 10} {2 20}] [{4 40} {5 50} {5.5 55}] [{5.5 1}]]"
	// 6 → 5.5 runs backwards and starts anew; that run leaves at once.
	if s := fmt.Sprint(got); s != want {
		t.Errorf("runs = %s, want %s", s, want)
	}
}

func TestThinningKeepsEveryPeak(t *testing.T) {
	const n, columns = 100000, 500
	r := rand.New(rand.NewPCG(5, 5))
	x, y := make([]float64, n), make([]float64, n)
	for i := range x {
		x[i], y[i] = float64(i), r.NormFloat64()
	}
	all := runs(x, y, 0, n-1, columns)
	if len(all) != 1 {
		t.Fatalf("%d runs", len(all))
	}
	got := all[0]
	if len(got) > 4*columns+4 {
		t.Errorf("%d points left", len(got))
	}
	lo, hi := map[int]float64{}, map[int]float64{}
	col := func(x float64) int { return int(x * columns / (n - 1)) }
	for _, p := range got {
		lo[col(p.X)], hi[col(p.X)] = min(lo[col(p.X)], p.Y), max(hi[col(p.X)], p.Y)
		if y[int(p.X)] != p.Y {
			t.Fatalf("%v is no point of the series", p)
		}
	}
	for i := range x {
		if c := col(x[i]); y[i] < lo[c] || y[i] > hi[c] {
			t.Fatalf("column %d lost %v", c, y[i])
		}
	}
	for i := 1; i < len(got); i++ {
		if got[i].X <= got[i-1].X {
			t.Fatalf("order lost at %d", i)
		}
	}
	if got[0].X != 0 || got[len(got)-1].X != n-1 {
		t.Error("an end is missing")
	}
}

func BenchmarkPlotMillion(b *testing.B) {
	s := Series{Role: RoleGain}
	for i := range 1000000 {
		s.X = append(s.X, float64(i)*1e-3)
		s.Y = append(s.Y, math.Sin(float64(i)*1e-4))
	}
	f := Plot{Lanes: []Lane{{Title: "p", Unit: "bar", Series: []Series{s}}}}
	r := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, 900, 400)))
	for range b.N {
		f.Draw(r, 900, 400, Light)
	}
}

// TestLongUnitFindsItsRoom: the unit follows the last number of the scale and
// must not lie on the number before.
func TestLongUnitFindsItsRoom(t *testing.T) {
	f := demoSteps()
	for _, unit := range []string{"kJ", "kWh a year", "kilowatt-hours a year and machine", strings.Repeat("W", 90)} {
		for _, w := range []float64{260, 420, 700} {
			f.Unit = unit
			rec := pen.NewRecorder()
			f.Draw(rec, w, f.Height(), Light)
			checkLabels(t, fmt.Sprintf("%s in %v", unit, w), rec, w, f.Height())
		}
	}
}
