package audit

import (
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Reading is what somebody read at the machine in one of its states.
type Reading struct {
	State string // stopped, idling, holding, working
	Point string // "M1.power", "P1.pressure", "P1.drain", "F1.drop", "oil.temperature"
	circuit.Value
}

// ReadingStates are the states of the machine in which it is read, in their order.
var ReadingStates = []string{"stopped", "idling", "holding", "working"}

// readingDims are the quantities by the last part of a point.
var readingDims = map[string]units.Dim{"power": units.Power, "pressure": units.Pressure, "drop": units.Pressure, "drain": units.Flow, "temperature": units.Temperature}

// ReadingDim returns the quantity of a point, from the last part of its name.
func ReadingDim(point string) (units.Dim, bool) {
	d, ok := readingDims[point[strings.LastIndex(point, ".")+1:]]
	return d, ok
}

const readingHelp = "write STATE.BLOCK.QUANTITY, such as idling.P1.pressure; states are stopped, idling, holding and working, quantities power, pressure, drop, drain and temperature"

// readings reads what was read at the machine:
//
//	site_check:
//	  idling.M1.power: 5.2 kW
//	  working.P1.pressure: {value: 150 bar, note: gauge 2}
func (r *reader) readings(n *yaml.Node) {
	s := scope{}.titled("").in("site_check")
	for _, e := range r.entries(s, n, "") {
		state, point, _ := strings.Cut(e.key, ".")
		d, ok := ReadingDim(point)
		if !ok || !slices.Contains(ReadingStates, state) || strings.Count(point, ".") != 1 {
			r.bad(s, e.at, e.key, "is no reading; %s", readingHelp)
			continue
		}
		if v, ok := r.value(s, e.value, e.key, d); ok {
			r.file.Readings = append(r.file.Readings, Reading{state, point, v})
		}
	}
}

// Reading returns what was read at a point in a state.
func (f *File) Reading(state, point string) (Reading, bool) {
	for _, r := range f.Readings {
		if r.State == state && r.Point == point {
			return r, true
		}
	}
	return Reading{}, false
}

// SetReading notes what was read at a point in a state; "" takes it out.
func (f *File) SetReading(state, point, quantity string) error {
	key, quantity := state+"."+point, strings.TrimSpace(quantity)
	if _, ok := ReadingDim(point); !ok || !slices.Contains(ReadingStates, state) {
		return fmt.Errorf("%s: is no reading; %s", key, readingHelp)
	}
	d := f.draft()
	m := child(f.root, "site_check")
	var err error
	switch _, old := pair(m, key); {
	case quantity == "" && old == nil:
		return nil
	case quantity == "":
		err = d.cut(f.root, "site_check", false, func(k int) bool { return mappingKeys(m)[k].Value == key })
	case old != nil:
		err = d.one(d.src.put(m, key, encode(quantity, false)))
	default:
		err = d.add(f.root, "site_check", false, encode(key, true)+": "+encode(quantity, false))
	}
	if err != nil {
		return fmt.Errorf("%s: %w", key, err)
	}
	return f.take(key, d, func(g *File) bool {
		got, ok := g.Reading(state, point)
		return ok == (quantity != "") && (!ok || got.Text == quantity)
	})
}
