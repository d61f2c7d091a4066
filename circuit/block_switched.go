package circuit

import "barlitre/machines/units"

const (
	switchedGeneral = "chosen so that about 90 % are left at a fifth of the flow, as published machines of the principle have it; from memory, no table"
	switchedRange   = "no measurement of an open source is known to us; ask its maker"
)

// switchedKind is one service of a cylinder-switched machine, in four quadrants.
var switchedKind = &Kind{
	Name: kindSwitched, Title: "Cylinder-switched machine", Group: "pumps and motors",
	Passes: PumpShaft, Letter: "S", Typical: []Setting{{"displacement", "45 cm3/rev"}},
	Text: "One service of a radial piston machine whose cylinders a controller switches stroke by stroke: a fraction of them works, the rest idles at low pressure. It pumps or motors at will (fraction 1 to −1), and has an outlet of its own. Several services on one shaft, each with its own cylinders and its own circuit, pass power to one another through the shaft. The fraction is a mean over strokes. `control` says what sets it: commanded (a track of the duty, or `setting`), pressure, load_sensing; with `follows` it is what makes the axis move as the duty says.",
	Ports: []Port{
		{Name: "shaft", Type: Shaft, Text: "drive shaft, with the other services"},
		{Name: "S", Type: Oil, Text: "low-pressure side"},
		{Name: "P", Type: Oil, Text: "outlet of the service"},
		{Name: "D", Type: Oil, Optional: true, Text: "case drain; unconnected it goes to tank"},
		{Name: "LS", Type: Pilot, Optional: true, Text: "load pressure signal"},
	},
	Params: append(switchedParams(), limitParams()...),
	Losses: []LossKind{
		{"slip", ToOil, "P = Σ k·|x|·Δp² over the leakage paths, k = Cs·D/μ"},
		{"friction", ToOil, "P = (Cf·|x|·D·|Δp| + Cv·D·μ·|ω| + Tc)·|ω|"},
		{"idle cylinders", ToOil, "P = (1 − |x|)·D·Δpi·|ω|"},
		{"dead volume", ToOil, "P = (1 − ρr)·|x|·kV·D·Δp·ε/2·|ω|, ε = Δp·((1 − α)/B + α/(|Δp| + p0))"},
		{"valve switching", ToOil, "P = Ev·N·(na·|x| + ni·(1 − |x|))·|ω|/2π, from the shaft"},
	},
	Equations: []Equation{
		{"q = x·D·ω − Cs·|x|·D·Δp/μ, D = V/2π", "Wilson's slip (Trans. ASME 68, 1946) of the working cylinders alone; x is a mean over strokes, our simplification"},
		{"T = x·D·Δp + (Cf·|x|·D·|Δp| + (1 − |x|)·D·Δpi + (1 − ρr)·|x|·kV·D·Δp·ε/2 + Ev·N·(na·|x| + ni·(1 − |x|))/2π + Tc)·sign ω + Cv·D·μ·ω", "general principle of the literature; what an idle cylinder and a valve event cost is assumed"},
		{"valve events a second, one valve: (na·|x| + ni·(1 − |x|))·|ω|/4π", "an event is one valve opening and closing once; the controller is taken to wear all alike"},
		{"flow step D·|ω|/N, strokes a second |x|·N·|ω|/2π, peak of a stroke π·D·|ω|/N", "half sine of one cylinder"},
		{"ripple in a volume VP: Δp = B·Vc·(cos φ − (π/2 − φ)·sin φ)/VP, sin φ = |x|·N/π", "evenly spaced strokes against a steady flow, without overlap; beyond |x|·N = 2 an upper bound"},
	},
	Rating: "rating",
	Symbol: func(*Block) string { return "radial_switched" },
	derive: func(k *Kind, b *Block, key string) (Value, bool) {
		n, _, _ := valueWithout(k, b, "cylinders")
		if key != "low_flow" || n.SI < 1 {
			return Value{}, false
		}
		return derived(k.Param(key), 1/n.SI, Assumed, "one working stroke a turn, 1/N; below it single strokes are felt"), true
	},
	check: checkSwitched,
	build: buildSwitched,
}

// valueWithout is Value without what is derived.
func valueWithout(k *Kind, b *Block, key string) (Value, bool, bool) {
	if v, ok := b.Values[key]; ok {
		return v, false, true
	}
	p := k.Param(key)
	return p.defaultValue, true, p.Default != ""
}

// switchedParams are the parameters of a service.
func switchedParams() []Param {
	return append(switchedLossParams(), []Param{
		{Key: "endurance", Title: "Endurance of a valve", Symbol: "Ne", Dim: units.Count, Default: "1e9", Origin: Assumed, Source: "a figure often stated for such valves, from memory; its maker's figure comes first", Above: true, Max: 1e15, Text: "valve events that one valve stands"},
		{Key: "low_flow", Title: "Low-flow limit", Symbol: "xl", Dim: units.Ratio, Above: true, Max: 1, Text: "fraction below which it should not work for long. Default: one working stroke a turn"},
		{Key: "outlet_volume", Title: "Oil volume at the outlet", Symbol: "VP", Dim: units.Volume, Above: true, Max: 100, Text: "lines and actuator on the service; when given, the pressure ripple is worked out"},
		{Key: "control", Title: "Control", Type: Choice, Default: "commanded", Choices: []string{"commanded", "pressure", "load_sensing"}, Called: map[string]string{"pressure": "constant pressure"}, Text: "what sets the fraction"},
		{Key: "follows", Title: "Follows axis", Type: AxisRef, Text: "its fraction is found from the motion of this axis"},
		{Key: "both_directions", Title: "Pump and motor", Type: Choice, Default: "yes", Choices: []string{"yes", "no"}, Text: "the fraction may go below zero: it takes oil from its outlet and drives the shaft"},
		{Key: "setting", Title: "Fraction", Symbol: "x", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "every cylinder works", Min: -1, Max: 1, Text: "of a commanded service without a track"},
		{Key: "set_pressure", Title: "Set pressure", Symbol: "ps", Dim: units.Pressure, Above: true, Max: 1000e5, Text: "held at P with control constant pressure"},
		{Key: "unloaded_pressure", Title: "Unloaded pressure", Symbol: "pu", Dim: units.Pressure, Max: 1000e5, Text: "set pressure while unloaded at rest"},
		{Key: "margin", Title: "Margin", Symbol: "Δpm", Dim: units.Pressure, Default: "20 bar", Origin: Assumed, Source: "load-sensing margin, common practice 14 to 25 bar", Above: true, Max: 200e5, Text: "with control load sensing, above the load pressure"},
		{Key: "min_setting", Title: "Lowest fraction", Symbol: "x1", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "it only delivers", Min: -1, Max: 1, Text: "with control constant pressure or load sensing; −1 lets it take oil back as a motor while the pressure is above what it holds"},
		{Key: "points", Title: "Measured points of another machine", Type: FileRef, Text: "CSV file beside the audit file with points of a swashplate machine to compare with: speed, pressure difference, flow, torque and, if it varies, displacement. Without it that is an axial piston machine of the best point of its family"},
		{Key: "points_displacement", Title: "Displacement of that machine", Dim: units.DisplacementPerRev, Above: true, Max: 0.02, Text: "geometric, at full setting; default: as this one"},
		{Key: "points_viscosity", Title: "Viscosity of the points", Dim: units.DynamicViscosity, Default: "26 mPa s", Origin: Assumed, Source: "ISO VG 46 at 50 C", Above: true, Max: 10, Text: "of the oil while they were measured, where the file has no such column"},
	}...)
}

// switchedLossParams are those of the law.
func switchedLossParams() []Param {
	return []Param{
		{Key: "displacement", Title: "Displacement", Symbol: "V", Dim: units.DisplacementPerRev, Need: true, Above: true, Max: 0.02, Text: "of all cylinders of this service, a turn"},
		{Key: "cylinders", Title: "Cylinders", Symbol: "N", Dim: units.Count, Default: "12", Origin: Assumed, Source: "state those of this service", Min: 1, Max: 1000, Text: "of this service; each makes one stroke a turn"},
		{Key: "slip", Title: "Slip coefficient", Symbol: "Cs", Dim: units.Ratio, Default: "5e-9", Origin: Assumed, Source: switchedGeneral, Max: 1e-4, Text: "laminar leakage of the working cylinders, of displacement, pressure and 1/viscosity"},
		{Key: "friction", Title: "Pressure friction", Symbol: "Cf", Dim: units.Ratio, Default: "0.02", Origin: Assumed, Source: switchedGeneral, Max: 0.9, Text: "of the working cylinders, share of their ideal torque"},
		{Key: "viscous", Title: "Viscous friction", Symbol: "Cv", Dim: units.Ratio, Default: "1.5e4", Origin: Assumed, Source: switchedGeneral, Max: 1e8, Text: "torque by displacement, viscosity and speed, whatever the fraction"},
		{Key: "drag", Title: "Constant friction", Symbol: "Tc", Dim: units.Torque, Default: "0.5 N m", Origin: Assumed, Source: "bearings and seals, common practice", Max: 1e4, Text: "torque that does not depend on pressure, speed or fraction; this service's share of it"},
		{Key: "idle_loss", Title: "Idle loss", Symbol: "Δpi", Dim: units.Pressure, Default: "1 bar", Low: "0.4 bar", High: "3 bar", Origin: Assumed, Source: switchedRange, Max: 100e5, Text: "work of an idle cylinder a turn, over its swept volume: what drawing oil in and pushing it back through the open low-pressure valve costs"},
		{Key: "cylinder_dead_volume", Title: "Dead volume", Symbol: "kV", Dim: units.Ratio, Default: "1", Low: "0.5", High: "2", Origin: Assumed, Source: switchedRange, Max: 100, Text: "of a cylinder at the end of its stroke, over its swept volume"},
		{Key: "returned", Title: "Compression returned", Symbol: "ρr", Dim: units.Ratio, Default: "0.9", Low: "0.7", High: "1", Origin: Assumed, Source: switchedRange, Max: 1, Text: "share of the work of compressing the dead volume that comes back as it expands"},
		{Key: "event_energy", Title: "Energy of a valve event", Symbol: "Ev", Dim: units.Energy, Default: "0.3 J", Low: "0.1 J", High: "1 J", Origin: Assumed, Source: switchedRange + ". Grows with the valve", Max: 1e4, Text: "of its coil and controller; counted as if the shaft drove what feeds them"},
		{Key: "events_active", Title: "Events of a working cylinder", Symbol: "na", Dim: units.Count, Default: "2", Origin: Assumed, Source: "each of its two valves opens and closes once a turn", Max: 100, Text: "valve events a turn; an event is one valve opening and closing once"},
		{Key: "events_idle", Title: "Events of an idle cylinder", Symbol: "ni", Dim: units.Count, Default: "0", Origin: Assumed, Source: "its low-pressure valve stays open, the other shut", Max: 100, Text: "valve events a turn"},
		{Key: "case_share", Title: "Slip to the case", Symbol: "kc", Dim: units.Ratio, Default: "1", Origin: Assumed, Source: "past the piston into the case, common practice", Max: 1, Text: "the rest slips from port to port; an open drain goes to tank"},
	}
}

func checkSwitched(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
	if follows(b) != "" && b.Word("control") != "" {
		bad(Stops, "control", "it follows an axis and has a control of its own; keep one of the two (follows, control)")
	}
	if k.WordOf(b, "control") == "pressure" && !hasValue(b, "set_pressure") {
		bad(Stops, "set_pressure", "a service that holds a pressure needs its set pressure (set_pressure)")
	}
	if law, ok := SwitchedLaw(b); !ok && hasValue(b, "displacement") {
		if err := law.Check(); err != nil {
			bad(Stops, "cylinders", "%v", err)
		}
	}
	if b.Word("points") == "" && (hasValue(b, "points_displacement") || hasValue(b, "points_viscosity")) {
		bad(Stops, "points", "displacement and viscosity of the points (points_displacement, points_viscosity) belong to measured points; name their file, or drop them")
	}
	if b.Fit != nil {
		for _, w := range b.Fit.Warnings {
			bad(Warns, "points", "%s", w)
		}
	}
}

// buildSwitched makes a pump, whose controls it shares, lose as a cylinder-switched machine.
func buildSwitched(k *compiler, b *Block) model {
	m := buildPump(k, b).(*pumpModel)
	k.switched(&m.machine, b)
	return m
}
