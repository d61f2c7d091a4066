package drawing

import "sort"

// relays is how often the branches of a net are laid anew at most.
const relays = 3

// branch is a part of a tree between two places where it branches or has a port.
type branch struct {
	edges []int
	ends  [2]int // nodes
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
		b := branch{edges: []int{e}}
		for i, node := range [2]int{e / 2, e/2 + f.delta[e&1]} {
			for on := f.onward(t, node, e); on >= 0; on = f.onward(t, node, on) {
				seen[on] = true
				b.edges = append(b.edges, on)
				node = on/2 + on/2 + f.delta[on&1] - node
			}
			b.ends[i] = node
		}
		out = append(out, b)
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

// relayBranch joins the two parts of a tree that a branch joins by the cheapest way, and
// tells whether that is another one. Nothing is done where another branch was laid to this
// one, or in place of it.
func (f *field) relayBranch(t *tree, b branch) bool {
	for _, e := range b.edges {
		if !t.has[e] {
			return false
		}
	}
	near, far := f.part(t, b, b.ends[0]), f.part(t, b, b.ends[1])
	if len(near.edges)+len(far.edges)+len(b.edges) != len(t.edges) {
		return false
	}
	if len(far.nodes) > len(near.nodes) {
		near, far = far, near
	}
	way := f.between(&near, &far)
	if way == nil {
		return false
	}
	*t = tree{has: map[int]bool{}, on: map[int]bool{}, ports: t.ports, stiff: t.stiff}
	for _, part := range []*tree{&near, &far} {
		for _, e := range part.edges {
			f.lay(t, e)
		}
	}
	changed := false
	was := map[int]bool{}
	for _, e := range b.edges {
		was[e] = true
	}
	for i := 1; i < len(way); i++ {
		e := 2*min(way[i-1], way[i]) + f.axis(way[i-1], way[i])
		changed = changed || !was[e]
		f.lay(t, e)
	}
	return changed
}

// part is what hangs together with a node once a branch is out.
func (f *field) part(t *tree, b branch, from int) tree {
	out := tree{has: map[int]bool{}, on: map[int]bool{from: true}, nodes: []int{from}, ports: t.ports, stiff: t.stiff}
	cut := map[int]bool{}
	for _, e := range b.edges {
		cut[e] = true
	}
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

// between is the cheapest way from one part of a tree to another: to its port where it is no
// more, else to where no other net is in the way.
func (f *field) between(near, far *tree) []int {
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
	way := f.path(near, open)
	for node, o := range was {
		f.own[node] = o
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
