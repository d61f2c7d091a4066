package figures

import (
	"math"
	"sort"

	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// Pyramid finds the lowest and highest value of any stretch of a long course without reading all of it: of every block of
// points it knows them, of every few blocks again, and so on. It is made once and keeps the course, which must not
// change, not a copy. It may be read by several goroutines.
type Pyramid struct {
	x, y   []float64
	levels [][]peaks
}

// peaks are the lowest and highest value of a block.
type peaks struct{ low, high float64 }

// none are the peaks of a block without a value that can be drawn.
var none = peaks{math.Inf(1), math.Inf(-1)}

// any reports whether there is a value.
func (a peaks) any() bool { return a.low <= a.high }

// join puts two blocks together.
func (a peaks) join(b peaks) peaks { return peaks{min(a.low, b.low), max(a.high, b.high)} }

const (
	pyramidBlock = 32 // points of a block of the lowest level
	pyramidStep  = 8  // blocks that make one of the next
)

// NewPyramid makes the pyramid of a course; nil where x falls or is no number. The longer of x and y is cut.
func NewPyramid(x, y []float64) *Pyramid {
	n := min(len(x), len(y))
	for i := range n {
		if !finite(x[i]) || i > 0 && x[i] < x[i-1] {
			return nil
		}
	}
	p := &Pyramid{x: x[:n:n], y: y[:n:n]}
	level := make([]peaks, 0, n/pyramidBlock+1)
	for from := 0; from < n; from += pyramidBlock {
		e := none
		for i := from; i < min(from+pyramidBlock, n); i++ {
			e = e.join(p.point(i))
		}
		level = append(level, e)
	}
	for p.levels = append(p.levels, level); len(level) > pyramidStep; p.levels = append(p.levels, level) {
		next := make([]peaks, 0, len(level)/pyramidStep+1)
		for from := 0; from < len(level); from += pyramidStep {
			e := none
			for _, b := range level[from:min(from+pyramidStep, len(level))] {
				e = e.join(b)
			}
			next = append(next, e)
		}
		level = next
	}
	return p
}

// point is a block of one point.
func (p *Pyramid) point(i int) peaks {
	if v := p.y[i]; finite(v) {
		return peaks{v, v}
	}
	return none
}

// Len is the number of points.
func (p *Pyramid) Len() int { return len(p.x) }

// within returns the points in from…to, as a stretch of indices.
func (p *Pyramid) within(from, to float64) (i, j int) {
	i = sort.SearchFloat64s(p.x, from)
	j = i + sort.Search(len(p.x)-i, func(k int) bool { return p.x[i+k] > to })
	return i, j
}

// Range returns the lowest and highest value in from…to; ok is false where there is none.
func (p *Pyramid) Range(from, to float64) (low, high float64, ok bool) {
	i, j := p.within(from, to)
	e := p.between(i, j)
	if !e.any() {
		return 0, 0, false
	}
	return e.low, e.high, true
}

// between returns the peaks of points i to j−1: of single points up to the next whole block on either side, then of blocks up
// to the next whole block of blocks, and so on.
func (p *Pyramid) between(i, j int) peaks {
	e := none
	unit := func(level, k int) peaks {
		if level < 0 {
			return p.point(k)
		}
		return p.levels[level][k]
	}
	for level, group := -1, pyramidBlock; i < j; level, group = level+1, pyramidStep {
		last := level+1 >= len(p.levels)
		for ; i < j && (last || i%group != 0); i++ {
			e = e.join(unit(level, i))
		}
		for ; i < j && j%group != 0; j-- {
			e = e.join(unit(level, j-1))
		}
		i, j = i/group, j/group
	}
	return e
}

// Long is a course of very many points, in SI, with the units that a plot shows it in.
type Long struct {
	*Pyramid
	X, Y units.Unit
}

// span is the range of values in from…to of the plot.
func (l *Long) span(from, to float64) (lo, hi float64, ok bool) {
	lo, hi, ok = l.Range(l.X.ToSI(from), l.X.ToSI(to))
	return l.Y.FromSI(lo), l.Y.FromSI(hi), ok
}

// dense reports whether more points lie in from…to of the plot than a line through them could show.
func (l *Long) dense(from, to float64, columns int) bool {
	i, j := l.within(l.X.ToSI(from), l.X.ToSI(to))
	return j-i > columns
}

// runs is runs for a window with few points.
func (l *Long) runs(from, to float64, columns int) [][]pen.Pt {
	i, j := l.within(l.X.ToSI(from), l.X.ToSI(to))
	i, j = max(0, i-1), min(l.Len(), j+1) // the neighbours on either side, to which lines lead
	x, y := make([]float64, j-i), make([]float64, j-i)
	for k := range x {
		x[k], y[k] = l.X.FromSI(l.x[i+k]), l.Y.FromSI(l.y[i+k])
	}
	return runs(x, y, from, to, columns)
}

// column is what a course holds in a column of the picture.
type column struct{ x, low, high float64 }

// columns cuts from…to of the plot into columns and returns the lowest and highest value of each, in runs: a column that has
// points but no value ends one, a column without points does not.
func (l *Long) columns(from, to float64, n int) [][]column {
	var out [][]column
	var run []column
	width := (to - from) / float64(n)
	i, _ := l.within(l.X.ToSI(from), l.X.ToSI(to))
	for c := range n {
		_, j := l.within(l.X.ToSI(from), l.X.ToSI(from+width*float64(c+1)))
		switch e := l.between(i, j); {
		case e.any():
			run = append(run, column{from + width*(float64(c)+0.5), l.Y.FromSI(e.low), l.Y.FromSI(e.high)})
		case j > i && len(run) > 0:
			out, run = append(out, run), nil
		}
		i = max(i, j)
	}
	if len(run) > 0 {
		out = append(out, run)
	}
	return out
}
