package duty

import "math"

// column is one track over the rows.
type column struct {
	t, v    []float64
	derived bool // v was worked out for this once
}

func (d *Duty) column(of string, w What) *column {
	if tr := d.Track(of, w); tr != nil {
		return &column{t: d.Time, v: tr.Values}
	}
	return nil
}

// speedColumn gives the speed track, or the speed taken from a position track:
// at each row the central difference over its neighbours (one-sided at the ends
// and at steps), linear between rows.
func (d *Duty) speedColumn(of string) *column {
	if c := d.column(of, Speed); c != nil {
		return c
	}
	p := d.column(of, Position)
	if p == nil {
		return nil
	}
	v := make([]float64, len(p.t))
	for i := range v {
		a, b := max(i-1, 0), min(i+1, len(v)-1)
		if p.t[a] == p.t[i] && i > 0 {
			a = i
		}
		if p.t[b] == p.t[i] {
			b = i
		}
		if p.t[b] > p.t[a] {
			v[i] = (p.v[b] - p.v[a]) / (p.t[b] - p.t[a])
		}
	}
	return &column{p.t, v, true}
}

func (c *column) top() float64 {
	if c == nil {
		return 0
	}
	m, ok := recall(c.v, largest)
	if !ok { // a derived column is never met again
		for _, v := range c.v {
			m = math.Max(m, math.Abs(v))
		}
		if !c.derived {
			keep(c.v, largest, m)
		}
	}
	return m
}

// at interpolates inside segment seg (rows seg, seg+1).
func (c *column) at(seg int, t float64) float64 {
	t0, t1 := c.t[seg], c.t[seg+1]
	if t1 <= t0 || t <= t0 {
		return c.v[seg]
	}
	if t >= t1 {
		return c.v[seg+1]
	}
	return c.v[seg] + (c.v[seg+1]-c.v[seg])*(t-t0)/(t1-t0)
}

func (c *column) slope(seg int) float64 {
	if h := c.t[seg+1] - c.t[seg]; h > 0 {
		return (c.v[seg+1] - c.v[seg]) / h
	}
	return 0
}
