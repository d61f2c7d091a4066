package duty

import (
	"strings"

	cycle "barlitre/circuit/duty"
)

// preset is a usual duty to start from. Its numbers are invented; they only have the
// proportions that such machines tend to have (common practice, no source).
type preset struct {
	name   string
	kind   cycle.AxisKind
	phases []string // name, how long, then what the axis does
}

var presets = []preset{
	{"press", cycle.Linear, []string{"approach, lasts 2 s, stroke 400 mm, load 5 kN", "press, lasts 3 s, stroke 60 mm, load 40 kN, load_end 200 kN",
		"hold, lasts 4 s, load 200 kN", "return, lasts 2.5 s, stroke -460 mm, load 2 kN", "unload and load, lasts 8 s, load 0 kN"}},
	{"clamp", cycle.Linear, []string{"close, lasts 1 s, stroke 50 mm, load 2 kN", "hold, lasts 28 s, load 25 kN", "open, lasts 1 s, stroke -50 mm, load 1 kN", "change, lasts 4 s, load 0 kN"}},
	{"lift", cycle.Linear, []string{"up, lasts 8 s, stroke 1.2 m, load 30 kN", "hold, lasts 20 s, load 30 kN", "down, lasts 10 s, stroke -1.2 m, load 30 kN", "wait, lasts 30 s, load 5 kN"}},
	{"baler", cycle.Linear, []string{"feed, lasts 15 s, load 0 kN", "approach, lasts 2 s, stroke 300 mm, load 10 kN", "pack, lasts 5 s, stroke 400 mm, load 30 kN, load_end 200 kN",
		"dwell, lasts 2 s, load 200 kN", "return, lasts 3 s, stroke -700 mm, load 4 kN"}},
	{"moulding cycle", cycle.Linear, []string{"close, lasts 1.5 s, stroke 350 mm, load 4 kN", "fill, lasts 2 s, stroke 60 mm, load 60 kN", "pack, lasts 4 s, load 80 kN",
		"cool, lasts 12 s, load 10 kN", "open, lasts 1.5 s, stroke -410 mm, load 4 kN", "eject, lasts 2 s, load 0 kN"}},
	{"saw feed", cycle.Linear, []string{"advance, lasts 2 s, stroke 400 mm, load 3 kN", "cut, lasts 6 s, stroke 250 mm, load 8 kN", "back, lasts 3 s, stroke -650 mm, load 2 kN", "wait, lasts 1 s, load 0 kN"}},
	{"winch", cycle.Rotary, []string{"hoist, lasts 10 s, ramp 1 s, stroke 60 rev, load 180 N m", "hold, lasts 4 s, load 180 N m", "lower, lasts 10 s, ramp 1 s, stroke -60 rev, load 180 N m", "wait, lasts 4 s, load 180 N m"}},
	{"travel drive", cycle.Rotary, []string{"set off, lasts 4 s, ramp 1.5 s, speed 20 rad/s, load 400 N m", "travel, lasts 30 s, speed 20 rad/s, load 150 N m", "brake, lasts 4 s, ramp 1.5 s, speed 2 rad/s, load -200 N m", "stand, lasts 12 s, load 0 N m"}},
	{"mixer", cycle.Rotary, []string{"fill, lasts 20 s, load 0 N m", "mix thick, lasts 60 s, ramp 2 s, speed 6 rad/s, load 900 N m, load_end 500 N m", "mix thin, lasts 60 s, ramp 2 s, speed 10 rad/s, load 400 N m", "empty, lasts 30 s, load 0 N m"}},
}

// phasesFor writes the phases of a preset for an axis, as keys and values.
func (p preset) phasesFor(axis string) [][]string {
	var out [][]string
	for _, line := range p.phases {
		var pairs []string
		for i, part := range strings.Split(line, ", ") {
			key, value, _ := strings.Cut(part, " ")
			switch {
			case i == 0:
				key, value = "name", part
			case key != "lasts" && key != "ramp":
				key = axis + "." + key
			}
			pairs = append(pairs, key, value)
		}
		out = append(out, pairs)
	}
	return out
}
