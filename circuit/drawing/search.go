package drawing

// search is the reusable memory of the shortest-path search. A state is a
// node and the direction it was entered by: 4*node + direction.
type search struct {
	cost   []int32
	from   []int32 // state before, -1 at a start
	seen   []int32 // run in which the entry was written
	closed []int32 // run in which the state was settled
	run    int32
	heap   []entry
	next   int32 // running number, breaks ties in favour of the older entry
}

type entry struct {
	guess, order, state int32
}

func (e entry) before(o entry) bool {
	return e.guess < o.guess || e.guess == o.guess && e.order < o.order
}

func (s *search) init(states int) {
	s.cost, s.from = make([]int32, states), make([]int32, states)
	s.seen, s.closed = make([]int32, states), make([]int32, states)
}

func (s *search) begin() {
	s.run++
	s.heap, s.next = s.heap[:0], 0
}

// offer records a way to a state if it is the best so far.
func (s *search) offer(state, from, cost, ahead int32) {
	if s.seen[state] == s.run && s.cost[state] <= cost {
		return
	}
	s.seen[state], s.cost[state], s.from[state] = s.run, cost, from
	s.push(entry{cost + ahead, s.next, state})
	s.next++
}

func (s *search) push(e entry) {
	h := append(s.heap, e)
	i := len(h) - 1
	for i > 0 && e.before(h[(i-1)/2]) {
		h[i] = h[(i-1)/2]
		i = (i - 1) / 2
	}
	h[i] = e
	s.heap = h
}

// pop takes the most promising open state, -1 when none is left.
func (s *search) pop() int32 {
	for len(s.heap) > 0 {
		state := s.take().state
		if s.closed[state] != s.run {
			s.closed[state] = s.run
			return state
		}
	}
	return -1
}

func (s *search) take() entry {
	h := s.heap
	top, last := h[0], h[len(h)-1]
	h = h[:len(h)-1]
	i := 0
	for {
		c := 2*i + 1
		if c >= len(h) {
			break
		}
		if c+1 < len(h) && h[c+1].before(h[c]) {
			c++
		}
		if !h[c].before(last) {
			break
		}
		h[i] = h[c]
		i = c
	}
	if len(h) > 0 {
		h[i] = last
	}
	s.heap = h
	return top
}

// around is how far beside its ports a way is looked for first [M].
const around = 20

// path finds the cheapest way from the tree to one of the open ports, as
// nodes from the tree's end on; nil if there is none. It is looked for near the ports,
// and farther away only when what is found there is poor: large sheets take the
// time that their lines need, not that of their area.
func (f *field) path(t *tree, open []terminal) []int {
	f.window = f.goalBox(open)
	for node := range t.ports {
		f.window = f.window.with(f.at(node))
	}
	ports := f.window
	f.window = ports.grown(around)
	way, cost := f.pathInside(t, open)
	if way != nil && cost < costKnot+costStep*int32(len(way)) {
		return way
	}
	f.window = ports.grown(3 * around)
	if way, cost = f.pathInside(t, open); way != nil && cost < costInside {
		return way
	}
	f.window = Box{f.at(0), f.at(f.w*f.h - 1)}
	way, _ = f.pathInside(t, open)
	return way
}

func (f *field) pathInside(t *tree, open []terminal) (way []int, cost int32) {
	s := &f.scratch
	s.begin()
	goal := f.goalBox(open)
	f.offerStarts(t, goal)
	for {
		state := s.pop()
		if state < 0 {
			return nil, 0
		}
		node, d := int(state/4), int(state%4)
		if s.from[state] >= 0 && f.arrives(node, d) {
			return f.trace(state), s.cost[state]
		}
		f.expand(state, node, d, goal)
	}
}

func (f *field) inWindow(node int) bool {
	p, w := f.at(node), &f.window
	return p.X >= w.Min.X && p.X <= w.Max.X && p.Y >= w.Min.Y && p.Y <= w.Max.Y
}

// arrives tells whether a line that comes to node in direction d ends there
// at a port that is still open, by the way the port faces.
func (f *field) arrives(node, d int) bool {
	return f.own[node] == openAny || f.own[node] == int8(1+opposite(d))
}

func (f *field) expand(state int32, node, d int, goal Box) {
	s := &f.scratch
	for turn := 0; turn < 4; turn++ {
		out := (d + turn) & 3
		if turn == 2 || turn != 0 && s.from[state] < 0 {
			continue
		}
		next := f.neighbour(node, out)
		if next < 0 || !f.inWindow(next) {
			continue
		}
		cost := s.cost[state] + f.stepCost(node, out, next)
		if turn != 0 {
			cost += costBend + f.turnCost(node)
		}
		if f.own[next] != 0 && !f.arrives(next, out) {
			cost += costKnot
		}
		s.offer(int32(4*next+out), state, cost, f.ahead(next, out, goal))
	}
}

// offerStarts begins at the first port while there is no line yet, and then at every
// node of the lines laid so far except at the ports themselves; at these too where the
// lines consist of nothing else, as between two ports that face each other a step apart.
func (f *field) offerStarts(t *tree, goal Box) {
	f.offerFrom(t, goal, false)
	if len(f.scratch.heap) == 0 {
		f.offerFrom(t, goal, true)
	}
}

func (f *field) offerFrom(t *tree, goal Box, atPorts bool) {
	s := &f.scratch
	for _, node := range t.starts() {
		port, isPort := t.ports[node]
		for d := 0; d < 4; d++ {
			if isPort && port.dir >= 0 && (len(t.edges) > 0 || d != port.dir) && !atPorts {
				continue
			}
			if next := f.neighbour(node, d); next < 0 || t.has[f.edge(node, d)] {
				continue
			}
			cost := int32(0)
			if len(t.edges) > 0 {
				cost = costTee + f.turnCost(node)
			}
			s.offer(int32(4*node+d), -1, cost, f.ahead(node, d, goal))
		}
	}
}

// trace lists the nodes that led to a state, the start first.
func (f *field) trace(state int32) []int {
	var nodes []int
	for ; state >= 0; state = f.scratch.from[state] {
		nodes = append(nodes, int(state/4))
	}
	for i, j := 0, len(nodes)-1; i < j; i, j = i+1, j-1 {
		nodes[i], nodes[j] = nodes[j], nodes[i]
	}
	return nodes
}

func (f *field) goalBox(open []terminal) Box {
	b := Box{f.at(open[0].node), f.at(open[0].node)}
	for _, p := range open {
		b = b.with(f.at(p.node))
	}
	return b
}

// ahead is a lower bound of the cost still to come: the plain way to the box round all
// goals, and the bends that it takes when entered in direction d.
func (f *field) ahead(node, d int, goal Box) int32 {
	p := f.at(node)
	dx := max(goal.Min.X-p.X, p.X-goal.Max.X, 0)
	dy := max(goal.Min.Y-p.Y, p.Y-goal.Max.Y, 0)
	cost := int32(costStep * (dx + dy))
	if d&1 == 0 && dy > 0 || d&1 == 1 && dx > 0 {
		cost += costBend
	}
	if d == right && p.X > goal.Max.X || d == left && p.X < goal.Min.X || d == down && p.Y > goal.Max.Y || d == up && p.Y < goal.Min.Y {
		cost += costBend
		if d&1 == 0 && dy == 0 || d&1 == 1 && dx == 0 {
			cost += costBend
		}
	}
	return cost
}
