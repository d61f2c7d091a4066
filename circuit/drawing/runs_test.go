package drawing

import (
	"math/rand"
	"testing"
)

// Two ports that face each other one module apart leave no free node between them; the
// third port of the net is joined all the same.
func TestThreePortsTwoFacing(t *testing.T) {
	blocks := []Box{{Pt{-6, -3}, Pt{0, 3}}, {Pt{1, -3}, Pt{7, 3}}, {Pt{10, 10}, Pt{16, 16}}}
	for _, more := range [][]PlacedPort{
		{{2, "c", Pt{13, 10}, Pt{0, -1}}},
		{{2, "c", Pt{13, 10}, Pt{0, -1}}, {2, "d", Pt{10, 13}, Pt{-1, 0}}},
	} {
		n := Net{Type: Oil, Ports: append([]PlacedPort{{0, "a", Pt{0, 0}, Pt{1, 0}}, {1, "b", Pt{1, 0}, Pt{-1, 0}}}, more...)}
		for range n.Ports {
			if r := RouteAll(blocks, []Net{n})[0]; !joins(r, n) {
				t.Errorf("from %s: the line does not reach all ports: %v", n.Ports[0].Name, r.Segments)
			}
			n.Ports = append(n.Ports[1:len(n.Ports):len(n.Ports)], n.Ports[0])
		}
	}
}

// steps are the points of a segment at whole modules from its first one.
func steps(s [2]Pt) []Pt {
	d := stepOf[dirOf(s[1].sub(s[0]))]
	out := []Pt{s[0]}
	for p := s[0]; p != s[1]; {
		p = p.add(d)
		out = append(out, p)
	}
	return out
}

// covers tells whether a route passes all of a run.
func covers(r Route, run [2]Pt) bool {
	on := map[Pt]bool{}
	for _, s := range r.Segments {
		for _, p := range steps(s) {
			on[p] = true
		}
	}
	for _, p := range steps(run) {
		if !on[p] {
			return false
		}
	}
	return true
}

// A line bent by hand passes where it was laid, also when it would be shorter elsewhere,
// and no further than its ports need it.
func TestRunsAreKept(t *testing.T) {
	blocks := []Box{{Pt{-6, -3}, Pt{0, 3}}, {Pt{30, -3}, Pt{36, 3}}}
	a, b := PlacedPort{0, "a", Pt{0, 0}, Pt{1, 0}}, PlacedPort{1, "b", Pt{30, 0}, Pt{-1, 0}}
	n := Net{Type: Oil, Ports: []PlacedPort{a, b}, Runs: [][2]Pt{{{4, 0}, {4, 12}}, {{4, 12}, {26, 12}}, {{26, 12}, {26, 20}}}}
	r := RouteAll(blocks, []Net{n})[0]
	if !joins(r, n) || !covers(r, [2]Pt{{4, 12}, {26, 12}}) {
		t.Errorf("the run is not passed: %v", r.Segments)
	}
	if covers(r, [2]Pt{{26, 12}, {26, 20}}) || len(r.Dots) > 0 {
		t.Errorf("a piece that leads nowhere is drawn: %v", r)
	}
	// The second block moves: the run stays, its end follows.
	n.Ports[1].At = Pt{40, 6}
	blocks[1] = Box{Pt{40, 3}, Pt{46, 9}}
	if r = RouteAll(blocks, []Net{n})[0]; !joins(r, n) || !covers(r, [2]Pt{{4, 12}, {25, 12}}) || r.Through {
		t.Errorf("after a move: %v", r.Segments)
	}
	// A block comes to stand on the run: the line goes round it.
	blocks = append(blocks, Box{Pt{12, 9}, Pt{18, 15}})
	r = RouteAll(blocks, []Net{n})[0]
	if !joins(r, n) || r.Through || !covers(r, [2]Pt{{4, 12}, {11, 12}}) {
		t.Errorf("round a block: %v", r)
	}
}

// Whatever runs a file names, on random sheets every line reaches its ports as a tree.
func TestRandomRuns(t *testing.T) {
	for seed := int64(1); seed <= 8; seed++ {
		blocks, nets := sheet(seed)
		rnd := rand.New(rand.NewSource(seed))
		for i := range nets {
			for k := rnd.Intn(4); k > 0; k-- {
				p := Pt{float64(rnd.Intn(100)), float64(rnd.Intn(80))}
				q := Pt{p.X, float64(rnd.Intn(80))}
				if rnd.Intn(2) == 0 {
					q = Pt{float64(rnd.Intn(100)), p.Y}
				}
				nets[i].Runs = append(nets[i].Runs, [2]Pt{p, q})
			}
		}
		for i, r := range RouteAll(blocks, nets) {
			if !joins(r, nets[i]) {
				t.Errorf("seed %d: net %d does not reach all ports", seed, i)
			}
			if nodes, edges := size(r); edges != nodes-1 {
				t.Errorf("seed %d: net %d has %d points and %d steps: no tree", seed, i, nodes, edges)
			}
		}
	}
}

// size counts the points and steps of a route.
func size(r Route) (nodes, edges int) {
	on, passed := map[Pt]bool{}, map[[2]Pt]bool{}
	for _, s := range r.Segments {
		p := steps(s)
		for i := range p {
			on[p[i]] = true
			if i > 0 {
				a, b := p[i-1], p[i]
				if a.X > b.X || a.Y > b.Y {
					a, b = b, a
				}
				passed[[2]Pt{a, b}] = true
			}
		}
	}
	return len(on), len(passed)
}
