package drawing

import (
	"math"
	"sort"
)

// Item is a block to be placed. At, Turn and Mirror are as for Placed; At
// holds only if Fixed.
type Item struct {
	Symbol Symbol // as from Lookup, unused ports already left out
	Fixed  bool
	At     Pt
	Turn   int
	Mirror bool
}

// ItemPort is a connection of an item in Place: item index and port name.
type ItemPort struct {
	Item int
	Port string
}

// Room between blocks in an automatic layout [M].
const (
	gapBeside  = 8 // between groups of a row; lines pass and lettering stands there
	gapCoupled = 2 // between blocks on one shaft, rod or cable
	gapRows    = 6 // between rows, and laneWidth more for each net that passes there
	laneWidth  = 1
	sweeps     = 6
)

// Place gives each item the place of its origin, on whole modules. Fixed
// items stay where they are; the others are laid in rows by the Level of
// their symbols, tank below and actuators on top, blocks on one shaft in line,
// and ordered in the row so that lines run short. No two boxes overlap
// unless fixed ones do.
func Place(items []Item, nets [][]ItemPort) []Pt {
	l := newLayout(items, nets)
	l.setRows()
	for i := 0; i < sweeps; i++ {
		for k := range l.rows {
			l.arrange(l.rows[k])
		}
		for k := len(l.rows) - 1; k >= 0; k-- {
			l.arrange(l.rows[k])
		}
	}
	l.meetFixed()
	return l.at
}

// cluster is a run of blocks in line: coupled ones, or a single block.
type cluster struct {
	items []int
	x     float64 // where its left edge is wanted
}

type layout struct {
	items []Item
	nets  [][]ItemPort
	shape []Symbol // placed at the origin
	at    []Pt
	nbrs  [][]link
	rows  [][]*cluster // from the bottom up
}

// link is one way from a port of an item to a port of another.
type link struct {
	own, far Port
	item     int
	weight   float64
}

func newLayout(items []Item, nets [][]ItemPort) *layout {
	n := len(items)
	l := &layout{items: items, nets: nets, shape: make([]Symbol, n), at: make([]Pt, n), nbrs: make([][]link, n)}
	for i, it := range items {
		l.shape[i] = it.Symbol.Placed(Pt{}, it.Turn, it.Mirror)
	}
	for _, net := range nets {
		for a, p := range net {
			for b, q := range net {
				if a != b {
					l.link(p, q, 1/float64(len(net)-1))
				}
			}
		}
	}
	return l
}

func (l *layout) link(p, q ItemPort, weight float64) {
	own, ok := l.port(p)
	far, ok2 := l.port(q)
	if ok && ok2 && p.Item != q.Item {
		l.nbrs[p.Item] = append(l.nbrs[p.Item], link{own, far, q.Item, weight})
	}
}

func (l *layout) port(e ItemPort) (Port, bool) {
	if e.Item < 0 || e.Item >= len(l.items) {
		return Port{}, false
	}
	return l.shape[e.Item].Port(e.Port)
}

// setRows sorts the items into rows of clusters and sets the rows' heights
// on the sheet.
func (l *layout) setRows() {
	byLevel := map[int][]int{}
	var levels []int
	for i, s := range l.shape {
		if byLevel[s.Level] == nil {
			levels = append(levels, s.Level)
		}
		byLevel[s.Level] = append(byLevel[s.Level], i)
	}
	sort.Ints(levels)
	y, below := 0.0, 0.0
	for k, level := range levels {
		row := byLevel[level]
		above, under := 0.0, 0.0
		for _, i := range row {
			above = math.Max(above, -l.shape[i].Min.Y)
			under = math.Max(under, l.shape[i].Max.Y)
		}
		if k > 0 {
			y -= math.Ceil(below + under + gapRows + laneWidth*float64(l.passing(level)))
		}
		below = above
		for _, i := range row {
			l.at[i].Y = y
		}
		l.rows = append(l.rows, l.clusters(row))
	}
	for _, row := range l.rows {
		l.pack(row)
	}
}

// passing counts the nets that have ends both below and at or above a level.
func (l *layout) passing(level int) int {
	count := 0
	for _, net := range l.nets {
		lower, upper := false, false
		for _, e := range net {
			if e.Item >= 0 && e.Item < len(l.items) {
				lower = lower || l.shape[e.Item].Level < level
				upper = upper || l.shape[e.Item].Level >= level
			}
		}
		if lower && upper {
			count++
		}
	}
	return count
}

// clusters joins the blocks of a row that share a shaft, rod or cable, left
// to right as their ports face each other.
func (l *layout) clusters(row []int) []*cluster {
	inRow := map[int]bool{}
	for _, i := range row {
		inRow[i] = true
	}
	var out []*cluster
	seen := map[int]bool{}
	for _, i := range row {
		if seen[i] {
			continue
		}
		c := &cluster{}
		rank := map[int]int{i: 0}
		for queue := []int{i}; len(queue) > 0; queue = queue[1:] {
			k := queue[0]
			if seen[k] {
				continue
			}
			seen[k] = true
			c.items = append(c.items, k)
			for _, n := range l.nbrs[k] {
				if n.own.Type.Fluid() || !inRow[n.item] || seen[n.item] {
					continue
				}
				if _, ranked := rank[n.item]; !ranked {
					rank[n.item] = rank[k] + sideOf(n)
				}
				queue = append(queue, n.item)
			}
		}
		sort.SliceStable(c.items, func(a, b int) bool { return rank[c.items[a]] < rank[c.items[b]] })
		out = append(out, c)
	}
	return out
}

// sideOf is +1 if the far block belongs to the right of the own one.
func sideOf(n link) int {
	if n.own.Dir.X < 0 || n.own.Dir.X == 0 && n.far.Dir.X > 0 {
		return -1
	}
	return 1
}
