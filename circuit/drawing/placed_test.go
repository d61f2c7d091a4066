package drawing

import (
	"math"
	"strings"
	"testing"
)

func near(p, q Pt) bool { return math.Hypot(p.X-q.X, p.Y-q.Y) < 1e-9 }

func sameDrawing(a, b Symbol) bool {
	for i := range a.Prims {
		p, q := a.Prims[i], b.Prims[i]
		if !near(p.C, q.C) || p.Kind == Arc && (!near(p.onArc(p.A0), q.onArc(q.A0)) || !near(p.onArc(p.A1), q.onArc(q.A1))) {
			return false
		}
		for k := range p.Pts {
			if !near(p.Pts[k], q.Pts[k]) {
				return false
			}
		}
	}
	return len(a.Prims) == len(b.Prims) && near(a.Min, b.Min) && near(a.Max, b.Max) && near(a.Tag, b.Tag)
}

func TestPlacedFourTurnsOrTwoMirrorsChangeNothing(t *testing.T) {
	for _, s := range all(t) {
		turned := s
		for i := 0; i < 4; i++ {
			turned = turned.Placed(Pt{}, 1, false)
		}
		mirrored := s.Placed(Pt{}, 0, true).Placed(Pt{}, 0, true)
		if !sameDrawing(s, turned) || !sameDrawing(s, mirrored) {
			t.Errorf("%s: four turns change it: %v, two mirrors: %v", s.Name, !sameDrawing(s, turned), !sameDrawing(s, mirrored))
		}
		if !sameDrawing(s.Placed(Pt{}, -1, false), s.Placed(Pt{}, 3, false)) {
			t.Errorf("%s: a turn back is not three turns on", s.Name)
		}
	}
}

// A turned arc must pass through the turned middle of the first one.
func TestPlacedTurnsArcsWithTheRest(t *testing.T) {
	s, _ := Lookup("motor_fixed_1")
	for _, mirror := range []bool{false, true} {
		q := s.Placed(Pt{5, 2}, 1, mirror)
		for i, p := range s.Prims {
			if p.Kind != Arc {
				continue
			}
			for _, f := range []float64{0, 0.3, 1} {
				want := p.onArc(p.A0 + f*(p.A1-p.A0))
				g := f
				if mirror {
					want.X, g = -want.X, 1-f
				}
				want = Pt{-want.Y, want.X}.add(Pt{5, 2}) // a quarter turn clockwise, y down
				r := q.Prims[i]
				if got := r.onArc(r.A0 + g*(r.A1-r.A0)); !near(got, want) {
					t.Errorf("mirrored %v: arc at %v of its length is at %v, want %v", mirror, f, got, want)
				}
			}
		}
	}
}

func TestTankAndAccumulatorStayUpright(t *testing.T) {
	for _, name := range []string{"tank", "accumulator", "pressure_source"} {
		s, _ := Lookup(name)
		if !sameDrawing(s, s.Placed(Pt{}, 1, false)) {
			t.Errorf("%s was turned", name)
		}
	}
}

func TestPlacedLeavesTheLibraryAlone(t *testing.T) {
	before, _ := Lookup("relief")
	changed, _ := Lookup("relief")
	changed.Prims[0].Pts[0] = Pt{99, 99}
	changed.Ports[0].At = Pt{99, 99}
	changed.Placed(Pt{3, 3}, 1, true)
	after, _ := Lookup("relief")
	if !sameDrawing(before, after) || after.Ports[0].At != before.Ports[0].At {
		t.Error("a change to a symbol reached the library")
	}
}

func TestKeepDropsUnusedStubs(t *testing.T) {
	s, _ := Lookup("pump_var_ls")
	k := s.Keep(func(port string) bool { return port != "LS" && port != "D" })
	if len(k.Ports) != len(s.Ports)-2 || k.hasPart("port:LS") || k.hasPart("port:D") {
		t.Errorf("ports left: %v", k.Ports)
	}
	if k.Max.X >= s.Max.X {
		t.Errorf("box still reaches to %v", k.Max.X)
	}
	none := s.Keep(func(string) bool { return false })
	if _, ok := none.Port("P"); !ok {
		t.Error("the outlet was dropped; it belongs to the symbol")
	}
}

func TestFaultyDataIsRefusedByPlace(t *testing.T) {
	cases := map[string]string{
		`{"symbols":[{"name":"x","draw":["line 0 0 a 1"]}]}`:                   `"a" is not a number`,
		`{"symbols":[{"name":"x","draw":["line 0 0 1"]}]}`:                     "pairs",
		`{"symbols":[{"name":"x","draw":["ring 0 0"]}]}`:                       "want 3 numbers",
		`{"symbols":[{"name":"x","draw":["blob 0 0 1 1"]}]}`:                   `no shape "blob"`,
		`{"symbols":[{"name":"x","draw":["line:wavy 0 0 1 1"]}]}`:              `no line style "wavy"`,
		`{"symbols":[{"name":"x","draw":["use nothing"]}]}`:                    `no piece "nothing"`,
		`{"pieces":{"a":["use a"]},"symbols":[{"name":"x","draw":["use a"]}]}`: "nested",
		`{"symbols":[{"name":"x","ports":["P 0 0 aside oil"]}]}`:               `no direction "aside"`,
		`{"symbols":[{"name":"x","ports":["P 0 0 up beer"]}]}`:                 `no port type "beer"`,
		`{"symbols":[{"name":"x"},{"name":"x"}]}`:                              "twice",
		`{"aliases":{"y":"x"}}`:                                                `no symbol "x"`,
	}
	for data, want := range cases {
		if _, err := readLibrary([]byte(data)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: got error %v, want %q in it", data, err, want)
		}
	}
}
