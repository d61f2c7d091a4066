package figures

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"sync"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
	"barlitre/machines/units"
)

// solved is a sample with its results; it is solved once for all tests.
type solved struct {
	name   string
	runs   []*audit.CircuitRun
	scales SheetScales
}

var solvedSamples = sync.OnceValues(func() ([]solved, error) {
	var out []solved
	for _, name := range []string{"baling-press", "quayside-winch"} {
		f, found := audit.Read("../../samples/" + name + ".yaml")
		if f == nil {
			return nil, fmt.Errorf("%s: %v", name, found)
		}
		s, err := audit.Solve(context.Background(), f, audit.Options{})
		if err != nil {
			return nil, err
		}
		k := solved{name: name, runs: s.Circuits}
		for _, c := range s.Circuits {
			sc := ScalesOf(c.Duties...)
			k.scales = SheetScales{math.Max(k.scales.Pressure, sc.Pressure), math.Max(k.scales.Flow, sc.Flow),
				math.Max(k.scales.Heat, sc.Heat), math.Max(k.scales.Energy, sc.Energy)}
		}
		out = append(out, k)
	}
	return out, nil
})

// eachState calls do for both samples, both circuits, at several instants.
func eachState(t *testing.T, do func(what string, s *Sheet, run *audit.DutyRun, st *SheetState, sc SheetScales)) {
	t.Helper()
	samples, err := solvedSamples()
	if err != nil {
		t.Fatal(err)
	}
	for _, k := range samples {
		for _, c := range k.runs {
			s := NewSheet(c.Circuit).Labelled(c.Duties...)
			run := c.Duties[0]
			if run.Plot == nil {
				t.Fatalf("%s, %s is not solved: %v", k.name, c.Circuit.Name, c.Findings)
			}
			for i := range 9 {
				at := run.Duty.Cycle() * float64(i) / 8
				do(fmt.Sprintf("%s, %s at %.3g s", k.name, c.Circuit.Name, at), s, run, StateAt(run, at), k.scales)
			}
			do(fmt.Sprintf("%s, %s over the cycle", k.name, c.Circuit.Name), s, run, OverCycle(run, 5), k.scales)
		}
	}
}

// checkSheet draws a sheet and checks its texts: none on another, none outside, every
// block named, no call refused.
func checkSheet(t *testing.T, what string, s *Sheet, st *SheetState, opt SheetOptions) *pen.Recorder {
	t.Helper()
	const scale = 10
	rec := pen.NewRecorder()
	s.Draw(rec, 30, 20, scale, st, opt)
	if rec.Skipped() != 0 {
		t.Errorf("%s: %d calls refused", what, rec.Skipped())
	}
	w, h := s.Size()
	if opt.Legend {
		h += LegendHeight
	}
	boxes := rec.Boxes()
	seen := map[string]bool{}
	for i, a := range boxes {
		if a.Bold {
			seen[a.Text] = true
		}
		if !a.Inside(30, 20, w*scale, h*scale, 0.1) {
			t.Errorf("%s: %q at %.1f,%.1f %.1f×%.1f leaves the sheet of %v×%v", what, a.Text, a.X, a.Y, a.W, a.H, w*scale, h*scale)
		}
		for _, b := range boxes[:i] {
			if a.Overlaps(b, 0.3) {
				t.Errorf("%s: %q lies on %q", what, a.Text, b.Text)
			}
		}
	}
	for _, b := range s.Circuit().Blocks {
		if !seen[pen.Clean(b.ID)] {
			t.Errorf("%s: block %s has no name on the sheet", what, b.ID)
		}
	}
	for _, q := range rec.Shapes() {
		lo, hi := q.Bounds()
		if q.Kind == "circle" {
			r := hi.X - lo.X
			lo, hi = pen.Pt{X: lo.X - r, Y: lo.Y - r}, pen.Pt{X: hi.X, Y: hi.Y + r}
		}
		if lo.X < 29.9 || lo.Y < 19.9 || hi.X > 30.1+w*scale || hi.Y > 20.1+h*scale {
			t.Errorf("%s: a %s from %.1f to %.1f leaves the sheet", what, q.Kind, lo, hi)
		}
	}
	return rec
}

func TestSheetLabelsOfSamples(t *testing.T) {
	eachState(t, func(what string, s *Sheet, _ *audit.DutyRun, st *SheetState, sc SheetScales) {
		for _, pal := range []Palette{Light, Dark} {
			for _, sys := range []units.System{units.Metric, units.US, units.SI} {
				checkSheet(t, what, s, st, SheetOptions{Palette: pal, System: sys, Scales: sc, Legend: true})
			}
		}
		checkSheet(t, what+", alone", s, nil, SheetOptions{Palette: Light, Legend: true})
	})
}

// randomCircuit joins blocks of all kinds at random, some placed, most not.
func randomCircuit(r *rand.Rand, n int) *circuit.Circuit {
	c := &circuit.Circuit{Name: "random"}
	kinds := circuit.Catalog()
	var open []circuit.PortRef
	for i := range n {
		k := kinds[i%len(kinds)]
		b := circuit.Block{ID: fmt.Sprintf("%s%d", strings.ToUpper(k.Name[:2]), i+1), Kind: k.Name, Turn: 0,
			Values: map[string]circuit.Value{}, Words: map[string]circuit.Word{}}
		for _, p := range k.Params {
			switch {
			case p.Type == circuit.Number && (p.Need || r.IntN(4) == 0):
				b.Values[p.Key] = circuit.Given(math.Pow(10, -6+8*r.Float64()))
			case p.Type == circuit.Choice && r.IntN(2) == 0:
				b.Words[p.Key] = circuit.Word{Text: p.Choices[r.IntN(len(p.Choices))]}
			case p.Key == "axis":
				b.Words[p.Key] = circuit.Word{Text: "ram"}
			}
		}
		if r.IntN(5) == 0 {
			b.Turn, b.Mirror = r.IntN(4), r.IntN(2) == 0
		}
		c.Blocks = append(c.Blocks, b)
		for _, p := range k.Ports {
			if p.Type == circuit.Oil || p.Type == circuit.Pilot {
				open = append(open, circuit.PortRef{Block: b.ID, Port: p.Name})
			}
		}
	}
	r.Shuffle(len(open), func(i, j int) { open[i], open[j] = open[j], open[i] })
	for len(open) > 3 {
		m := 2 + r.IntN(2)
		c.Lines = append(c.Lines, circuit.Line{Ports: open[:m]})
		open = open[m:]
	}
	return c
}

// randomState gives every port a pressure and a flow; flows of a line need not add up.
func randomState(r *rand.Rand, s *Sheet) *SheetState {
	st := &SheetState{signals: map[string]float64{}, heat: map[string]float64{}, travel: map[string]travel{}}
	for i := range s.parts {
		p := &s.parts[i]
		for _, q := range p.symbol.Ports {
			st.signals[p.id+"."+q.Name+".p"] = 4e7 * r.Float64()
			st.signals[p.id+"."+q.Name+".q"] = 1e-2 * (r.Float64() - 0.5)
		}
		for _, name := range []string{"u", "e", "v", "w", "F", "load"} {
			st.signals[p.id+"."+name] = math.Pow(10, 6*r.Float64()-3) * (r.Float64() - 0.5)
		}
		if p.heats() {
			st.heat[p.id] = 1e5 * r.Float64() * r.Float64()
		}
		st.travel[p.id] = travel{r.Float64(), 1}
	}
	return st
}

// largeSheets are laid out once: routing sheets of this size takes a second each.
var largeSheets = sync.OnceValue(func() []*Sheet {
	var out []*Sheet
	for seed := range uint64(2) {
		out = append(out, NewSheet(randomCircuit(rand.New(rand.NewPCG(seed, 3)), 60)))
	}
	return out
})

func TestSheetLabelsOfLargeCircuits(t *testing.T) {
	for seed, s := range largeSheets() {
		r := rand.New(rand.NewPCG(uint64(seed), 9))
		for _, pal := range []Palette{Light, Dark} {
			checkSheet(t, fmt.Sprintf("seed %d", seed), s, randomState(r, s), SheetOptions{Palette: pal, Legend: true})
		}
	}
}

// TestSheetJoinsPorts follows the drawn stretches from port to port.
func TestSheetJoinsPorts(t *testing.T) {
	check := func(what string, s *Sheet) {
		for i, n := range s.nets {
			next := map[drawing.Pt][]drawing.Pt{}
			for _, st := range s.stretches {
				if st.net != i {
					continue
				}
				for k := 1; k < len(st.pts); k++ {
					a, b := st.pts[k-1], st.pts[k]
					if a.X != b.X && a.Y != b.Y {
						t.Errorf("%s: line %d runs aslant from %v to %v", what, i, a, b)
					}
					next[a], next[b] = append(next[a], b), append(next[b], a)
				}
			}
			start := s.endPoint(n.ends[0])
			reached := map[drawing.Pt]bool{start: true}
			for queue := []drawing.Pt{start}; len(queue) > 0; queue = queue[1:] {
				for _, p := range next[queue[0]] {
					if !reached[p] {
						reached[p] = true
						queue = append(queue, p)
					}
				}
			}
			for _, e := range n.ends {
				if !reached[s.endPoint(e)] {
					t.Errorf("%s: line %d does not reach %s.%s", what, i, s.parts[e.part].id, e.port)
				}
			}
		}
	}
	eachState(t, func(what string, s *Sheet, _ *audit.DutyRun, _ *SheetState, _ SheetScales) { check(what, s) })
	for seed, s := range largeSheets() {
		check(fmt.Sprint("seed ", seed), s)
	}
}

// at undoes the placement that checkSheet draws with.
func (s *Sheet) at(p pen.Pt) drawing.Pt {
	return drawing.Pt{X: (p.X-30)/10 + s.box.Min.X, Y: (p.Y-20)/10 + s.box.Min.Y}
}

// TestChevronsFollowFlow compares the drawn marks with the signals: beside a port, a
// mark points at the block if oil flows into it.
func TestChevronsFollowFlow(t *testing.T) {
	checked := 0
	eachState(t, func(what string, s *Sheet, _ *audit.DutyRun, st *SheetState, sc SheetScales) {
		rec := checkSheet(t, what, s, st, SheetOptions{Palette: Light, Scales: sc})
		for _, q := range rec.Shapes() {
			if q.Kind != "line" || q.Closed || len(q.Points) != 3 || math.Abs(q.Stroke.W-2.6) > 1e-9 || q.Fill.A > 0 {
				continue
			}
			tip := s.at(q.Points[1])
			foot := s.at(pen.Pt{X: (q.Points[0].X + q.Points[2].X) / 2, Y: (q.Points[0].Y + q.Points[2].Y) / 2})
			for _, line := range s.stretches {
				for k := 1; k < len(line.pts); k++ {
					a, b := line.pts[k-1], line.pts[k]
					if !contains(grown(union(drawing.Box{Min: a, Max: a}, drawing.Box{Min: b, Max: b}), 1e-6), tip) || !s.nets[line.net].kind.Fluid() {
						continue
					}
					for _, e := range s.nets[line.net].ends {
						v, ok := st.Signal(s.parts[e.part].id + "." + e.port + ".q")
						port := s.endPoint(e)
						if !ok || port != line.pts[0] && port != line.pts[len(line.pts)-1] {
							continue
						}
						// Along the stretch, is the tip nearer to the port than the foot?
						along := func(p drawing.Pt) float64 { return distance(a, p) }
						towards := along(tip) > along(foot)
						if port == line.pts[0] {
							towards = !towards
						}
						if towards != (v > 0) {
							t.Errorf("%s: a mark at %v points the wrong way; flow into %s.%s is %.3g m³/s", what, tip, s.parts[e.part].id, e.port, v)
						}
						if math.Abs(v) < flowShown*sc.Flow*0.999 {
							t.Errorf("%s: a mark at %v for a flow of %.3g m³/s", what, tip, v)
						}
						checked++
					}
				}
			}
		}
	})
	if checked < 200 {
		t.Errorf("only %d marks checked", checked)
	}
}

// TestDiscAreaIsHeat compares areas with the powers of the run and the energies of its
// balance, added up here from their channels.
func TestDiscAreaIsHeat(t *testing.T) {
	checked := 0
	eachState(t, func(what string, s *Sheet, run *audit.DutyRun, st *SheetState, sc SheetScales) {
		heat, most := map[string]float64{}, sc.Heat
		if st.Energy {
			most = sc.Energy
			for _, l := range run.Balance.Losses {
				heat[l.Block] += l.Energy.Total()
			}
		} else {
			for i, c := range run.Plot.Channels {
				if c.Role == circuit.Loss {
					heat[c.Block] += run.Plot.Powers[i].At(st.T)
				}
			}
		}
		rec := checkSheet(t, what, s, st, SheetOptions{Palette: Light, Scales: sc})
		area := map[drawing.Pt]float64{}
		for _, q := range rec.Shapes() {
			if q.Kind == "circle" && q.Fill == faded(Light.Heat, 84) {
				r := (q.Points[1].X - q.Points[0].X) / 10
				c := s.at(q.Points[0])
				area[drawing.Pt{X: math.Round(c.X * 100), Y: math.Round(c.Y * 100)}] = math.Pi * r * r
			}
		}
		for i := range s.parts {
			p := &s.parts[i]
			want := math.Pi * discRadius * discRadius * heat[p.id] / most
			got := area[drawing.Pt{X: math.Round(p.centre.X * 100), Y: math.Round(p.centre.Y * 100)}]
			if heat[p.id] < discShown*most {
				want = 0
			}
			if math.Abs(got-want) > 1e-6*(1+want) {
				t.Errorf("%s: the disc of %s has %.4g M², want %.4g", what, p.id, got, want)
			}
			if want > 0 {
				checked++
			}
		}
	})
	if checked < 50 {
		t.Errorf("only %d discs checked", checked)
	}
}

// TestLineWidthIsRootOfFlow checks widths and tints of stretches that end at a port
// against the signals of that port.
func TestLineWidthIsRootOfFlow(t *testing.T) {
	checked := 0
	eachState(t, func(what string, s *Sheet, _ *audit.DutyRun, st *SheetState, sc SheetScales) {
		rec := checkSheet(t, what, s, st, SheetOptions{Palette: Dark, Scales: sc})
		drawn := map[string]pen.Stroke{}
		for _, q := range rec.Shapes() {
			if q.Kind == "line" && !q.Closed && q.Stroke.C != Dark.Card {
				key := fmt.Sprintf("%.2f %.2f", q.Points[0], q.Points[len(q.Points)-1])
				if _, first := drawn[key]; !first {
					drawn[key] = q.Stroke
				}
			}
		}
		for _, line := range s.stretches {
			for _, e := range s.nets[line.net].ends {
				name := s.parts[e.part].id + "." + e.port
				q, ok := st.Signal(name + ".q")
				p, _ := st.Signal(name + ".p")
				if at := s.endPoint(e); !ok || line.pilot || at != line.pts[0] && at != line.pts[len(line.pts)-1] {
					continue
				}
				on := func(p drawing.Pt) pen.Pt {
					return pen.Pt{X: 30 + 10*(p.X-s.box.Min.X), Y: 20 + 10*(p.Y-s.box.Min.Y)}
				}
				got, found := drawn[fmt.Sprintf("%.2f %.2f", on(line.pts[0]), on(line.pts[len(line.pts)-1]))]
				want := 10 * math.Max(lineThin, lineWidest*math.Sqrt(math.Abs(q)/sc.Flow))
				if !found || math.Abs(got.W-want) > 1e-6 {
					t.Errorf("%s: the line at %s is %.3f wide, want %.3f", what, name, got.W, want)
				}
				if tint := Dark.Pressure(p / sc.Pressure); got.C != tint {
					t.Errorf("%s: the line at %s is %v, want %v", what, name, got.C, tint)
				}
				checked++
			}
		}
	})
	if checked < 300 {
		t.Errorf("only %d lines checked", checked)
	}
}
