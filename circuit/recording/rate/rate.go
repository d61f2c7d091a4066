package rate

import (
	"fmt"
	"math"
	"sort"

	"barlitre/machines/units"
)

// Limits of the estimated error of energy [share]: our choice. Below the first an
// instrument of the usual 1 to 3 % is the larger error.
const (
	Fair = 0.01
	Poor = 0.05
)

// leastPerCycle is how many rows a cycle must have for its energy to be judged by them: our
// choice, two for each of some ten phases.
const leastPerCycle = 20

// Rows that do not differ tell nothing of what lies within them: our choice of how alike they
// are then [share], and from which interval on [s] a whole cycle of a machine may lie in one.
const (
	alike       = 0.01
	wholeCycles = 1.0
)

// Check is what there is to say about the rate of a recording.
type Check struct {
	Interval float64 // s, between rows
	Energy   float64 // J, of the products of the rows, positive and negative apart by size
	Error    float64 // share of Energy, estimated; NaN where nothing moves or rows cannot tell it
	Order    float64 // with which the error falls with the interval
	PerCycle float64 // rows a cycle; 0 = no cycle is known
	Multiple float64 // how near the cycle is to a whole number of intervals, or the interval to one of cycles: 0..0.5
	Coarser  []Coarser
	Remarks  []string
	Warns    bool
}

// Coarser is what the same recording would have told at a coarser interval.
type Coarser struct {
	Interval float64 // s
	Means    float64 // share: error of the energy where effort and flow are averaged, then multiplied
	Spot     float64 // share: worst error where rows are taken at instants only
}

// Of checks a recording of an effort (pressure, force, torque) and a flow (flow, speed)
// whose product is power, in SI. means says that rows are means over their intervals,
// otherwise they are instants. cycle [s] is 0 where none is known. products are taken before anything is averaged here; rows
// that are means already were averaged by the logger.
func Of(t, effort, flow []float64, means bool, cycle float64) Check {
	c := Check{Interval: median(t), Error: math.NaN(), Order: math.NaN()}
	if len(t) < 8 || !(c.Interval > 0) {
		c.say(true, "%d rows are too few to say whether they tell the energy", len(t))
		return c
	}
	c.Energy = Products(t, effort, flow)
	if means {
		c.richardson(func(n int) float64 { return joined(t, effort, flow, n) })
	} else {
		c.thinned(t, effort, flow)
	}
	for _, h := range []float64{0.1, 0.2, 0.5, 1, 2, 5, 10, 60} {
		if span := t[len(t)-1] - t[0]; h >= 4*c.Interval && h <= span/3 && c.Energy > 0 {
			c.Coarser = append(c.Coarser, Coarser{h, Means(t, effort, flow, h)/c.Energy - 1, spot(t, effort, flow, h, c.Energy)})
		}
	}
	blind := c.Energy > 0 && (cycle > 0 && cycle < 2*c.Interval || cycle <= 0 && c.Interval >= wholeCycles && even(effort, flow))
	if blind { // what thinning tells is chance, and 0 % where the interval is a multiple of the cycle
		c.Error, c.Order = math.NaN(), math.NaN()
	}
	c.judge(means, blind, cycle)
	c.cycle(cycle)
	return c
}

func (c *Check) say(warns bool, format string, args ...any) {
	c.Remarks = append(c.Remarks, fmt.Sprintf(format, args...))
	c.Warns = c.Warns || warns
}

func (c *Check) judge(means, blind bool, cycle float64) {
	how := "rows are instants; thinned to every second and fourth, the energy changes such that"
	if means {
		how = "rows are means, so a product of them leaves out what goes up and down together within one; joined by two and four, the energy changes such that"
	}
	switch {
	case blind && cycle > 0:
		c.say(true, "logged every %s: the error of the energy cannot be told from these rows, for a cycle of %s has fewer than two; log faster", units.Seconds(c.Interval, 3), units.Seconds(cycle, 4))
	case blind:
		c.say(true, "logged every %s: the error of the energy cannot be told from these rows, for they hardly differ: the machine runs steadily, or its cycle goes into the interval; log faster for an hour", units.Seconds(c.Interval, 3))
	case math.IsNaN(c.Error):
		c.say(false, "nothing moves under a load: there is no energy to judge the rate by")
	case cycle > 0 && cycle < leastPerCycle*c.Interval:
		c.say(true, "logged every %s: fewer than %d rows a cycle are too few to tell the error of their energy (thinned or joined, they differ by %s); log faster", units.Seconds(c.Interval, 3), leastPerCycle, percent(c.Error))
	case c.Error <= Fair:
		c.say(false, "logged every %s: %s an error of about %s is left; fit for energy", units.Seconds(c.Interval, 3), how, percent(c.Error))
	case c.Error <= Poor:
		c.say(true, "logged every %s: %s an error of about %s is left; log faster, or state it", units.Seconds(c.Interval, 3), how, percent(c.Error))
	default:
		c.say(true, "logged every %s: %s an error of about %s is left; not fit for energy, log faster", units.Seconds(c.Interval, 3), how, percent(c.Error))
	}
}

// even reports whether the products of all rows are alike.
func even(effort, flow []float64) bool {
	low, high := math.Inf(1), 0.0
	for i := range effort {
		p := math.Abs(effort[i] * flow[i])
		low, high = math.Min(low, p), math.Max(high, p)
	}
	return high-low <= alike*high
}

// cycle compares the interval with the cycle.
func (c *Check) cycle(cycle float64) {
	if !(cycle > 0) {
		return
	}
	c.PerCycle = cycle / c.Interval
	r := c.PerCycle
	if r < 1 {
		r = 1 / r
	}
	c.Multiple = math.Abs(r - math.Round(r))
	if c.PerCycle < leastPerCycle {
		c.say(true, "a cycle of %s has %.3g rows; take %d at least", units.Seconds(cycle, 4), c.PerCycle, leastPerCycle)
		if c.Multiple < 0.02 {
			c.say(true, "the interval of %s and the cycle of %s are whole multiples of each other: the rows meet the same places of every cycle", units.Seconds(c.Interval, 4), units.Seconds(cycle, 4))
		}
	} else {
		c.say(false, "a cycle of %s has %.4g rows", units.Seconds(cycle, 4), c.PerCycle)
	}
}

// Products integrates |effort·flow|, straight between rows: products first, means after.
func Products(t, effort, flow []float64) float64 {
	sum := 0.0
	for i := 1; i < len(t); i++ {
		sum += (t[i] - t[i-1]) / 2 * (math.Abs(effort[i]*flow[i]) + math.Abs(effort[i-1]*flow[i-1]))
	}
	return sum
}

// Means returns the energy that a logger would tell which keeps means of effort and flow
// over intervals of h [s]: the sum of the products of means.
func Means(t, effort, flow []float64, h float64) float64 {
	e, f := newIntegral(t, effort), newIntegral(t, flow)
	sum, end := 0.0, t[len(t)-1]
	for a := t[0]; a < end-1e-9*h; a += h {
		b := math.Min(a+h, end)
		sum += math.Abs(e.over(a, b)*f.over(a, b)) / (b - a)
	}
	return sum
}

// joined is the energy of means joined by n rows.
func joined(t, effort, flow []float64, n int) float64 {
	sum := 0.0
	for a := 0; a < len(t); a += n {
		b := min(a+n, len(t))
		e, f := 0.0, 0.0
		for i := a; i < b; i++ {
			e, f = e+effort[i], f+flow[i]
		}
		h := t[min(b, len(t)-1)] - t[a]
		sum += math.Abs(e*f) / float64((b-a)*(b-a)) * h
	}
	return sum
}

// richardson estimates the error at n = 1 of what is known at 1, 2 and 4.
func (c *Check) richardson(energy func(n int) float64) {
	e1, e2, e4 := energy(1), energy(2), energy(4)
	if !(e1 > 0) {
		return
	}
	near, far := math.Abs(e2-e1), math.Abs(e4-e2)
	c.carry(near, far, e1)
}

// carry takes the change from one interval to two, near, and from two to four, far, on to
// none. Where their ratio is that of no order between 1 and 2, rows are too far apart to
// follow a law: the first order is taken then, and the larger of what either change tells.
func (c *Check) carry(near, far, energy float64) {
	if ratio := far / near; near > 0 && ratio >= 2 && ratio <= 4 {
		c.Order = math.Log2(ratio)
		c.Error = near / (ratio - 1) / energy
		return
	}
	c.Order = 1
	c.Error = math.Max(near, far/2) / energy
}

// thinned estimates the error of instants: every n-th row, from each of n starts, worst of them.
func (c *Check) thinned(t, effort, flow []float64) {
	if !(c.Energy > 0) {
		return
	}
	off := func(n int) float64 {
		sum := 0.0
		for from := range n {
			var ts, es, fs []float64
			for i := from; i < len(t); i += n {
				ts, es, fs = append(ts, t[i]), append(es, effort[i]), append(fs, flow[i])
			}
			last := len(t) - 1
			whole := Products(t[from:], effort[from:], flow[from:])
			if k := ts[len(ts)-1]; k < t[last] {
				ts, es, fs = append(ts, t[last]), append(es, effort[last]), append(fs, flow[last])
			}
			d := Products(ts, es, fs) - whole
			sum += d * d
		}
		return math.Sqrt(sum / float64(n))
	}
	c.carry(off(2), off(4), c.Energy)
}

// spot is the worst error, over starts, of instants every h.
func spot(t, effort, flow []float64, h, energy float64) float64 {
	worst := 0.0
	for k := range 8 {
		sum, at := 0.0, t[0]+float64(k)/8*h
		n := 0
		for i := range t {
			if t[i] >= at {
				sum += math.Abs(effort[i] * flow[i])
				n++
				at += h
			}
		}
		if n > 0 {
			if e := sum/float64(n)*(t[len(t)-1]-t[0])/energy - 1; math.Abs(e) > math.Abs(worst) {
				worst = e
			}
		}
	}
	return worst
}

// integral is the running integral of a channel that is straight between rows.
type integral struct{ t, v, sum []float64 }

func newIntegral(t, v []float64) integral {
	sum := make([]float64, len(t))
	for i := 1; i < len(t); i++ {
		sum[i] = sum[i-1] + (t[i]-t[i-1])*(v[i]+v[i-1])/2
	}
	return integral{t, v, sum}
}

func (g integral) at(x float64) float64 {
	i := sort.SearchFloat64s(g.t, x)
	if i == 0 {
		return 0
	}
	if i == len(g.t) {
		return g.sum[len(g.sum)-1]
	}
	h := x - g.t[i-1]
	slope := (g.v[i] - g.v[i-1]) / (g.t[i] - g.t[i-1])
	return g.sum[i-1] + h*(g.v[i-1]+slope*h/2)
}

func (g integral) over(a, b float64) float64 { return g.at(b) - g.at(a) }

func median(t []float64) float64 {
	var d []float64
	for i := 1; i < len(t); i += max(1, len(t)/10000) {
		d = append(d, t[i]-t[i-1])
	}
	if len(d) == 0 {
		return 0
	}
	sort.Float64s(d)
	return d[len(d)/2]
}

// percent writes a share in plain digits.
func percent(share float64) string {
	if x := 100 * share; x >= 10 {
		return units.Join(fmt.Sprintf("%.0f", x), "%")
	}
	return units.Join(fmt.Sprintf("%.2g", 100*share), "%")
}
