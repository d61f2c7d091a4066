package drawing

import (
	"math"
	"strings"
	"testing"
)

// portsOf is what the blocks of a circuit need: symbol name to port names.
var portsOf = map[string]string{
	"tank": "T", "pressure_source": "P", "junction": "1 2 3 4", "electric_motor": "shaft E", "converter": "M L",
	"pump_fixed_1": "shaft S P D", "pump_fixed_2": "shaft S P D", "pump_var_1": "shaft S P D", "pump_var_2": "shaft S P D",
	"pump_var_pc": "shaft S P D", "pump_var_power": "shaft S P D", "pump_var_pq": "shaft S P D", "unloading_pilot": "P T X", "unloading": "P A T", "diesel_engine": "shaft", "pump_var_ls": "shaft S P D LS",
	"pump_var_pc_through": "shaft S P D", "pump_var_ls_through": "shaft S P D LS", "pump_var_power_through": "shaft S P D", "pump_var_pq_through": "shaft S P D", "pump_var_nf_through": "shaft S P D LS", "radial_switched_through": "shaft S P D LS",
	"motor_fixed_1": "shaft A B D", "motor_fixed_2": "shaft A B D", "motor_var": "shaft A B D",
	"relief": "P T", "check": "in out", "pilot_check": "V C X", "orifice": "A B",
	"dcv_4_3_closed": "P A B T LS", "dcv_4_3_open": "P A B T LS", "dcv_4_3_tandem": "P A B T LS", "dcv_4_3_float": "P A B T LS",
	"dcv_4_3_prop": "P A B T LS", "dcv_4_3_prop_closed": "P A B T LS", "dcv_4_3_prop_open": "P A B T LS",
	"dcv_4_3_prop_tandem": "P A B T LS", "dcv_4_3_prop_float": "P A B T LS",
	"compensator": "P A LS", "counterbalance": "V C X", "line": "A B", "filter": "A B", "filter_bypass": "A B",
	"cylinder": "A B rod", "charge_pump": "shaft S P T D", "charge_set": "shaft S P T D", "tank_return": "T", "cyl_diff": "A B rod", "relief_direct": "P T", "check_pilot": "V C X", "shuttle": "X Y A",
	"cyl_double_rod": "A B rod", "cyl_plunger": "A rod", "gearbox": "in out", "flow_divider_gear": "A B P", "flushing": "A B T",
	"cooler": "A B", "cooler_bypass": "A B", "gauge": "P", "flow_meter": "A B",
	"reducing": "P A T", "reducing_check": "P A T", "reducing_3way": "P A T", "reducing_3way_check": "P A T",
	"sequence": "P A D", "sequence_check": "P A D", "sequence_external": "P A X D", "sequence_external_check": "P A X D",
	"flow_sharing": "P A LS", "flow_sharing_check": "P A LS", "flow_2way": "A B", "flow_2way_check": "A B", "flow_3way": "P A T", "throttle_check": "A B",
	"shuttle_flow": "X Y A", "dcv_6_3": "C1 C2 P A B T", "pump_var_nf": "shaft S P D LS",
	"dcv_4_3_regen_closed": "P A B T LS", "dcv_4_3_regen_open": "P A B T LS", "dcv_4_3_regen_tandem": "P A B T LS", "dcv_4_3_regen_float": "P A B T LS",
	"dcv_4_3_prop_regen_closed": "P A B T LS", "dcv_4_3_prop_regen_open": "P A B T LS", "dcv_4_3_prop_regen_tandem": "P A B T LS", "dcv_4_3_prop_regen_float": "P A B T LS",
}

func all(t *testing.T) []Symbol {
	t.Helper()
	if _, err := loaded(); err != nil {
		t.Fatal(err)
	}
	var list []Symbol
	for _, name := range Names() {
		s, ok := Lookup(name)
		if !ok {
			t.Fatalf("%s is listed but not found", name)
		}
		list = append(list, s)
	}
	return list
}

func TestEveryKindHasItsPorts(t *testing.T) {
	for name, ports := range portsOf {
		s, ok := Lookup(name)
		if !ok {
			t.Errorf("no symbol %s", name)
			continue
		}
		want := strings.Fields(ports)
		if len(s.Ports) != len(want) {
			t.Errorf("%s has %d ports, want %d", name, len(s.Ports), len(want))
		}
		for _, p := range want {
			if _, ok := s.Port(p); !ok {
				t.Errorf("%s has no port %s", name, p)
			}
		}
	}
}

func TestNamesAndTitlesAreUnique(t *testing.T) {
	titles := map[string]string{}
	for _, s := range all(t) {
		if other := titles[s.Title]; other != "" {
			t.Errorf("%s and %s share the title %q", s.Name, other, s.Title)
		}
		titles[s.Title] = s.Name
	}
}

func whole(p Pt) bool { return p.X == math.Round(p.X) && p.Y == math.Round(p.Y) }

// onSide tells whether a port lies on the side of the box it faces.
func onSide(b Box, p Port) bool {
	switch p.Dir {
	case Pt{1, 0}:
		return p.At.X == b.Max.X
	case Pt{-1, 0}:
		return p.At.X == b.Min.X
	case Pt{0, 1}:
		return p.At.Y == b.Max.Y
	case Pt{0, -1}:
		return p.At.Y == b.Min.Y
	}
	return false
}

// hasFreeEnd: a line runs from the port straight into the symbol; for
// shafts and rods there is one line on each side of the port.
func hasFreeEnd(s Symbol, p Port) bool {
	ends := map[Pt]bool{}
	for _, q := range s.Prims {
		if q.Kind != Line && q.Kind != Poly {
			continue
		}
		for i, a := range q.Pts {
			for _, j := range []int{i - 1, i + 1} {
				if j < 0 || j >= len(q.Pts) {
					continue
				}
				inward := a.sub(q.Pts[j])
				if inward.dot(p.Dir) > 0 && inward.sub(p.Dir.scale(inward.dot(p.Dir))) == (Pt{}) {
					ends[a] = true
				}
			}
		}
	}
	if p.Type != Shaft && p.Type != Rod {
		return ends[p.At]
	}
	for _, half := range []float64{0.5, 1.25} {
		side := Pt{p.Dir.Y, p.Dir.X}.scale(half)
		if ends[p.At.add(side)] && ends[p.At.sub(side)] {
			return true
		}
	}
	return false
}

func TestPortsAreFreeEndsOnTheGrid(t *testing.T) {
	for _, s := range all(t) {
		for turn := 0; turn < 4; turn++ {
			for _, mirror := range []bool{false, true} {
				q := s.Placed(Pt{7, -3}, turn, mirror)
				for _, p := range q.Ports {
					if !whole(p.At) || !onSide(q.Box(), p) || !hasFreeEnd(q, p) {
						t.Errorf("%s turned %d mirrored %v: port %s at %v facing %v in box %v: on grid %v, on its side %v, free end %v",
							s.Name, turn, mirror, p.Name, p.At, p.Dir, q.Box(), whole(p.At), onSide(q.Box(), p), hasFreeEnd(q, p))
					}
				}
			}
		}
	}
}

// touches tells whether p lies on one of the strokes of a line.
func touches(l Prim, p Pt) bool {
	for i := 1; i < len(l.Pts); i++ {
		a, b := l.Pts[i-1], l.Pts[i]
		if math.Abs(math.Hypot(p.X-a.X, p.Y-a.Y)+math.Hypot(p.X-b.X, p.Y-b.Y)-math.Hypot(a.X-b.X, a.Y-b.Y)) < 1e-9 {
			return true
		}
	}
	return false
}

// joinedInMiddle follows the lines drawn in the middle square from one port
// line to the others: the letters of the ports reached.
func joinedInMiddle(s Symbol, from string) string {
	edge := map[string]Pt{"A": {-1, -2}, "B": {1, -2}, "P": {-1, 2}, "T": {1, 2}}
	var lines []Prim
	for _, p := range s.Prims {
		if p.Part == "square:middle" && p.Kind == Line {
			lines = append(lines, p)
		}
	}
	reached := []Pt{edge[from]}
	used := make([]bool, len(lines))
	for again := true; again; {
		again = false
		for i, l := range lines {
			for _, p := range reached {
				meets := touches(l, p)
				for _, e := range []Pt{l.Pts[0], l.Pts[len(l.Pts)-1]} {
					for k, m := range lines {
						meets = meets || used[k] && touches(m, e)
					}
				}
				if !used[i] && meets {
					used[i], again = true, true
					reached = append(reached, l.Pts...)
					break
				}
			}
		}
	}
	out := ""
	for _, name := range []string{"A", "B", "P", "T"} {
		for i, l := range lines {
			if used[i] && touches(l, edge[name]) {
				out += name
				break
			}
		}
	}
	return out
}

// The trade names of the centres say which ports are joined at rest.
func TestValveCentres(t *testing.T) {
	centres := map[string][4]string{ // joined with A, B, P, T
		"closed": {"A", "B", "P", "T"},
		"open":   {"ABPT", "ABPT", "ABPT", "ABPT"},
		"tandem": {"A", "B", "PT", "PT"},
		"float":  {"ABT", "ABT", "P", "ABT"},
	}
	for centre, want := range centres {
		for _, name := range []string{"dcv_4_3_" + centre, "dcv_4_3_prop_" + centre} {
			s, ok := Lookup(name)
			if !ok {
				t.Errorf("no symbol %s", name)
			}
			for i, port := range []string{"A", "B", "P", "T"} {
				if got := joinedInMiddle(s, port); got != want[i] {
					t.Errorf("%s: %s is joined with %s, want %s", name, port, got, want[i])
				}
			}
		}
	}
}

// At rest a valve that opens by pressure has its arrow beside the axis of its ports,
// one that closes by pressure on it.
func TestArrowsShowRest(t *testing.T) {
	for name, x := range map[string]float64{"relief": -1, "sequence": -1, "sequence_external": -1, "reducing": 0, "flow_sharing": 0, "compensator": 0} {
		s, _ := Lookup(name)
		arrows := 0
		for _, p := range s.Prims {
			if p.Part != "flow" || p.Kind != Line {
				continue
			}
			arrows++
			if p.Pts[0].X != x {
				t.Errorf("%s: arrow at %v", name, p.Pts[0])
			}
		}
		if arrows != 1 {
			t.Errorf("%s has %d arrows", name, arrows)
		}
	}
}

// A filled triangle points out of a pump and into a motor, and there is
// one for each flow direction.
func TestTrianglesShowPumpAndMotor(t *testing.T) {
	want := map[string][2]int{ // triangles that point out, in
		"pump_fixed_1": {1, 0}, "pump_fixed_2": {2, 0}, "pump_var_1": {1, 0}, "pump_var_2": {2, 0}, "pump_var_pc": {1, 0},
		"pump_var_ls": {1, 0}, "motor_fixed_1": {0, 1}, "motor_fixed_2": {0, 2}, "motor_var": {0, 2},
	}
	for name, count := range want {
		s, _ := Lookup(name)
		var got [2]int
		for _, p := range s.Prims {
			if p.Part != "flow" || !p.Filled || p.Kind != Poly {
				continue
			}
			tip := Pt{}
			rest := 0.0
			for _, q := range p.Pts {
				if q.X == 0 {
					tip = q
				} else {
					rest += math.Abs(q.Y) / 2
				}
			}
			if math.Abs(tip.Y) > rest {
				got[0]++
			} else {
				got[1]++
			}
		}
		if got != count {
			t.Errorf("%s: %d triangles out and %d in, want %v", name, got[0], got[1], count)
		}
	}
}

// Where the shaft of a machine goes on, nothing of its setting device stands in the way.
func TestShaftPasses(t *testing.T) {
	found := 0
	for _, s := range all(t) {
		if !strings.HasSuffix(s.Name, "_through") {
			continue
		}
		found++
		for _, p := range s.Prims {
			for _, q := range p.Pts {
				if q.X > 4.2 && math.Abs(q.Y) <= 0.5 {
					t.Errorf("%s: the %s stands in the way at %v", s.Name, p.Part, q)
				}
			}
		}
		if b, ok := Lookup(strings.TrimSuffix(s.Name, "_through")); !ok || len(b.Ports) != len(s.Ports) || b.Own != s.Own {
			t.Errorf("%s is not like %s", s.Name, b.Name)
		}
	}
	if found != 6 {
		t.Errorf("%d machines let their shaft pass, want 6", found)
	}
}

// Oil lifts the ball off its seat: the tip of the seat is on the inlet side.
func TestCheckValvesOpenTowardsTheirOutlet(t *testing.T) {
	for name, ports := range map[string][2]string{"check": {"in", "out"}, "check_spring": {"in", "out"}, "pilot_check": {"V", "C"},
		"reducing_check": {"A", "P"}, "reducing_3way_check": {"A", "P"}, "sequence_check": {"A", "P"}, "sequence_external_check": {"A", "P"},
		"flow_sharing_check": {"A", "P"}, "flow_2way_check": {"B", "A"}, "throttle_check": {"B", "A"}} {
		s, _ := Lookup(name)
		in, _ := s.Port(ports[0])
		out, _ := s.Port(ports[1])
		flow := out.At.sub(in.At)
		for _, p := range s.Prims {
			if p.Part == "seat" && p.Pts[1].sub(p.Pts[0]).dot(flow) >= 0 {
				t.Errorf("%s: the seat opens towards %s", name, ports[0])
			}
		}
	}
}
