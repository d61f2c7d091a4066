package audit

import (
	"math"
	"sync"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// MachineMap is what a displacement machine does anywhere, and where it was.
type MachineMap struct {
	Name   string
	Law    machines.Displacement
	Fluid  machines.Fluid
	States []Operating   // of the duties, by their hours a year, or of a measurement
	Motor  bool          // it mostly gives power at its shaft
	Fit    *machines.Fit // of measured points, or nil
	Chart  *machines.Map // the points themselves, where they stand in for the law
	// Limits of the machine, rad/s and Pa; NaN when not given.
	MinSpeed, MaxSpeed, Rating float64

	look   sync.Once
	around *machines.Hull
}

// hull is that of the measured points, found when it is first asked for, by any goroutine.
func (m *MachineMap) hull() *machines.Hull {
	m.look.Do(func() { m.around = machines.NewHull(m.Fit.Points) })
	return m.around
}

// MachineMap returns the map of a machine of a circuit that was solved; nil where the block is no such machine.
func (s *Solution) MachineMap(c *CircuitRun, block string) *MachineMap {
	b := c.Circuit.Block(block)
	if b == nil {
		return nil
	}
	law, ok := circuit.MachineLaw(b, s.Conditions)
	if !ok {
		return nil
	}
	m := &MachineMap{Name: b.ID, Law: law, Fluid: fluidOf(s.Conditions), Fit: b.Fit, MinSpeed: limitOf(b, "min_speed"), MaxSpeed: limitOf(b, "max_speed"), Rating: limitOf(b, "rating")}
	if b.Fit != nil && circuit.KindNamed(b.Kind).WordOf(b, "points_as") == "map" {
		m.Chart = machines.NewMap(b.Fit)
	}
	drives := 0.0
	m.States = c.states(block)
	for _, x := range m.States {
		drives += x.Energy * machines.Sign(x.E*x.W*x.DP)
	}
	m.Motor = drives < 0
	return m
}

// states returns those of a machine in all duties, by their hours a year.
func (c *CircuitRun) states(block string) []Operating {
	var out []Operating
	for _, d := range c.Duties {
		times := d.times()
		for _, x := range d.Operating[block] {
			x.Energy, x.Seconds = times*x.Energy, times*x.Seconds
			out = append(out, x)
		}
	}
	return out
}

// times is how often a year what was run comes round; for a duty without hours, one cycle of it.
func (d *DutyRun) times() float64 {
	n := float64(max(1, d.Cycles))
	if d.Duty.Hours > 0 && d.Balance != nil && d.Balance.Cycle > 0 {
		return d.Duty.Hours / d.Balance.Cycle / n
	}
	return 1 / n
}

// FitMap returns the map of a fit; its states are the points measured, all of one weight.
func FitMap(name string, f *machines.Fit) *MachineMap {
	nan := math.NaN()
	m := &MachineMap{Name: name, Law: f.Law, Fluid: f.Fluid, Fit: f, MinSpeed: nan, MaxSpeed: nan, Rating: nan}
	for _, p := range f.Points {
		m.States = append(m.States, Operating{W: p.W, E: p.E, DP: p.DP, Energy: 1})
		m.Motor = p.DP*p.E*p.W < 0
	}
	return m
}

// Efficiency returns the overall efficiency at a setting, speed [rad/s] and pressure difference [Pa], all > 0, as a pump or,
// where the machine mostly drives, as a motor; NaN where it gives no power.
func (m *MachineMap) Efficiency(e, w, dp float64) float64 {
	if m.Motor {
		dp = -dp
	}
	if m.Chart != nil {
		return m.Chart.EfficiencyIn(m.Law, e, w, dp, m.Fluid)
	}
	return m.Law.EfficiencyIn(e, w, dp, m.Fluid)
}

// Measured reports whether a state, all > 0, lies among measured points; without any the law is all that is known, and true.
func (m *MachineMap) Measured(e, w, dp float64) bool {
	if m.Motor {
		dp = -dp
	}
	return m.Fit == nil || m.hull().Inside(e, w, dp)
}

// Extrapolated returns the share of the energy that passed the shaft at states outside the measured points.
func (m *MachineMap) Extrapolated() float64 {
	if m.Fit == nil {
		return 0
	}
	out, all := 0.0, 0.0
	for _, x := range m.States {
		all += x.Energy
		if !m.hull().Inside(x.E, x.W, x.DP) {
			out += x.Energy
		}
	}
	if all == 0 {
		return 0
	}
	return out / all
}

func fluidOf(c circuit.Conditions) machines.Fluid {
	f := machines.Fluid{Mu: c.Viscosity, Rho: c.Density, Bulk: c.BulkModulus, Air: c.Air}
	if f.Bulk == 0 {
		f.Bulk = machines.DefaultBulkModulus
	}
	return f
}

func limitOf(b *circuit.Block, key string) float64 {
	if v, ok := b.Values[key]; ok {
		return v.SI
	}
	return math.NaN()
}

// usual speeds and pressures where neither a limit nor a duty gives the ends of a map.
const (
	usualSpeed    = 1800 * units.RPM
	usualPressure = 250 * units.Bar
)

// Reach returns how far a map should go, rad/s and Pa: to the limits of the machine, and to where it was.
func (m *MachineMap) Reach() (w, dp float64) {
	for _, x := range m.States {
		w, dp = math.Max(w, math.Abs(x.W)), math.Max(dp, math.Abs(x.DP))
	}
	if w == 0 {
		w = usualSpeed
	}
	if dp == 0 {
		dp = usualPressure
	}
	if m.MaxSpeed > w {
		w = m.MaxSpeed
	}
	if m.Rating > dp {
		dp = m.Rating
	}
	return w, dp
}
