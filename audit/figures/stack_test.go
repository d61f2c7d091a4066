package figures

import (
	"context"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/machines/units"
	"barlitre/samples"
)

func randomStack(r *rand.Rand) Stack {
	f := Stack{Unit: "kW", Axis: "time", AxisUnit: "s", Phases: []Phase{{pick(r), 0, 4}, {pick(r), 4, 10}}}
	for range 1 + r.IntN(3) {
		l := StackLane{Title: pick(r), Note: pick(r), X: []float64{0, 2, 5, 5, 10}, Mean: extreme(r), MeanNote: "1.2 kW"}
		for range r.IntN(7) {
			y := make([]float64, len(l.X))
			for i := range y {
				y[i] = extreme(r)
			}
			l.Layers = append(l.Layers, Layer{pick(r), "0.5 kW", y})
		}
		f.Lanes = append(f.Lanes, l)
	}
	return f
}

func TestStackLabels(t *testing.T) {
	for seed := range uint64(100) {
		r := rand.New(rand.NewPCG(seed, 3))
		f := randomStack(r)
		w, h := 300+r.Float64()*900, 150+r.Float64()*600
		rec := pen.NewRecorder()
		area := f.Draw(rec, w, h, Light)
		// the numbers in the areas may meet each other where layers are thin; they are
		// not labels that must be read, so only the others are checked
		boxes := slices.DeleteFunc(slices.Clone(rec.Boxes()), func(b pen.Box) bool { return len(b.Text) == 1 })
		for i, a := range boxes {
			if a.Text == "" {
				continue
			}
			if !a.Inside(0, 0, w, h, 0.5) || a.Cut {
				t.Errorf("seed %d: %q at %.0f, %.0f leaves %.0f×%.0f", seed, a.Text, a.X, a.Y, w, h)
			}
			for _, b := range boxes[:i] {
				if b.Text != "" && a.Overlaps(b, 0.6) {
					t.Errorf("seed %d: %q lies on %q", seed, a.Text, b.Text)
				}
			}
		}
		if rec.Skipped() != 0 || len(area.Lanes) != len(f.Lanes) {
			t.Errorf("seed %d: %d calls refused, %d lanes of %d", seed, rec.Skipped(), len(area.Lanes), len(f.Lanes))
		}
		for _, l := range area.Lanes[1:] {
			if l.Hi != area.Lanes[0].Hi || l.Lo != 0 {
				t.Errorf("seed %d: lanes on scales %v and %v", seed, area.Lanes[0], l)
			}
		}
	}
}

// The areas on paper are the energies: by the shoelace formula, in the scale of the lane.
func TestStackAreas(t *testing.T) {
	x := []float64{0, 1, 3, 3, 6, 10}
	a, b := []float64{0, 2, 2, 5, 1, 0}, []float64{1, 1, 4, 0, 0, 3}
	f := Stack{Unit: "kW", Lanes: []StackLane{{Title: "one", X: x, Layers: []Layer{{"a", "", a}, {"b", "", b}}}}}
	rec := pen.NewRecorder()
	area := f.Draw(rec, 700, 300, Light)
	var got []float64
	for _, s := range rec.Shapes() {
		if s.Closed && len(s.Points) == 2*len(x) {
			sum := 0.0
			for i, p := range s.Points {
				q := s.Points[(i+1)%len(s.Points)]
				sum += p.X*q.Y - q.X*p.Y
			}
			got = append(got, math.Abs(sum)/2)
		}
	}
	lane := area.Lanes[0]
	scale := area.W / (area.To - area.From) * lane.H / (lane.Hi - lane.Lo)
	for i, y := range [][]float64{a, b} {
		want := 0.0
		for j := 1; j < len(x); j++ {
			want += (x[j] - x[j-1]) * (y[j] + y[j-1]) / 2
		}
		if len(got) != 2 || math.Abs(got[i]/scale-want) > 1e-9*want {
			t.Fatalf("areas %v, layer %d should be %v", got, i, want*scale)
		}
	}
}

func TestStackOfNothing(t *testing.T) {
	rec := pen.NewRecorder()
	if area := (Stack{}).Draw(rec, 400, 200, Light); len(area.Lanes) != 0 || len(rec.Boxes()) != 1 {
		t.Errorf("an empty stack: %v, %v", area, rec.Boxes())
	}
	bad := Stack{Lanes: []StackLane{{X: []float64{0, 1, 2}, Mean: math.NaN(), Layers: []Layer{{"n", "", []float64{math.NaN(), math.Inf(1), -3}}, {"s", "", nil}}}}}
	for _, size := range [][2]float64{{400, 200}, {5, 5}, {0, 0}, {math.NaN(), 4}} {
		rec := pen.NewRecorder()
		bad.Draw(rec, size[0], size[1], Dark)
		if rec.Skipped() != 0 {
			t.Errorf("%v: %d calls refused", size, rec.Skipped())
		}
	}
}

// The stack of a sample holds the heat that the balance books: by layer and over the cycle.
func TestHeatLaneHoldsTheHeat(t *testing.T) {
	for _, name := range samples.Names() {
		data, err := samples.Read(name)
		if err != nil {
			t.Fatal(err)
		}
		file, _ := audit.Parse(data, nil, name)
		s, err := audit.Solve(context.Background(), file, audit.Options{})
		if err != nil {
			t.Fatal(err)
		}
		kW, _ := units.ParseUnit("kW", units.Power)
		for _, c := range s.Circuits {
			for _, run := range c.Duties {
				lane := HeatLane(c, run, 5, kW, func(w float64) string { return units.Format(w, kW, 3) })
				if len(lane.Layers) > 5 || len(lane.Layers) == 0 {
					t.Fatalf("%s, %s: %d layers", name, c.Circuit.Name, len(lane.Layers))
				}
				sum := 0.0
				for _, l := range lane.Layers {
					for j := 1; j < len(lane.X); j++ {
						sum += (lane.X[j] - lane.X[j-1]) * (l.Y[j] + l.Y[j-1]) / 2
					}
				}
				want, allowed := run.Balance.HeatToOil().Total(), 1e-9
				if run.Plot.Thinned {
					allowed = 0.03 // a course of highest and lowest values is no integral
				}
				const rounding = 1e-12 // J, of a duty that stands and makes no heat: it may even be below zero
				if math.Abs(1e3*sum-want) > allowed*want+rounding {
					t.Errorf("%s, %s, %s: areas make %v kJ, the balance has %v", name, c.Circuit.Name, run.Duty.Name, sum, want/1e3)
				}
				if got := lane.Mean * 1e3 * run.Balance.Cycle; math.Abs(got-want) > 1e-9*want+rounding {
					t.Errorf("%s, %s: mean makes %v J, want %v", name, c.Circuit.Name, got, want)
				}
			}
		}
	}
}
