package fixfirst

import (
	"fmt"
	"strings"

	"barlitre/audit"
)

// Class says what a cure is: whose money it is in the split of the saving.
type Class string

// The classes, in the order in which they are done.
const (
	Settings  Class = "settings"   // a screwdriver and a gauge
	StopStart Class = "stop-start" // who switches off, and when
	Repair    Class = "repair"     // a part in order again, or exchanged for one that fits
)

// Classes lists the classes in the order of the split.
func Classes() []Class { return []Class{Settings, Repair, StopStart} }

// Effort is what a cure costs to carry out.
type Effort int

// The efforts.
const (
	NoCost  Effort = iota // within an hour, nothing bought
	LowCost               // a service visit, wearing parts
	Invest                // a part, new or of another size
)

func (e Effort) String() string {
	return [...]string{"no cost", "low cost: a service visit, wearing parts", "a part, new or of another size"}[e]
}

// Quantity is one piece of evidence: what was found and what it is compared with.
type Quantity struct {
	Name  string `json:"name"`
	Found string `json:"found"`
	Limit string `json:"limit"`
}

// Finding is one thing to put right.
type Finding struct {
	Rule     string // "relief at or below compensator"
	Class    Class
	Effort   Effort
	Habit    bool // a way of running the machine, not a fault of it
	Circuit  string
	Block    string // where to go
	Param    string // of the block, to be looked at
	Duty     string // where it shows, "" in all
	Time     float64
	Text     string // what is wrong, one sentence
	Evidence []Quantity
	Do       string   // in trade words
	Caution  string   // "" where none is due
	Basis    string   // of the limit
	because  []string // keys of findings that follow from it
	Cures    []Cure   // the first that leaves the motion as it was counts; none where the price cannot be computed
}

// Name says it in a line of a list.
func (f *Finding) Name() string {
	if f.Block == "" {
		return f.Rule
	}
	return f.Block + ": " + f.Rule
}

// Resizes reports whether its cure is a part of another size, not one put in order or exchanged for its like.
func (f *Finding) Resizes() bool {
	return f.Effort == Invest && f.Rule != wornPumpRule && f.Rule != wornMotorRule
}

// key tells faults of one circuit apart.
func (f *Finding) key() string { return f.Rule + "|" + f.Block }

// Cure is a list of edits of the audit file.
type Cure []Edit

// String lists the edits as the command line takes them.
func (c Cure) String() string {
	var parts []string
	for _, e := range c {
		parts = append(parts, e.String())
	}
	return strings.Join(parts, "; ")
}

// act is what an edit does.
type act int

const (
	set    act = iota // a value of a block or of the oil
	lower             // the same, where it is not lower already
	off               // the hours of a duty become hours off
	rewire            // a signal line to another port
	heat              // what the section heat says of a circuit
)

// Edit is one change of the audit file.
type Edit struct {
	act           act
	Target, Value string
}

// String writes the edit as the command line takes it, or in words where that cannot.
func (e Edit) String() string {
	switch e.act {
	case off:
		return fmt.Sprintf("duty %q: its hours are hours off", e.Target)
	case rewire:
		return fmt.Sprintf("join %s to %s", e.Target, e.Value)
	case heat:
		return e.Target + ": " + e.Value
	}
	return fmt.Sprintf("-set %q", e.Target+"="+e.Value)
}

// apply makes the edit.
func (e Edit) apply(f *audit.File) error {
	switch e.act {
	case off:
		return switchOff(f, e.Target)
	case rewire:
		name, port, _ := strings.Cut(e.Target, "/")
		if err := f.Disconnect(name, port); err != nil {
			return err
		}
		return f.Connect(name, port, e.Value)
	case heat:
		return f.Put(e.Target, e.Value)
	case lower:
		if isLower(f, e) {
			return nil
		}
	}
	return f.Set(e.Target, e.Value)
}
