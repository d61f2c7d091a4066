package figures

import (
	"fmt"
	"image"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/drawing"
)

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

// TestShaftPassesSettingDevices: the shaft goes straight through pumps with a setting device,
// which stands above it; where something stands there already the shaft goes round.
func TestShaftPassesSettingDevices(t *testing.T) {
	c := &circuit.Circuit{Blocks: []circuit.Block{{ID: "M1", Kind: "electric_motor", At: &[2]float64{0, 0}}}}
	shaft := circuit.Line{Ports: []circuit.PortRef{{Block: "M1", Port: "shaft"}}}
	for i, control := range []string{"pressure", "load_sensing", "pressure"} {
		id := fmt.Sprint("P", i+1)
		c.Blocks = append(c.Blocks, circuit.Block{ID: id, Kind: "pump", At: &[2]float64{20 + 25*float64(i), 0}, Words: map[string]circuit.Word{"control": {Text: control}}})
		shaft.Ports = append(shaft.Ports, circuit.PortRef{Block: id, Port: "shaft"})
	}
	c.Lines = []circuit.Line{shaft}
	s := NewSheet(c)
	if len(s.stretches) != 3 {
		t.Errorf("%d couplings, want 3", len(s.stretches))
	}
	for _, st := range s.stretches {
		if len(st.pts) != 2 {
			t.Errorf("a shaft goes round something: %v", st.pts)
		}
	}
	ports := map[SheetPort]bool{}
	for _, p := range s.Ports() {
		ports[p] = true
	}
	if at := (SheetPort{circuit.PortRef{Block: "P2", Port: "LS"}, 59, -1}); !ports[at] {
		t.Errorf("no port is said to stand at %v", at)
	}
	full := *c
	full.Blocks = append(slices.Clone(c.Blocks), circuit.Block{ID: "RV1", Kind: "relief", At: &[2]float64{28, -6}})
	if s = NewSheet(&full); len(s.nets) != 1 || s.parts[1].base.Name != "pump_var_pc" {
		t.Errorf("%d couplings past %s with a valve in the way", len(s.nets), s.parts[1].base.Name)
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
	for _, r := range s.Regions(0, 0, 4, false) {
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
			if rec.Skipped() > 0 {
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
