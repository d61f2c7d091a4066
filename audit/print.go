package audit

import (
	"math"
	"strings"

	"barlitre/machines/units"
)

// printer writes numbers as the report shows them.
type printer struct {
	system   units.System
	currency string
}

func (p printer) in(si float64, d units.Dim, digits int) string {
	return units.Format(si, units.Preferred(d, p.system), digits)
}

// kWh writes a year's energy: the unit of the bill, whatever the system.
func (p printer) kWh(joule float64) string {
	u, _ := units.ParseUnit("kWh", units.Energy)
	return units.Format(joule, u, 4)
}

// energy writes the energy of a cycle: kJ in both families that people read, since
// a kWh is too large for it.
func (p printer) energy(joule float64) string {
	if p.system == units.SI {
		return p.in(joule, units.Energy, 4)
	}
	return kilojoules(joule)
}

func (p printer) power(watt float64) string { return p.in(watt, units.Power, 3) }
func (p printer) cooler(k float64) string   { return p.in(k, units.HeatCapacityRate, 3) }
func (p printer) degrees(t float64) string  { return p.in(t, units.Temperature, 3) }
func (p printer) seconds(t float64) string  { return p.in(t, units.Time, 4) }
func (p printer) hours(t float64) string    { return units.Number(t/units.Hour, 4) + "\u202fh" }
func (p printer) count(n float64) string    { return units.Number(n, 4) }
func (p printer) share(x float64) string    { return units.Format(x, units.Percent, 3) }

func (p printer) money(x float64) string {
	return units.Format(x, units.Unit{Symbol: p.currency, Dim: units.Money, Factor: 1}, 4)
}

// price writes what a kWh costs, without zeros that say nothing.
func (p printer) price(perJoule float64) string {
	x := units.Number(perJoule*units.KilowattHour, 5)
	if strings.Contains(x, ".") && !strings.Contains(x, "e") {
		x = strings.TrimRight(strings.TrimRight(x, "0"), ".")
	}
	return x + "\u202f" + p.currency + "/kWh"
}

func (p printer) mass(kg float64) string {
	return units.Format(kg, units.Unit{Symbol: "kg", Dim: units.Mass, Factor: 1}, 3)
}

// nothing turns into 0 what is left of a sum by rounding: less than a billionth of
// the whole that it is part of.
func nothing(x, whole float64) float64 {
	if math.Abs(x) < 1e-9*math.Abs(whole) {
		return 0
	}
	return x
}

// known reports whether a figure may be shown.
func known(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
