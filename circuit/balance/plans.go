package balance

// plans keeps the plans made for the sets of active bounds that were met.
type plans struct {
	key   []uint64 // of the last residual
	last  *plan
	of    map[uint64]*plan
	made  []*plan // that may be used again
	count int     // of them in use
	work  []float64
}

// mostPlans bounds the memory of plans.
const mostPlans = 400

func newPlans(n int) plans {
	return plans{key: make([]uint64, (n+63)/64), of: map[uint64]*plan{}}
}

// mostVariants bounds the plans of one set of active bounds; beyond it one counts on no zeros.
const mostVariants = 8

// get returns the plan for the present key and slopes.
func (ps *plans) get(j *entries, maker *planner) *plan {
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
	p := ps.unused()
	maker.make(p, j, ps.key, variants < mostVariants)
	if variants < mostVariants {
		p.next = ps.of[h]
	}
	ps.of[h] = p
	ps.take(p)
	return p
}

// take makes p the last plan, and room for it.
func (ps *plans) take(p *plan) {
	if len(ps.work) < p.size {
		ps.work = make([]float64, 2*p.size)
	}
	ps.last = p
}

// remake works the last plan out anew, in its own place.
func (ps *plans) remake(j *entries, maker *planner) {
	p := ps.last
	next := p.next
	maker.make(p, j, ps.key, p.lean)
	p.next = next
	ps.take(p)
}

// unused returns room for a plan for n unknowns. When there are too many, all are
// forgotten: those that still serve are soon made again.
func (ps *plans) unused() *plan {
	if ps.count == mostPlans {
		ps.forget()
	}
	if ps.count == len(ps.made) {
		ps.made = append(ps.made, &plan{})
	}
	ps.count++
	return ps.made[ps.count-1]
}

// forget gives up all plans, but not their memory.
func (ps *plans) forget() {
	clear(ps.of)
	ps.count, ps.last = 0, nil
}

// fits reports whether p was made for this key and pattern, and works.
func (p *plan) fits(key []uint64, j *entries) bool {
	if p.bad > pivotBad || !p.met(key) {
		return false
	}
	for _, v := range j.val[p.entries:] {
		if v != 0 {
			return false
		}
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

// planned takes the Newton step from x with a plan, if there is one and it works; a long
// step it only finds, and notes so in s.far.
func (s *Solver) planned(x []float64, a aim) bool {
	if a.weighed() {
		return s.plannedWeighted(x, a)
	}
	p := s.plans.get(&s.j.entries, s.maker)
	if !p.sparse {
		return false
	}
	if !s.factored(&s.plans, s.j.val, s.load(&s.plans, s.Weight)) {
		p.bad++
		return false
	}
	return s.gone(x)
}

// factored replays the last plan, once the residual and the steps of unknowns on a bound are loaded;
// moved tells whether any of these moves. It reports false when a pivot has become too small.
func (s *Solver) factored(of *plans, val []float64, moved bool) bool {
	s.used = of
	if moved {
		of.last.tie(val, of.work)
	}
	return of.last.run(s.n, val, of.work)
}

// gone takes the step that was factored; see planned.
func (s *Solver) gone(x []float64) bool {
	s.used.last.backward(s.used.work)
	if s.far = !s.stride(x); s.far {
		copy(x, s.xt)
		return s.numbers()
	}
	return true
}

// stride goes the whole step s.dx from x, which it leaves in s.xt, and reports whether
// all of it is short.
func (s *Solver) stride(x []float64) bool {
	short, dx := true, s.dx
	x, from := x[:len(dx)], s.xt[:len(dx)]
	for i, d := range dx {
		v := x[i]
		from[i], x[i] = v, v+d
		if !(d*d <= maxStep*maxStep) {
			short = false
		}
	}
	return short
}

// numbers reports whether all of the step s.dx are numbers.
func (s *Solver) numbers() bool {
	for _, d := range s.dx {
		if d != d {
			return false
		}
	}
	return true
}

// step solves with the factors of the last plan for the present residual.
func (s *Solver) step() {
	moved := s.load(&s.plans, s.Weight)
	s.plans.last.solve(s.j.val, s.plans.work, moved)
}

// load puts the residual into the room of plans, and the steps of unknowns on a bound, whose rows are
// rim times these; it reports whether any of them moves.
func (s *Solver) load(of *plans, rim []float64) (moved bool) {
	work, n := of.work, s.n
	copy(work, s.r)
	s.dx = work[n : 2*n]
	for _, i := range of.last.fixed {
		r := s.r[i]
		s.dx[i] = 0
		if r != 0 {
			s.dx[i] = -r / rim[i]
			moved = true
		}
	}
	return moved
}
