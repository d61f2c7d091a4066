package audit

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// typicalNote stands beside the values that a new block begins with.
const typicalNote = "typical, put in your own"

// AddBlock puts a block of a kind on the sheet of a circuit at a place [modules] and
// returns its id, the next that is free where id is "". What the kind must have and
// has no default for begins with a typical value, marked as assumed. Choices that
// only the user can make stay open, and Check asks for them; the axis is taken where
// there is just one to take.
func (f *File) AddBlock(circuitName, kindName string, at [2]float64, id string) (string, error) {
	e, err := f.drawn(circuitName)
	if err != nil {
		return "", err
	}
	kind := circuit.KindNamed(kindName)
	if kind == nil {
		return "", errors.New(noKind(kindName))
	}
	if id == "" {
		id = f.freeID(e, kind, nil)
	} else if err := f.mayBeCalled(e, id); err != nil {
		return "", err
	}
	words := []string{"kind: " + kind.Name}
	for _, p := range kind.Params {
		if p.Type != circuit.AxisRef {
			continue
		}
		if axis := f.axisFor(e, kind, p.Key); axis != "" {
			words = append(words, p.Key+": "+encode(axis, true))
		}
	}
	for _, t := range kind.Typical {
		words = append(words, fmt.Sprintf("%s: {value: %s, origin: %s, note: %s}", t.Key, encode(t.Text, false), circuit.Assumed, encode(typicalNote, true)))
	}
	words = append(words, "at: "+placeText(at))
	d, ci := f.draft(), f.circuitIndex(circuitName)
	if valve, axis := f.waiting(e, kind); valve != "" {
		if err := d.one(d.src.insert(child(child(d.circuit(ci), "blocks"), valve), "follows", encode(axis, true))); err != nil {
			return "", fmt.Errorf("%s: %w", valve, err)
		}
	}
	if err := d.add(d.circuit(ci), "blocks", false, encode(id, true)+": {"+strings.Join(words, ", ")+"}"); err != nil {
		return "", fmt.Errorf("%s: %w", id, err)
	}
	return id, f.take(id, d, func(g *File) bool {
		b := g.Circuit(circuitName).Block(id)
		return b != nil && b.Kind == kind.Name && b.At != nil && *b.At == at
	})
}

// drawn finds a circuit by name, or says that there is none.
func (f *File) drawn(name string) (*CircuitEntry, error) {
	if e := f.Circuit(name); e != nil {
		return e, nil
	}
	var names []string
	for _, c := range f.Circuits {
		names = append(names, c.Name)
	}
	return nil, fmt.Errorf("there is no circuit %q%s", name, guess(name, names))
}

// block finds a block by id, or says that there is none.
func (e *CircuitEntry) block(id string) (*circuit.Block, error) {
	if b := e.Block(id); b != nil {
		return b, nil
	}
	var known []string
	for _, b := range e.Blocks {
		known = append(known, b.ID)
	}
	return nil, fmt.Errorf("there is no block %q in circuit %q%s", id, e.Name, guess(id, known))
}

func placeText(at [2]float64) string {
	return "[" + strconv.FormatFloat(at[0], 'f', -1, 64) + ", " + strconv.FormatFloat(at[1], 'f', -1, 64) + "]"
}

// FreeID returns the id that AddBlock gives a block of a kind, "" for what is not known.
func (f *File) FreeID(circuitName, kindName string) string {
	e, kind := f.Circuit(circuitName), circuit.KindNamed(kindName)
	if e == nil || kind == nil {
		return ""
	}
	return f.freeID(e, kind, nil)
}

// freeID returns the first id of a kind's letter that neither the circuit, nor a track
// of a duty, nor taken has: a track would command the new block.
func (f *File) freeID(e *CircuitEntry, kind *circuit.Kind, taken map[string]bool) string {
	for n := 1; ; n++ {
		id := kind.Letter + strconv.Itoa(n)
		if e.Block(id) == nil && !taken[id] && !f.hasTrackOf(id) && !f.isAxis(id) {
			return id
		}
	}
}

func (f *File) hasTrackOf(id string) bool {
	return slices.ContainsFunc(f.Duties, func(d *duty.Duty) bool {
		return slices.ContainsFunc(d.Tracks, func(t duty.Track) bool { return t.Of == id })
	})
}

// mayBeCalled says why a block cannot have an id.
func (f *File) mayBeCalled(e *CircuitEntry, id string) error {
	switch {
	case !IsName(id):
		return fmt.Errorf("block %q: use letters, digits and _ only", id)
	case e.Block(id) != nil:
		return fmt.Errorf("circuit %q has a block %s already; choose another id", e.Name, id)
	case f.isAxis(id):
		return fmt.Errorf("%s is the name of an axis; choose another id", id)
	}
	return nil
}

// axisFor returns the axis that a new block takes for a parameter, or "" where the
// choice is the user's: an actuator takes the only axis of its sort that nothing
// moves yet, a directional valve the only one that nothing controls.
func (f *File) axisFor(e *CircuitEntry, kind *circuit.Kind, key string) string {
	valve := key == "follows" && isDirectional(kind)
	if !valve && key != "axis" {
		return ""
	}
	var free []string
	for _, a := range f.Axes {
		bound := slices.ContainsFunc(e.Blocks, func(b circuit.Block) bool {
			return b.Word(key) == a.Name || valve && b.Word("directs") == a.Name
		})
		if !bound && (key != "axis" || kind.Moves(a.Kind)) {
			free = append(free, a.Name)
		}
	}
	if len(free) != 1 {
		return ""
	}
	return free[0]
}

// isDirectional reports whether blocks of a kind throttle or direct an actuator.
func isDirectional(kind *circuit.Kind) bool { return kind.Param("directs") != nil }

// waiting returns the only directional valve of a circuit that nothing controls yet,
// and the axis that a new actuator gives it, where no other control has that.
func (f *File) waiting(e *CircuitEntry, actuator *circuit.Kind) (valve, axis string) {
	if actuator.Param("axis") == nil {
		return "", ""
	}
	axis = f.axisFor(e, actuator, "axis")
	for _, b := range e.Blocks {
		kind := circuit.KindNamed(b.Kind)
		switch follows, directs := b.Word("follows"), b.Word("directs"); {
		case axis == "" || follows == axis || directs == axis:
			return "", ""
		case kind == nil || !isDirectional(kind) || follows+directs != "" || f.hasTrackOf(b.ID):
		case valve != "":
			return "", "" // two wait; which it is only the user knows
		default:
			valve = b.ID
		}
	}
	return valve, axis
}

// axisKeys are the parameters that bind a block to an axis.
var axisKeys = []string{"axis", "follows", "directs"}

// flowText writes a node as text of one line.
func flowText(n *yaml.Node) string {
	var parts []string
	switch n.Kind {
	case yaml.MappingNode:
		for i := 0; i+1 < len(n.Content); i += 2 {
			parts = append(parts, flowText(n.Content[i])+": "+flowText(n.Content[i+1]))
		}
		return "{" + strings.Join(parts, ", ") + "}"
	case yaml.SequenceNode:
		for _, c := range n.Content {
			parts = append(parts, flowText(c))
		}
		return "[" + strings.Join(parts, ", ") + "]"
	}
	if emptyValue(n) {
		return "~"
	}
	if isNull(n) {
		return n.Value
	}
	return encode(n.Value, n.Tag == "!!str")
}
