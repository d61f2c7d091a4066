package audit

import (
	"errors"
	"fmt"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
)

// Delete takes blocks off the sheet of a circuit, with their ports on lines and the
// tracks of duties that only they have. A line with fewer than two ports left goes.
// With heal the lines on both sides of a block that stands in a line (a filter, a line,
// a check valve, an orifice, a junction ...) become one.
func (f *File) Delete(circuitName string, heal bool, ids ...string) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	what := strings.Join(ids, ", ")
	if len(ids) == 0 {
		return errors.New("no block is chosen; choose the blocks to delete")
	}
	for _, id := range ids {
		if _, err := e.block(id); err != nil {
			return err
		}
	}
	want, err := e.linesWithout(ids, heal)
	if err != nil {
		return err
	}
	d, ci := f.draft(), f.circuitIndex(circuitName)
	if err := d.setLines(ci, want); err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	for _, id := range ids {
		if err := f.dropTracks(d, ci, id); err != nil {
			return err
		}
	}
	if err := d.leaveGroups(ci, ids); err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	keys := mappingKeys(child(d.circuit(ci), "blocks"))
	if err := d.cut(d.circuit(ci), "blocks", true, func(i int) bool { return slices.Contains(ids, keys[i].Value) }); err != nil {
		return fmt.Errorf("%s: %w", what, err)
	}
	lines := wanted(e.Lines, want)
	return f.take(what, d, func(g *File) bool {
		c := g.Circuit(circuitName)
		return sameLines(c.Lines, lines) && !slices.ContainsFunc(c.Blocks, func(b circuit.Block) bool { return slices.Contains(ids, b.ID) })
	})
}

// linesWithout returns what the lines of a circuit become without some blocks, by
// their places: those that change.
func (e *CircuitEntry) linesWithout(ids []string, heal bool) (map[int][]circuit.PortRef, error) {
	lines := make([][]circuit.PortRef, len(e.Lines))
	for i, l := range e.Lines {
		lines[i] = l.Ports
	}
	var healed []circuit.PortRef
	for _, id := range ids {
		ports := throughPorts(e.Block(id))
		if !heal || len(ports) == 0 {
			continue
		}
		first := -1
		for i := range lines {
			if !slices.ContainsFunc(lines[i], func(p circuit.PortRef) bool { return p.Block == id && slices.Contains(ports, p.Port) }) {
				continue
			}
			if first < 0 {
				first = i
				continue
			}
			lines[first], lines[i] = union(lines[first], lines[i]), nil
			healed = append(healed, lines[first]...)
		}
	}
	want := map[int][]circuit.PortRef{}
	after := *e.Circuit
	after.Lines = nil
	for i := range lines {
		lines[i] = slices.DeleteFunc(slices.Clone(lines[i]), func(p circuit.PortRef) bool { return slices.Contains(ids, p.Block) })
		if !slices.Equal(lines[i], e.Lines[i].Ports) {
			want[i] = lines[i]
		}
		after.Lines = append(after.Lines, circuit.Line{Ports: lines[i]})
	}
	for _, p := range healed {
		if err := after.Clash(p); err != nil && !slices.Contains(ids, p.Block) {
			return nil, fmt.Errorf("%s: the lines on both sides cannot become one: %w. Delete without joining them", strings.Join(ids, ", "), err)
		}
	}
	return want, nil
}

// throughPorts returns the ports whose lines become one where a block goes.
func throughPorts(b *circuit.Block) []string {
	kind := circuit.KindNamed(b.Kind)
	if kind == nil {
		return nil
	}
	if kind.Name == "junction" {
		var all []string
		for _, p := range kind.Ports {
			all = append(all, p.Name)
		}
		return all
	}
	if a, z, ok := kind.Through(); ok {
		return []string{a, z}
	}
	return nil
}

// dropTracks takes the tracks of a block out of the duties, unless another circuit
// has a block of that id.
func (f *File) dropTracks(d *draft, ci int, id string) error {
	if f.elsewhere(ci, id) || f.isAxis(id) {
		return nil
	}
	return f.eachTrackList(d, id, func(of *yaml.Node, key string) error {
		keys := mappingKeys(child(of, key))
		return d.cut(of, key, false, func(k int) bool { return ofTrack(keys[k]) == id })
	})
}

// eachTrackList edits the lists, by their keys, that name tracks of an axis or block in the duties that have any.
func (f *File) eachTrackList(d *draft, of string, edit func(duty *yaml.Node, key string) error) error {
	for i, du := range f.Duties {
		if !slices.ContainsFunc(du.Tracks, func(t duty.Track) bool { return t.Of == of }) {
			continue
		}
		if err := f.headsFromFile(d, i, of); err != nil {
			return err
		}
		for _, key := range []string{"points", "columns", "derived"} {
			if err := edit(d.duty(i), key); err != nil {
				return fmt.Errorf("duty %q, tracks of %s: %w", du.Name, of, err)
			}
		}
	}
	return nil
}

// headsFromFile refuses an edit of tracks whose names stand in a recording.
func (f *File) headsFromFile(d *draft, i int, of string) error {
	if f.Sources[i].File != "" && isNull(child(d.duty(i), "columns")) && isNull(child(d.duty(i), "import")) {
		return fmt.Errorf("%s: duty %q takes tracks of it from the heads of %s; change the recording first", of, f.Duties[i].Name, f.Sources[i].File)
	}
	return nil
}

// elsewhere reports whether another circuit has a block of an id.
func (f *File) elsewhere(ci int, id string) bool {
	for i := range f.Circuits {
		if i != ci && f.Circuits[i].Block(id) != nil {
			return true
		}
	}
	return false
}

func (f *File) isAxis(name string) bool {
	return slices.ContainsFunc(f.Axes, func(a duty.Axis) bool { return a.Name == name })
}

// ofTrack returns the axis or block that the key of a track names.
func ofTrack(key *yaml.Node) string {
	name, _, ok := recording.SplitHead(key.Value)
	of, _, dotted := strings.Cut(name, ".")
	if !ok || !dotted {
		return ""
	}
	return of
}
