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

var hostile = []float64{math.NaN(), math.Inf(1), math.Inf(-1), -5, 0, 1e308, -1e308, 5e-324}

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
