package circuit

import (
	"fmt"

	"barlitre/machines"
	"barlitre/machines/units"
)

// Role says on which side of the energy balance a channel stands.
type Role int

// The roles. For every time step
//
//	supply = work + stored + sum of losses
//
// up to what the balance left unsolved, with supply summed over all prime movers.
const (
	Supply Role = iota // power at the mains terminals of a motor or converter, > 0 drawn, < 0 returned; fuel power of an engine
	Work               // power given to the load of an axis, > 0 resisted, < 0 the load drives
	Stored             // power going into a store (moved mass, lifted oil, pressure source), either sign
	Loss               // power lost, >= 0
)

// Channel is one power that a run books at every time step [W].
type Channel struct {
	Role  Role
	Block string
	Kind  string // of loss, as in the catalog; else "supply", "fuel", the axis name, or what stores it
	Sink  Sink   // of a loss
}

// Signal is one quantity that a run reports at every time step, in SI.
type Signal struct {
	Name  string // "RV1.P.p", "C1.v", "P1.shaft"
	Block string
	Port  string // "" when it is the block's own
	What  string // "p", "q", "v", "w", "F", "T", "e", "u", "shaft", "electric", "fuel"
	Title string // for plots: "pressure at P"
	Dim   units.Dim
}

// AxisNow is the state of one axis at a time step.
type AxisNow struct {
	Demand   float64 // m/s or rad/s; equals Speed where motion is not given
	Speed    float64
	Load     float64 // N or N·m
	Standing bool
	End      int // 1 or −1 where that end of its stroke holds it, else 0
}

// Sample is one time step of a run. Its slices are used again for the next one.
type Sample struct {
	T          float64
	Signals    []float64 // by Compiled.Signals
	Power      []float64 // W, by Compiled.Channels
	Pulse      []float64 // J, by Compiled.Channels: what is booked at this instant beside the powers, such as the start of a motor
	Pulsed     bool      // some of Pulse are not 0
	Axes       []AxisNow // by Compiled.Axes
	Standing   bool      // every axis stands
	Holding    bool      // every axis stands and at least one under a load
	Driving    bool      // the load drives an axis
	Stopped    bool      // the prime movers are switched off
	Void       []float64 // m³/s missing at each node, by Compiled.Nodes; 0 where the node is filled
	Unbalanced bool      // not solved: Signals and Power are of the nearest point found
}

// Receiver takes the time steps of a run, in order. An error ends the run.
type Receiver interface {
	Sample(s *Sample) error
}

// Receivers passes each time step to several.
type Receivers []Receiver

// Sample passes s on.
func (ss Receivers) Sample(s *Sample) error {
	for _, k := range ss {
		if err := k.Sample(s); err != nil {
			return err
		}
	}
	return nil
}

// Conditions hold for a whole call of Run: the oil at its temperature.
type Conditions struct {
	Density     float64 // kg/m³
	Viscosity   float64 // dynamic, Pa·s
	BulkModulus float64 // of oil without air, Pa; 0 = machines.DefaultBulkModulus
	Air         float64 // entrained, share of volume at atmospheric pressure
	Temperature float64 // K, at which these hold; 0 = not known
	Start       float64 // K, of the oil when the machine starts; 0 = not known
	// Oil says how they change with temperature; its zero value when that is not known.
	Oil machines.Oil
}

// bulk returns the modulus without air [Pa].
func (c *Conditions) bulk() float64 {
	if c.BulkModulus == 0 {
		return machines.DefaultBulkModulus
	}
	return c.BulkModulus
}

// changes reports whether the oil is known at other temperatures than its own.
func (c *Conditions) changes() bool { return c.Oil.Nu40 > 0 && c.Temperature > 0 }

// ViscosityAt returns the dynamic viscosity [Pa·s] at temperature theta [K]; at any where only one is known, that one.
func (c *Conditions) ViscosityAt(theta float64) float64 {
	if !c.changes() {
		return c.Viscosity
	}
	return c.Viscosity * c.Oil.DynamicViscosity(theta) / c.Oil.DynamicViscosity(c.Temperature)
}

// densityAt returns the density [kg/m³] at temperature theta [K], as ViscosityAt.
func (c *Conditions) densityAt(theta float64) float64 {
	if !c.changes() {
		return c.Density
	}
	return c.Density * c.Oil.Density(theta) / c.Oil.Density(c.Temperature)
}

// Certificate says how well the time steps of a run are balanced.
type Certificate struct {
	Steps     int
	Fallbacks int     // steps that needed more than Newton's method from the step before
	Worst     float64 // m³/s, largest flow that a node was left with
	WorstAt   string
	Force     float64 // N, largest force (torque over its displacement, times an area) left at an actuator
	// Unsolved lists the first few steps that stayed unbalanced; Unbalanced counts them all.
	Unbalanced int
	Unsolved   []Unsolved
	// Loose names the nodes, in order, that leakage alone gives a pressure while axes stand,
	// shut in by closed valves: what is shown there is a convention. See Circuit.Pockets.
	Loose []string
	// Sequential names what made a long duty be balanced in one go on one processor: what
	// the circuit remembers from step to step. "" for others and for short duties.
	Sequential string
}

// Unsolved names a time step that could not be balanced.
type Unsolved struct {
	T        float64
	Where    string // node or block with the largest residual
	Residual string // largest of the flows and of the pressures
	Tried    []string
	Cause    string // the likely one, and what to look at
}

func (u Unsolved) String() string {
	text := fmt.Sprintf("not balanced at %s: %s is left with %s", clock(u.T), u.Where, u.Residual)
	if u.Cause != "" {
		text += "; likely cause: " + u.Cause
	}
	return text
}

// State is carried from one call of Run to the next: the last solution, where
// the axes are, and what is stored. The zero State starts afresh.
type State struct {
	x      []float64
	travel []float64 // m or rad, by axis
	speed  []float64 // m/s or rad/s, by axis
	stood  bool      // all axes stood
	slow   []float64 // gas volumes, flywheel speeds, switch states
	lastT  float64
	begun  bool
}

// Travel returns how far axis i has gone since the first step [m or rad].
func (s State) Travel(i int) float64 {
	if i < len(s.travel) {
		return s.travel[i]
	}
	return 0
}
