package drawing

import (
	"math/rand"
	"slices"
	"testing"
)

// Two ports that turn their backs to each other are joined round about. A third one that comes
// later gives them a shorter way, and the first branch is laid to it.
func TestBranchesAreLaidAnew(t *testing.T) {
	n := Net{Type: Oil, Ports: []PlacedPort{port(11, 0, Pt{0, -1}), port(10, 2, Pt{0, 1}), port(18, 9, Pt{0, -1})}}
	for range n.Ports {
		r := RouteAll(nil, []Net{n})[0]
		length := 0.0
		for _, s := range r.Segments {
			length += float64(len(steps(s)) - 1)
		}
		if !joins(r, n) || length > 21 {
			t.Errorf("from %v: %g M, 21 M are enough: %v", n.Ports[0].At, length, r.Segments)
		}
		n.Ports = append(n.Ports[1:len(n.Ports):len(n.Ports)], n.Ports[0])
	}
}

// Laying anew leaves a tree that joins all ports, on sheets where lines crowd.
func TestRelaidNetsStayTrees(t *testing.T) {
	for seed := int64(50); seed < 60; seed++ {
		blocks, nets := sheet(seed)
		for i, r := range RouteAll(blocks, nets) {
			if nodes, edges := size(r); !joins(r, nets[i]) || edges != nodes-1 {
				t.Errorf("seed %d: net %d has %d points and %d steps: no tree", seed, i, nodes, edges)
			}
		}
	}
}

// The queue gives states by their guesses, and those of one guess as they came.
func TestQueueOrder(t *testing.T) {
	rnd := rand.New(rand.NewSource(1))
	var q queue
	for round := 0; round < 20; round++ {
		q.empty()
		type entry struct{ guess, state int32 }
		var in []entry
		for k := int32(0); k < 300; k++ {
			e := entry{int32(rnd.Intn(40) * rnd.Intn(3000)), k}
			in = append(in, e)
			q.push(e.guess, e.state)
			if rnd.Intn(3) > 0 {
				continue
			}
			least := in[0]
			for _, e := range in {
				if e.guess < least.guess {
					least = e
				}
			}
			if got := q.pop(); got != least.state {
				t.Fatalf("got %d, want %d", got, least.state)
			}
			in = slices.DeleteFunc(in, func(e entry) bool { return e.state == least.state })
		}
		slices.SortStableFunc(in, func(a, b entry) int { return int(a.guess - b.guess) })
		for _, e := range in {
			if got := q.pop(); got != e.state {
				t.Fatalf("got %d, want %d", got, e.state)
			}
		}
		if q.pop() != -1 {
			t.Error("more comes out than went in")
		}
	}
}
