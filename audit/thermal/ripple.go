package thermal

import "math"

// Ripple returns by how much the oil is colder and warmer than in the mean [K] while its heat repeats the course of power p [W] over t
// [s], linear between the points: the periodic solution of
//
//	C·dT/dt = P(t) − P̄ − C·T/τ        (4)
//
// with the heat capacity C [J/K] and the time constant τ [s] of oil, walls and cooler. t rises or stands.
func Ripple(t, p []float64, capacity, tau float64) (low, high float64) {
	n := len(t)
	if n < 2 || t[n-1] <= t[0] {
		return 0, 0
	}
	mean := 0.0
	for i := 1; i < n; i++ {
		mean += (p[i] + p[i-1]) / 2 * (t[i] - t[i-1])
	}
	mean /= t[n-1] - t[0]
	follow := func(x float64) (end float64) {
		low, high = x, x
		for i := 1; i < n; i++ {
			h := t[i] - t[i-1]
			if h <= 0 {
				continue
			}
			// (4) for power linear in time: T = a + b·s + (T0 − a)·exp(−s/τ)
			slope := (p[i] - p[i-1]) / h
			b := slope * tau / capacity
			a := (p[i-1]-mean)*tau/capacity - b*tau
			x = a + b*h + (x-a)*math.Exp(-h/tau)
			low, high = math.Min(low, x), math.Max(high, x)
		}
		return x
	}
	// The end depends linearly on the start: end = end(0) + start·exp(−T/τ).
	fade := math.Exp(-(t[n-1] - t[0]) / tau)
	follow(follow(0) / (1 - fade))
	return low, high
}
