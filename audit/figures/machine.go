package figures

import (
	"fmt"
	"math"

	"barlitre/audit"
	"barlitre/machines/units"
)

// States within these of the setting, or within this share of the speed, lie on the map.
const (
	sameSetting = 0.05
	sameSpeed   = 0.05
)

// MapOverSpeed is the efficiency of a machine over speed and pressure at a setting, full when 0.
func MapOverSpeed(m *audit.MachineMap, setting float64, s units.System) EfficiencyMap {
	if setting <= 0 {
		setting = 1
	}
	w, dp := m.Reach()
	speed, pressure := units.Preferred(units.AngularSpeed, s), units.Preferred(units.Pressure, s)
	f := mapOf(m, pressure, dp)
	f.Title = "Efficiency of " + m.Name + " over speed and pressure"
	f.Subtitle = "at " + units.Format(setting, units.Percent, 3) + " setting, " + oilText(m, s)
	f.X, f.XUnit, f.ToX = "speed", speed.Symbol, speed.FromSI(1.05*w)
	f.At = func(x, y float64) float64 { return m.Efficiency(setting, speed.ToSI(x), pressure.ToSI(y)) }
	if m.Fit != nil {
		f.Inside = func(x, y float64) bool { return m.Measured(setting, speed.ToSI(x), pressure.ToSI(y)) }
	}
	f.LimitsX = []float64{speed.FromSI(m.MaxSpeed), speed.FromSI(m.MinSpeed)}
	f.OffAre = "at another setting"
	for _, x := range m.States {
		off := math.Abs(math.Abs(x.E)-setting) > sameSetting
		f.Points = append(f.Points, MapPoint{speed.FromSI(math.Abs(x.W)), pressure.FromSI(math.Abs(x.DP)), x.Energy, off})
	}
	return f
}

// MapOverSetting is the efficiency of a machine over setting and pressure at a speed [rad/s]; 0 takes the mean of its
// states, weighted by energy.
func MapOverSetting(m *audit.MachineMap, w float64, s units.System) EfficiencyMap {
	top, dp := m.Reach()
	if w <= 0 {
		w = meanSpeed(m, top)
	}
	speed, pressure := units.Preferred(units.AngularSpeed, s), units.Preferred(units.Pressure, s)
	f := mapOf(m, pressure, dp)
	f.Title = "Efficiency of " + m.Name + " over setting and pressure"
	f.Subtitle = "at " + units.Format(w, speed, 4) + ", " + oilText(m, s)
	f.X, f.XUnit, f.ToX = "setting", "%", 105
	f.At = func(x, y float64) float64 { return m.Efficiency(x/100, w, pressure.ToSI(y)) }
	if m.Fit != nil {
		f.Inside = func(x, y float64) bool { return m.Measured(x/100, w, pressure.ToSI(y)) }
	}
	f.OffAre = "at another speed"
	for _, x := range m.States {
		off := math.Abs(math.Abs(x.W)-w) > sameSpeed*w
		f.Points = append(f.Points, MapPoint{100 * math.Abs(x.E), pressure.FromSI(math.Abs(x.DP)), x.Energy, off})
	}
	return f
}

// mapOf begins a map with what both have.
func mapOf(m *audit.MachineMap, pressure units.Unit, dp float64) EfficiencyMap {
	f := EfficiencyMap{Y: "pressure difference", YUnit: pressure.Symbol, ToY: pressure.FromSI(1.05 * dp), PointsAre: "states of the duties, area by energy",
		LimitsY: []float64{pressure.FromSI(m.Rating)}}
	if m.Fit != nil && len(m.States) == len(m.Fit.Points) {
		f.PointsAre = "measured points"
	}
	return f
}

func meanSpeed(m *audit.MachineMap, none float64) float64 {
	sum, e := 0.0, 0.0
	for _, x := range m.States {
		sum += x.Energy * math.Abs(x.W)
		e += x.Energy
	}
	if e == 0 {
		return none
	}
	return sum / e
}

func oilText(m *audit.MachineMap, s units.System) string {
	return fmt.Sprintf("oil of %s", units.Format(m.Fluid.Mu, units.Preferred(units.DynamicViscosity, s), 3))
}

// FitResiduals shows what a fit leaves: efficiency of the law less that measured, over pressure, tinted by speed.
func FitResiduals(m *audit.MachineMap, s units.System) Residuals {
	pressure, speed := units.Preferred(units.Pressure, s), units.Preferred(units.AngularSpeed, s)
	f := Residuals{Title: "What the fit of " + m.Name + " leaves", X: "pressure difference", XUnit: pressure.Symbol, Group: "speed", GroupUnit: speed.Symbol}
	if m.Fit == nil {
		return f
	}
	f.RMS = 100 * m.Fit.RMS
	for i, p := range m.Fit.Points {
		f.Points = append(f.Points, ResidualPoint{pressure.FromSI(math.Abs(p.DP)), 100 * m.Fit.Residual[i], speed.FromSI(math.Abs(p.W))})
	}
	return f
}
