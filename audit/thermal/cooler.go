package thermal

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"
)

// Place is where a cooler stands.
type Place int

// The places. Each gets the oil of its line alone.
const (
	ReturnLine Place = iota // all that comes back to the tank but by drains and flushing
	CaseDrain               // what pumps and motors leak into their cases
	Flushing                // what a flushing valve takes out of a closed circuit
	OffLine                 // a loop of its own, from tank to tank, while the machine runs
	places
)

// RatePoint is one point of a cooler's table.
type RatePoint struct{ Flow, Rate float64 } // m³/s, W/K

// Cooler takes heat out of the oil that passes it,
//
//	Q = s·K(q)·(T_in − Ta)        (2)
//
// with the oil entering at T_in and the air or water entering at Ta. K is known at one flow or at several. At one, RateFlow, it
// changes with the flow as that of a heat exchanger whose other side does not warm up (effectiveness and number of transfer
// units, capacity ratio 0; Incropera, Fundamentals of Heat and Mass Transfer, from memory),
//
//	K(q) = ρc·q·(1 − exp(−UA/(ρc·q)))        (3)
//
// with UA such that K(RateFlow) = Rate; without a RateFlow UA is the Rate. s is the share of the oil that the thermostat lets
// through, 0 below Opens, 1 from Full on.
type Cooler struct {
	Place    Place
	Rate     float64     // W/K; 0 = there is no cooler
	RateFlow float64     // m³/s at which Rate holds; 0 = with plenty of oil
	Points   []RatePoint // in place of Rate: by rising flow
	Scale    float64     // of what it takes, such as 1/1.2 when fouled; 0 = 1
	Water    float64     // K, entering; 0 = it is cooled by the air
	Opens    float64     // K of the oil in the tank; 0 = there is no thermostat
	Full     float64     // K, above Opens
	LoopFlow float64     // m³/s, of OffLine

	Fan       float64 // W, of the fan or the pump of the cooling water
	Switched  bool    // the fan runs as far as the thermostat is open; else with the machine
	LoopPower float64 // W, of the pump of an off-line loop; all of it warms the oil
}

// None reports whether nothing is cooled.
func (c *Cooler) None() bool { return c.Rate <= 0 && len(c.Points) == 0 }

// Share returns s at the oil temperature of the tank [K].
func (c *Cooler) Share(theta float64) float64 {
	switch {
	case c.Opens == 0:
		return 1
	case c.Full <= c.Opens:
		if theta >= c.Opens {
			return 1
		}
		return 0
	}
	return math.Max(0, math.Min(1, (theta-c.Opens)/(c.Full-c.Opens)))
}

// coolant is what the cooler gives its heat to [K].
func (c *Cooler) coolant(air float64) float64 {
	if c.Water > 0 {
		return c.Water
	}
	return air
}

// rates returns K(q).
func (c *Cooler) rates(rhoC float64) (func(flow float64) float64, error) {
	scale := c.Scale
	if scale == 0 {
		scale = 1
	}
	if len(c.Points) > 0 {
		table, err := c.table()
		if err != nil {
			return nil, err
		}
		most := c.Points[len(c.Points)-1].Flow
		return func(q float64) float64 { return math.Min(scale*table.Predict(math.Min(q, most)), rhoC*q) }, nil
	}
	ua := scale * c.Rate
	if w := rhoC * c.RateFlow; c.RateFlow > 0 {
		if c.Rate >= w {
			return nil, fmt.Errorf("cooler: %.3g kW/K cannot be taken out of %.3g L/min of oil, which carries %.3g kW/K; correct the rate or its flow",
				c.Rate/1e3, c.RateFlow*60e3, w/1e3)
		}
		ua = -scale * w * math.Log1p(-c.Rate/w)
	}
	return func(q float64) float64 {
		if q <= 0 {
			return 0
		}
		return -rhoC * q * math.Expm1(-ua/(rhoC*q))
	}, nil
}

// table is what stands in the table, from no flow on.
func (c *Cooler) table() (interp.Predictor, error) {
	x, y := []float64{0}, []float64{0}
	for _, p := range c.Points {
		if !(p.Flow > x[len(x)-1]) || !(p.Rate > 0) {
			return nil, fmt.Errorf("cooler: the flows of its table must rise from above 0, and its rates must be above 0")
		}
		x, y = append(x, p.Flow), append(y, p.Rate)
	}
	if len(x) == 2 {
		var line interp.PiecewiseLinear
		return &line, line.Fit(x, y)
	}
	var curve interp.FritschButland
	return &curve, curve.Fit(x, y)
}

// RateAt returns K at a flow of oil [m³/s] with a heat capacity of rhoC [J/(m³·K)]; the error says what is wrong with the cooler.
func (c *Cooler) RateAt(flow, rhoC float64) (float64, error) {
	k, err := c.rates(rhoC)
	if err != nil {
		return math.NaN(), err
	}
	return k(flow), nil
}
