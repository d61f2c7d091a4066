package thermal

import (
	"errors"
	"fmt"
	"math"
)

// ErrNoPeriod says that a machine does not come to repeat itself week by week.
var ErrNoPeriod = errors.New("thermal: the oil does not come to the same temperature week after week")

// period is how near two Mondays must be [K], and how many weeks are tried.
const (
	sameMonday = 1e-4
	mostWeeks  = 60
)

// Periodic returns the week that repeats itself. It begins near, else at the temperature of the air.
func (p *Plant) Periodic() (*Course, error) {
	s := State{p.Air.Mean, p.Air.Mean}
	for range mostWeeks {
		c, err := p.March(0, Week, s, nil)
		if err != nil {
			return c, err
		}
		if math.Abs(c.End.Oil-s.Oil) < sameMonday && math.Abs(c.End.Steel-s.Steel) < sameMonday {
			return c, nil
		}
		s = c.End
	}
	return nil, ErrNoPeriod
}

// net is what warms the oil [W] at a temperature and load, with the steel at its own balance.
func (p *Plant) net(theta, air float64, load int) float64 {
	c, b := p.curves[load], &p.Body
	at := c.within(theta)
	q := p.Cooler.Share(theta) * (c.rate.Predict(at)*(theta-p.Cooler.coolant(air)) + c.extra.Predict(at))
	walls := b.Walls + b.SteelWalls
	if b.Steel > 0 {
		walls = b.Walls + b.Coupling*b.SteelWalls/(b.Coupling+b.SteelWalls)
	}
	heat := c.heat.Predict(at)
	if p.Cooler.Place == OffLine {
		heat += p.Cooler.LoopPower
	}
	return heat - walls*(theta-air) - q
}

// TooHot is the oil temperature [K] beyond which no steady one is looked for: mineral oil does not stand it.
const TooHot = 273.15 + 200

// Steady returns the oil temperature [K] at which a load that goes on for ever keeps the oil, with the air at a temperature
// [K]: the first that oil comes to which starts as cold as the air. It is +Inf when there is none below TooHot.
func (p *Plant) Steady(load int, air float64) float64 {
	low := air
	if p.Cooler.Water > 0 {
		low = math.Min(low, p.Cooler.Water)
	}
	if p.net(low, air, load) <= 0 {
		return low
	}
	for high := low + 0.5; high <= TooHot; high += 0.5 {
		if p.net(high, air, load) > 0 {
			low = high
			continue
		}
		for high-low > 1e-9 {
			if mid := (low + high) / 2; p.net(mid, air, load) > 0 {
				low = mid
			} else {
				high = mid
			}
		}
		return (low + high) / 2
	}
	return math.Inf(1)
}

// Need is the cooler that keeps the oil at a temperature.
type Need struct {
	Heat     float64 // W to be taken by the cooler, >= 0
	Put      float64 // W put into the oil
	Walls    float64 // W that the walls take
	Flow     float64 // m³/s, mean oil flow in its place
	Entering float64 // K, of the oil entering the cooler: mean by flow
	Coolant  float64 // K, entering
	Rate     float64 // W/K at that flow; 0 = no cooler is needed; +Inf where no cooler in this place is enough
}

// Need returns the cooler in the place of the plant's that keeps the oil of the tank at theta [K] under a load that goes on,
// with the air at a temperature [K]. Without walls they are a reserve and not credited. The thermostat is taken as open.
func (p *Plant) Need(load int, theta, air float64, walls bool) (Need, error) {
	l := &p.Loads[load]
	c := p.curves[load]
	at := c.within(theta)
	n := Need{Put: c.heat.Predict(at), Coolant: p.Cooler.coolant(air)}
	if p.Cooler.Place == OffLine {
		n.Put += p.Cooler.LoopPower
	}
	if walls {
		n.Walls = (p.Body.Walls + p.Body.SteelWalls) * (theta - air)
		if b := &p.Body; b.Steel > 0 {
			n.Walls = (b.Walls + b.Coupling*b.SteelWalls/(b.Coupling+b.SteelWalls)) * (theta - air)
		}
	}
	n.Heat = math.Max(0, n.Put-n.Walls)
	var carried float64
	n.Flow, carried = lineAt(l, p.Cooler, at)
	n.Entering = theta
	if n.Flow > 0 {
		n.Entering += carried / (p.Body.RhoC * n.Flow)
	}
	if n.Heat == 0 {
		return n, nil
	}
	if n.Entering <= n.Coolant {
		return n, fmt.Errorf("oil that enters the cooler at %.1f C is not warmer than what cools it, %.1f C: no cooler takes heat out of it", n.Entering-273.15, n.Coolant-273.15)
	}
	n.Rate = p.rateFor(l, at, theta, n)
	return n, nil
}

// lineAt returns the mean flow and heat in the place of a cooler, at a temperature within the load's.
func lineAt(l *Load, c Cooler, theta float64) (flow, heat float64) {
	if c.Place == OffLine {
		return c.LoopFlow, 0
	}
	x, q, h := make([]float64, len(l.At)), make([]float64, len(l.At)), make([]float64, len(l.At))
	for i, p := range l.At {
		x[i] = p.Theta
		q[i], h[i] = p.Lines[c.Place].Mean()
	}
	flows, _ := curve(x, q)
	heats, _ := curve(x, h)
	return flows.Predict(theta), heats.Predict(theta)
}

// rateFor finds the rate at the mean flow that takes the heat of n.
func (p *Plant) rateFor(l *Load, at, theta float64, n Need) float64 {
	w := p.Body.RhoC * n.Flow
	if w <= 0 {
		return math.Inf(1)
	}
	takes := func(share float64) float64 { // of the heat that oil of the mean flow can carry
		c := Cooler{Place: p.Cooler.Place, LoopFlow: p.Cooler.LoopFlow, Rate: share * w, RateFlow: n.Flow}
		cs, err := newCurves(l, p.Body, &c)
		if err != nil {
			return 0
		}
		return cs.rate.Predict(at)*(theta-n.Coolant) + cs.extra.Predict(at)
	}
	low, high := 0.0, 1-1e-6
	if takes(high) < n.Heat {
		return math.Inf(1)
	}
	for range 60 {
		if mid := (low + high) / 2; takes(mid) < n.Heat {
			low = mid
		} else {
			high = mid
		}
	}
	return (low + high) / 2 * w
}
