package drawing

import (
	"slices"
	"sort"
)

// relays is how often the branches of a net are laid anew at most.
const relays = 3

// branch is a part of a tree between two places where it branches or has a port: nodes in line.
type branch []int

// edges lists the edges of a branch, or of another way.
func (f *field) edges(way []int) map[int]bool {
	out := make(map[int]bool, len(way))
	for i := 1; i < len(way); i++ {
		out[2*min(way[i-1], way[i])+f.axis(way[i-1], way[i])] = true
	}
	return out
}

// relay lays every branch of a tree anew while the rest of it stands: ports are joined one
// after the other, and one that was early may have a shorter way to what came after it.
func (f *field) relay(t *tree) {
	if len(t.ports) < 3 {
		return // a single way, the cheapest already
	}
	for range relays {
		changed := false
		for _, b := range f.branches(t) {
			changed = f.relayBranch(t, b) || changed
		}
		if !changed {
			return
		}
	}
}

// branches cuts a tree at its ports and where it branches.
func (f *field) branches(t *tree) []branch {
	edges := append([]int(nil), t.edges...)
	sort.Ints(edges)
	seen := map[int]bool{}
	var out []branch
	for _, e := range edges {
		if seen[e] {
			continue
		}
		seen[e] = true
		b := f.follow(t, e/2, e, seen)
		slices.Reverse(b)
		out = append(out, append(b, f.follow(t, e/2+f.delta[e&1], e, seen)...))
	}
	return out
}

// follow lists the nodes of a branch from one on that an edge leads to, and notes the edges.
func (f *field) follow(t *tree, node, e int, seen map[int]bool) branch {
	out := branch{node}
	for on := f.onward(t, node, e); on >= 0 && !seen[on]; on = f.onward(t, node, on) {
		seen[on] = true
		node = on/2 + on/2 + f.delta[on&1] - node
		out = append(out, node)
	}
	return out
}

// onward is the edge by which a branch that comes along e goes on at node, -1 where it ends.
func (f *field) onward(t *tree, node, e int) int {
	if t.isPort(node) {
		return -1
	}
	out, degree := t.lines(f, node)
	if degree != 2 {
		return -1
	}
	for d := range out {
		if out[d] && f.edge(node, d) != e {
			return f.edge(node, d)
		}
	}
	return -1
}

// relayBranch joins the two parts of a tree that a branch joins by a cheaper way, and tells
// whether there is one. Nothing is done where another branch was laid to this one, or in
// place of it.
func (f *field) relayBranch(t *tree, b branch) bool {
	cut := f.edges(b)
	for e := range cut {
		if !t.has[e] {
			return false
		}
	}
	near, far := f.part(t, cut, b[0]), f.part(t, cut, b[len(b)-1])
	if len(near.edges)+len(far.edges)+len(cut) != len(t.edges) {
		return false
	}
	if len(far.nodes) > len(near.nodes) {
		near, far = far, near
		slices.Reverse(b)
	}
	way := f.cheaper(&near, &far, f.costOf(&near, b))
	if way == nil {
		return false
	}
	*t = tree{has: map[int]bool{}, on: map[int]bool{}, ports: t.ports, stiff: t.stiff}
	for _, part := range []*tree{&near, &far} {
		for _, e := range part.edges {
			f.lay(t, e)
		}
	}
	for i := 1; i < len(way); i++ { // not by addWay: its end is on the tree as well
		f.lay(t, 2*min(way[i-1], way[i])+f.axis(way[i-1], way[i]))
	}
	return true
}

// costOf is what a way from a tree costs, as a search counts it.
func (f *field) costOf(t *tree, way []int) int32 {
	cost := int32(0)
	if len(t.edges) > 0 {
		cost = costTee + f.turnCost(way[0])
	}
	was := -1
	for i := 1; i < len(way); i++ {
		d := dirOf(f.at(way[i]).sub(f.at(way[i-1])))
		if was >= 0 && d != was {
			cost += costBend + f.turnCost(way[i-1])
		}
		cost += f.stepCost(way[i-1], d, way[i])
		was = d
	}
	return cost
}

// part is what hangs together with a node once the edges of a branch are cut.
func (f *field) part(t *tree, cut map[int]bool, from int) tree {
	out := tree{has: map[int]bool{}, on: map[int]bool{from: true}, nodes: []int{from}, ports: t.ports, stiff: t.stiff}
	for k := 0; k < len(out.nodes); k++ {
		node := out.nodes[k]
		lines, _ := t.lines(f, node)
		for d := range lines {
			if e := f.edge(node, d); lines[d] && !cut[e] && !out.has[e] {
				out.has[e] = true
				out.edges = append(out.edges, e)
				if next := node + f.delta[d]; !out.on[next] {
					out.on[next] = true
					out.nodes = append(out.nodes, next)
				}
			}
		}
	}
	return out
}

// cheaper is a way from one part of a tree to another that costs less than given, nil where
// there is none near them: to its port where the other is no more, else to where no other net
// is in the way.
func (f *field) cheaper(near, far *tree, than int32) []int {
	var open []terminal
	was := map[int]int8{}
	for _, node := range far.nodes {
		p, isPort := far.ports[node]
		if isPort && len(far.edges) > 0 && p.dir >= 0 || len(far.edges) > 0 && f.turnCost(node) > 0 {
			continue
		}
		was[node] = f.own[node]
		f.own[node] = openAny
		if isPort && p.dir >= 0 {
			f.own[node] = int8(1 + p.dir)
		}
		open = append(open, terminal{node, -1})
	}
	if len(open) == 0 {
		return nil
	}
	f.scratch.goal = f.goalBox(open)
	way, cost := f.pathInside(near, f.portBox(near), around)
	for node, o := range was {
		f.own[node] = o
	}
	if cost >= than {
		return nil
	}
	first := 0
	for i, node := range way {
		if near.on[node] {
			first = i
		}
		if far.on[node] {
			return way[first : i+1]
		}
	}
	return nil
}
