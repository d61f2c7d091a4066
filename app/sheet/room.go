package sheet

import (
	"maps"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
)

// choose is set for a choice, which may change the symbol of its block.
func (p *panel) choose(target, text string) error {
	room := p.s.room(target[:max(0, strings.LastIndex(target, "/"))])
	return room.said(p.s.ctx.Doc().SetAll(p.targets(target), text, room.make))
}

// room puts aside what other symbols of blocks would lie over, in the same step as the change
// that brings them.
type room struct {
	s     *Station
	name  string // of the circuit
	was   *audit.CircuitEntry
	aside []string
}

// room is that for a change of a circuit as it is now.
func (s *Station) room(circuitName string) *room {
	return &room{s: s, name: circuitName, was: s.ctx.Doc().File().Circuit(circuitName)}
}

// make makes room in the changed file.
func (r *room) make(f *audit.File) error {
	c := f.Circuit(r.name)
	if r.was == nil || c == nil {
		return nil
	}
	places := figures.MakeRoom(r.was.Circuit, c.Circuit)
	if r.aside = slices.Sorted(maps.Keys(places)); len(r.aside) == 0 {
		return nil
	}
	return f.Place(r.name, places, nil)
}

// said tells what was put aside, if the change was made.
func (r *room) said(err error) error {
	if err == nil && len(r.aside) > 0 {
		r.s.ctx.Say("The new symbol needs room: " + strings.Join(r.aside, ", ") + " put aside. Ctrl+Z takes both back.")
	}
	return err
}
