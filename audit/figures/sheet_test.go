package figures

import (
	"context"
	"fmt"
	"image"
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

func TestSheetLabelsOfLargeCircuits(t *testing.T) {
	for seed := range uint64(4) {
		r := rand.New(rand.NewPCG(seed, 3))
		s := NewSheet(randomCircuit(r, 60))
		w, h := s.Size()
		t.Logf("seed %d: %v × %v modules, %d lines", seed, w, h, s.Nets())
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
	for seed := range uint64(3) {
		check(fmt.Sprint("seed ", seed), NewSheet(randomCircuit(rand.New(rand.NewPCG(seed, 5)), 60)))
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

// TestTankOfEachLine: a tank that stands in three lines has three symbols with its name.
func TestTankOfEachLine(t *testing.T) {
	c := &circuit.Circuit{Blocks: []circuit.Block{{ID: "T1", Kind: "tank"}, {ID: "RV1", Kind: "relief"}, {ID: "RV2", Kind: "relief"}, {ID: "P1", Kind: "pump"}}}
	line := func(ports ...circuit.PortRef) { c.Lines = append(c.Lines, circuit.Line{Ports: ports}) }
	line(circuit.PortRef{Block: "RV1", Port: "T"}, circuit.PortRef{Block: "T1", Port: "T"})
	line(circuit.PortRef{Block: "RV2", Port: "T"}, circuit.PortRef{Block: "T1", Port: "T"})
	line(circuit.PortRef{Block: "P1", Port: "S"}, circuit.PortRef{Block: "T1", Port: "T"})
	line(circuit.PortRef{Block: "P1", Port: "P"}, circuit.PortRef{Block: "RV1", Port: "P"})
	line(circuit.PortRef{Block: "P1", Port: "P"}, circuit.PortRef{Block: "RV2", Port: "P"})
	s := NewSheet(c)
	rec := checkSheet(t, "tanks", s, nil, SheetOptions{Palette: Light})
	if n := strings.Count(rec.String(), `"T1"`); n != 3 {
		t.Errorf("T1 is written %d times, want 3", n)
	}
	if s.Nets() != 4 { // the two lines at P1.P are one
		t.Errorf("%d lines, want 4", s.Nets())
	}
}

// TestShaftPassesThrough: the shaft from motor over pump to charge pump is two straight
// couplings.
func TestShaftPassesThrough(t *testing.T) {
	samples, err := solvedSamples()
	if err != nil {
		t.Fatal(err)
	}
	s := NewSheet(samples[1].runs[1].Circuit)
	count := 0
	for _, st := range s.stretches {
		if s.nets[st.net].kind == drawing.Shaft {
			count++
			if len(st.pts) != 2 {
				t.Errorf("a shaft goes round something: %v", st.pts)
			}
		}
	}
	if count != 2 {
		t.Errorf("%d couplings, want 2", count)
	}
}

// TestPistonFollowsMotion: the ram of the press goes 0.763 m of 0.9 m (its duty says so),
// so the piston stands at 0.763/0.9 of its way in the dwell and is drawn in at the end.
func TestPistonFollowsMotion(t *testing.T) {
	samples, err := solvedSamples()
	if err != nil {
		t.Fatal(err)
	}
	c := samples[0].runs[0]
	s := NewSheet(c.Circuit)
	edge := func(at float64) float64 {
		d := &sheetDrawing{Sheet: s, st: StateAt(c.Duties[0], at)}
		for i := range s.parts {
			if p := &s.parts[i]; p.id == "C1" {
				return pistonRest + d.pistonShift(p).X
			}
		}
		return math.NaN()
	}
	for _, k := range []struct{ t, share float64 }{{0, 0}, {25, 0.763 / 0.9}, {39, 0}} {
		if want := pistonIn + k.share*pistonWay; math.Abs(edge(k.t)-want) > 0.06 {
			t.Errorf("at %v s the piston stands at %.3f, want %.3f", k.t, edge(k.t), want)
		}
	}
}

func TestSheetHitAndMove(t *testing.T) {
	samples, err := solvedSamples()
	if err != nil {
		t.Fatal(err)
	}
	s := NewSheet(samples[0].runs[0].Circuit)
	ox, oy := s.Origin()
	x, y, _ := s.At("RV1")
	if b, net, ok := s.Hit(x-ox, y-oy); !ok || b != "RV1" || net != -1 {
		t.Errorf("at RV1: %q, %d, %v", b, net, ok)
	}
	if _, _, ok := s.Hit(-50, -50); ok {
		t.Error("something is hit outside the sheet")
	}
	for i, st := range s.stretches {
		a, b := st.pts[0], st.pts[1]
		at := drawing.Pt{X: (a.X+b.X)/2 - ox, Y: (a.Y+b.Y)/2 - oy}
		if block, net, ok := s.Hit(at.X, at.Y); !ok || block == "" && net != st.net && len(s.crossings) == 0 {
			t.Errorf("stretch %d: %q, %d, %v", i, block, net, ok)
		}
	}
	m := s.Move("RV1", 3.2, -1.1)
	if x2, y2, _ := m.At("RV1"); x2 != x+3 || y2 != y-1 {
		t.Errorf("RV1 moved from %v, %v to %v, %v", x, y, x2, y2)
	}
	if x2, y2, _ := s.At("RV1"); x2 != x || y2 != y {
		t.Error("the sheet itself has changed")
	}
	for _, b := range s.Circuit().Blocks {
		x0, y0, _ := s.At(b.ID)
		if x1, y1, _ := m.At(b.ID); b.ID != "RV1" && (x0 != x1 || y0 != y1) {
			t.Errorf("%s moved too", b.ID)
		}
	}
	d := s.Drag([]string{"RV1"}, 2.5, 1.25)
	if x2, y2, _ := d.At("RV1"); x2 != x+2.5 || y2 != y+1.25 {
		t.Errorf("RV1 dragged from %v, %v to %v, %v", x, y, x2, y2)
	}
	checkJoined(t, d)
	for _, r := range s.Draw(pen.NewRecorder(), 0, 0, 4, nil, SheetOptions{Palette: Light}) {
		if r.Kind == SheetBlock && r.Block == "RV1" && !r.Contains((x-ox)*4, (y-oy)*4) {
			t.Errorf("the region of RV1 is %v", r)
		}
	}
}

// checkJoined fails if an end of a line is not at the end of a stretch.
func checkJoined(t *testing.T, s *Sheet) {
	t.Helper()
	for i, n := range s.nets {
		for _, e := range n.ends {
			met := false
			for _, st := range s.stretches {
				met = met || st.net == i && (st.pts[0] == s.endPoint(e) || st.pts[len(st.pts)-1] == s.endPoint(e))
			}
			if !met {
				t.Errorf("line %d does not end at %s.%s", i, s.parts[e.part].id, e.port)
			}
		}
	}
}

// TestHostileSheets draws circuits that no check has passed.
func TestHostileSheets(t *testing.T) {
	nan := math.NaN()
	far := [2]float64{1e9, -1e9}
	line := func(ports ...string) circuit.Line {
		l := circuit.Line{}
		for _, p := range ports {
			b, q, _ := strings.Cut(p, ".")
			l.Ports = append(l.Ports, circuit.PortRef{Block: b, Port: q})
		}
		return l
	}
	for name, c := range map[string]*circuit.Circuit{
		"empty":   {},
		"unknown": {Blocks: []circuit.Block{{ID: "X1", Kind: "no such thing"}, {ID: "P1", Kind: "pump"}}, Lines: []circuit.Line{line("X1.A", "P1.P", "Q.R"), line("P1.Z", "P1.P")}},
		"not a place": {Blocks: []circuit.Block{{ID: "P1", Kind: "pump", At: &[2]float64{nan, 3}}, {ID: "RV1", Kind: "relief", At: &[2]float64{3, math.Inf(1)}}},
			Lines: []circuit.Line{line("P1.P", "RV1.P")}},
		"far apart": {Blocks: []circuit.Block{{ID: "P1", Kind: "pump", At: &far}, {ID: "RV1", Kind: "relief", At: &[2]float64{0, 0}}}, Lines: []circuit.Line{line("P1.P", "RV1.P")}},
		"twice":     {Blocks: []circuit.Block{{ID: "P1", Kind: "pump"}, {ID: "P1", Kind: "pump"}}, Lines: []circuit.Line{line("P1.P", "P1.S"), line("P1.P")}},
		"in one place": {Blocks: []circuit.Block{{ID: "P1", Kind: "pump", At: &[2]float64{5, 5}}, {ID: "RV1", Kind: "relief", At: &[2]float64{5, 5}}, {ID: "C1", Kind: "cylinder", At: &[2]float64{5, 5}}},
			Lines: []circuit.Line{line("P1.P", "RV1.P", "C1.A")}},
		"junctions": {Blocks: []circuit.Block{{ID: "J1", Kind: "junction"}, {ID: "J2", Kind: "junction"}, {ID: "P1", Kind: "pump"}, {ID: "RV1", Kind: "relief"}, {ID: "T1", Kind: "tank"}},
			Lines: []circuit.Line{line("J1.1", "J2.1"), line("P1.P", "J1.2"), line("J2.3", "RV1.P"), line("RV1.T", "T1.T")}},
	} {
		s := NewSheet(c)
		st := &SheetState{signals: map[string]float64{"P1.P.q": nan, "P1.P.p": math.Inf(1), "C1.v": nan, "P1.S.q": 1e300}, heat: map[string]float64{"P1": math.Inf(1), "RV1": nan}}
		for _, state := range []*SheetState{nil, st, StateAt(nil, 3)} {
			rec := pen.NewRecorder()
			s.Draw(rec, 0, 0, 5, state, SheetOptions{Palette: Light, Legend: true, Findings: map[string]circuit.Level{"P1": circuit.Stops}})
			if name != "far apart" && rec.Skipped() > 0 {
				t.Errorf("%s: %d calls refused", name, rec.Skipped())
			}
			for _, b := range c.Blocks {
				if !strings.Contains(rec.String(), `"`+b.ID+`"`) {
					t.Errorf("%s: %s is not named", name, b.ID)
				}
			}
		}
		s.Move("P1", 1, 1).Drag([]string{"P1", "none"}, 0.5, 0).Labelled(nil, &audit.DutyRun{})
	}
}

func BenchmarkSheet(b *testing.B) {
	samples, err := solvedSamples()
	if err != nil {
		b.Fatal(err)
	}
	c := samples[0].runs[1]
	large := randomCircuit(rand.New(rand.NewPCG(1, 3)), 60)
	s := NewSheet(c.Circuit)
	b.Run("NewSheet press proposal", func(b *testing.B) {
		for b.Loop() {
			NewSheet(c.Circuit)
		}
	})
	b.Run("NewSheet 60 blocks", func(b *testing.B) {
		for b.Loop() {
			NewSheet(large)
		}
	})
	b.Run("Labelled", func(b *testing.B) {
		for b.Loop() {
			s.Labelled(c.Duties...)
		}
	})
	b.Run("Drag", func(b *testing.B) {
		for b.Loop() {
			s.Drag([]string{"P1"}, 1, 1)
		}
	})
	b.Run("StateAt and Draw", func(b *testing.B) {
		w, h := s.Size()
		img := image.NewRGBA(image.Rect(0, 0, int(w*7), int(h*7)))
		p := pen.NewRaster(img)
		for b.Loop() {
			p.Clear(Light.Card)
			s.Draw(p, 0, 0, 7, StateAt(c.Duties[0], 20), SheetOptions{Palette: Light, Scales: samples[0].scales})
		}
	})
}
