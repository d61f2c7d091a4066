package audit

import (
	"errors"
	"fmt"
	"math"

	"barlitre/machines/units"
)

// HeatRow is the mean heat put into the oil, and the cooler that this asks for.
type HeatRow struct {
	Duty   string
	Mean   float64 // W, losses with sink oil over the length of the cycle
	Cooler float64 // W/K between entering oil and entering air; NaN when oil is not warmer than air
}

// Heat is the heat put into the oil of a circuit. Tank and pipe walls are not
// credited, so a cooler chosen by Cooler has them in reserve.
type Heat struct {
	Oil, Air float64 // K
	Duties   []HeatRow
	Year     HeatRow // mean over the running hours of the year; NaN when no duty has hours
	Hottest  int     // place in Duties of the largest mean, -1 when there is none
	Fault    string  // why no cooler can be named, or ""
}

// CoolerRate returns the specific capacity [W/K] that takes heat [W] out of oil
// entering at oil [K] with air entering at air [K],
//
//	K = P / (T_oil − T_air)
//
// It fails when a temperature is NaN (not given), and when the oil is not warmer
// than the air: then no air cooler does it. The result is NaN in both cases.
func CoolerRate(heat, oil, air float64) (float64, error) {
	if math.IsNaN(oil) || math.IsNaN(air) {
		return math.NaN(), errors.New("no cooler can be named without the oil temperature and the air temperature; give both (oil.temperature, air.temperature)")
	}
	if oil <= air {
		c, _ := units.ParseUnit("C", units.Temperature)
		return math.NaN(), fmt.Errorf("oil at %s is not warmer than the air at %s: no air cooler can take heat out; "+
			"raise the oil temperature or correct the air temperature", units.Format(oil, c, 3), units.Format(air, c, 3))
	}
	return heat / (oil - air), nil
}

// WallHeat returns what tank walls of the given area [m²] give off [W] at a heat
// transfer coefficient h [W/(m²·K)] and dT [K] between oil and air: P = h·A·dT.
func WallHeat(h, area, dT float64) float64 { return h * area * dT }

// leastHeat is the mean heat [W] below which it is what rounding leaves of nothing, as in
// a circuit that is switched off.
const leastHeat = 1e-6

func heatOf(runs []*DutyRun, y *Year, oil, air float64) *Heat {
	h := &Heat{Oil: oil, Air: air, Hottest: -1}
	if _, err := CoolerRate(0, oil, air); err != nil {
		h.Fault = err.Error()
	}
	row := func(name string, mean float64) HeatRow {
		if math.Abs(mean) < leastHeat {
			mean = 0
		}
		k, _ := CoolerRate(mean, oil, air)
		return HeatRow{Duty: name, Mean: mean, Cooler: k}
	}
	for _, r := range runs {
		if r.Balance == nil || r.Balance.Cycle <= 0 {
			continue
		}
		h.Duties = append(h.Duties, row(r.Duty.Name, r.Balance.HeatToOil().Total()/r.Balance.Cycle))
		if n := len(h.Duties) - 1; h.Hottest < 0 || h.Duties[n].Mean > h.Duties[h.Hottest].Mean {
			h.Hottest = n
		}
	}
	mean := math.NaN()
	if y.Hours > 0 {
		mean = y.MeanPower(y.HeatToOil())
	}
	h.Year = row("", mean)
	return h
}

// Largest returns the row of the duty with the largest mean heat, which is the one
// a cooler must be chosen for. ok is false when nothing was solved.
func (h *Heat) Largest() (row HeatRow, ok bool) {
	if h.Hottest < 0 {
		return HeatRow{Mean: math.NaN(), Cooler: math.NaN()}, false
	}
	return h.Duties[h.Hottest], true
}
