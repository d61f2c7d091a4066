package figures

import (
	"math"

	"barlitre/audit"
	"barlitre/circuit"
)

// SheetState is what a sheet shows at an instant of a solved duty. It is not changed
// after it was made.
type SheetState struct {
	T      float64 // s
	Energy bool    // discs show the heat of a cycle [J] instead of the power at T [W]

	signals map[string]float64 // SI, by name of the signal
	heat    map[string]float64 // W or J, by block
	travel  map[string]travel  // by block with a speed
}

// travel is how far an actuator has gone from its lowest place in the cycle [m].
type travel struct{ at, span float64 }

// StateAt reads the state of a circuit at time t [s] of a solved duty. Outside the
// cycle the nearest end holds. A duty that was not solved gives nil.
func StateAt(run *audit.DutyRun, t float64) *SheetState {
	if run == nil || run.Plot == nil || math.IsNaN(t) {
		return nil
	}
	st := &SheetState{T: t, signals: make(map[string]float64, len(run.Plot.Signals)), heat: map[string]float64{}, travel: map[string]travel{}}
	now := audit.NewInstant(t)
	for i := range run.Plot.Signals {
		k := &run.Plot.Signals[i]
		st.signals[k.Name] = now.Of(k)
		if block, isSpeed := speedOf(k.Name); isSpeed {
			w := run.Plot.Way(i)
			st.travel[block] = travel{w.At(t), w.Span()}
		}
	}
	for i, c := range run.Plot.Channels {
		if c.Role == circuit.Loss {
			st.heat[c.Block] += math.Max(0, now.Of(&run.Plot.Powers[i]))
		}
	}
	return st
}

// OverCycle is StateAt with the heat of the whole cycle [J] in the discs.
func OverCycle(run *audit.DutyRun, t float64) *SheetState {
	st := StateAt(run, t)
	if st == nil || run.Balance == nil {
		return st
	}
	st.Energy, st.heat = true, cycleHeat(run)
	return st
}

func cycleHeat(run *audit.DutyRun) map[string]float64 {
	heat := map[string]float64{}
	for _, l := range run.Balance.Losses {
		heat[l.Block] += math.Max(0, l.Energy.Total())
	}
	return heat
}

// speedOf takes the block out of the name of a speed, "C1.v".
func speedOf(signal string) (block string, ok bool) {
	if n := len(signal) - 2; n > 0 && signal[n:] == ".v" {
		return signal[:n], true
	}
	return "", false
}

// Heat returns what a block turns to heat: W, or J if Energy is set; 0 for a nil state
// or an unknown block.
func (st *SheetState) Heat(block string) float64 {
	if st == nil {
		return 0
	}
	return st.heat[block]
}

// Signal returns a signal by name [SI]; ok is false if the state has none.
func (st *SheetState) Signal(name string) (v float64, ok bool) {
	if st == nil {
		return 0, false
	}
	v, ok = st.signals[name]
	return v, ok
}

// SheetScales are the largest values of what is drawn, one set for all sheets that are
// to be compared.
type SheetScales struct {
	Pressure float64 // Pa, deepest tint
	Flow     float64 // m³/s, widest line
	Heat     float64 // W, largest disc at an instant
	Energy   float64 // J, largest disc over a cycle
}

// ScalesOf returns the largest pressure at a port, flow through a port, and heat of a
// block over all instants of the given runs. Pressures that stand behind closed valves
// count as well. Zero where nothing was solved.
func ScalesOf(runs ...*audit.DutyRun) SheetScales {
	var out SheetScales
	for _, run := range runs {
		if run == nil || run.Plot == nil {
			continue
		}
		for i := range run.Plot.Signals {
			k := &run.Plot.Signals[i]
			switch kind := k.Name[max(0, len(k.Name)-2):]; kind {
			case ".p":
				out.Pressure = math.Max(out.Pressure, largestOf(k.V))
			case ".q":
				out.Flow = math.Max(out.Flow, largestOf(k.V))
			}
		}
		out.Heat = math.Max(out.Heat, largestHeat(run))
		if run.Balance != nil {
			for _, j := range cycleHeat(run) {
				out.Energy = math.Max(out.Energy, j)
			}
		}
	}
	return out
}

func largestOf(v []float64) float64 {
	most := 0.0
	for _, x := range v {
		if x = math.Abs(x); finite(x) {
			most = math.Max(most, x)
		}
	}
	return most
}

// largestHeat is the largest heat of one block. Its channels are summed at the times
// that any of them keeps.
func largestHeat(run *audit.DutyRun) float64 {
	of := map[string][]int{}
	for i, c := range run.Plot.Channels {
		if c.Role == circuit.Loss {
			of[c.Block] = append(of[c.Block], i)
		}
	}
	most := 0.0
	for _, list := range of {
		for _, i := range list {
			for _, t := range run.Plot.Powers[i].T {
				sum := 0.0
				for _, k := range list {
					sum += math.Max(0, run.Plot.Powers[k].At(t))
				}
				most = math.Max(most, sum)
			}
		}
	}
	return most
}
