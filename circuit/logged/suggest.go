package logged

import (
	"slices"
	"strings"
	"unicode"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Machine is what is known of the machine that was logged.
type Machine struct {
	Axes   []duty.Axis
	Points map[string]duty.What         // measuring points of its circuits, by id
	Sizes  map[string]map[string]string // by axis: what its cylinder or motor has, "bore": "90 mm"
}

// Suggestion is what the names and quantities of columns make likely.
type Suggestion struct {
	Tracks []Track
	Axes   []duty.Axis // that the machine does not have yet
}

// gives says which track a quantity of an axis makes.
var gives = map[units.Dim]struct {
	what duty.What
	kind duty.AxisKind
}{
	units.Force: {duty.Load, duty.Linear}, units.Velocity: {duty.Speed, duty.Linear}, units.Length: {duty.Position, duty.Linear},
	units.Torque: {duty.Load, duty.Rotary}, units.AngularSpeed: {duty.Speed, duty.Rotary}, units.Angle: {duty.Position, duty.Rotary},
}

// Suggest proposes tracks. It goes by names and quantities only, so it is to be looked at.
func Suggest(series []*logger.Series, m Machine) Suggestion {
	s := suggester{machine: m, axes: slices.Clone(m.Axes)}
	for _, c := range series {
		if what, ok := m.Points[c.Column]; ok && c.Dim == what.Dim(duty.Linear) && c.Quantity != "" {
			s.add(measured(c.Column+"."+what.String(), c.Column))
			continue
		}
		if g, ok := gives[c.Dim]; ok && c.Quantity != "" {
			if axis := s.axisOf(c.Column, g.kind); axis != "" {
				s.add(measured(axis+"."+g.what.String(), c.Column))
			}
		}
	}
	s.positions()
	s.pressures(series)
	return Suggestion{s.tracks, s.axes[len(m.Axes):]}
}

type suggester struct {
	machine Machine
	axes    []duty.Axis
	tracks  []Track
}

func (s *suggester) find(name string) int {
	return slices.IndexFunc(s.tracks, func(t Track) bool { return t.Name == name })
}

func (s *suggester) add(t Track) {
	if s.find(t.Name) < 0 {
		s.tracks = append(s.tracks, t)
	}
}

// positions makes speeds of positions, for a recorded position is rarely smooth, and
// leaves positions out where the speed was logged.
func (s *suggester) positions() {
	for i := 0; i < len(s.tracks); i++ {
		axis, ok := strings.CutSuffix(s.tracks[i].Name, ".position")
		switch {
		case !ok:
		case s.find(axis+".speed") >= 0:
			s.tracks = slices.Delete(s.tracks, i, i+1)
			i--
		default:
			s.tracks[i] = Track{Name: axis + ".speed", Law: OfPosition, Says: map[string]string{"position": s.tracks[i].Says["column"]}}
		}
	}
}

// pressures makes the load of an axis of two pressures that bear its name.
func (s *suggester) pressures(series []*logger.Series) {
	for _, a := range s.axes {
		if s.find(a.Name+".load") >= 0 || s.find(a.Name+".speed") < 0 {
			continue
		}
		var sides [2]string
		for _, c := range series {
			if c.Dim != units.Pressure || c.Quantity == "" || stem(c.Column) != a.Name && len(s.axes) > 1 {
				continue
			}
			if i := sideOf(c.Column); i >= 0 && sides[i] == "" {
				sides[i] = c.Column
			}
		}
		if sides[0] == "" {
			continue
		}
		t := Track{Name: a.Name + ".load", Law: Chambers, Says: map[string]string{"a": sides[0]}}
		if a.Kind == duty.Rotary {
			t.Law = OfMotor
		}
		if sides[1] != "" {
			t.Says["b"] = sides[1]
		}
		if v := s.tracks[s.find(a.Name+".speed")]; v.Law == AsMeasured {
			t.Says["speed"] = v.Says["column"]
		} else {
			t.Says["position"] = v.Says["position"]
		}
		law, _ := LawOf(t.Law, duty.Load, a.Kind)
		for _, n := range law.Numbers {
			if text := s.machine.Sizes[a.Name][n.Key]; text != "" {
				t.Says[n.Key] = text
			}
		}
		s.add(t)
	}
}

func measured(track, column string) Track {
	return Track{Name: track, Law: AsMeasured, Says: map[string]string{"column": column}}
}

// sideOf tells the side of an actuator by the name of a pressure: 0 for A, 1 for B, else -1.
func sideOf(column string) int {
	w := words(column)
	last := w[len(w)-1]
	switch {
	case last == "a" || strings.HasSuffix(last, "pa") || last == "cap" || last == "piston" || last == "bottom":
		return 0
	case last == "b" || strings.HasSuffix(last, "pb") || last == "rod" || last == "ring" || last == "annulus":
		return 1
	}
	return -1
}

// axisOf finds the axis of a column, and makes one where none fits.
func (s *suggester) axisOf(column string, kind duty.AxisKind) string {
	name := stem(column)
	fits := func(a duty.Axis) bool { return a.Kind == kind }
	for _, a := range s.axes {
		if fits(a) && strings.EqualFold(a.Name, name) {
			return a.Name
		}
	}
	var those []duty.Axis
	for _, a := range s.axes {
		if fits(a) {
			those = append(those, a)
		}
	}
	if name == "" && len(those) == 1 {
		return those[0].Name
	}
	if name == "" {
		name = "axis"
	}
	for _, a := range s.axes {
		if strings.EqualFold(a.Name, name) {
			return "" // an axis of the other kind
		}
	}
	s.axes = append(s.axes, duty.Axis{Name: name, Kind: kind})
	return name
}

// said are words of a column that name its quantity and not its axis.
var said = map[string]bool{"f": true, "v": true, "t": true, "w": true, "x": true, "s": true, "n": true, "m": true, "p": true, "q": true, "pa": true, "pb": true, "a": true, "b": true, "omega": true, "phi": true,
	"force": true, "load": true, "torque": true, "speed": true, "velocity": true, "position": true, "pos": true, "stroke": true, "travel": true, "way": true, "angle": true, "flow": true, "pressure": true,
	"cap": true, "rod": true, "ring": true, "piston": true, "bottom": true, "annulus": true, "side": true, "rpm": true,
	"kraft": true, "last": true, "moment": true, "geschwindigkeit": true, "drehzahl": true, "weg": true, "hub": true, "druck": true}

// stem is what is left of the name of a column without the words of its quantity.
func stem(column string) string {
	var keep []string
	for _, w := range words(column) {
		if !said[w] {
			keep = append(keep, w)
		}
	}
	if len(keep) == 1 && len([]rune(keep[0])) == 2 && said[keep[0][:1]] && unicode.IsDigit(rune(keep[0][1])) {
		return "axis" + keep[0][1:] // v1 and F1 are of one axis
	}
	return strings.Join(keep, "_")
}

// words parts a name at what is neither letter nor figure.
func words(name string) []string {
	w := strings.FieldsFunc(strings.ToLower(name), func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) })
	if len(w) == 0 {
		return []string{""}
	}
	return w
}
