package document

import (
	"slices"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// faults are what is wrong with the circuits as found, without a price: that needs nothing solved again.
type faults struct {
	list   []*fixfirst.Finding
	of     faultsOf // list
	sought faultsOf
}

type faultsOf struct {
	solution *audit.Solution
	system   units.System // that the words are written in
}

// Faults lists what is wrong with the circuits as found, habits left out, in words of a family of units. It is that of the
// solution before until it is found anew, behind the window; FaultsFound tells of it.
func (d *Document) Faults(system units.System) []*fixfirst.Finding {
	d.mu.Lock()
	defer d.mu.Unlock()
	f := &d.faults
	now := faultsOf{d.solution, system}
	switch {
	case d.solution == nil:
		f.list, f.of = nil, faultsOf{}
	case d.closed || d.solution.Pending || f.of == now || f.sought == now:
	default:
		f.sought = now
		d.running.Add(1)
		go d.findFaults(now)
	}
	return f.list
}

// Listed are all findings, as a list shows them and as they are counted: those of check and solution, and the faults of
// the circuits as found that fix first knows. Linked are those that fix first tells more of: the faults, and what is said
// of the same setting already.
func (d *Document) Listed(system units.System) (all, linked []circuit.Finding) {
	all = d.Findings()
	for _, x := range d.Faults(system) {
		i := slices.IndexFunc(all, func(g circuit.Finding) bool {
			return x.Param != "" && g.Level == circuit.Warns && g.Circuit == x.Circuit && g.Block == x.Block && g.Parameter == x.Param
		})
		if i < 0 {
			i = len(all)
			all = append(all, circuit.Finding{Level: circuit.Warns, Circuit: x.Circuit, Duty: x.Duty, Block: x.Block, Parameter: x.Param, Time: x.Time, Text: x.Text})
		}
		linked = append(linked, all[i])
	}
	return all, linked
}

func (d *Document) findFaults(now faultsOf) {
	defer d.running.Done()
	var list []*fixfirst.Finding
	err := guarded(func() error {
		for _, run := range now.solution.Circuits {
			if !run.Proposal {
				list = append(list, fixfirst.Detect(now.solution, run, now.system)...)
			}
		}
		list = slices.DeleteFunc(list, func(f *fixfirst.Finding) bool { return f.Habit })
		return nil
	})
	d.mu.Lock()
	there := d.faults.sought == now && !d.closed
	if there {
		d.faults.list, d.faults.of = list, now
	}
	d.mu.Unlock()
	if there {
		d.emit(Event{Kind: FaultsFound, Err: err})
	}
}
