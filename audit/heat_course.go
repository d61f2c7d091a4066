package audit

import (
	"math"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Viscosity returns the kinematic viscosity of the oil [m²/s] at a temperature [K].
func (h *Heating) Viscosity(theta float64) float64 {
	if h.Oil.Oil.Nu40 > 0 {
		return h.Oil.Oil.KinematicViscosity(theta)
	}
	return h.Oil.Viscosity / h.Oil.Density
}

// TemperatureOf returns the temperature [K] at which the oil has a kinematic viscosity [m²/s]; NaN where that is not known.
func (h *Heating) TemperatureOf(nu float64) float64 {
	low, high := units.ZeroCelsius-40, units.ZeroCelsius+150
	if h.Oil.Oil.Nu40 <= 0 || h.Viscosity(low) < nu || h.Viscosity(high) > nu {
		return math.NaN()
	}
	for range 60 {
		if mid := (low + high) / 2; h.Viscosity(mid) > nu {
			low = mid
		} else {
			high = mid
		}
	}
	return (low + high) / 2
}

// readyAt returns when a start comes to working viscosity [s], NaN when it does not.
func (h *HeatStudy) readyAt(c *thermal.Course) float64 {
	ready := h.TemperatureOf(h.WorkViscosity)
	if math.IsNaN(ready) {
		return math.NaN()
	}
	for i, v := range c.Oil {
		if v >= ready {
			if i == 0 {
				return 0
			}
			return c.T[i-1] + (c.T[i]-c.T[i-1])*(ready-c.Oil[i-1])/(v-c.Oil[i-1])
		}
	}
	return math.NaN()
}

// CycleRipple is how the oil temperature moves within a cycle of a duty.
type CycleRipple struct {
	Duty         string
	Cycle, Tau   float64 // s
	Low, High    float64 // K, below and above the mean of the cycle
	MeanIsEnough bool    // the cycle is short beside the time constant
}

// meanShare is the share of the time constant up to which the mean heat of a cycle tells the temperature (common practice 0.2 to 0.5).
const meanShare = 0.2

// ripples checks the averaging time of each duty.
func (h *HeatStudy) ripples(r *CircuitRun) {
	b := h.Plant.Body
	for _, d := range r.Duties {
		if d.Balance == nil || d.Plot == nil {
			continue
		}
		x := CycleRipple{Duty: d.Duty.Name, Cycle: d.Balance.Cycle, Tau: b.TimeConstant(h.takes())}
		t, p := heatCourse(d)
		x.Low, x.High = thermal.Ripple(t, p, b.Capacity(), x.Tau)
		x.MeanIsEnough = x.Cycle <= meanShare*x.Tau
		h.Cycles = append(h.Cycles, x)
	}
}

// takes is what the cooler takes at one kelvin [W/K] in the mean of the hottest hour of the week, 0 without one.
func (h *HeatStudy) takes() float64 {
	w := h.Week
	if w == nil || w.On <= 0 || w.Cooled <= 0 {
		return 0
	}
	return w.Cooled / w.On / math.Max(1, w.Ran-h.Plant.Air.Mean)
}

// heatCourse adds up the courses of the heat into the oil.
func heatCourse(d *DutyRun) (t, p []float64) {
	for i, ch := range d.Plot.Channels {
		if ch.Role == circuit.Loss && ch.Sink == circuit.ToOil && len(d.Plot.Powers[i].T) > len(t) {
			t = d.Plot.Powers[i].T
		}
	}
	p = make([]float64, len(t))
	for i, ch := range d.Plot.Channels {
		if ch.Role != circuit.Loss || ch.Sink != circuit.ToOil {
			continue
		}
		for k := range t {
			p[k] += d.Plot.Powers[i].At(t[k])
		}
	}
	return t, p
}
