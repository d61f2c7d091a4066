package units

import "math"

// Exact factors to SI, for code: p := 160 * units.Bar.
const (
	Bar        = 1e5             // Pa
	Kilopascal = 1e3             // Pa
	Megapascal = 1e6             // Pa
	PSI        = LbForce / sqIn  // Pa; 6894.757
	Technical  = 98066.5         // Pa, technical atmosphere: 1 kp/cm²
	sqIn       = 0.0254 * 0.0254 // m²

	// AtmosphericPressure is the standard atmosphere [Pa], exact by definition; the
	// weather moves the true value by about ±3 %.
	AtmosphericPressure = 101325.0

	Minute = 60.0    // s
	Hour   = 3600.0  // s
	Day    = 86400.0 // s
	// Year is 365.25 days [s]: a span of time, not a plant's working hours.
	Year = 365.25 * Day

	Litre          = 1e-3                 // m³
	CubicInch      = 0.0254 * sqIn        // m³
	Gallon         = 231 * CubicInch      // m³, US liquid gallon
	LitrePerMinute = 1e-3 / 60            // m³/s
	GallonPerMin   = Gallon / 60          // m³/s, US
	Millimetre     = 1e-3                 // m
	Inch           = 0.0254               // m
	Foot           = 0.3048               // m
	SquareCM       = 1e-4                 // m²
	RPM            = 2 * math.Pi / 60     // rad/s
	Revolution     = 2 * math.Pi          // rad
	Degree         = math.Pi / 180        // rad
	Kilowatt       = 1e3                  // W
	Horsepower     = 550 * Foot * LbForce // W; 745.69987
	MetricHP       = 75 * 9.80665         // W; 735.49875
	KilowattHour   = 3.6e6                // J
	Kilojoule      = 1e3                  // J
	Btu            = 1055.05585262        // J, international table
	Kilonewton     = 1e3                  // N
	LbForce        = Pound * 9.80665      // N
	Pound          = 0.45359237           // kg
	MilliPascalSec = 1e-3                 // Pa·s, equal to 1 cP
	SquareMMPerSec = 1e-6                 // m²/s, equal to 1 cSt

	// CubicCentimetrePerRev is 1 cm³ a revolution as D = V/2π [m³/rad].
	CubicCentimetrePerRev = 1e-6 / (2 * math.Pi)
	// CubicInchPerRev is 1 in³ a revolution [m³/rad].
	CubicInchPerRev = CubicInch / (2 * math.Pi)

	// ZeroCelsius is 0 °C [K], exact by definition.
	ZeroCelsius = 273.15
)

// Dim is a physical quantity as the user names it. Two quantities with the same SI unit
// but another meaning (torque and energy, temperature and temperature difference) differ.
type Dim int

// The quantities. The comment is the SI unit a parsed value has.
const (
	Ratio                 Dim = iota // plain number; "%" accepted
	Count                            // plain number, no unit at all
	Pressure                         // Pa, gauge
	Flow                             // m³/s
	DisplacementPerRev               // m³/rad, written per revolution
	Velocity                         // m/s
	Acceleration                     // m/s²
	AngularSpeed                     // rad/s
	Force                            // N
	Torque                           // N m
	Length                           // m; roughness too
	Area                             // m²
	Volume                           // m³
	Angle                            // rad
	Time                             // s
	Mass                             // kg
	Inertia                          // kg m²
	Power                            // W
	Energy                           // J
	Temperature                      // K, never below 0
	TemperatureDifference            // K
	Density                          // kg/m³
	DynamicViscosity                 // Pa s
	KinematicViscosity               // m²/s
	SpecificHeat                     // J/(kg K)
	ThermalExpansion                 // 1/K
	FlowResistance                   // Pa s/m³, pressure per flow
	FlowConductance                  // m³/(s Pa), flow per pressure: leakage
	ViscousFriction                  // N s/m
	RotaryFriction                   // N m s/rad
	HeatCapacityRate                 // W/K
	HeatCapacity                     // J/K
	HeatTransfer                     // W/(m² K)
	Money                            // the currency typed
	EnergyPrice                      // money per J
	PowerPrice                       // money per W
	VolumePrice                      // money per m³
	CO2Factor                        // kg/J
	MassPrice                        // money per kg
	Voltage                          // V
	Current                          // A
	TorqueConstant                   // N m/A
	ElectricResistance               // Ω
	Frequency                        // Hz
	SpecificEnergy                   // J/kg: heating value
	dimCount
)

// PressureDifference is the same quantity as Pressure: gauge pressures subtract.
const PressureDifference = Pressure

// System is a family of units that are used together.
type System int

// The unit systems a reader can choose. SI means the coherent units (Pa, m³/s).
const (
	Metric System = iota
	US
	SI
)

// Name returns the quantity in lower case words, as used in messages and labels.
func (d Dim) Name() string {
	if d < 0 || d >= dimCount {
		return "unknown quantity"
	}
	return quantities[d].name
}

// String is Name.
func (d Dim) String() string { return d.Name() }
