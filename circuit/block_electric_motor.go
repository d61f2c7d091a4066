package circuit

import (
	"barlitre/machines"
	"barlitre/machines/units"
)

// electricMotorKind is an induction or permanent-magnet motor: it gives its shaft a
// speed, and the machines on the shaft ask it for torque.
var electricMotorKind = &Kind{
	Name: kindElectricMotor, Title: "Electric motor", Group: "supply",
	Passes: PrimeMover, Letter: "M", Typical: []Setting{{"rated_power", "15 kW"}, {"efficiency", "0.921"}},
	Text: "Induction motor or permanent-magnet servo motor, in four quadrants: driven by its shaft it is a generator. It turns at constant speed; with `slip`, straight on the mains, slower as it gives more torque; or, behind a frequency converter, at the speed that makes an axis move as the duty says (`follows`) or that a track commands. With `commands: torque` its track commands a torque and its speed is found, as of a generator. With a `torque_limit` it slows down when the machines on its shaft ask for more. Without a converter what comes back goes to the mains. Its efficiency is typed, or that of its `efficiency_class` and `poles`.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft"},
		{Name: "E", Type: Electric, Optional: true, Text: "terminals; unconnected it hangs on the mains"},
	},
	Params: sectioned([]Param{
		{Key: "rated_power", Title: "Rated power", Symbol: "PN", Dim: units.Power, Need: true, Above: true, Max: 5e6, Text: "shaft power on the name plate"},
		{Key: "type", Title: "Type", Type: Choice, Default: "induction", Choices: []string{"induction", "permanent_magnet"}, Text: "permanent magnet: servo motor without slip, behind a converter"},
		{Key: "efficiency_class", Title: "Efficiency class", Type: Choice, Choices: machines.MotorClasses(), Text: "by IEC 60034-30-1, 0.75 to 200 kW, 2, 4 or 6 poles, 50 Hz; gives the efficiency where none is typed"},
		{Key: "poles", Title: "Poles", Symbol: "p", Dim: units.Count, Default: "4", Origin: Assumed, Source: "most pump motors, common practice", Min: 2, Max: 12, Text: "even; with the frequency they give the speed of the field"},
		{Key: "efficiency", Title: "Efficiency at rated load", Symbol: "ηN", Dim: units.Ratio, Above: true, Max: 1, Derived: "that of its efficiency class", Text: "on the name plate; or give its efficiency class"},
		{Key: "speed", Title: "Speed", Symbol: "n", Dim: units.AngularSpeed, Default: "1480 rpm", Origin: Assumed, Source: "four poles, 50 Hz, loaded; common practice", Above: true, Max: 1000, Derived: "1480 rpm with four poles at 50 Hz, else 1.3 % below that of the field", Text: "rated speed; a motor of constant speed turns at it"},
		{Key: "frequency", Title: "Frequency of the mains", Symbol: "f", Dim: units.Frequency, Default: "50 Hz", Origin: Assumed, Source: "most mains outside America", Above: true, Max: 400, Text: "with the poles it gives the speed of the field"},
		{Key: "slip", Title: "Slip", Type: Choice, Default: "no", Choices: []string{"no", "yes"}, Text: "yes: straight on the mains its speed falls from that of the field without load to the rated one at rated torque, and rises above as it generates; no: it keeps its rated speed"},
		{Key: "control", Title: "Speed", Type: Choice, Default: "constant", Choices: []string{"constant", "commanded"}, Text: "what sets the speed"},
		{Key: "follows", Title: "Follows axis", Type: AxisRef, Text: "its speed is found from the motion of this axis"},
		{Key: "commands", Title: "Commands are of", Type: Choice, Default: "speed", Choices: []string{"speed", "torque"}, Text: "what a command of 1 means: its highest speed, or its torque limit (rated torque without one), below 0 braking a shaft that turns forwards"},
		{Key: "max_speed", Title: "Highest speed", Symbol: "n2", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "of a motor of variable speed; default: its speed"},
		{Key: "both_directions", Title: "Both directions", Type: Choice, Default: "no", Choices: []string{"no", "yes"}, Text: "a motor of variable speed may turn backwards"},
		{Key: "torque_limit", Title: "Torque limit", Symbol: "TL", Dim: units.Torque, Above: true, Max: 1e5, Text: "most it gives, as its converter or its pull-out torque limits it; without one it gives what is asked"},
		{Key: "idle_speed", Title: "Soft idle speed", Symbol: "n0", Dim: units.AngularSpeed, Above: true, Max: 1000, Text: "a motor of constant speed behind a converter turns at it while every axis stands, unless pumps are switched off at rest"},
		{Key: "fixed_share", Title: "Fixed losses", Symbol: "kf", Dim: units.Ratio, Default: "0.35", Origin: Assumed, Source: "iron, friction and windage at full speed as share of the rated loss, common practice", Max: 1, Text: "share of the rated loss that does not depend on load"},
		{Key: "loss", Title: "Loss law", Type: Choice, Default: "torque_speed", Choices: []string{"torque_speed", "power"}, Called: map[string]string{"torque_speed": "torque and speed"}, Text: "of torque and speed; or of power, the older law in shaft power alone, which knows no loss of holding torque at standstill"},
		{Key: "torque_constant", Title: "Torque constant", Symbol: "kT", Dim: units.TorqueConstant, Above: true, Max: 1e3, Text: "of a permanent-magnet motor: torque per rms current of a phase"},
		{Key: "resistance", Title: "Phase resistance", Symbol: "R", Dim: units.ElectricResistance, Max: 100, Text: "of a permanent-magnet motor, warm; with the torque constant it gives the copper loss"},
		{Key: "speed_loss", Title: "Loss at speed", Symbol: "P0", Dim: units.Power, Max: 1e5, Derived: "the rated loss less that of the copper", Text: "of a permanent-magnet motor with torque constant: iron, friction and windage at rated speed"},
		{Key: "voltage", Title: "Voltage", Symbol: "U", Dim: units.Voltage, Default: "400 V", Origin: Assumed, Source: "low-voltage mains in Europe", Above: true, Max: 15e3, Text: "between phases; for the current"},
		{Key: "power_factor", Title: "Power factor", Symbol: "cosφ", Dim: units.Ratio, Default: "0.85", Origin: Assumed, Source: "four poles, 10 to 50 kW, common practice; smaller and slower ones less", Above: true, Max: 1, Text: "at rated load, on the name plate; at part load it follows a generic curve, assumed"},
		{Key: "breakdown", Title: "Breakdown torque", Symbol: "kb", Dim: units.Ratio, Default: "2", Origin: Assumed, Source: "most motors pull out near 2 to 3 times, common practice; IEC 60034-1 asks for 1.6, from memory", Min: 1, Max: 10, Text: "over the rated torque; of a servo motor its peak torque"},
		{Key: "cooling", Title: "Cooling", Type: Choice, Default: "self", Choices: []string{"self", "forced"}, Called: map[string]string{"self": "self-ventilated", "forced": "forced ventilation"}, Text: "self-ventilated: a fan on its shaft, so that below half speed it can stand less torque, half of it at standstill (common practice, no source); forced ventilation: a fan of its own. A permanent-magnet motor cools by its surface unless self-ventilated is said"},
		{Key: "starts_per_hour", Title: "Starts an hour", Symbol: "z", Dim: units.Count, Above: true, Max: 1e4, Derived: "30·(PN/hp)^−0.38 with 4 poles, half with 2, a seventh more with 6: NEMA MG 10, from memory", Text: "permitted straight on the mains"},
		{Key: "inertia", Title: "Moment of inertia", Symbol: "J", Dim: units.Inertia, Max: 1e4, Derived: "0.002 kg m2·(PN/kW)^1.5·(p/4)², from memory of motors of 4 to 110 kW", Text: "of the motor and what turns with it, for the energy of a start"},
		{Key: "start_loss", Title: "Loss of a start", Symbol: "ks", Dim: units.Ratio, Default: "2", Origin: Assumed, Source: "the rotor heats by the energy of motion (textbook, from memory), the stator by about as much; behind a converter a tenth of it, no source", Max: 10, Text: "heat of a start on the mains over the energy of motion"},
	}, map[Section][]string{
		Governing: {"slip", "control", "follows", "commands", "max_speed", "both_directions", "torque_limit", "idle_speed"},
		LossBasis: {"loss", "fixed_share", "torque_constant", "resistance", "speed_loss", "inertia", "start_loss"},
		Limits:    {"breakdown", "cooling", "starts_per_hour"},
	}),
	Losses: []LossKind{
		{"electric motor", ToAir, "P = PV·(kf·|ω|/ωN + (1 − kf)·(T/TN)²), PV = PN·(1/ηN − 1)"},
		{"starting", ToAir, "E = (1 + ks)·J·(ω² − ω0²)/2 a start; behind a converter ks/10"},
	},
	Equations: []Equation{
		{"PV = PN·(1/ηN − 1); loss = PV·(kf·|ω|/ωN + (1 − kf)·(T/TN)²)", "loss separation, e.g. IEC 60034-2-1; fixed share assumed"},
		{"permanent magnet with kT and R: loss = 3·R·(T/kT)² + P0·|ω|/ωN, I = |T|/kT", "synchronous machine, current in quadrature, textbook"},
		{"slip: T = TN·(ωs − ω)/(ωs − ωN), ωs = 2π·f/(p/2)", "linear part of the torque curve, textbook; beyond twice the rated torque it is too stiff"},
		{"I = √((|T|·ωN + loss)² + Q²)/(√3·U), Q = QN·(0.7 + 0.3·(T/TN)²), cosφ = P/√(P² + Q²)", "magnetizing and leakage part; share 0.7 assumed, common practice"},
		{"with a torque limit: ω = set speed while Σ T <= TL, else Σ T = TL", "complementarity of set speed and limit; the current at the limit is not described"},
		{"commands torque: Σ T = command·TL, ω found, ω >= 0 unless it may turn both ways", "torque control of a converter; its dynamics and the inertia are not described"},
		{"start: E = (1 + ks)·J·(ω² − ω0²)/2", "energy of motion, lost when it runs out, and heat of the windings"},
		{"older law: loss = PV·(kf + (1 − kf)·(P/PN)²)", "part-load law in shaft power"},
	},
	Symbol: func(*Block) string { return "electric_motor" },
	derive: electricMotorDefault,
	check:  checkElectricMotor,
	build:  buildElectricMotor,
}
