package drawing

// search is the reusable memory of the shortest-path search. A state is a
// node and the direction it was entered by: 4*node + direction.
type search struct {
	states []reached
	run    int32
	open   queue
	goal   span
}

// reached is the best way to a state so far, in the search with the number run.
type reached struct {
	cost   int32
	from   int32 // state before, -1 at a start
	run    int32
	closed bool // there is no better one
}

// span is a box of grid places.
type span struct{ x0, y0, x1, y1 int }

func (s span) has(x, y int) bool { return x >= s.x0 && x <= s.x1 && y >= s.y0 && y <= s.y1 }

func (s *search) begin() {
	s.run++
	s.open.empty()
}

// offer records a way to a state if it is the best so far.
func (s *search) offer(state, from, cost, ahead int32) {
	r := &s.states[state]
	if r.run == s.run && (r.closed || r.cost <= cost) {
		return
	}
	*r = reached{cost, from, s.run, false}
	s.open.push(cost+ahead, state)
}

// pop takes the most promising open state, -1 when none is left.
func (s *search) pop() int32 {
	for {
		state := s.open.pop()
		if state < 0 {
			return -1
		}
		if r := &s.states[state]; !r.closed {
			r.closed = true
			return state
		}
	}
}

// around is how far beside its ports a way is looked for first [M].
const around = 20

// path finds the cheapest way from the tree to one of the open ports, as
// nodes from the tree's end on; nil if there is none. It is looked for near the ports,
// and farther away only when what is found there is poor: large sheets take the
// time that their lines need, not that of their area.
func (f *field) path(t *tree, open []terminal) []int {
	f.scratch.goal = f.goalBox(open)
	ports := f.portBox(t)
	way, cost := f.pathInside(t, ports, around)
	if way != nil && cost < costKnot+costStep*int32(len(way)) {
		return way
	}
	if way, cost = f.pathInside(t, ports, 3*around); way != nil && cost < costInside {
		return way
	}
	way, _ = f.pathInside(t, ports, f.w+f.h)
	return way
}

// portBox is the box of the goals of a search and of all ports of its net.
func (f *field) portBox(t *tree) span {
	ports := f.scratch.goal
	for node := range t.ports {
		ports = ports.with(node%f.w, node/f.w)
	}
	return ports
}

// with is the box that holds a place too.
func (s span) with(x, y int) span {
	return span{min(s.x0, x), min(s.y0, y), max(s.x1, x), max(s.y1, y)}
}

// pathInside looks for the way no farther than so far beside a box, and inside the rim of the grid.
func (f *field) pathInside(t *tree, box span, by int) (way []int, cost int32) {
	f.window = span{max(box.x0-by, 1), max(box.y0-by, 1), min(box.x1+by, f.w-2), min(box.y1+by, f.h-2)}
	s := &f.scratch
	s.begin()
	f.offerStarts(t)
	for {
		state := s.pop()
		if state < 0 {
			return nil, 0
		}
		node, d := int(state/4), int(state%4)
		if s.states[state].from >= 0 && f.arrives(node, d) {
			return f.trace(state), s.states[state].cost
		}
		f.expand(state, node, d)
	}
}

// arrives tells whether a line that comes to node in direction d ends there
// at a port that is still open, by the way the port faces.
func (f *field) arrives(node, d int) bool {
	return f.own[node] == openAny || f.own[node] == int8(1+opposite(d))
}

// expand offers the three ways on from a state: straight, and to both sides unless a line begins there.
func (f *field) expand(state int32, node, d int) {
	s := &f.scratch
	x, y := int(uint32(node)%uint32(f.w)), int(uint32(node)/uint32(f.w))
	base, bend := s.states[state].cost, int32(-1)
	turns := [3]int{0, 1, 3}
	ways := turns[:]
	if s.states[state].from < 0 {
		ways = turns[:1]
	}
	for _, turn := range ways {
		out := (d + turn) & 3
		nx, ny := x+stepX[out], y+stepY[out]
		if !f.window.has(nx, ny) {
			continue
		}
		next := node + f.delta[out]
		cost := base + f.stepCost(node, out, next)
		if turn != 0 {
			if bend < 0 {
				bend = costBend + f.turnCost(node)
			}
			cost += bend
		}
		if f.own[next] != 0 && !f.arrives(next, out) {
			cost += costKnot
		}
		s.offer(int32(4*next+out), state, cost, s.goal.ahead(nx, ny, out))
	}
}

// offerStarts begins at the first port while there is no line yet, and then at every
// node of the lines laid so far except at the ports themselves; at these too where the
// lines consist of nothing else, as between two ports that face each other a step apart.
func (f *field) offerStarts(t *tree) {
	f.offerFrom(t, false)
	if len(f.scratch.open.items) == 0 {
		f.offerFrom(t, true)
	}
}

func (f *field) offerFrom(t *tree, atPorts bool) {
	s := &f.scratch
	for _, node := range t.starts() {
		port, isPort := t.ports[node]
		for d := 0; d < 4; d++ {
			if isPort && port.dir >= 0 && (len(t.edges) > 0 || d != port.dir) && !atPorts {
				continue
			}
			if t.has[f.edge(node, d)] {
				continue
			}
			cost := int32(0)
			if len(t.edges) > 0 {
				cost = costTee + f.turnCost(node)
			}
			s.offer(int32(4*node+d), -1, cost, s.goal.ahead(node%f.w, node/f.w, d))
		}
	}
}

// trace lists the nodes that led to a state, the start first.
func (f *field) trace(state int32) []int {
	var nodes []int
	for ; state >= 0; state = f.scratch.states[state].from {
		nodes = append(nodes, int(state/4))
	}
	for i, j := 0, len(nodes)-1; i < j; i, j = i+1, j-1 {
		nodes[i], nodes[j] = nodes[j], nodes[i]
	}
	return nodes
}

func (f *field) goalBox(open []terminal) span {
	b := span{f.w, f.h, 0, 0}
	for _, p := range open {
		b = b.with(p.node%f.w, p.node/f.w)
	}
	return b
}

// ahead is a lower bound of the cost still to come: the plain way to the box round all
// goals, and the bends that it takes when entered in direction d.
func (s *span) ahead(x, y, d int) int32 {
	dx, dy := max(s.x0-x, x-s.x1, 0), max(s.y0-y, y-s.y1, 0)
	cost := int32(costStep * (dx + dy))
	if d&1 == 0 && dy > 0 || d&1 == 1 && dx > 0 {
		cost += costBend
	}
	if d == right && x > s.x1 || d == left && x < s.x0 || d == down && y > s.y1 || d == up && y < s.y0 {
		cost += costBend
		if d&1 == 0 && dy == 0 || d&1 == 1 && dx == 0 {
			cost += costBend
		}
	}
	return cost
}
