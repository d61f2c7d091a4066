package balance

// past foretells a solution from the last ones, by the polynomial (constant, line,
// parabola, up to mostOrder) that would have foretold the last one best. After a corner in a
// smooth way it is the one through all that came since. It is a start for Newton's method,
// nothing else: a poor one costs a step, never a result.
type past struct {
	x       [mostOrder + 3][]float64 // two more than a start needs, to judge it; in turns
	at      int                      // the last of them; those before come after it
	count   int
	order   int
	since   int // solutions since the last corner, that on it counted, or since the way was rough
	corners int // that may follow yet; 0 once the way since the last one has proved smooth or rough
}

const mostOrder = 5

// ahead holds, by order, the shares of the last solutions in the next one: the
// polynomial through them, one step on.
var ahead = [mostOrder + 1][mostOrder + 1]float64{
	{1}, {2, -1}, {3, -3, 1}, {4, -6, 4, -1}, {5, -10, 10, -5, 1}, {6, -15, 20, -15, 6, -1},
}

func newPast(n int) (p past) {
	for k := range p.x {
		p.x[k] = make([]float64, n)
	}
	return p
}

// before is the solution k before the last.
func (p *past) before(k int) []float64 { return p.x[(p.at+k)&(len(p.x)-1)] }

func (p *past) forget() { p.count, p.order, p.since, p.corners = 0, 0, 0, mostCorners }

// guess moves on the unknowns that stand where the last solution left them; the
// others have been given a start by the caller. It reports whether it did.
func (p *past) guess(x, lo, hi []float64) bool {
	if p.order == 0 {
		return false
	}
	s := &ahead[p.order]
	a := p.before(0)
	n := len(a)
	b, c, d, x, lo, hi := p.before(1)[:n], p.before(2)[:n], p.before(3)[:n], x[:n], lo[:n], hi[:n]
	if p.order <= 3 {
		for i, v := range a {
			if x[i] == v {
				x[i] = within((s[0]*v+s[1]*b[i])+(s[2]*c[i]+s[3]*d[i]), lo[i], hi[i])
			}
		}
		return true
	}
	e, f := p.before(4)[:n], p.before(5)[:n]
	for i, v := range a {
		if x[i] == v {
			x[i] = within((s[0]*v+s[1]*b[i])+(s[2]*c[i]+s[3]*d[i])+(s[4]*e[i]+s[5]*f[i]), lo[i], hi[i])
		}
	}
	return true
}

func within(v, lo, hi float64) float64 {
	if v < lo {
		return lo
	}
	if v > hi {
		return hi
	}
	return v
}

// begin takes the first solution of another way.
func (p *past) begin(x []float64) {
	p.forget()
	p.keep(x, 0, false)
}

// A way is smooth after so many solutions that were foretold well: what is foretold badly then is a
// corner, not noise. There are at most so many corners one after another.
const (
	smoothSince = 8
	mostCorners = 3
)

// keep takes a solution, how many steps it took from its start, and whether what was foretold of it
// was hardly better than to foretell nothing. It finds the order for the next.
func (p *past) keep(x []float64, steps int, worse bool) {
	p.at--
	copy(p.before(0), x)
	p.count++
	p.since++
	poor := steps > 2 || worse
	switch {
	case p.corners == 0 && poor && p.order > 0 && p.since > smoothSince:
		p.since, p.order, p.corners = 2, 1, mostCorners // the corner is the solution before
	case p.corners > 1 && worse: // it is this one
		p.since, p.order = 1, 0
		p.corners--
	case p.corners > 0 && !worse && (!poor || p.since <= 3):
		p.order = min(p.since-1, mostOrder)
		if p.since >= smoothSince {
			p.corners = 0
		}
	case poor || p.count&15 == 0 || steps > 1 && p.count&3 == 0:
		if poor {
			p.since, p.corners = 0, 0
		}
		p.choose()
	}
}

// choose takes the lowest order that would have missed the last two solutions by much
// less than those below it: two, for noise may meet one by chance. What order k has
// missed is the difference of k+2 solutions.
func (p *past) choose() {
	x0 := p.before(0)
	n := len(x0)
	x1, x2, x3 := p.before(1)[:n], p.before(2)[:n], p.before(3)[:n]
	x4, x5, x6, x7 := p.before(4)[:n], p.before(5)[:n], p.before(6)[:n], p.before(7)[:n]
	var missed [mostOrder + 1]float64
	for i, v := range x0 {
		a, b, c, d, e, f, g := v-x1[i], x1[i]-x2[i], x2[i]-x3[i], x3[i]-x4[i], x4[i]-x5[i], x5[i]-x6[i], x6[i]-x7[i]
		missed[0] += a*a + b*b
		a, b, c, d, e, f = a-b, b-c, c-d, d-e, e-f, f-g
		missed[1] += a*a + b*b
		a, b, c, d, e = a-b, b-c, c-d, d-e, e-f
		missed[2] += a*a + b*b
		a, b, c, d = a-b, b-c, c-d, d-e
		missed[3] += a*a + b*b
		a, b, c = a-b, b-c, c-d
		missed[4] += a*a + b*b
		a, b = a-b, b-c
		missed[5] += a*a + b*b
	}
	p.order = 0
	for k := 1; k <= mostOrder && k < p.count-2; k++ {
		if missed[k] < 0.1*missed[p.order] {
			p.order = k
		}
	}
}
