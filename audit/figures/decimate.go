package figures

import "barlitre/audit/pen"

// runs cuts a series into pieces that can be drawn as unbroken lines: it breaks
// at missing values and where x runs backwards, keeps what lies in from…to, and
// adds the points where a line enters and leaves that window. The longer of x and
// y is cut to the shorter. Each piece is thinned, see thinner.
func runs(x, y []float64, from, to float64, columns int) [][]pen.Pt {
	t := thinner{from: from, k: float64(columns) / (to - from)}
	var last pen.Pt
	linked := false // last is a valid neighbour of the point at hand
	for i := range min(len(x), len(y)) {
		q := pen.Pt{X: x[i], Y: y[i]}
		if !finite(q.X) || !finite(q.Y) {
			t.end()
			linked = false
			continue
		}
		if linked && q.X < last.X {
			t.end()
			linked = false
		}
		if linked && last.X < from && q.X > from {
			t.add(between(last, q, from))
		}
		if q.X >= from && q.X <= to {
			t.add(q)
		} else if q.X > to {
			if linked && last.X < to {
				t.add(between(last, q, to))
			}
			t.end()
		}
		last, linked = q, true
	}
	t.end()
	return t.out
}

// between returns the point at x on the line from a to b, a.X < b.X.
func between(a, b pen.Pt, x float64) pen.Pt {
	t := (x - a.X) / (b.X - a.X)
	return pen.Pt{X: x, Y: a.Y + t*(b.Y-a.Y)}
}

// thinner keeps at most four points for each column of the picture: the first,
// the lowest, the highest and the last, in their order. What is drawn does not
// change by that, and no peak is lost.
type thinner struct {
	from, k float64 // column of x is (x − from)·k
	out     [][]pen.Pt
	run     []pen.Pt

	col                 int
	n                   int // points in the column so far
	first, lo, hi, last pen.Pt
	loAt, hiAt          int
}

// add takes the next point of a run.
func (t *thinner) add(q pen.Pt) {
	col := int((q.X - t.from) * t.k)
	if t.n > 0 && col != t.col {
		t.flush()
	}
	if t.n == 0 {
		t.col, t.first, t.lo, t.hi, t.loAt, t.hiAt = col, q, q, q, 0, 0
	}
	if q.Y < t.lo.Y {
		t.lo, t.loAt = q, t.n
	}
	if q.Y > t.hi.Y {
		t.hi, t.hiAt = q, t.n
	}
	t.last = q
	t.n++
}

// flush ends a column.
func (t *thinner) flush() {
	if t.n == 0 {
		return
	}
	t.run = append(t.run, t.first)
	a, b, at, bt := t.lo, t.hi, t.loAt, t.hiAt
	if at > bt {
		a, b, at, bt = b, a, bt, at
	}
	end := t.n - 1
	if at > 0 && at < end {
		t.run = append(t.run, a)
	}
	if bt > at && bt < end {
		t.run = append(t.run, b)
	}
	if end > 0 {
		t.run = append(t.run, t.last)
	}
	t.n = 0
}

// end ends a run.
func (t *thinner) end() {
	t.flush()
	if len(t.run) > 0 {
		t.out = append(t.out, t.run)
	}
	t.run = nil
}
