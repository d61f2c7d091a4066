package balance

// past foretells a solution from the last three, by the polynomial (constant,
// line, parabola) that would have foretold the last one best. It is a start for
// Newton's method, nothing else: a poor one costs a step, never a result.
type past struct {
	x     [3][]float64 // last first
	count int
	order int
}

func newPast(n int) past {
	return past{x: [3][]float64{make([]float64, n), make([]float64, n), make([]float64, n)}}
}

func (p *past) forget() { p.count, p.order = 0, 0 }

// guess moves on the unknowns that stand where the last solution left them; the
// others have been given a start by the caller. It reports whether it did.
func (p *past) guess(x, lo, hi []float64) bool {
	if p.order == 0 {
		return false
	}
	a, b, c := p.x[0], p.x[1], p.x[2]
	for i, v := range a {
		if x[i] != v {
			continue
		}
		if p.order == 1 {
			v += v - b[i]
		} else {
			v += 2*v - 3*b[i] + c[i]
		}
		x[i] = max(lo[i], min(hi[i], v))
	}
	return true
}

// keep takes a solution; at every fourth it finds the order for the next.
func (p *past) keep(x []float64) {
	if p.count++; p.count > 3 && p.count&3 == 0 {
		p.choose(x)
	}
	a, b, c := p.x[0], p.x[1], p.x[2]
	p.x[0], p.x[1], p.x[2] = c, a, b
	copy(c, x)
}

func (p *past) choose(x []float64) {
	a, b, c := p.x[0], p.x[1], p.x[2]
	var missed [3]float64
	for i, v := range a {
		d0 := x[i] - v
		d1 := d0 - (v - b[i])
		d2 := d1 - (v - 2*b[i] + c[i])
		missed[0], missed[1], missed[2] = missed[0]+d0*d0, missed[1]+d1*d1, missed[2]+d2*d2
	}
	p.order = 0
	for k := 1; k < 3; k++ {
		if missed[k] < 0.1*missed[p.order] {
			p.order = k
		}
	}
}
