package drawing

import (
	"math"
	"sort"
)

// width is the length of a cluster with the room inside it.
func (l *layout) width(c *cluster) float64 {
	w := gapCoupled * float64(len(c.items)-1)
	for _, i := range c.items {
		w += l.left(i) + l.right(i)
	}
	return w
}

// left and right are a block's reach beside its origin, in whole modules.
func (l *layout) left(i int) float64  { return math.Ceil(-l.shape[i].Min.X) }
func (l *layout) right(i int) float64 { return math.Ceil(l.shape[i].Max.X) }

// set puts a cluster's left edge at x.
func (l *layout) set(c *cluster, x float64) {
	for _, i := range c.items {
		l.at[i].X = x + l.left(i)
		x += l.left(i) + l.right(i) + gapCoupled
	}
}

// pack lays a row in its order, each cluster as near to its wanted x as the
// ones before it and their order allow.
func (l *layout) pack(row []*cluster) {
	// Neighbours that want the same room form a block that settles at the mean
	// of what its members want, each counted from the block's left edge.
	type block struct{ count, sum, width float64 }
	var blocks []block
	for _, c := range row {
		b := block{1, c.x, l.width(c) + gapBeside}
		for len(blocks) > 0 {
			p := blocks[len(blocks)-1]
			if p.sum/p.count+p.width <= b.sum/b.count {
				break
			}
			b.sum = p.sum + b.sum - p.width*b.count
			b.count += p.count
			b.width += p.width
			blocks = blocks[:len(blocks)-1]
		}
		blocks = append(blocks, b)
	}
	k := 0
	for _, b := range blocks {
		x := math.Round(b.sum / b.count)
		if k > 0 {
			prev := row[k-1]
			x = math.Max(x, l.leftEdge(prev)+l.width(prev)+gapBeside)
		}
		for n := 0; n < int(b.count); n++ {
			l.set(row[k], x)
			x += l.width(row[k]) + gapBeside
			k++
		}
	}
}

func (l *layout) leftEdge(c *cluster) float64 {
	i := c.items[0]
	return l.at[i].X - l.left(i)
}

// arrange orders a row by where the blocks its members are joined to stand,
// and packs it anew.
func (l *layout) arrange(row []*cluster) {
	for _, c := range row {
		c.x = l.leftEdge(c)
		shift, weight := 0.0, 0.0
		for _, i := range c.items {
			for _, n := range l.nbrs[i] {
				if contains(c.items, n.item) {
					continue
				}
				shift += n.weight * (l.at[n.item].X + n.far.At.X - l.at[i].X - n.own.At.X)
				weight += n.weight
			}
		}
		if weight > 0 {
			c.x += shift / weight
		}
	}
	sort.SliceStable(row, func(a, b int) bool {
		return row[a].x+l.width(row[a])/2 < row[b].x+l.width(row[b])/2
	})
	l.pack(row)
}

func contains(list []int, v int) bool {
	for _, w := range list {
		if w == v {
			return true
		}
	}
	return false
}

// meetFixed moves the whole layout to where it agrees best with the fixed
// items, puts these back and shifts the free ones to the right until clear.
func (l *layout) meetFixed() {
	var offset Pt
	count := 0.0
	for i, it := range l.items {
		if it.Fixed {
			offset = offset.add(it.At.sub(l.at[i]))
			count++
		}
	}
	if count == 0 {
		return
	}
	offset = Pt{math.Round(offset.X / count), math.Round(offset.Y / count)}
	var taken []Box
	for i, it := range l.items {
		if it.Fixed {
			l.at[i] = it.At
			taken = append(taken, l.shape[i].Box().moved(it.At).grown(gapBeside/2))
		}
	}
	for _, row := range l.rows {
		for _, c := range row {
			l.clear(c, offset, &taken)
		}
	}
}

// clear places the free members of a cluster beside what is taken.
func (l *layout) clear(c *cluster, offset Pt, taken *[]Box) {
	for _, i := range c.items {
		if l.items[i].Fixed {
			continue
		}
		l.at[i] = l.at[i].add(offset)
		box := l.shape[i].Box()
		for k := 0; k < len(*taken); k++ {
			if b := (*taken)[k]; b.overlaps(box.moved(l.at[i])) {
				l.at[i].X = math.Ceil(b.Max.X - box.Min.X)
				k = -1 // the new place must be clear of all
			}
		}
		*taken = append(*taken, box.moved(l.at[i]).grown(gapCoupled/2))
	}
}
