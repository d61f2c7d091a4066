package drawing

import (
	"math"
	"math/rand"
	"reflect"
	"testing"
)

// sheet is a random layout: blocks that do not overlap, each port in one net
// at most.
func sheet(seed int64) (blocks []Box, nets []Net) {
	r := rand.New(rand.NewSource(seed))
	names := Names()
	var open []PlacedPort
	for tries := 0; len(blocks) < 8+int(seed%7) && tries < 500; tries++ {
		s, _ := Lookup(names[r.Intn(len(names))])
		q := s.Placed(Pt{float64(r.Intn(90)), float64(r.Intn(70))}, r.Intn(4), r.Intn(2) == 0)
		free := true
		for _, b := range blocks {
			free = free && !b.grown(3).overlaps(q.Box())
		}
		if !free {
			continue
		}
		for _, p := range q.Ports {
			open = append(open, PlacedPort{len(blocks), p.Name, p.At, p.Dir})
		}
		blocks = append(blocks, q.Box())
	}
	r.Shuffle(len(open), func(i, j int) { open[i], open[j] = open[j], open[i] })
	for len(open) >= 4 {
		n := 2 + r.Intn(3)
		nets = append(nets, Net{Type: PortType(r.Intn(3)), Ports: open[:n]})
		open = open[n:]
	}
	return blocks, nets
}

// walk gives all points of a segment at steps of half a module.
func walk(s [2]Pt) []Pt {
	n := int(math.Round(2 * (math.Abs(s[0].X-s[1].X) + math.Abs(s[0].Y-s[1].Y))))
	pts := []Pt{s[0]}
	for i := 1; i <= n; i++ {
		pts = append(pts, lerp(s[0], s[1], float64(i)/float64(n)))
	}
	return pts
}

// joins follows the lines from the first port and tells whether it reaches all.
func joins(r Route, n Net) bool {
	next := map[Pt][]Pt{}
	for _, s := range r.Segments {
		p := walk(s)
		for i := 1; i < len(p); i++ {
			next[p[i-1]] = append(next[p[i-1]], p[i])
			next[p[i]] = append(next[p[i]], p[i-1])
		}
	}
	seen := map[Pt]bool{n.Ports[0].At: true}
	for queue := []Pt{n.Ports[0].At}; len(queue) > 0; queue = queue[1:] {
		for _, q := range next[queue[0]] {
			if !seen[q] {
				seen[q] = true
				queue = append(queue, q)
			}
		}
	}
	for _, p := range n.Ports {
		if !seen[p.At] {
			return false
		}
	}
	return true
}

func inside(b Box, p Pt) bool {
	return b.Min.X < p.X && p.X < b.Max.X && b.Min.Y < p.Y && p.Y < b.Max.Y
}

// leavesProperly: every line at the port runs in the port's direction.
func leavesProperly(r Route, p PlacedPort) bool {
	met := false
	for _, s := range r.Segments {
		for i := range s {
			if s[i] == p.At {
				d := s[1-i].sub(s[i])
				if d.dot(p.Dir) <= 0 {
					return false
				}
				met = true
			}
		}
	}
	return met
}

// endsOnAnother: a corner or end on a line of another net looks like a joint.
func endsOnAnother(r Route, routes []Route) bool {
	ends := map[Pt]bool{}
	for _, s := range r.Segments {
		ends[s[0]], ends[s[1]] = true, true
	}
	for _, other := range routes {
		for _, s := range other.Segments {
			for _, p := range walk(s) {
				if other.Net != r.Net && ends[p] {
					return true
				}
			}
		}
	}
	return false
}

func TestRoutesOnRandomSheets(t *testing.T) {
	count, through, sideways, shared, touching := 0, 0, 0, 0, 0
	for seed := int64(1); seed <= 30; seed++ {
		blocks, nets := sheet(seed)
		routes := RouteAll(blocks, nets)
		owner := map[Pt]int{} // middles of the half modules that lines cover
		for i, r := range routes {
			count++
			if r.Net != i || !joins(r, nets[i]) {
				t.Errorf("sheet %d: route %d does not join its ports", seed, i)
			}
			crosses, shares := false, false
			for _, s := range r.Segments {
				if s[0] == s[1] || s[0].X != s[1].X && s[0].Y != s[1].Y {
					t.Errorf("sheet %d: segment %v is not at right angles", seed, s)
				}
				p := walk(s)
				for k := range p {
					for _, b := range blocks {
						crosses = crosses || inside(b, p[k])
					}
					if k > 0 {
						mid := lerp(p[k-1], p[k], 0.5)
						other, taken := owner[mid]
						shares = shares || taken && other != i
						owner[mid] = i
					}
				}
			}
			for _, p := range nets[i].Ports {
				if !leavesProperly(r, p) {
					sideways++
				}
			}
			if crosses {
				through++
				if !r.Through {
					t.Errorf("sheet %d: route %d passes through a block and does not say so", seed, i)
				}
			}
			if shares {
				shared++
			}
			if endsOnAnother(r, routes) {
				touching++
			}
		}
	}
	t.Logf("%d routes: %d through blocks, %d on the line of another net, %d with an end or corner on one, %d ports left sideways", count, through, shared, touching, sideways)
	if limit := count / 50; through > limit || shared > limit || touching > limit || sideways > limit {
		t.Errorf("at most %d routes may do each of these", limit)
	}
}

func TestRoutesAreTheSameEachTime(t *testing.T) {
	blocks, nets := sheet(5)
	if a, b := RouteAll(blocks, nets), RouteAll(blocks, nets); !reflect.DeepEqual(a, b) {
		t.Error("two runs differ")
	}
}

func port(x, y float64, dir Pt) PlacedPort { return PlacedPort{Block: -1, At: Pt{x, y}, Dir: dir} }

func TestRouteIsStraightWhereItCanBe(t *testing.T) {
	nets := []Net{{Ports: []PlacedPort{port(0, 0, Pt{1, 0}), port(9, 0, Pt{-1, 0})}}}
	r := RouteAll(nil, nets)[0]
	if want := [][2]Pt{{{0, 0}, {9, 0}}}; !reflect.DeepEqual(r.Segments, want) || r.Dots != nil || r.Through {
		t.Errorf("got %+v", r)
	}
}

func TestRouteGoesRoundABlock(t *testing.T) {
	wall := Box{Pt{4, -5}, Pt{6, 3}}
	nets := []Net{{Ports: []PlacedPort{port(0, 0, Pt{1, 0}), port(10, 0, Pt{-1, 0})}}}
	r := RouteAll([]Box{wall}, nets)[0]
	// The way below the wall is the shorter one.
	lowest := 0.0
	for _, s := range r.Segments {
		lowest = math.Max(lowest, math.Max(s[0].Y, s[1].Y))
	}
	if lowest != 4 || len(r.Segments) != 5 || r.Through {
		t.Errorf("got %+v", r)
	}
}

func TestRouteSaysWhenThereIsNoWayRound(t *testing.T) {
	cell := []Box{{Pt{-2, -4}, Pt{8, -2}}, {Pt{-2, 2}, Pt{8, 4}}, {Pt{-4, -4}, Pt{-1, 4}}, {Pt{6, -4}, Pt{9, 4}}}
	nets := []Net{{Ports: []PlacedPort{port(1, 0, Pt{1, 0}), port(20, 0, Pt{-1, 0})}}}
	r := RouteAll(cell, nets)[0]
	if !r.Through || !joins(r, nets[0]) {
		t.Errorf("got %+v", r)
	}
}

func TestDotWhereThreeLinesMeet(t *testing.T) {
	nets := []Net{{Ports: []PlacedPort{port(0, 0, Pt{1, 0}), port(10, 0, Pt{-1, 0}), port(5, 8, Pt{0, -1})}}}
	r := RouteAll(nil, nets)[0]
	if want := []Pt{{5, 0}}; !reflect.DeepEqual(r.Dots, want) || len(r.Segments) != 3 {
		t.Errorf("got %+v", r)
	}
}

func TestCrossingIsListedAndHasNoDot(t *testing.T) {
	nets := []Net{
		{Ports: []PlacedPort{port(0, 0, Pt{1, 0}), port(10, 0, Pt{-1, 0})}},
		{Ports: []PlacedPort{port(5, -6, Pt{0, 1}), port(5, 6, Pt{0, -1})}},
	}
	routes := RouteAll(nil, nets)
	if got, want := Crossings(routes), []Crossing{{Pt{5, 0}, 1, 0}}; !reflect.DeepEqual(got, want) {
		t.Errorf("got %v, want %v", got, want)
	}
	if routes[0].Dots != nil || routes[1].Dots != nil {
		t.Errorf("a crossing has a dot: %v", routes)
	}
}

func TestPortsInOnePlaceNeedNoLine(t *testing.T) {
	nets := []Net{{Ports: []PlacedPort{port(3, 3, Pt{1, 0}), port(3, 3, Pt{-1, 0})}}}
	if r := RouteAll(nil, nets)[0]; r.Segments != nil || r.Dots != nil {
		t.Errorf("got %+v", r)
	}
}

func TestPortsOffTheGridAreReached(t *testing.T) {
	nets := []Net{{Ports: []PlacedPort{port(0.3, 0.2, Pt{1, 0}), port(9.6, 4.4, Pt{-1, 0})}}}
	r := RouteAll(nil, nets)[0]
	met := 0
	for _, s := range r.Segments {
		if s[0].X != s[1].X && s[0].Y != s[1].Y {
			t.Errorf("segment %v is not at right angles", s)
		}
		if s[0] == nets[0].Ports[0].At || s[0] == nets[0].Ports[1].At {
			met++
		}
	}
	if met != 2 {
		t.Errorf("%d of 2 ports are met: %v", met, r.Segments)
	}
}

func TestElbowsWhereTheSheetIsTooLarge(t *testing.T) {
	nets := []Net{{Ports: []PlacedPort{port(0, 0, Pt{1, 0}), port(1e6, 1e6, Pt{-1, 0})}}, {}}
	routes := RouteAll([]Box{{Pt{math.NaN(), 0}, Pt{1, 1}}}, nets)
	want := [][2]Pt{{{0, 0}, {1e6, 0}}, {{1e6, 0}, {1e6, 1e6}}}
	if !reflect.DeepEqual(routes[0].Segments, want) || !routes[0].Through || routes[1].Segments != nil {
		t.Errorf("got %+v", routes)
	}
	routes = RouteAll(nil, nets)
	if !reflect.DeepEqual(routes[0].Segments, want) {
		t.Errorf("got %+v", routes)
	}
}

func TestSegmentFlowsBalanceAtEveryPoint(t *testing.T) {
	blocks, nets := sheet(3)
	for i, r := range RouteAll(blocks, nets) {
		into := make([]float64, len(nets[i].Ports))
		for k := range into {
			into[k] = float64(k + 1)
		}
		into[0] = -float64(len(into)*(len(into)+1)/2 - 1) // the first port feeds the others
		rest := map[Pt]float64{}
		for k, p := range nets[i].Ports {
			rest[p.At] -= into[k]
		}
		for k, q := range r.Flows(nets[i], into) {
			rest[r.Segments[k][0]] -= q
			rest[r.Segments[k][1]] += q
		}
		for at, q := range rest {
			if math.Abs(q) > 1e-12 {
				t.Errorf("route %d: %g is left over at %v", i, q, at)
			}
		}
	}
	if (Route{}).Flows(nets[0], nil) != nil {
		t.Error("flows that do not fit the ports were accepted")
	}
}

// Two ports that face each other a module apart leave no room between them for a branch: the
// other ports of the net are joined all the same, wherever they stand and in any order.
func TestPortsFacingEachOtherTakeABranch(t *testing.T) {
	turned := func(p Pt, quarter int) Pt {
		for range quarter {
			p = Pt{-p.Y, p.X}
		}
		return p
	}
	for quarter := range 4 {
		for _, rest := range [][]PlacedPort{
			{port(12, 9, Pt{0, -1})},
			{port(-9, -6, Pt{1, 0})},
			{port(12, 9, Pt{-1, 0}), port(13, 9, Pt{1, 0})}, // faces away from its neighbour
			{port(12, 9, Pt{1, 0}), port(13, 9, Pt{-1, 0})}, // a second pair
			{port(0, 1, Pt{0, 1}), port(20, 0, Pt{-1, 0}), port(1, -1, Pt{0, -1})},
		} {
			ports := append([]PlacedPort{port(0, 0, Pt{1, 0}), port(1, 0, Pt{-1, 0})}, rest...)
			for i := range ports {
				ports[i].At, ports[i].Dir = turned(ports[i].At, quarter), turned(ports[i].Dir, quarter)
			}
			for first := range ports {
				n := Net{Type: Oil, Ports: append(append([]PlacedPort{}, ports[first:]...), ports[:first]...)}
				blocks := []Box{}
				for _, p := range n.Ports { // a block of 4 by 4 behind each port
					c := Pt{p.At.X - 2*p.Dir.X, p.At.Y - 2*p.Dir.Y}
					blocks = append(blocks, Box{Pt{c.X - 2, c.Y - 2}, Pt{c.X + 2, c.Y + 2}})
				}
				for _, b := range [][]Box{nil, blocks} {
					if r := RouteAll(b, []Net{n})[0]; !joins(r, n) {
						t.Errorf("turned %d, %d blocks, ports %v: not all are joined by %v", quarter, len(b), n.Ports, r.Segments)
					}
				}
			}
		}
	}
}

// RouteSome lays what it is told to and leaves the rest: all that was laid again is joined,
// leaves its ports properly and shares no line with another net.
func TestRouteSomeLaysTheOthersRoundWhatStays(t *testing.T) {
	again := 0
	for seed := int64(1); seed <= 40; seed++ {
		blocks, nets := sheet(seed)
		all := RouteAll(blocks, nets)
		lay := map[int]bool{}
		for i := range nets {
			lay[i] = i%3 == int(seed)%3
		}
		some := RouteSome(blocks, nets, all, lay)
		for i, n := range nets {
			if !lay[i] {
				if !reflect.DeepEqual(some[i], all[i]) {
					t.Fatalf("seed %d: net %d was to stay", seed, i)
				}
				continue
			}
			again++
			if !joins(some[i], n) {
				t.Errorf("seed %d: net %d is not joined", seed, i)
			}
			if some[i].Through != all[i].Through && some[i].Through {
				t.Logf("seed %d: net %d runs through a block or along a line, for what stays is in its way", seed, i)
			}
			for _, p := range n.Ports {
				if !some[i].Through && !leavesProperly(some[i], p) {
					t.Errorf("seed %d: net %d does not leave %s as it faces", seed, i, p.Name)
				}
			}
		}
	}
	if again < 50 {
		t.Errorf("only %d nets were laid again", again)
	}
}
