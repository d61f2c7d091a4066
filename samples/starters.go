package samples

import (
	"embed"
	"fmt"
	"path"
	"slices"
	"strings"
)

//go:embed starters/*.yaml
var starterFiles embed.FS

// Starter is a small audit file of one kind of circuit, to draw a machine from.
type Starter struct {
	Name  string // for ReadStarter
	Title string // of the kind of circuit
	Text  string // what it is for, and what gives its losses away
}

var starters = []Starter{
	{"throttled-constant-flow.yaml", "Throttled constant flow",
		"Fixed pump, relief valve, proportional valve, cylinder. Cheap, and right for a steady speed. Its power hardly changes whether it works or waits; the outlet of the relief valve is the hottest pipe."},
	{"pressure-compensated-pump.yaml", "Pressure-compensated pump",
		"The pump holds one pressure and gives what flows. Loads far below that pressure are paid for in the valve, waiting in leakage: look for a hot case drain, and for a relief valve set as low as the pump."},
	{"load-sensing-one.yaml", "Load sensing, one actuator",
		"The pump stays a margin above the load. That margin times the flow is the price; it grows where somebody turned it up to calm an unsteady machine."},
	{"load-sensing-two.yaml", "Load sensing, two actuators",
		"One pump follows the higher load; the compensator of the other section burns the difference. A motor at low pressure beside a cylinder at high pressure warms its compensator."},
	{"open-centre.yaml", "Open centre",
		"The pump circulates through a stack of sections until one closes the way. Many sections, a narrow return line or a clogged filter show as pressure at the pump with nothing moving."},
	{"high-low-pumps.yaml", "High-low pump pair",
		"A large pump for the fast way, a small one for the force. An unloading valve set too high, or a check valve that leaks back, keeps the large pump working during the press."},
	{"accumulator-unloading.yaml", "Accumulator with unloading valve",
		"A small pump fills an accumulator and then runs free. Short strokes with long pauses suit it. Loading again and again at rest means a leak or a lost pre-charge."},
	{"closed-circuit-winch.yaml", "Closed circuit winch",
		"A pump over centre drives the winch and takes the load back; nothing throttles. Two machines lose twice and the charge pump becomes heat; a hot charge relief valve is normal, a hotter one is not."},
	{"regenerative-extension.yaml", "Regenerative extension",
		"The rod side feeds the bore side: a cylinder of area ratio 2 goes out as fast as back with half the pump. It costs twice the pressure for a force; look for machines that never leave it under load."},
	{"counterbalance-lift.yaml", "Counterbalance, lifting cylinder",
		"A valve at the cylinder holds the load and lets it down against pump pressure: lowering costs power, and the energy of the load becomes heat. A hot counterbalance valve, and high inlet pressure on the way down, tell it."},
	{"meter-out-flow-control.yaml", "Meter-out flow control",
		"A valve in the outlet keeps the feed steady, also where the load pulls. The pump works at its relief valve for every slow feed, and the rod side stands above it by the ratio of the areas."},
	{"flow-divider.yaml", "Flow divider",
		"One pump, two circuits with a fixed share each. What one side does not need it throws away itself, while the other may be too slow; the pump sees the mean of both pressures."},
	{"sequence-clamp-press.yaml", "Sequence valve, clamp then press",
		"The press waits until the clamp has its pressure. While the press moves with little load the pump still stands at the sequence setting, and the valve burns the rest."},
	{"reducing-clamp.yaml", "Reducing valve for a clamp",
		"A clamp that may see only half the pressure hangs on the pump of the press. A branch that is warm behind the reducing valve while nothing moves leaks, all day, at full pump pressure."},
	{"float-driven-rig.yaml", "Float-driven rig",
		"A float moves a cylinder as the swell does; check valves make one direction of it for a motor and its generator. Motion and torque are given, the force on the float is found. Suction valves that open late, and a converter that draws in the calm, eat what it earns."},
}

// Starters lists the starters, from the plainest supply to special functions; a
// fresh slice.
func Starters() []Starter { return slices.Clone(starters) }

// ReadStarter returns the audit file of a starter; the caller may change the bytes.
// An unknown name is an error that lists the known ones.
func ReadStarter(name string) ([]byte, error) {
	data, err := starterFiles.ReadFile(path.Join("starters", name))
	if err != nil {
		var known []string
		for _, s := range starters {
			known = append(known, s.Name)
		}
		return nil, fmt.Errorf("there is no starter %q; the starters are %s", name, strings.Join(known, ", "))
	}
	return data, nil
}
