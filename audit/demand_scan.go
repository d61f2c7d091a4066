package audit

import "slices"

// scan moves a window of a given length over points as they come, and keeps where it
// holds the most energy. Between two instants at which one of its ends passes a point,
// that energy is a quadratic in its start; so the largest lies at such an instant or at
// the crest of one of the quadratics, and is exact.
type scan struct {
	window  float64
	points  []powerAt // from the one at or before the window's start
	energy  []float64 // J, up to each point
	trail   int       // the window starts between this point and the next
	most    float64   // J
	at      float64   // s, start of that window
	started bool
}

func (s *scan) clone() *scan {
	c := *s
	c.points, c.energy = slices.Clone(s.points), slices.Clone(s.energy)
	return &c
}

// take moves the end of the window on to x.
func (s *scan) take(x powerAt) {
	n := len(s.points)
	if n == 0 {
		s.points, s.energy = append(s.points, x), append(s.energy, 0)
		return
	}
	last := s.points[n-1]
	s.points = append(s.points, x)
	s.energy = append(s.energy, s.energy[n-1]+(x.t-last.t)*(last.p+x.p)/2)
	for start, end := max(last.t-s.window, s.points[0].t), x.t-s.window; start <= end; {
		for s.trail+2 < len(s.points) && s.points[s.trail+1].t <= start {
			s.trail++
		}
		next := min(end, s.points[s.trail+1].t)
		s.move(start, next)
		if next >= end {
			break
		}
		start = next
	}
	s.drop()
}

// move moves the start of the window from a to b, with the end behind the point before
// the last.
func (s *scan) move(a, b float64) {
	lead := len(s.points) - 2
	outA, outB := s.power(s.trail, a), s.power(s.trail, b)
	inA, inB := s.power(lead, a+s.window), s.power(lead, b+s.window)
	e := s.upTo(lead, a+s.window, inA) - s.upTo(s.trail, a, outA)
	s.try(a, e)
	up, down := inA-outA, outB-inB // slopes at both ends
	if up > 0 && down > 0 {
		crest := (b - a) * up / (up + down)
		s.try(a+crest, e+crest*up/2)
	}
	s.try(b, e+(b-a)*(up-down)/2)
}

// power is linear from point k to the next.
func (s *scan) power(k int, t float64) float64 {
	a, b := s.points[k], s.points[k+1]
	if t >= b.t || a.t == b.t {
		return b.p
	}
	return a.p + (b.p-a.p)*(t-a.t)/(b.t-a.t)
}

// upTo is the energy up to t after point k, where the power is p.
func (s *scan) upTo(k int, t, p float64) float64 {
	return s.energy[k] + (t-s.points[k].t)*(s.points[k].p+p)/2
}

// rounding is what windows may differ by and still count as equal: the first is kept.
const rounding = 1e-12

func (s *scan) try(at, e float64) {
	if !s.started || e > s.most*(1+rounding) {
		s.started, s.at, s.most = true, at, e
	}
}

// drop forgets points that the window has left, when they are more than half of all.
func (s *scan) drop() {
	if k := s.trail; k > 1024 && 2*k > len(s.points) {
		s.points, s.energy = slices.Delete(s.points, 0, k), slices.Delete(s.energy, 0, k)
		s.trail = 0
	}
}
