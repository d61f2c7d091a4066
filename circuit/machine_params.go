package circuit

import (
	"slices"

	"barlitre/machines/units"
)

const (
	goodPiston = "piston machine in good order, common practice"
	ofFamily   = "that of its family, else of an axial piston machine"
)

// machineParams are the parameters that every displacement machine has. The defaults of the coefficients hold where
// neither a family, a best point nor measured points are given.
func machineParams(share string) []Param {
	sized := Plate.of(Param{Key: "displacement", Title: "Displacement", Symbol: "V", Dim: units.DisplacementPerRev, Need: true, Above: true, Max: 0.02, Text: "geometric, at full setting"})
	return slices.Concat(sized, basisParams(), coefficientParams(), wearParams(share), limitParams())
}

// basisParams say what the coefficients that are not given follow from.
func basisParams() []Param {
	return LossBasis.of([]Param{
		{Key: "family", Title: "Family", Type: Choice, Choices: familyWords(), Text: "takes the coefficients that are not given from the best point of such a machine in good order"},
		{Key: "best_volumetric", Title: "Best volumetric efficiency", Symbol: "ηv", Dim: units.Ratio, Above: true, Max: 1, Text: "at the best point; sets the slip. Default: " + ofFamily},
		{Key: "best_hydromechanical", Title: "Best hydromechanical efficiency", Symbol: "ηhm", Dim: units.Ratio, Above: true, Max: 1, Text: "at the best point; sets the friction. Default: " + ofFamily},
		{Key: "best_pressure", Title: "Pressure of the best point", Dim: units.Pressure, Above: true, Max: 2000e5, Text: "pressure difference there. Default: " + ofFamily},
		{Key: "best_speed", Title: "Speed of the best point", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "speed there. Default: " + ofFamily},
		{Key: "best_viscosity", Title: "Viscosity of the best point", Dim: units.DynamicViscosity, Above: true, Max: 10, Text: "of the oil there. Default: " + ofFamily},
		{Key: "points", Title: "Measured points", Type: FileRef, Text: "CSV file beside the audit file with speed, pressure difference, flow, torque and, if it varies, displacement; the coefficients that are not given are fitted to them"},
		{Key: "points_as", Title: "Points used as", Type: Choice, Default: "law", Choices: []string{"law", "map"}, Text: "law: the fitted law everywhere; map: the measured losses where points lie, the fitted law away from them"},
		{Key: "points_viscosity", Title: "Viscosity of the points", Dim: units.DynamicViscosity, Default: "26 mPa s", Origin: Assumed, Source: "ISO VG 46 at 50 C", Above: true, Max: 10, Text: "of the oil while they were measured, where the file has no such column"},
	}...)
}

// coefficientParams are the coefficients of the loss law.
func coefficientParams() []Param {
	return Coefficients.of([]Param{
		{Key: "slip", Title: "Slip coefficient", Symbol: "Cs", Dim: units.Ratio, Default: "1.5e-8", Origin: Assumed, Source: goodPiston, Max: 1e-4, Text: "laminar leakage, of displacement, pressure and 1/viscosity"},
		{Key: "turbulent_slip", Title: "Turbulent slip", Symbol: "Cst", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "counted in the laminar slip", Max: 1e-2, Text: "leakage by the root of the pressure, through short gaps"},
		{Key: "compression", Title: "Compression factor", Symbol: "kB", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "counted in the laminar slip; 1 where all compression of the swept volume is lost", Max: 10, Text: "swept oil that is compressed and whose energy is not given back, by swept volume"},
		{Key: "dead_volume", Title: "Dead volume", Symbol: "kV", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "counted in the laminar slip", Max: 10, Text: "oil compressed every turn whatever the setting, over the displacement at full setting"},
		{Key: "friction", Title: "Pressure friction", Symbol: "Cf", Dim: units.Ratio, Default: "0.03", Origin: Assumed, Source: goodPiston, Max: 0.9, Text: "share of the ideal torque at full displacement"},
		{Key: "viscous", Title: "Viscous friction", Symbol: "Cv", Dim: units.Ratio, Default: "6.5e4", Origin: Assumed, Source: goodPiston, Max: 1e8, Text: "torque by displacement, viscosity and speed"},
		{Key: "hydrodynamic", Title: "Hydrodynamic torque", Symbol: "Ch", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "counted in the viscous friction", Max: 1e5, Text: "torque by setting, density and the square of speed"},
		{Key: "drag", Title: "Constant friction", Symbol: "Tc", Dim: units.Torque, Default: "1.5 N m", Origin: Assumed, Source: "seals and bearings, common practice", Max: 1e4, Text: "torque that does not depend on pressure or speed"},
	}...)
}

// wearParams change the slip of a machine, and say where it goes.
func wearParams(share string) []Param {
	return LossBasis.of([]Param{
		{Key: "wear", Title: "Wear", Symbol: "W", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "as new", Above: true, Max: 100, Text: "multiplies laminar and turbulent slip"},
		{Key: "drain_flow", Title: "Measured case-drain flow", Symbol: "qD", Dim: units.Flow, Above: true, Max: 0.1, Text: "sets laminar and turbulent slip, in place of wear; needs the pressure it was measured at"},
		{Key: "drain_pressure", Title: "Pressure of that measurement", Symbol: "pD", Dim: units.Pressure, Above: true, Max: 2000e5, Text: "pressure difference of the machine while its drain was measured"},
		{Key: "drain_temperature", Title: "Temperature of that measurement", Dim: units.Temperature, Min: 233.15, Max: 423.15, Text: "of the oil; when not given its working temperature"},
		{Key: "case_share", Title: "Slip to the case", Symbol: "kc", Dim: units.Ratio, Default: share, Origin: Assumed, Source: "share of the slip that leaves by the case drain, common practice", Max: 1, Text: "the rest slips from port to port; an open drain goes to tank"},
	}...)
}

// limitParams are what a machine stands.
func limitParams() []Param {
	return Limits.of([]Param{
		ratedPressure,
		{Key: "max_speed", Title: "Highest speed", Symbol: "n2", Dim: units.AngularSpeed, Above: true, Max: 2000, Text: "highest permitted speed"},
		{Key: "min_speed", Title: "Lowest speed", Symbol: "n1", Dim: units.AngularSpeed, Max: 2000, Text: "lowest permitted speed while it carries pressure"},
		{Key: "min_viscosity", Title: "Lowest viscosity", Symbol: "ν1", Dim: units.KinematicViscosity, Default: "10 mm2/s", Origin: Assumed, Source: "common practice, no source; its maker's figure comes first", Max: 1, Text: "thinnest oil it may run with"},
		{Key: "optimum_viscosity_from", Title: "Optimum viscosity from", Symbol: "ν2", Dim: units.KinematicViscosity, Max: 1, Text: "lower end of the range that its maker recommends, often 16 mm2/s"},
		{Key: "optimum_viscosity_to", Title: "Optimum viscosity to", Symbol: "ν3", Dim: units.KinematicViscosity, Max: 1, Text: "upper end of that range, often 36 mm2/s"},
		{Key: "start_viscosity", Title: "Highest viscosity at start", Symbol: "ν4", Dim: units.KinematicViscosity, Default: "1000 mm2/s", Origin: Assumed, Source: "common practice, no source; its maker's figure comes first", Above: true, Max: 1, Text: "thickest oil it may start with, at the start temperature of the oil"},
	}...)
}

var machineLosses = []LossKind{
	{"slip", ToOil, "P = Σ k·Δp² over the leakage paths, k = Cs·D/μ"},
	{"turbulent slip", ToOil, "P = Σ k·Cst·D^(2/3)·√(2|Δp|/ρ)·|Δp| over the leakage paths"},
	{"compression", ToOil, "P = (kB·|e| + kV)·D·|ω|·ε·Δp, ε = Δp·((1 − α)/B + α/(|Δp| + p0))"},
	{"friction", ToOil, "P = (Cf·D·|Δp| + Cv·D·μ·|ω| + Tc)·|ω|"},
	{"hydrodynamic torque", ToOil, "P = Ch·|e|·ρ·D^(5/3)/2·|ω|³"},
}

var machineEquations = []Equation{
	{"q = e·D·ω − Cs·D·Δp/μ − Cst·D^(2/3)·√(2|Δp|/ρ)·sign Δp − (kB·|e| + kV)·D·|ω|·ε, D = V/2π, ε = Δp·((1 − α)/B + α/(|Δp| + p0))", "Wilson, Rotary-pump theory, Trans. ASME 68 (1946); Schloesser, second term; Pourmovahed, Beachley and Fronczak, ASME J. Dyn. Sys. Meas. Contr. 114 (1992), third, with kB = 1; kV our addition; ε after Rabie, Fluid Power Engineering (2009), eq. 2.57; slip split between port to port and port to case, compression port to port"},
	{"T = e·D·Δp + (Cf·D·|Δp| + Cv·D·μ·|ω| + Ch·|e|·ρ·ω²·D^(5/3)/2 + Tc)·sign ω", "Wilson 1946, with full D in the friction terms; Schloesser, the term in ω²"},
	{"best point: Cs = (1 − ηv)·μ·ω/Δp, friction torque = D·Δp·(1/ηhm − 1); of a motor (1/ηv − 1) and (1 − ηhm)", "from the definitions of ISO 4409; the friction is shared 0.45 by pressure, 0.37 viscous, 0.18 constant, common practice"},
	{"worn: Cs and Cst times W, or times qD over kc·slip at pD and the viscosity of that temperature", "the slip keeps its law, our choice"},
}
