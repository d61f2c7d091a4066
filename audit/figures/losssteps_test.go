package figures

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/audit/pen"
)

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

// Where neither side nor the bar has room for all of a label, the value stands in the bar and the
// name beside it: the largest loss keeps its name.
func TestLargeStepKeepsItsName(t *testing.T) {
	f := LossSteps{Unit: "kJ", Circuits: []StepsCircuit{{Title: "x", Supply: 400, WorkPositive: 70,
		Steps: []Step{{"first", 115, true}, {"V1: metering P-A", 120, true}, {"last", 95, true}}}}}
	const w, h = 280, 300
	rec := pen.NewRecorder()
	f.Draw(rec, w, h, Light)
	checkLabels(t, "parted", rec, w, h)
	var name, value *pen.Box
	for i, b := range rec.Boxes() {
		switch b.Text {
		case "V1: metering P-A":
			name = &rec.Boxes()[i]
		case "120 kJ":
			value = &rec.Boxes()[i]
		}
	}
	if name == nil || value == nil || name.Overlaps(*value, 0) {
		t.Fatalf("name %v, value %v in\n%s", name, value, rec)
	}
	for _, s := range rec.Shapes() {
		if lo, hi := s.Bounds(); s.Fill == Light.Heat && hi.X-lo.X > 50 && value.Y > lo.Y-2 && value.Y < hi.Y && !value.Inside(lo.X, lo.Y, hi.X-lo.X, hi.Y-lo.Y, 2) {
			t.Errorf("the value at %v is not in its bar %v to %v", *value, lo, hi)
		}
	}
}
