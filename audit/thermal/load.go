package thermal

import (
	"fmt"
	"slices"

	"gonum.org/v1/gonum/interp"
)

// Bin is a part of the time in which a line has about the same flow.
type Bin struct {
	Share float64 // of the time
	Flow  float64 // m³/s, mean over the part
	Heat  float64 // W that the oil took up since it left the tank, mean over the part
}

// Line is what flows in a line over a cycle. Shares of time need not add up to 1: the rest is without flow.
type Line []Bin

// Mean returns the mean flow [m³/s] and the mean heat [W] of a line.
func (l Line) Mean() (flow, heat float64) {
	for _, b := range l {
		flow += b.Share * b.Flow
		heat += b.Share * b.Heat
	}
	return flow, heat
}

// Point is what a machine does at one temperature of its oil, in the mean over a cycle.
type Point struct {
	Theta float64      // K
	Heat  float64      // W into the oil
	Drawn float64      // W drawn from the supply
	Lines [places]Line // that of OffLine stays empty: Cooler.LoopFlow is its flow
}

// Load is what a machine does while it runs, known at some temperatures.
type Load struct {
	Name string
	At   []Point // by rising temperature; beyond the first and the last all is as there
}

// Range returns the lowest and the highest temperature that a load is known at [K].
func (l *Load) Range() (low, high float64) { return l.At[0].Theta, l.At[len(l.At)-1].Theta }

// Mix returns the load of a machine that changes between loads, each with its share of the time. The loads must be known at the
// same temperatures.
func Mix(name string, loads []Load, shares []float64) (Load, error) {
	out := Load{Name: name}
	for i := range loads {
		switch {
		case i == 0:
			for _, p := range loads[i].At {
				out.At = append(out.At, Point{Theta: p.Theta})
			}
		case !slices.EqualFunc(loads[i].At, out.At, func(a, b Point) bool { return a.Theta == b.Theta }):
			return out, fmt.Errorf("thermal: loads that are mixed must be known at the same temperatures")
		}
		for k := range out.At {
			out.At[k].add(loads[i].At[k], shares[i])
		}
	}
	return out, nil
}

func (p *Point) add(o Point, share float64) {
	p.Heat += share * o.Heat
	p.Drawn += share * o.Drawn
	for i, l := range o.Lines {
		for _, b := range l {
			b.Share *= share
			p.Lines[i] = append(p.Lines[i], b)
		}
	}
}

// curves are a load by temperature, with what a cooler takes out of its lines at 1 K between tank and coolant (rate), and
// takes from the heat that the oil brings beyond that (extra).
type curves struct {
	low, high                float64
	heat, drawn, rate, extra interp.Predictor
}

// flat is a curve that does not change.
type flat float64

func (f flat) Predict(float64) float64 { return float64(f) }

func newCurves(l *Load, b Body, c *Cooler) (*curves, error) {
	if len(l.At) == 0 {
		return nil, fmt.Errorf("thermal: load %q is known at no temperature", l.Name)
	}
	out := &curves{}
	out.low, out.high = l.Range()
	k := func(float64) float64 { return 0 }
	if !c.None() {
		var err error
		if k, err = c.rates(b.RhoC); err != nil {
			return nil, err
		}
	}
	n := len(l.At)
	x, heat, drawn, rate, extra := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	for i, p := range l.At {
		x[i], heat[i], drawn[i] = p.Theta, p.Heat, p.Drawn
		if c.Place == OffLine {
			rate[i] = k(c.LoopFlow)
			continue
		}
		for _, bin := range p.Lines[c.Place] {
			if bin.Flow > 0 {
				r := k(bin.Flow)
				rate[i] += bin.Share * r
				extra[i] += bin.Share * r / (b.RhoC * bin.Flow) * bin.Heat
			}
		}
	}
	for y, to := range map[*[]float64]*interp.Predictor{&heat: &out.heat, &drawn: &out.drawn, &rate: &out.rate, &extra: &out.extra} {
		var err error
		if *to, err = curve(x, *y); err != nil {
			return nil, fmt.Errorf("thermal: load %q: %w", l.Name, err)
		}
	}
	return out, nil
}

func curve(x, y []float64) (interp.Predictor, error) {
	for i := range x[1:] {
		if !(x[i+1] > x[i]) {
			return nil, fmt.Errorf("its temperatures do not rise")
		}
	}
	switch {
	case len(x) == 1 || slices.Min(y) == slices.Max(y):
		return flat(y[0]), nil
	case len(x) == 2:
		var line interp.PiecewiseLinear
		return &line, line.Fit(x, y)
	}
	var c interp.FritschButland
	return &c, c.Fit(x, y)
}

// within is a temperature brought into the range of the load.
func (c *curves) within(theta float64) float64 { return max(c.low, min(c.high, theta)) }

// HeatAt returns the heat into the oil [W] at a temperature [K].
func (l *Load) HeatAt(theta float64) (float64, error) {
	return l.at(theta, func(p Point) float64 { return p.Heat })
}

// DrawnAt returns the power drawn from the supply [W] at a temperature [K].
func (l *Load) DrawnAt(theta float64) (float64, error) {
	return l.at(theta, func(p Point) float64 { return p.Drawn })
}

func (l *Load) at(theta float64, of func(Point) float64) (float64, error) {
	x, y := make([]float64, len(l.At)), make([]float64, len(l.At))
	for i, p := range l.At {
		x[i], y[i] = p.Theta, of(p)
	}
	if len(x) == 0 {
		return 0, fmt.Errorf("thermal: load %q is known at no temperature", l.Name)
	}
	c, err := curve(x, y)
	if err != nil {
		return 0, err
	}
	return c.Predict(max(x[0], min(x[len(x)-1], theta))), nil
}
