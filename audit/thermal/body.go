package thermal

import (
	"fmt"
	"math"
)

// Heat transfer coefficients of tank walls by how the air moves [W/(m²·K)]. Trade article on tanks, which gives them for 6
// poor, 12 ordinary and 24 forced circulation; handbooks of the trade print 5.8 to 14.5 for ordinary air.
const (
	StillAir, OrdinaryAir, ForcedAir = 6.0, 12.0, 24.0
)

// SteelHeat is the specific heat of steel [J/(kg·K)]; handbooks print 460 to 490.
const SteelHeat = 460.0

// Body is what stores heat and gives it to the air by its walls.
type Body struct {
	Oil        float64 // J/K, of oil and tank, and of the steel where it has no body of its own; > 0
	Steel      float64 // J/K, of the second body; 0 = there is one body
	Coupling   float64 // W/K between the two bodies; > 0 where there are two
	Walls      float64 // W/K, of the first body to the air
	SteelWalls float64 // W/K, of the second body to the air
	RhoC       float64 // J/(m³·K) of the oil, > 0; for the temperatures of lines
}

// Capacity returns the heat capacity of both bodies [J/K].
func (b Body) Capacity() float64 { return b.Oil + b.Steel }

// TimeConstant returns C/(UA + K) [s] of a body whose cooler takes rate [W/K] (0 = none): the time in which 63 % of a change of
// temperature is done. Both bodies count as one. +Inf where nothing leaves.
func (b Body) TimeConstant(rate float64) float64 {
	return b.Capacity() / (b.Walls + b.SteelWalls + rate)
}

// TankArea returns the area of the walls of a tank [m²] without its base, for a cube of volume [m³]: 5·V^(2/3). A 200 L tank
// has 1.71 m², where trade literature prints 1.7.
func TankArea(volume float64) float64 { return 5 * math.Pow(volume, 2.0/3) }

// check returns nil or what is wrong.
func (b Body) check() error {
	switch {
	case !(b.Oil > 0) || math.IsInf(b.Oil, 0):
		return fmt.Errorf("thermal: the heat capacity of the oil is %g J/K, must be above 0", b.Oil)
	case !(b.RhoC > 0):
		return fmt.Errorf("thermal: the heat capacity of a volume of oil is %g J/(m³·K), must be above 0", b.RhoC)
	case !(b.Walls >= 0) || !(b.SteelWalls >= 0) || !(b.Steel >= 0):
		return fmt.Errorf("thermal: walls and steel must not be below 0")
	case b.Steel > 0 && !(b.Coupling > 0):
		return fmt.Errorf("thermal: steel with a heat capacity of its own needs its coupling to the oil")
	}
	return nil
}
