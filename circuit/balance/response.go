package balance

import "math"

// Response tells at a solution x how far unknown i moves when a unit is taken from its own
// row: (J⁻¹)ᵢᵢ, with the unknowns on a bound held there. It is 0 for one of these and +Inf
// where nothing determines the unknowns. What it finds for each of the unknowns asked for
// it puts into out; the solution and what the next Solve finds stay as they are.
func (s *Solver) Response(p Problem, x []float64, of []int, out []float64) {
	s.norm(p, x, aim{}, true)
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
