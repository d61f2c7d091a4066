package audit

import (
	"math"
	"strconv"
	"strings"

	"barlitre/circuit"
)

// newSolution takes from the file what all circuits share. It fails when the oil
// is not told well enough to solve anything.
func newSolution(f *File) (*Solution, error) {
	cond, err := f.Conditions()
	if err != nil {
		return nil, err
	}
	s := &Solution{File: f, Conditions: cond, Tariff: f.tariff(),
		Oil: given(f.Oil.Temperature, f.Oil.HasTemperature), Air: given(f.Air, f.HasAir)}
	for _, e := range f.Circuits {
		s.Circuits = append(s.Circuits, &CircuitRun{Circuit: e.Circuit, Proposal: e.Role == Proposal, Cost: e.Cost.plain()})
	}
	return s, nil
}

// given returns the number of a value, NaN when it was not given.
func given(v circuit.Value, has bool) float64 {
	if !has {
		return math.NaN()
	}
	return v.SI
}

func (f *File) tariff() Tariff {
	t := Tariff{Price: given(f.Price, f.HasPrice), Currency: f.Site.Currency, CreditReturned: f.CreditReturned,
		CO2: given(f.CO2, f.HasCO2), CO2Basis: f.CO2Basis, Fuel: f.fuel()}
	for _, v := range []circuit.Value{f.Price, f.FuelPrice} {
		if t.Currency == "" && v.Unit.Symbol != "" {
			t.Currency, _, _ = strings.Cut(v.Unit.Symbol, "/")
		}
	}
	if f.CO2Year != 0 {
		t.CO2Year = strconv.Itoa(f.CO2Year)
	}
	return t
}

// plain drops how a cost was written.
func (c Cost) plain() CostRange {
	if !c.Given {
		return CostRange{Low: math.NaN(), Likely: math.NaN(), High: math.NaN()}
	}
	return CostRange{Low: c.Low.SI, Likely: c.Likely.SI, High: c.High.SI, Given: true, Note: c.Note}
}
