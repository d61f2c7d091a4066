package balance

// plans keeps the plans made for the sets of active bounds that were met.
type plans struct {
	key   []uint64 // of the last residual
	last  *plan
	of    map[uint64]*plan
	made  []*plan // that may be used again
	count int     // of them in use
	work  []float64
	maker *planner
}

// mostPlans bounds the memory of plans.
const mostPlans = 400

func newPlans(n int) plans {
	return plans{key: make([]uint64, (n+63)/64), of: map[uint64]*plan{}}
}

// mostVariants bounds the plans of one set of active bounds; beyond it one counts on no zeros.
const mostVariants = 8

// get returns the plan for the present key and slopes.
func (ps *plans) get(j *Slopes) *plan {
	if p := ps.last; p != nil && p.fits(ps.key, j) {
		return p
	}
	h := uint64(14695981039346656037)
	for _, w := range ps.key {
		h = (h ^ w) * 1099511628211
		h ^= h >> 29
	}
	variants := 0
	for p := ps.of[h]; p != nil; p = p.next {
		if p.fits(ps.key, j) {
			ps.last = p
			return p
		}
		variants++
	}
	p := ps.unused(j.n)
	ps.maker.make(p, j, ps.key, variants < mostVariants)
	if variants < mostVariants {
		p.next = ps.of[h]
	}
	ps.of[h] = p
	if len(ps.work) < p.size {
		ps.work = make([]float64, 2*p.size)
	}
	ps.last = p
	return p
}

// unused returns room for a plan for n unknowns. When there are too many, all are
// forgotten: those that still serve are soon made again.
func (ps *plans) unused(n int) *plan {
	if ps.maker == nil {
		ps.maker = newPlanner(n)
	}
	if ps.count == mostPlans {
		clear(ps.of)
		ps.count = 0
	}
	if ps.count == len(ps.made) {
		ps.made = append(ps.made, &plan{})
	}
	ps.count++
	return ps.made[ps.count-1]
}

// fits reports whether p was made for this key and pattern, and works.
func (p *plan) fits(key []uint64, j *Slopes) bool {
	if p.entries != len(j.val) || p.bad > pivotBad || !p.met(key) {
		return false
	}
	for _, k := range p.none {
		if j.val[k] != 0 {
			return false
		}
	}
	return true
}

// met reports whether p is of this key.
func (p *plan) met(key []uint64) bool {
	for i, w := range p.key {
		if w != key[i] {
			return false
		}
	}
	return true
}

// planned solves for the Newton step with a plan, if there is one and it works.
func (s *Solver) planned(a aim) bool {
	if a.smooth || a.delta > 0 {
		return false
	}
	p := s.plans.get(s.j)
	if !p.sparse {
		return false
	}
	if !p.run(s.n, s.j.val, s.plans.work) {
		p.bad++
		return false
	}
	s.step()
	return s.usable()
}

// usable reports whether all of the step s.dx are numbers, and notes in s.far whether one is long.
func (s *Solver) usable() bool {
	s.far = false
	for _, d := range s.dx {
		if !(d*d <= maxStep*maxStep) {
			s.far = true
			if d != d {
				return false
			}
		}
	}
	return true
}

// step solves with the factors of the last plan for the present residual.
func (s *Solver) step() {
	p, work := s.plans.last, s.plans.work
	s.dx = work[s.n : 2*s.n]
	copy(work, s.r)
	moved := false
	for _, i := range p.fixed {
		r := s.r[i]
		s.dx[i] = -r / s.Weight[i]
		moved = moved || r != 0
	}
	p.solve(s.j.val, work, moved)
}
