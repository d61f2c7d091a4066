package balance

import "math"

// Response tells at a solution x how far unknown i moves when a unit is taken from its own
// row: (J⁻¹)ᵢᵢ, with the unknowns on a bound held there. It is 0 for one of these and +Inf
// where nothing determines the unknowns. What it finds for each of the unknowns asked for
// it puts into out; the solution and what the next Solve finds stay as they are.
func (s *Solver) Response(p Problem, x []float64, of []int, out []float64) {
	s.j.Tangent = true
	s.norm(p, x, aim{}, true)
	s.j.Tangent = false
	if !s.plannedResponse(of, out) {
		s.openResponse(x, of, out)
	}
}

// plannedResponse finds it with the plan for the active bounds, if there is one and it works.
func (s *Solver) plannedResponse(of []int, out []float64) bool {
	p, val := s.plans.get(&s.j.entries, s.maker), s.j.val
	work := s.plans.work
	if !p.sparse || !p.run(s.n, val, work) {
		return false
	}
	for k, i := range of {
		if out[k] = 0; bit(p.key, i) {
			continue
		}
		clear(work[:2*s.n])
		work[i] = -1
		p.solve(val, work, false)
		out[k] = work[s.n+i]
	}
	return true
}

// openResponse finds it with pivots of its own each time.
func (s *Solver) openResponse(x []float64, of []int, out []float64) {
	s.weigh(x, aim{})
	b, moved := s.xt, s.dx
	for k, i := range of {
		if out[k] = 0; s.onBound(i) {
			continue
		}
		s.lay(0)
		clear(b)
		b[i] = 1
		if out[k] = math.Inf(1); s.maker.solve(b, moved) {
			out[k] = moved[i]
		}
	}
}
