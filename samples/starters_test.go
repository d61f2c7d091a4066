package samples

import (
	"context"
	"io/fs"
	"math"
	"strings"
	"sync"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
)

// startersSolved returns the starters solved, by name: once for all tests.
var startersSolved = sync.OnceValues(func() (map[string]*audit.Solution, error) {
	out := map[string]*audit.Solution{}
	for _, st := range Starters() {
		data, err := ReadStarter(st.Name)
		if err != nil {
			return nil, err
		}
		f, _ := audit.Parse(data, nil, st.Name)
		if out[st.Name], err = audit.Solve(context.Background(), f, audit.Options{}); err != nil {
			return nil, err
		}
	}
	return out, nil
})

func eachStarter(t *testing.T, do func(t *testing.T, st Starter, s *audit.Solution)) {
	t.Helper()
	all, err := startersSolved()
	if err != nil {
		t.Fatal(err)
	}
	for _, st := range Starters() {
		t.Run(st.Name, func(t *testing.T) { do(t, st, all[st.Name]) })
	}
}

func TestStarterFiles(t *testing.T) {
	files, err := fs.Glob(starterFiles, "starters/*.yaml")
	if err != nil || len(files) != len(Starters()) {
		t.Errorf("%d files for %d starters, %v", len(files), len(Starters()), err)
	}
	titles := map[string]bool{}
	for _, st := range Starters() {
		data, err := ReadStarter(st.Name)
		if err != nil {
			t.Fatal(err)
		}
		if titles[st.Title] || st.Title == "" || len(st.Text) < 80 {
			t.Errorf("%s: title %q, text %q", st.Name, st.Title, st.Text)
		}
		titles[st.Title] = true
		f, found := audit.Parse(data, nil, st.Name)
		if len(found) > 0 {
			t.Errorf("%s: %v", st.Name, found)
		}
		if want := st.Title + " (starter, invented data)"; f.Title != want {
			t.Errorf("%s is titled %q, want %q", st.Name, f.Title, want)
		}
		if want := "Invented data. " + st.Text; f.Site.Note != want {
			t.Errorf("%s says %q, want %q", st.Name, f.Site.Note, want)
		}
	}
	if _, err := ReadStarter("none.yaml"); err == nil || !strings.Contains(err.Error(), Starters()[0].Name) {
		t.Errorf("unknown name: %v, want the known names", err)
	}
	Starters()[0].Name = "changed"
	if Starters()[0].Name == "changed" {
		t.Error("a change by one reader shows to the next")
	}
}

// Every starter balances at every time step, closes, does the whole duty and has a
// year with work and waiting in it.
func TestStartersBalanced(t *testing.T) {
	eachStarter(t, func(t *testing.T, _ Starter, s *audit.Solution) {
		if len(s.Circuits) != 1 || len(s.File.Duties) != 2 {
			t.Fatalf("%d circuits, %d duties", len(s.Circuits), len(s.File.Duties))
		}
		c := s.Circuits[0]
		for _, d := range c.Duties {
			if d.Balance == nil {
				t.Errorf("%s: not solved", d.Duty.Name)
				continue
			}
			if n := d.Certificate.Unbalanced; n != 0 {
				t.Errorf("%s: %d unbalanced time steps: %v", d.Duty.Name, n, d.Certificate.Unsolved)
			}
			if x := d.Balance.Closure(); !(x < audit.ClosureLimit) {
				t.Errorf("%s: closure %g", d.Duty.Name, x)
			}
			if len(d.Shortfalls) > 0 {
				t.Errorf("%s: shortfalls %v", d.Duty.Name, d.Shortfalls)
			}
			if in, stored := d.Balance.SupplyIn.Total(), d.Balance.StoredEnergy().Total(); math.Abs(stored) > 1e-3*in {
				t.Errorf("%s: a cycle leaves %g of %g J in store", d.Duty.Name, stored, in)
			}
			if d.Duty.Hours <= 0 || len(d.Duty.Phases) == 0 {
				t.Errorf("%s: %g s a year, %d phases", d.Duty.Name, d.Duty.Hours, len(d.Duty.Phases))
			}
		}
		if taken := -c.Year.WorkNegative().Total(); c.Year.WorkPositive().Total() == 0 { // its load drives it
			if back := c.Year.Returned.Total(); !(back > 0.3*taken && back < 0.9*taken) {
				t.Errorf("%g of %g J taken are returned", back, taken)
			}
		} else if w, in := c.Year.WorkPositive().Total(), c.Year.Drawn.Total(); !(w > 0.005*in && w < 0.7*in) {
			t.Errorf("work %g of %g J drawn", w, in)
		}
	})
}

// What is found in a starter must be what its kind of circuit gives rise to: relief
// valves that are open by design, oil that valves shut in at rest, and the cautions that its
// parts ask for.
func TestStarterFindings(t *testing.T) {
	own := map[string]string{"accumulator-unloading.yaml": "ACC1: it stays charged"}
	eachStarter(t, func(t *testing.T, st Starter, s *audit.Solution) {
		for _, f := range s.Circuits[0].Findings {
			ok := f.Level == circuit.Note && strings.HasPrefix(f.Text, "RV") && strings.Contains(f.Text, ": open for ")
			ok = ok || f.Level == circuit.Note && strings.HasPrefix(f.Text, "while axes stand, leakage alone sets the pressure at ")
			for _, k := range append([]string{own[st.Name]}, partCautions...) {
				ok = ok || f.Level == circuit.Caution && k != "" && strings.HasPrefix(f.Text, k)
			}
			if !ok {
				t.Errorf("%s: %s", f.Level, f.Text)
			}
		}
	})
}

// A starter says of every number that it is assumed, and has reliefs, a filter and
// something that holds.
func TestStarterParts(t *testing.T) {
	eachStarter(t, func(t *testing.T, _ Starter, s *audit.Solution) {
		kinds := map[string]int{}
		for _, b := range s.Circuits[0].Circuit.Blocks {
			kinds[b.Kind]++
			for key, v := range b.Values {
				if v.Origin != circuit.Assumed {
					t.Errorf("%s.%s: origin %q", b.ID, key, v.Origin)
				}
			}
			if b.Word("axis") != "" && b.Word("hold") == "" {
				t.Errorf("%s is held by nothing", b.ID)
			}
		}
		kinds["pump"] += kinds["motor"] // a rig that its load drives has no pump
		for _, k := range []string{"tank", "electric_motor", "pump", "relief", "filter"} {
			if kinds[k] == 0 {
				t.Errorf("no %s", k)
			}
		}
	})
}

// The strokes of a duty close; where the speed is found, those of the solution do,
// within half a thousandth of the way.
func TestStarterStrokes(t *testing.T) {
	eachStarter(t, func(t *testing.T, _ Starter, s *audit.Solution) {
		d := s.File.Duties[0]
		for _, a := range s.File.Axes {
			time, speed, least := d.Time, []float64(nil), 1e-9
			for _, tr := range d.Tracks {
				if tr.Of == a.Name && tr.What.String() == "speed" {
					speed = tr.Values
				}
			}
			if speed == nil {
				time, speed = found(t, s, a.Name)
				least = 5e-4
			}
			if a.Name == "screw" || a.Name == "roller" {
				continue // turns one way
			}
			_, _, net := work(time, speed, make([]float64, len(speed)))
			if way := travel(time, speed); !(math.Abs(net) < least*way) || way < 1e-3 {
				t.Errorf("axis %s ends %g from where it began, after a way of %g", a.Name, net, way)
			}
		}
	})
}

// found returns the speed of an axis over a solved cycle, where the duty gives its
// command instead.
func found(t *testing.T, s *audit.Solution, axis string) (time, speed []float64) {
	t.Helper()
	d := s.File.Duties[0]
	c, _ := circuit.Compile(s.Circuits[0].Circuit, s.File.Axes, d)
	if c == nil {
		t.Fatal("not compiled")
	}
	r := &speeds{}
	for i, a := range c.Axes() {
		if a.Name == axis {
			r.axis = i
		}
	}
	if _, _, err := circuit.Run(context.Background(), c, c.Defaults(), c.Series(d), s.Conditions, circuit.State{}, r); err != nil {
		t.Fatal(err)
	}
	return r.time, r.speed
}

// speeds is a receiver that keeps the speed of an axis.
type speeds struct {
	axis        int
	time, speed []float64
}

func (r *speeds) Sample(s *circuit.Sample) error {
	r.time, r.speed = append(r.time, s.T), append(r.speed, s.Axes[r.axis].Speed)
	return nil
}
