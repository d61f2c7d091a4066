package balance

import "math"

// Response tells at a solution x how far unknown i moves when a unit is taken from its own
// row: (J⁻¹)ᵢᵢ, with the unknowns on a bound held there. It is 0 for one of these and +Inf
// where nothing determines the unknowns. What it finds for each of the unknowns asked for
// it puts into out; the solution and what the next Solve finds stay as they are.
func (s *Solver) Response(p Problem, x []float64, of []int, out []float64) {
	s.norm(p, x, aim{}, true)
	free := s.open(x, aim{})
	n := len(free)
	b, moved := s.xt[:n], s.f.out[:n]
	s.dense(free, b, 0)
	sound := s.f.factor() >= tinyPivot
	for k, i := range of {
		at := s.place[i]
		switch {
		case at < 0:
			out[k] = 0
		case !sound:
			out[k] = math.Inf(1)
		default:
			clear(b)
			b[at] = 1
			s.f.solve(b, moved)
			out[k] = moved[at]
		}
	}
}
