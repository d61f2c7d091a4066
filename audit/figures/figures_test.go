package figures

import (
	"bytes"
	"fmt"
	"image"
	"image/color"
	"math"
	"math/rand/v2"
	"strings"
	"testing"
	"time"

	"barlitre/audit/pen"
)

// checkLabels fails if two labels overlap, one leaves 0…w × 0…h, or the pen
// refused a call.
func checkLabels(t *testing.T, what string, r *pen.Recorder, w, h float64) {
	t.Helper()
	boxes := r.Boxes()
	for i, a := range boxes {
		if a.Text == "" {
			continue
		}
		if !a.Inside(0, 0, w, h, 0.5) {
			t.Errorf("%s: %q at %.1f,%.1f size %.1f×%.1f leaves %v×%v", what, a.Text, a.X, a.Y, a.W, a.H, w, h)
		}
		if a.Cut {
			t.Errorf("%s: %q is cut", what, a.Text)
		}
		for _, b := range boxes[:i] {
			if b.Text != "" && a.Overlaps(b, 0.3) {
				t.Errorf("%s: %q lies on %q", what, a.Text, b.Text)
			}
		}
	}
	for _, s := range r.Shapes() {
		if lo, hi := s.Bounds(); len(s.Points) == 4 && s.Points[0].Y == s.Points[1].Y && s.Fill.A > 0 && (lo.X < -0.5 || lo.Y < -0.5 || hi.X > w+0.5 || hi.Y > h+0.5) {
			t.Errorf("%s: a bar leaves the figure: %v to %v", what, lo, hi)
		}
	}
	if r.Skipped() != 0 {
		t.Errorf("%s: %d calls refused", what, r.Skipped())
	}
}

var names = []string{"relief RV1", "pump P1 slip and friction", "", "valve V1", "filter", "Pressure compensator on section 3 of the mobile valve block, metering edge P to A at low temperature",
	"moteur électrique", "η Δp", "🛢️ tank", "油圧", "M", strings.Repeat("WM", 60)}

func pick(r *rand.Rand) string { return names[r.IntN(len(names))] }

// extreme returns mostly plain values, sometimes very small or large ones.
func extreme(r *rand.Rand) float64 {
	switch r.IntN(8) {
	case 0:
		return 0
	case 1:
		return r.Float64() * 1e-9
	case 2:
		return r.Float64() * 1e7
	}
	return r.Float64() * 100
}

// randomSteps returns circuits with 2 to 18 steps that balance.
func randomSteps(r *rand.Rand) LossSteps {
	f := LossSteps{Unit: "kJ"}
	for range 1 + r.IntN(3) {
		c := StepsCircuit{Title: pick(r), Subtitle: pick(r), WorkPositive: extreme(r), Stored: extreme(r) - 20}
		if r.IntN(2) == 0 {
			c.WorkNegative, c.Returned = extreme(r), extreme(r)
		}
		sum := c.WorkPositive + c.Stored + c.Returned - c.WorkNegative
		for range 2 + r.IntN(17) {
			s := Step{pick(r), extreme(r), r.IntN(2) == 0}
			c.Steps = append(c.Steps, s)
			sum += s.Value
		}
		c.Supply = max(0, sum)
		f.Circuits = append(f.Circuits, c)
	}
	return f
}

func TestLossStepsLabels(t *testing.T) {
	for seed := range uint64(120) {
		r := rand.New(rand.NewPCG(seed, 7))
		f := randomSteps(r)
		w, h := 150+r.Float64()*900, 60+r.Float64()*900
		if seed%3 == 0 {
			h = f.Height()
		}
		rec := pen.NewRecorder()
		regions := f.Draw(rec, w, h, Light)
		checkLabels(t, fmt.Sprintf("seed %d", seed), rec, w, h)
		rows := 0
		for _, c := range f.Circuits {
			rows += len(c.Steps)
		}
		steps := 0
		for _, g := range regions {
			if g.Kind == KindStep {
				steps++
			}
		}
		if steps != rows {
			t.Errorf("seed %d: %d steps drawn of %d", seed, steps, rows)
		}
	}
}

// TestLossStepsWidths checks each bar against value / scale, where the scale
// comes from the largest energy in any circuit.
func TestLossStepsWidths(t *testing.T) {
	for seed := range uint64(40) {
		f := randomSteps(rand.New(rand.NewPCG(seed, 11)))
		w, h := 700.0, f.Height()
		rec := pen.NewRecorder()
		f.Draw(rec, w, h, Light)
		most := 0.0
		var want []float64
		for _, c := range f.Circuits {
			most = max(most, c.Supply+c.WorkNegative+max(0, -c.Stored))
		}
		add := func(v float64) {
			if v/most*w > 1e-6 {
				want = append(want, v/most*w)
			}
		}
		for _, c := range f.Circuits {
			add(c.Supply)
			add(c.WorkNegative)
			add(-c.Stored)
			for _, s := range c.Steps {
				add(s.Value)
			}
			add(c.Stored)
			add(c.Returned)
			add(c.WorkPositive)
		}
		var got []float64
		for _, s := range rec.Shapes() {
			lo, hi := s.Bounds()
			if math.Abs(hi.Y-lo.Y-stepBar) < 1e-9 && s.Fill.A > 0 && hi.X-lo.X > 1e-6 {
				got = append(got, hi.X-lo.X)
			}
		}
		if len(got) != len(want) {
			// A circuit fed by its load alone has a rest that is a row of its own.
			if strings.Contains(rec.String(), "not accounted for") {
				continue
			}
			t.Fatalf("seed %d: %d bars, want %d", seed, len(got), len(want))
		}
		for i := range got {
			if math.Abs(got[i]-want[i]) > 1e-6*w {
				t.Errorf("seed %d bar %d: %v wide, want %v", seed, i, got[i], want[i])
			}
		}
	}
}

func TestLossStepsStepDownToTheWork(t *testing.T) {
	f := demoSteps()
	rows, _, hi := f.Circuits[1].lines()
	at := 0.0
	for _, r := range rows[:len(rows)-1] {
		if math.Abs(r.from-at) > 1e-9 {
			t.Errorf("%q begins at %v, the row before ended at %v", r.label, r.from, at)
		}
		at = r.to
	}
	if work := rows[len(rows)-1]; work.kind != KindWork || math.Abs(at-work.to) > 1e-9 || work.to != 5.1 {
		t.Errorf("steps end at %v, work is %v", at, work.to)
	}
	if math.Abs(hi-16.3) > 1e-9 { // 14.1 from the supply and 2.2 from the load
		t.Errorf("scale reaches to %v", hi)
	}
}

func TestLossStepsShowWhatDoesNotBalance(t *testing.T) {
	f := LossSteps{Unit: "kJ", Circuits: []StepsCircuit{{Title: "x", Supply: 100, WorkPositive: 50, Steps: []Step{{"loss", 40, true}}}}}
	rec := pen.NewRecorder()
	f.Draw(rec, 600, 300, Light)
	if !strings.Contains(rec.String(), "not accounted for 10.0 kJ") {
		t.Error("10 kJ are missing and nothing says so")
	}
	f.Circuits[0].Steps[0].Value = 49.6
	rec = pen.NewRecorder()
	f.Draw(rec, 600, 300, Light)
	if strings.Contains(rec.String(), "not accounted for") {
		t.Error("0.4 % is below the limit of 0.5 %")
	}
}

func TestTinyStepsKeepLabelAndMark(t *testing.T) {
	f := LossSteps{Unit: "J", Circuits: []StepsCircuit{{Title: "x", Supply: 1e6, WorkPositive: 1e6 - 1e-3, Steps: []Step{{"check valve CV3", 1e-3, true}}}}}
	rec := pen.NewRecorder()
	f.Draw(rec, 600, 300, Light)
	checkLabels(t, "tiny", rec, 600, 300)
	if !strings.Contains(rec.String(), "check valve CV3 0.00100 J") {
		t.Errorf("label missing in\n%s", rec)
	}
	marks := 0
	for _, s := range rec.Shapes() {
		if lo, hi := s.Bounds(); s.Stroke.C == Light.Heat && hi.Y-lo.Y == stepBar {
			marks++
		}
	}
	if marks != 1 {
		t.Errorf("%d marks for the tiny step, want 1", marks)
	}
}

var hostile = []float64{math.NaN(), math.Inf(1), math.Inf(-1), -5, 0, 1e308, -1e308, 5e-324}

func TestHostileSteps(t *testing.T) {
	for _, v := range hostile {
		for _, size := range [][2]float64{{600, 400}, {0, 0}, {-3, 5}, {math.NaN(), 100}, {1e-3, 1e-3}, {30, 2000}} {
			f := LossSteps{Circuits: []StepsCircuit{{Supply: v, Steps: []Step{{"a", v, true}, {"b", 3, false}}}, {}, {Supply: 5, Returned: v, WorkPositive: v, WorkNegative: v, Stored: v}}}
			rec := pen.NewRecorder()
			f.Draw(rec, size[0], size[1], Dark)
			if size[0] == 600 {
				checkLabels(t, fmt.Sprint(v), rec, 600, 400)
			}
			LossSteps{}.Draw(rec, size[0], size[1], Dark)
		}
	}
}

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

func TestBarsLabelsAndWidths(t *testing.T) {
	for seed := range uint64(80) {
		r := rand.New(rand.NewPCG(seed, 9))
		f := Bars{}
		for range 1 + r.IntN(4) {
			g := BarGroup{Title: pick(r), Unit: "MWh"}
			for range 1 + r.IntN(4) {
				g.Bars = append(g.Bars, Bar{pick(r), extreme(r) * float64(r.IntN(4)-1), Role(r.IntN(6))})
			}
			f.Groups = append(f.Groups, g)
		}
		w := 150 + 700*r.Float64()
		h := f.Height() * (0.5 + r.Float64())
		rec := pen.NewRecorder()
		if n := len(f.Draw(rec, w, h, Light)); n == 0 {
			t.Errorf("seed %d: no regions", seed)
		}
		checkLabels(t, fmt.Sprintf("seed %d", seed), rec, w, h)
	}
	rec := pen.NewRecorder()
	Bars{Groups: []BarGroup{{Bars: []Bar{{"a", 100, RoleBar}, {"b", 25, RoleGain}, {"c", -50, RoleDanger}}}}}.Draw(rec, 500, 200, Light)
	width := map[color.NRGBA]float64{}
	for _, s := range rec.Shapes() {
		lo, hi := s.Bounds()
		width[s.Fill] = hi.X - lo.X
	}
	if a := width[Light.Bar]; math.Abs(width[Light.Gain]-a/4) > 1e-9 || math.Abs(width[Light.Danger]-a/2) > 1e-9 || a < 100 {
		t.Errorf("bars of 100, 25 and 50 are %v wide", width)
	}
	for _, v := range hostile {
		rec := pen.NewRecorder()
		Bars{Groups: []BarGroup{{Title: "x", Bars: []Bar{{"a", v, RoleBar}, {"b", 2, RoleGain}}}, {}}}.Draw(rec, 400, 200, Light)
		checkLabels(t, fmt.Sprint(v), rec, 400, 200)
	}
}

// TestFiguresOnScreenAndPaper draws everything on pixels and on a page.
func TestFiguresOnScreenAndPaper(t *testing.T) {
	f := pen.NewPDF("P", time.Date(2024, 1, 1, 0, 0, 0, 0, time.UTC))
	f.AddPage()
	pdf := pen.NewPDFPen(f)
	pdf.Push(20, 20, 0.24)
	for name, draw := range map[string]func(pen.Pen){
		"steps": func(p pen.Pen) { demoSteps().Draw(p, 700, demoSteps().Height(), Light) },
		"plot":  func(p pen.Pen) { demoPlot().Draw(p, 700, 500, Light) },
		"bars":  func(p pen.Pen) { demoBars().Draw(p, 700, demoBars().Height(), Light) },
	} {
		draw(pdf)
		r := pen.NewRaster(image.NewRGBA(image.Rect(0, 0, 700, 500)))
		r.Clear(Light.Card)
		draw(r)
		seen := map[color.RGBA]int{}
		for y := range 500 {
			for x := range 700 {
				seen[r.Image().RGBAAt(x, y)]++
			}
		}
		for role, c := range map[string]color.NRGBA{"gain": Light.Gain, "heat": Light.Heat} {
			if seen[color.RGBA(c)] < 50 {
				t.Errorf("%s: only %d pixels in the colour of %s", name, seen[color.RGBA(c)], role)
			}
		}
		if r.Skipped() != 0 {
			t.Errorf("%s: %d calls refused", name, r.Skipped())
		}
	}
	pdf.Pop()
	var b bytes.Buffer
	if err := f.Output(&b); err != nil || pdf.Skipped() != 0 {
		t.Errorf("page: %v, %d calls refused", err, pdf.Skipped())
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
