package drawing

import (
	"math"
	"reflect"
	"strings"
	"testing"
)

// build makes items and nets from "name symbol" and "name.port name.port".
func build(t *testing.T, blocks, wires string) ([]Item, [][]ItemPort) {
	t.Helper()
	index := map[string]int{}
	var items []Item
	for _, b := range strings.Split(blocks, ";") {
		f := strings.Fields(b)
		s, ok := Lookup(f[1])
		if !ok {
			t.Fatalf("no symbol %s", f[1])
		}
		index[f[0]] = len(items)
		items = append(items, Item{Symbol: s})
	}
	var nets [][]ItemPort
	for _, w := range strings.Split(wires, ";") {
		var net []ItemPort
		for _, p := range strings.Fields(w) {
			name, port, _ := strings.Cut(p, ".")
			net = append(net, ItemPort{index[name], port})
		}
		nets = append(nets, net)
	}
	return items, nets
}

const (
	pressBlocks = "M electric_motor;P pump_fixed_1;R relief;V dcv_4_3_closed;C cylinder;L load_mass;T tank;T2 tank;F filter;CK check"
	pressWires  = "M.shaft P.shaft;P.S T.T;P.P R.P CK.in;CK.out V.P;V.A C.A;V.B C.B;V.T F.A R.T;F.B T2.T;C.rod L.rod"
)

func boxesOf(items []Item, at []Pt) []Box {
	var boxes []Box
	for i, it := range items {
		boxes = append(boxes, it.Symbol.Placed(at[i], it.Turn, it.Mirror).Box())
	}
	return boxes
}

func checkApart(t *testing.T, boxes []Box) {
	t.Helper()
	for i, b := range boxes {
		for j := range boxes[:i] {
			if b.overlaps(boxes[j]) {
				t.Errorf("blocks %d and %d overlap: %v, %v", j, i, boxes[j], b)
			}
		}
	}
}

func TestPlaceLayersACircuit(t *testing.T) {
	items, nets := build(t, pressBlocks, pressWires)
	at := Place(items, nets)
	checkApart(t, boxesOf(items, at))
	for i, p := range at {
		if !whole(p) {
			t.Errorf("block %d stands off the grid at %v", i, p)
		}
		for j, q := range at {
			if items[i].Symbol.Level < items[j].Symbol.Level && p.Y <= q.Y {
				t.Errorf("block %d of level %d is not below block %d of level %d", i, items[i].Symbol.Level, j, items[j].Symbol.Level)
			}
		}
	}
	const motor, pump, cylinder, load = 0, 1, 4, 5
	if at[motor].Y != at[pump].Y || at[motor].X >= at[pump].X || at[cylinder].X >= at[load].X {
		t.Errorf("coupled blocks are not in line: %v", at)
	}
	if !reflect.DeepEqual(at, Place(items, nets)) {
		t.Error("two runs differ")
	}
}

func TestPlacedCircuitRoutesCleanly(t *testing.T) {
	items, nets := build(t, pressBlocks, pressWires)
	at := Place(items, nets)
	var routed []Net
	for _, n := range nets {
		var net Net
		for _, e := range n {
			p, _ := items[e.Item].Symbol.Placed(at[e.Item], 0, false).Port(e.Port)
			net.Type = p.Type
			net.Ports = append(net.Ports, PlacedPort{e.Item, p.Name, p.At, p.Dir})
		}
		routed = append(routed, net)
	}
	for i, r := range RouteAll(boxesOf(items, at), routed) {
		if r.Through || !joins(r, routed[i]) {
			t.Errorf("net %d: through %v, joined %v", i, r.Through, joins(r, routed[i]))
		}
	}
}

func TestPlaceKeepsFixedItems(t *testing.T) {
	items, nets := build(t, pressBlocks, pressWires)
	for i, p := range []Pt{{40, 30}, {56, 30}, {52, 20}} {
		items[i].Fixed, items[i].At = true, p
	}
	items[3].Turn = 1
	at := Place(items, nets)
	for i := range items {
		if items[i].Fixed && at[i] != items[i].At {
			t.Errorf("fixed block %d was moved to %v", i, at[i])
		}
	}
	if math.Abs(at[4].X-items[1].At.X) > 60 {
		t.Errorf("the cylinder stands far from the fixed pump: %v", at[4])
	}
	boxes := boxesOf(items, at)
	checkApart(t, boxes[3:])
	for i := 3; i < len(boxes); i++ {
		checkApart(t, append([]Box{boxes[i]}, boxes[1], boxes[2]))
	}
}

func TestPlaceBearsPoorInput(t *testing.T) {
	if at := Place(nil, nil); len(at) != 0 {
		t.Errorf("got %v", at)
	}
	items, _ := build(t, "A tank;B tank", "A.T B.T")
	at := Place(items, [][]ItemPort{{{0, "T"}, {9, "T"}}, {{0, "none"}, {-1, "T"}}, {{1, "T"}}})
	checkApart(t, boxesOf(items, at))
}
