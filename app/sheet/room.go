package sheet

import (
	"maps"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
)

// choose is set for a choice, which may change the symbol of its block: what a grown symbol
// would lie over is put aside in the same step.
func (p *panel) choose(target, text string) error {
	name, _, _ := strings.Cut(target, "/")
	doc := p.s.ctx.Doc()
	was := symbolsOf(doc.File().Circuit(name))
	var aside []string
	err := doc.SetAll(p.targets(target), text, func(f *audit.File) error {
		c := f.Circuit(name)
		var grown []string
		for id, symbol := range symbolsOf(c) {
			if symbol != was[id] {
				grown = append(grown, id)
			}
		}
		if len(grown) == 0 {
			return nil
		}
		places := figures.MakeRoom(c.Circuit, grown...)
		if aside = slices.Sorted(maps.Keys(places)); len(aside) == 0 {
			return nil
		}
		return f.Place(name, places, nil)
	})
	if err == nil && len(aside) > 0 {
		p.s.ctx.Say("The new symbol needs room: " + strings.Join(aside, ", ") + " put aside. Ctrl+Z takes both back.")
	}
	return err
}

// symbolsOf are the symbols of the blocks of a circuit, by block; none of a circuit that is not there.
func symbolsOf(c *audit.CircuitEntry) map[string]string {
	out := map[string]string{}
	if c != nil {
		for i := range c.Blocks {
			out[c.Blocks[i].ID] = circuit.SymbolOf(c.Circuit, &c.Blocks[i])
		}
	}
	return out
}
