package circuit

import (
	"barlitre/circuit/balance"
	"barlitre/machines"
)

// solve balances a point in time.
func (r *run) solve(k int, share float64, x, good []float64, warm bool) balance.Result {
	r.begin(k, share)
	if !warm {
		r.cold(0, x)
	}
	r.solver.Foretell = r.moved() && warm && r.step.t > r.solved
	r.solved = r.step.t
	res := r.solver.Solve(r, x, len(coldStarts), r.cold)
	r.solver.Foretell = false
	if !res.Solved() && len(r.openings) > 0 {
		res = r.pilots(x, good)
	}
	if !res.Solved() {
		res = r.approach(k, share, x, good)
	}
	return res
}

// mostPilots bounds how many valves are tried both shut and open.
const mostPilots = 4

// pilots holds the valves that a pilot pressure opens shut or wide open, in every way,
// and then lets them go: opening lowers or raises the pressure that opens them, so that
// answers lie far apart and a way from elsewhere may end between them.
func (r *run) pilots(x, good []float64) balance.Result {
	var res balance.Result
	n := min(len(r.openings), mostPilots)
	lo, hi := r.solver.Lo, r.solver.Hi
	for ways := range 1 << n {
		copy(x, good)
		for i, s := range r.openings[:n] {
			v := float64(ways >> i & 1)
			lo[s], hi[s], x[s] = v, v, v
		}
		held := r.solver.Solve(r, x, 1, r.cold)
		for _, s := range r.openings[:n] {
			lo[s], hi[s] = 0, 1
		}
		if !held.Solved() {
			continue
		}
		if res = r.solver.Solve(r, x, 0, r.cold); res.Solved() {
			res.Rung = balance.Levels
			return res
		}
	}
	copy(x, good)
	res.Rung = balance.Failed
	return res
}

// Ease makes the circuit leakier by a share of 1e-3 of its flow scale at 100 bar: what
// hangs on the least of leaks then hangs on more.
func (r *run) Ease(e float64) {
	r.leak = leak + 1e-3*e
	r.solver.Restate()
}

// approach solves a step that withstood all else by way of easier ones: the axes
// move faster at first, where throttling edges are well open, and slow down to
// what is asked in steps of half an order of magnitude.
func (r *run) approach(k int, share float64, x, good []float64) balance.Result {
	defer func() { r.haste = 1 }()
	copy(x, good)
	var res balance.Result
	for _, haste := range [...]float64{1000, 300, 100, 30, 10, 3, 1} {
		r.haste = haste
		r.begin(k, share)
		levels := 1
		if haste == 1 || haste == 1000 {
			levels = len(coldStarts)
		}
		res = r.solver.Solve(r, x, levels, r.cold)
	}
	if res.Solved() {
		res.Rung = balance.Levels
	}
	return res
}

// coldStart is a guess for a cold start: pressure of all nodes (scaled), opening
// of throttling valves, setting of variable pumps, and speed over demand.
type coldStart struct{ pressure, opening, setting, speed float64 }

// Starts for moving freely, for a supply that is exhausted, and for a stalled
// actuator; the first is the usual one.
var coldStarts = [...]coldStart{
	{0.3, 0.3, 0.5, 1}, {0.03, 0.15, 0.5, 1}, {1.2, 1, 1, 0}, {2.5, 0.6, 0.1, 1}, {0.8, 1, 1, 0.5}, {0.3, 1, 1, 0}, {1.5, 0.05, 0.05, 1},
}

func coldStartOf(level int) coldStart { return coldStarts[level%len(coldStarts)] }

func (r *run) cold(level int, x []float64) {
	guess := coldStartOf(level)
	for i := range x {
		x[i] = 0
		if r.rows[i].kind == flowRow {
			x[i] = guess.pressure
		}
	}
	for i, m := range r.movers {
		if m.speed >= 0 {
			x[m.speed] = guess.speed * r.step.axes[i].scaledDemand
			x[m.sigma] = machines.Sign(r.step.axes[i].scaledDemand)
		}
	}
	for _, m := range r.models {
		if st, ok := m.(starter); ok {
			st.cold(&r.step, level, x)
		}
	}
	for i := range x {
		x[i] = max(r.solver.Lo[i], min(r.solver.Hi[i], x[i]))
	}
}
