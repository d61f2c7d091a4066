package cure

import (
	"barlitre/audit"
	"barlitre/circuit"
)

// Cure is one way to mend a finding.
type Cure struct {
	Name string // what it does, for a button and for undo: "Add a relief valve at P1.P"
	Told string // what is to be known of it once it is done; "" = nothing beyond its name
	// Mend edits the file; on an error nothing is changed. It is nil for a value that only
	// the user knows: then Field is the parameter to be typed.
	Mend  func(f *audit.File) error
	Field string
}

// patient is a finding with what it is about.
type patient struct {
	circuit.Finding
	file *audit.File
	sol  *audit.Solution // nil before there is one
	e    *audit.CircuitEntry
	b    *circuit.Block // nil where it is about no block
}

// rules has the cure of each cause; a rule gives nil where it knows none.
var rules = map[circuit.Cause]func(p *patient) *Cure{
	circuit.MissingValue:  missingValue,
	circuit.OpenPort:      openPort,
	circuit.OpenLine:      openLine,
	circuit.NoTank:        noTank,
	circuit.NoRelief:      noRelief,
	circuit.ReliefTooLow:  reliefTooLow,
	circuit.NoDrive:       noDrive,
	circuit.NoConverter:   noConverter,
	circuit.NeedsNoValue:  needsNoValue,
	circuit.HeldByValve:   heldByValve,
	circuit.HeldOtherwise: heldOtherwise,
	circuit.RestNotSaid:   restNotSaid,
	circuit.JoinsNothing:  joinsNothing,
	circuit.NoLoadSignal:  noLoadSignal,
	circuit.NoFollower:    noFollower,
}

// Of returns the cure of a finding about a file, or nil where there is none. s gives the
// pressures that a new relief valve must lie above; it may be nil or of an older text.
func Of(f *audit.File, s *audit.Solution, g circuit.Finding) *Cure {
	rule := rules[g.Cause]
	if f == nil || rule == nil {
		return nil
	}
	p := &patient{Finding: g, file: f, sol: s, e: f.Circuit(g.Circuit)}
	if p.e == nil {
		return nil
	}
	if g.Block != "" {
		if p.b = p.e.Block(g.Block); p.b == nil {
			return nil
		}
	}
	return rule(p)
}

// target names a parameter of the block for Set and Drop.
func (p *patient) target(key string) string { return p.e.Name + "/" + p.Block + "." + key }

// all does steps one after another on a file; what is done goes with the copy of the
// file that a document edits when a later step fails.
func all(steps ...func(f *audit.File) error) func(f *audit.File) error {
	return func(f *audit.File) error {
		was := *f
		for _, do := range steps {
			if err := do(f); err != nil {
				*f = was
				return err
			}
		}
		return nil
	}
}
