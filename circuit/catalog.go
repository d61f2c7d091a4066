package circuit

import (
	"fmt"
	"math"
	"slices"

	"barlitre/machines/units"
)

// PortType says what passes a port.
type PortType string

// The types of port. Ports of one line must be of one type; a pilot port may
// also sit on an oil line, whose pressure it reads.
const (
	Oil      PortType = "oil"
	Pilot    PortType = "pilot" // pressure, no flow
	Shaft    PortType = "shaft"
	Electric PortType = "electric" // power only
)

// Port is a connection of a kind of block.
type Port struct {
	Name     string
	Type     PortType
	Optional bool   // may stay unconnected
	Source   bool   // of a pilot port: it gives a pressure instead of reading one
	Text     string // what it is
}

// ParamType says what a parameter takes.
type ParamType int

// The types of parameter.
const (
	Number  ParamType = iota // a quantity with a unit
	Choice                   // one of Choices
	AxisRef                  // the name of an axis
	FileRef                  // the name of a file beside the audit file
)

// Param is a parameter of a kind of block.
type Param struct {
	Key     string // as in files
	Title   string // as on screen and paper
	Symbol  string // in equations
	Type    ParamType
	Dim     units.Dim
	Default string // as written in a file; "" = none
	Low     string // of the default's range, as Default; "" = none
	High    string
	Origin  Origin // of the default
	Source  string // why this default
	Min     float64
	Max     float64 // SI; the range includes its ends
	Above   bool    // the range excludes Min
	Need    bool    // must be given
	Choices []string
	Called  map[string]string // what choices are called on screen and paper, where that is not their word with spaces
	Text    string
	Derived string // what its default follows from in each block, "" where it is the same for all
	Section Section

	defaultValue Value
}

// ratedPressure limits the pressure of a block that states it as its Rating.
var ratedPressure = Param{Key: "rating", Title: "Rated pressure", Symbol: "pr", Dim: units.Pressure, Above: true, Max: 2000e5, Text: "highest permitted working pressure"}

// Takes says what is to be written for a parameter that is no number.
func (p *Param) Takes() string {
	switch p.Type {
	case AxisRef:
		return "the name of an axis"
	case FileRef:
		return "the name of a file"
	}
	return "one of " + join(p.choicesInText(), "or")
}

// Section is a group of the parameters of a kind that has many; "" where it has few.
type Section string

// The sections, in the order of a screen.
const (
	Plate        Section = "Name plate"
	Governing    Section = "What it follows"
	LossBasis    Section = "What its losses follow from"
	Coefficients Section = "Loss coefficients"
	Limits       Section = "Limits"
)

// Sections lists them in order.
var Sections = []Section{Plate, Governing, LossBasis, Coefficients, Limits}

// of puts parameters into a section.
func (s Section) of(params ...Param) []Param {
	for i := range params {
		params[i].Section = s
	}
	return params
}

// sectioned puts parameters into sections by key; those that none names are on the name plate.
func sectioned(params []Param, keys map[Section][]string) []Param {
	for i := range params {
		params[i].Section = Plate
		for s, list := range keys {
			if slices.Contains(list, params[i].Key) {
				params[i].Section = s
			}
		}
	}
	return params
}

// Sink says where the energy of a loss goes.
type Sink string

// The sinks.
const (
	ToOil      Sink = "oil"
	ToAir      Sink = "air"
	ToResistor Sink = "resistor"
	ToLoad     Sink = "load" // a brake or the machine itself
)

// LossKind is one way in which a kind of block loses energy.
type LossKind struct {
	Name string
	Sink Sink
	Text string // the law, in words and symbols
}

// Equation is one law of a block, with where it comes from.
type Equation struct{ Text, Source string }

// Setting is a value as a file writes it.
type Setting struct{ Key, Text string }

// Passage says what a kind of machine or drive turns power from and into.
type Passage int

// The passages. The signal "shaft" of a prime mover is the power that it gives to its shaft, that of a pump or
// hydraulic motor what it takes from its own; the signal "electric" of a converter is what it takes from the mains.
const (
	NoPassage      Passage = iota
	PrimeMover             // to a shaft
	PumpShaft              // from a shaft to oil, and back
	HydraulicMotor         // from oil to an axis
	Inverter               // from the mains to motors
)

// Kind is an entry of the catalog: everything the program knows of one kind of block.
type Kind struct {
	Name      string // as in files
	Title     string
	Group     string // of the block shelf
	Text      string
	Ports     []Port
	Params    []Param
	Losses    []LossKind
	Equations []Equation
	Rating    string // key of the parameter that limits its pressure, if any
	// Passes says which side of a machine or drive its power is counted at.
	Passes Passage
	// Letter begins the ids of such blocks, as in P1.
	Letter string
	// Typical is what a new block begins with where its kind has no default, to be replaced: common practice, no source.
	Typical []Setting
	// Symbol returns the name of its drawing symbol; see also SymbolOf.
	Symbol func(b *Block) string
	// derive gives what a block has for a number that is not given, where that follows from others.
	derive func(k *Kind, b *Block, key string) (Value, bool)
	// check adds what only this kind can say of a block.
	check func(k *Kind, b *Block, bad func(level Level, param, format string, args ...any))
	// build makes the model of a block; nil for blocks that only join or fix nodes.
	build func(c *compiler, b *Block) model
}

// Param returns a parameter by key, or nil.
func (k *Kind) Param(key string) *Param {
	for i := range k.Params {
		if k.Params[i].Key == key {
			return &k.Params[i]
		}
	}
	return nil
}

// Port returns a port by name, or nil.
func (k *Kind) Port(name string) *Port {
	for i := range k.Ports {
		if k.Ports[i].Name == name {
			return &k.Ports[i]
		}
	}
	return nil
}

// The names of the kinds, as files write them.
const (
	kindTank           = "tank"
	kindPressureSource = "pressure_source"
	kindElectricMotor  = "electric_motor"
	kindEngine         = "engine"
	kindConverter      = "converter"
	kindPump           = "pump"
	kindChargePump     = "charge_pump"
	kindHydraulicMotor = "motor"
	kindSwitched       = "switched_machine"
	kindCylinder       = "cylinder"
	kindDoubleRod      = "double_rod"
	kindPlunger        = "plunger"
	kindValve          = "valve"
	kindRelief         = "relief"
	kindCheck          = "check"
	kindPilotCheck     = "pilot_check"
	kindCounterbalance = "counterbalance"
	kindCompensator    = "compensator"
	kindOrifice        = "orifice"
	kindShuttle        = "shuttle"
	kindLine           = "line"
	kindFilter         = "filter"
	kindJunction       = "junction"
	kindFlowDivider    = "flow_divider"
	kindGearbox        = "gearbox"
	kindFlushing       = "flushing"
	kindCooler         = "cooler"
	kindPressurePoint  = "pressure_point"
	kindFlowPoint      = "flow_point"
	kindReducing       = "reducing"
	kindSequence       = "sequence"
	kindFlowControl    = "flow_control"
	kindFlowControl3   = "flow_control_3"
	kindThrottleCheck  = "throttle_check"
	kindShuttleFlow    = "shuttle_flow"
	kindFlowSharing    = "flow_sharing"
	kindSection63      = "section_6_3"
	kindAccumulator    = "accumulator"
	kindUnloading      = "unloading"
	kindUnloadingPilot = "unloading_pilot"
	kindFlywheel       = "flywheel"
)

// catalog lists the kinds, one line each, in the order of the block shelf. It is
// filled at start, since the kinds refer to one another.
var catalog []*Kind

// Catalog returns all kinds of block.
func Catalog() []*Kind { return catalog }

// SymbolOf returns the drawing symbol of a block in its circuit: a fixed pump on a
// motor that turns both ways delivers both ways.
func SymbolOf(c *Circuit, b *Block) string {
	k := KindNamed(b.Kind)
	if k == nil {
		return ""
	}
	name := k.Symbol(b)
	if name != "pump_fixed_1" {
		return name
	}
	_, of := netsOf(c)
	for _, p := range trainPorts(c, of, b) {
		if o := c.Block(p.Block); o.Kind == kindElectricMotor && o.Word("both_directions") == "yes" {
			return "pump_fixed_2"
		}
	}
	return name
}

// KindNamed returns a kind by its name in files, or nil.
func KindNamed(name string) *Kind {
	for _, k := range catalog {
		if k.Name == name {
			return k
		}
	}
	return nil
}

// Passes is that of the kind of a block, none where there is no such kind.
func (b *Block) Passes() Passage {
	if k := KindNamed(b.Kind); k != nil {
		return k.Passes
	}
	return NoPassage
}

// Every kind's defaults are written as a user would write them, and read once here.
func init() {
	catalog = []*Kind{
		tankKind,
		pressureSourceKind,
		accumulatorKind,
		flywheelKind,
		electricMotorKind,
		engineKind,
		gearboxKind,
		converterKind,
		pumpKind,
		chargePumpKind,
		hydraulicMotorKind,
		switchedKind,
		cylinderKind,
		doubleRodKind,
		plungerKind,
		valveKind,
		flowDividerKind,
		flushingKind,
		section63Kind,
		reliefKind,
		reducingKind,
		sequenceKind,
		unloadingKind,
		unloadingPilotKind,
		checkKind,
		pilotCheckKind,
		counterbalanceKind,
		compensatorKind,
		flowSharingKind,
		orificeKind,
		throttleCheckKind,
		flowControlKind,
		flowControl3Kind,
		shuttleKind,
		shuttleFlowKind,
		lineKind,
		filterKind,
		junctionKind,
		coolerKind,
		pressurePointKind,
		flowPointKind,
	}
	for _, k := range catalog {
		for i := range k.Params {
			p := &k.Params[i]
			if p.Max == 0 && p.Min == 0 {
				p.Max = math.Inf(1)
			}
			if p.Type != Number || p.Default == "" {
				continue
			}
			si, u, err := units.Parse(p.Default, p.Dim)
			if err != nil {
				panic(fmt.Sprintf("circuit: default of %s.%s: %v", k.Name, p.Key, err))
			}
			p.defaultValue = Value{SI: si, Text: p.Default, Unit: u, Origin: p.Origin, Low: p.end(p.Low), High: p.end(p.High), Note: p.Source}
		}
	}
}

// end reads one end of the range of a default, NaN without one.
func (p *Param) end(text string) float64 {
	if text == "" {
		return math.NaN()
	}
	si, _, err := units.Parse(text, p.Dim)
	if err != nil {
		panic(fmt.Sprintf("circuit: range of the default of %s: %v", p.Key, err))
	}
	return si
}

// CheckValue reports in words what is wrong with a number for this parameter, or "".
func (p *Param) CheckValue(v Value) string {
	u := v.Unit
	if u.Symbol == "" && u.Factor == 0 {
		u = units.Preferred(p.Dim, units.Metric)
	}
	show := func(x float64) string { return units.Format(x, u, 4) }
	switch {
	case math.IsNaN(v.SI) || math.IsInf(v.SI, 0):
		return "is not a number"
	case v.SI < p.Min || (p.Above && v.SI == p.Min):
		if p.Above {
			return fmt.Sprintf("is %s, must be above %s", show(v.SI), show(p.Min))
		}
		return fmt.Sprintf("is %s, must be at least %s", show(v.SI), show(p.Min))
	case v.SI > p.Max:
		return fmt.Sprintf("is %s, must be at most %s", show(v.SI), show(p.Max))
	case v.Low > v.SI || v.High < v.SI:
		return fmt.Sprintf("is %s, outside its own low and high", show(v.SI))
	}
	return ""
}

// checkChoice reports what is wrong with a word for this parameter, or "".
func (p *Param) checkChoice(w string) string {
	if p.Type == Choice && !slices.Contains(p.Choices, w) {
		return fmt.Sprintf("is %q, must be one of %s", w, join(p.choicesInText(), "or"))
	}
	return ""
}

// Names writes names as people do: "a, b and c".
func Names(words []string) string { return join(words, "and") }

// join writes a list as people do: "a, b or c".
func join(words []string, last string) string {
	switch len(words) {
	case 0:
		return ""
	case 1:
		return words[0]
	}
	s := words[0]
	for _, w := range words[1 : len(words)-1] {
		s += ", " + w
	}
	return s + " " + last + " " + words[len(words)-1]
}
