package samples

import (
	"context"
	"math"
	"strings"
	"sync"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
)

// solved returns the samples solved, by name: once for all tests.
var solved = sync.OnceValues(func() (map[string]*audit.Solution, error) {
	out := map[string]*audit.Solution{}
	for _, name := range Names() {
		data, err := Read(name)
		if err != nil {
			return nil, err
		}
		f, _ := audit.Parse(data, nil, name)
		s, err := audit.Solve(context.Background(), f, audit.Options{})
		if err != nil {
			return nil, err
		}
		out[name] = s
	}
	return out, nil
})

func each(t *testing.T, do func(t *testing.T, s *audit.Solution)) {
	t.Helper()
	all, err := solved()
	if err != nil {
		t.Fatal(err)
	}
	if len(all) != 5 {
		t.Fatalf("%d samples, want 5", len(all))
	}
	for _, name := range Names() {
		t.Run(name, func(t *testing.T) { do(t, all[name]) })
	}
}

func TestRead(t *testing.T) {
	for _, name := range Names() {
		data, err := Read(name)
		if err != nil || len(data) == 0 {
			t.Fatalf("%s: %d bytes, %v", name, len(data), err)
		}
		head, _, _ := strings.Cut(string(data), "format:")
		if !strings.Contains(head, "invented") {
			t.Errorf("%s does not say at its top that it is invented", name)
		}
		data[0]++
		if again, _ := Read(name); again[0] == data[0] {
			t.Errorf("%s: a change by one reader shows to the next", name)
		}
		if _, found := audit.Parse(again(t, name), nil, name); len(found) > 0 {
			t.Errorf("%s: %v", name, found)
		}
	}
	if _, err := Read("none.yaml"); err == nil || !strings.Contains(err.Error(), Names()[0]) {
		t.Errorf("unknown name: %v, want the known names", err)
	}
}

func again(t *testing.T, name string) []byte {
	t.Helper()
	data, err := Read(name)
	if err != nil {
		t.Fatal(err)
	}
	return data
}

// Every circuit balances at every time step, closes, and does the whole duty.
func TestBalanced(t *testing.T) {
	each(t, func(t *testing.T, s *audit.Solution) {
		for _, c := range s.Circuits {
			for _, d := range c.Duties {
				name := c.Circuit.Name + ", " + d.Duty.Name
				if d.Balance == nil {
					t.Errorf("%s: not solved", name)
					continue
				}
				if n := d.Certificate.Unbalanced; n != 0 {
					t.Errorf("%s: %d unbalanced time steps: %v", name, n, d.Certificate.Unsolved)
				}
				if x := d.Balance.Closure(); !(x < audit.ClosureLimit) {
					t.Errorf("%s: closure %g", name, x)
				}
				if len(d.Shortfalls) > 0 {
					t.Errorf("%s: shortfalls %v", name, d.Shortfalls)
				}
				if in, stored := d.Balance.SupplyIn.Total(), d.Balance.StoredEnergy().Total(); math.Abs(stored) > 1e-9*in {
					t.Errorf("%s: a cycle leaves %g J in store", name, stored)
				}
			}
		}
	})
}

// partCautions are what the parts of a circuit ask for, as drawn or not.
var partCautions = []string{"Suspended load:", "Relief valves:", "Load-holding valves:", "Pressure raised by area:", "Frequency converter:"}

// What is found must be worth reading: nothing that stops or warns, and no caution
// as drawn but the bale that stands on a spool and oil that a fouled cooler would not hold.
func TestFindings(t *testing.T) {
	known := append([]string{"C1: a load stands on a spool valve", "oil at "}, partCautions...)
	each(t, func(t *testing.T, s *audit.Solution) {
		for _, c := range s.Circuits {
			for _, f := range c.Findings {
				ok := f.Level == circuit.Note
				for _, k := range known {
					ok = ok || f.Level == circuit.Caution && strings.HasPrefix(f.Text, k)
				}
				if !ok {
					t.Errorf("%s: %s: %s", c.Circuit.Name, f.Level, f.Text)
				}
			}
		}
	})
}

// Both circuits do the same work, and it is the integral of load times speed.
func TestWork(t *testing.T) {
	each(t, func(t *testing.T, s *audit.Solution) {
		for i, d := range s.File.Duties {
			for _, a := range s.File.Axes {
				speed, load := tracks(t, s, i, a.Name)
				pos, neg, net := work(d.Time, speed, load)
				for _, c := range s.Circuits {
					for _, w := range c.Duties[i].Balance.Work {
						if w.Axis != a.Name {
							continue
						}
						near(t, c.Circuit.Name+", work", w.Positive.Total(), pos, 0.005)
						near(t, c.Circuit.Name+", work of the load", w.Negative.Total(), neg, 0.005)
					}
				}
				// a fan turns one way only
				if way := travel(d.Time, speed); math.Abs(net) > 1e-9*way && math.Abs(net) < (1-1e-9)*way {
					t.Errorf("%s: axis %s ends %g from where it began", d.Name, a.Name, net)
				}
			}
		}
		for _, c := range s.Comparisons {
			if !c.SameDuty() || c.Missing != "" {
				t.Errorf("%v, %s", c.Differences, c.Missing)
			}
			if c.Payback.None != "" || c.Published.Text == "" {
				t.Errorf("payback %v, published %q", c.Payback, c.Published.Text)
			}
		}
	})
}

func tracks(t *testing.T, s *audit.Solution, duty int, axis string) (speed, load []float64) {
	t.Helper()
	for _, tr := range s.File.Duties[duty].Tracks {
		switch {
		case tr.Of == axis && tr.What.String() == "speed":
			speed = tr.Values
		case tr.Of == axis && tr.What.String() == "load":
			load = tr.Values
		}
	}
	if speed == nil || load == nil {
		t.Fatalf("axis %s has no speed or no load", axis)
	}
	return speed, load
}

// work integrates load·speed, both linear between the rows: exact by Simpson's
// rule. Rows on which the product changes its sign do not occur in the samples.
func work(t, v, f []float64) (pos, neg, net float64) {
	for i := 1; i < len(t); i++ {
		h := t[i] - t[i-1]
		mid := (v[i] + v[i-1]) * (f[i] + f[i-1]) / 4
		e := h / 6 * (v[i-1]*f[i-1] + 4*mid + v[i]*f[i])
		pos, neg = pos+math.Max(e, 0), neg+math.Min(e, 0)
		net += h * (v[i] + v[i-1]) / 2
	}
	return pos, neg, net
}

func travel(t, v []float64) float64 {
	way := 0.0
	for i := 1; i < len(t); i++ {
		way += (t[i] - t[i-1]) * (math.Abs(v[i]) + math.Abs(v[i-1])) / 2
	}
	return math.Max(way, 1e-12)
}

// near compares within a share; below 1 J both count as none.
func near(t *testing.T, what string, got, want, share float64) {
	t.Helper()
	if math.Abs(got-want) > share*math.Abs(want)+1 {
		t.Errorf("%s: %g, want %g", what, got, want)
	}
}

// The stand-by power of the winch as found, by hand: the pump makes up its own
// slip at its set pressure.
//
//	shaft = Cs·D·p²/μ + (Cf·D·p + Cv·D·μ·ω + Tc)·ω, electric = shaft + PV·(kf + (1 − kf)·(T/TN)²)
func TestStandByOfTheWinch(t *testing.T) {
	all, err := solved()
	if err != nil {
		t.Fatal(err)
	}
	s := all["quayside-winch.yaml"]
	const (
		p, Cs, Cf, Cv, Tc = 210e5, 1.2e-8, 0.03, 6.5e4, 1.5 // Pa, -, -, -, N m: as in the file, or the defaults
		PN, eta, kf       = 22e3, 0.93, 0.35
	)
	D, w, mu := 45e-6/(2*math.Pi), 1475*math.Pi/30, s.Conditions.Viscosity
	shaft := Cs*D*p*p/mu + (Cf*D*p+Cv*D*mu*w+Tc)*w
	want := shaft + PN*(1/eta-1)*(kf+(1-kf)*math.Pow(shaft/PN, 2)) // same speed: torques go as powers
	want += 550 + 400                                              // fan and pump of the off-line loop, as in the file
	b := s.Circuits[0].Duties[1].Balance
	if got := b.SupplyIn.Total() / b.Cycle; math.Abs(got-want) > 1e-4*want {
		t.Errorf("stand-by %.1f W, by hand %.1f W", got, want)
	}
}

// Every block has a place on whole modules, away from its neighbours, and where a sheet of A4
// has room for it at a module of 2 mm.
func TestPlaces(t *testing.T) {
	each(t, func(t *testing.T, s *audit.Solution) { places(t, s) })
	eachStarter(t, func(t *testing.T, _ Starter, s *audit.Solution) { places(t, s) })
}

func places(t *testing.T, s *audit.Solution) {
	t.Helper()
	for _, c := range s.Circuits {
		var at [][2]float64
		for _, b := range c.Circuit.Blocks {
			if b.At == nil {
				t.Errorf("%s: %s has no place", c.Circuit.Name, b.ID)
				continue
			}
			x, y := b.At[0], b.At[1]
			if x != math.Trunc(x) || y != math.Trunc(y) || x < 0 || y < 0 || x > 76 || y > 68 {
				t.Errorf("%s: %s stands at %v", c.Circuit.Name, b.ID, *b.At)
			}
			for _, o := range at {
				if math.Max(math.Abs(o[0]-x), math.Abs(o[1]-y)) < 8 {
					t.Errorf("%s: %s stands on a neighbour at %v", c.Circuit.Name, b.ID, o)
				}
			}
			at = append(at, *b.At)
		}
	}
}
