package audit

import (
	"math"

	"barlitre/machines/units"
)

// Tariff is what energy costs and what it emits, as the audit file states it.
type Tariff struct {
	Price          float64 // money/J, what the next unit costs (marginal); NaN when not given
	Currency       string  // three letters
	CreditReturned bool    // energy returned to the mains is paid for at Price
	CO2            float64 // kg/J; NaN when not given
	CO2Year        string  // of the factor
	CO2Basis       string  // "location" or "market"
	Fuel           Fuel
}

// CostRange is money by three views [currency]; NaN where not given.
type CostRange struct {
	Low, Likely, High float64
	Given             bool
	Note              string
}

// YearCost is what the energy of a year costs and emits.
type YearCost struct {
	Drawn    float64 // money a year for the energy drawn
	Credit   float64 // money a year for the energy returned, 0 unless the tariff credits it
	Credited bool
	CO2      float64 // kg a year for the energy drawn; NaN without a factor that it needs
}

// Net returns the bill [money a year].
func (c YearCost) Net() float64 { return c.Drawn - c.Credit }

// YearCost prices a year: what is from the mains and what engines burn, each at its own price and factor. Its money is
// NaN when a price that it needs is not given. Emissions follow the energy drawn alone: what a neighbour does with
// returned energy is not known here.
func (t Tariff) YearCost(y *Year) YearCost {
	c := YearCost{Drawn: t.of(y, t.Price, t.Fuel.Price), Credited: t.CreditReturned, CO2: t.of(y, t.CO2, t.Fuel.CO2)}
	if t.CreditReturned && y.Returned.Total() > 0 {
		c.Credit = y.Returned.Total() * t.Price
	}
	return c
}

// of sums what the two kinds of energy of a year come to; a rate that is not needed need not be known.
func (t Tariff) of(y *Year, mains, fuel float64) float64 {
	burnt := y.Fuel.Total()
	if burnt == 0 {
		return y.Drawn.Total() * mains
	}
	sum := burnt * fuel
	if rest := y.Drawn.Total() - burnt; rest > 1e-9*burnt {
		sum += rest * mains
	}
	return sum
}

// Payback is the simple payback [years] of a cost by a saving a year,
//
//	n = cost / saving
//
// without interest, price changes or upkeep. None says in words why there is no
// payback; the numbers are NaN then, and each is NaN where its cost is not given.
type Payback struct {
	Low, Likely, High float64
	None              string
}

// SimplePayback divides. A saving of zero or less never pays back.
func SimplePayback(cost CostRange, saving float64) Payback {
	none := Payback{Low: math.NaN(), Likely: math.NaN(), High: math.NaN()}
	switch {
	case !cost.Given:
		none.None = "no payback named: the file states no retrofit cost"
	case math.IsNaN(saving):
		none.None = "no payback named: the money saved a year is not known"
	case saving <= 0:
		none.None = "no payback: the proposal saves no money"
	default:
		return Payback{Low: cost.Low / saving, Likely: cost.Likely / saving, High: cost.High / saving}
	}
	return none
}

// years writes a time of payback.
func years(x float64) string { return units.Number(x, 2) }

// ranges reports whether a range is written.
func (p Payback) ranges() bool { return p.Low < p.High && years(p.Low) != years(p.High) }

// String says the payback as people do: "2.6 years (2.0 to 3.5)".
func (p Payback) String() string {
	if p.None != "" {
		return p.None
	}
	hasRange := !math.IsNaN(p.Low) && !math.IsNaN(p.High)
	switch {
	case !math.IsNaN(p.Likely) && hasRange:
		return units.Around(years(p.Likely), " years", years(p.Low), years(p.High))
	case !math.IsNaN(p.Likely):
		return years(p.Likely) + " years"
	case hasRange:
		return units.Range(years(p.Low), years(p.High)) + " years"
	case !math.IsNaN(p.Low):
		return "at least " + years(p.Low) + " years"
	case !math.IsNaN(p.High):
		return "at most " + years(p.High) + " years"
	}
	return "no payback named: the file states no retrofit cost"
}
