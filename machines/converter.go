package machines

import (
	"fmt"
	"math"
	"sort"

	"barlitre/machines/units"
)

// Converter is the loss law of a frequency converter; the losses are fractions of rated output.
type Converter struct {
	NoLoad float64 // loss at no load, –, >= 0
	Linear float64 // loss proportional to load, –, >= 0 (semiconductors)
	Square float64 // loss proportional to load squared, –, >= 0 (resistive)
}

// converterSizes are least-squares fits of efficiency to the rows of a published table of PWM converters, rated
// in hp, at seven loads from 1.6 to 100 %: each row is met within 1 point at every load.
var converterSizes = []struct {
	hp float64
	Converter
}{
	{5, Converter{0.0291, 0.0232, 0.0029}}, {10, Converter{0.0228, 0.0204, 0}}, {20, Converter{0.0178, 0.0153, 0.0005}},
	{30, Converter{0.0157, 0.0129, 0.0062}}, {50, Converter{0.0186, 0.0123, 0.0017}}, {75, Converter{0.0180, 0.0082, 0.0013}},
	{100, Converter{0.0128, 0.0170, 0}}, {200, Converter{0.0100, 0.0159, 0.0047}},
}

// UsualConverter returns the loss law of a usual converter of rated output p [W], > 0: a row of the published table, between
// rows in proportion to the logarithm of the rating, below 5 hp and above 200 hp the last row.
func UsualConverter(p float64) Converter {
	hp, last := p/units.Horsepower, len(converterSizes)-1
	i := sort.Search(last, func(i int) bool { return converterSizes[i+1].hp >= hp }) // between i and i+1
	i = min(i, last-1)
	a, b := converterSizes[i], converterSizes[i+1]
	x := math.Max(0, math.Min(1, math.Log(hp/a.hp)/math.Log(b.hp/a.hp)))
	mix := func(u, v float64) float64 { return u + x*(v-u) }
	return Converter{mix(a.NoLoad, b.NoLoad), mix(a.Linear, b.Linear), mix(a.Square, b.Square)}
}

// Check returns nil or an error that names the first value out of range.
func (c Converter) Check() error {
	for _, v := range []struct {
		name string
		v    float64
	}{{"no-load", c.NoLoad}, {"linear", c.Linear}, {"square", c.Square}} {
		if !notNegative(v.v) || v.v > 1 {
			return fmt.Errorf("converter: %s loss is %s of rated output, must be 0 to 1", v.name, units.Number(v.v, 3))
		}
	}
	return nil
}

// Loss returns the loss [W], >= 0, at motor-side power p [W] of any sign,
//
//	P_loss = PN·(a + b·x + c·x²),  x = |P|/PN        (8)
//
// ratedPower is PN, the rated output [W], > 0. The supply gives P + P_loss. Where several motors hang on one link,
// p is the sum of their |P|: what passes from one to the other passes the inverters of both.
func (c Converter) Loss(p, ratedPower float64) float64 {
	x := math.Abs(p) / ratedPower
	return ratedPower * (c.NoLoad + (c.Linear+c.Square*x)*x)
}
