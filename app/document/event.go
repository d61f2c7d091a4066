package document

import (
	"fmt"
	"runtime/debug"
)

// EventKind says what happened to a document.
type EventKind int

// The kinds of event. Revision is the one concerned.
const (
	Opened         EventKind = iota + 1 // another audit is in the document
	Edited                              // a new revision of the same audit
	Solving                             // Done of Total; at most twenty a second
	Solved                              // Solution has the result of Revision; where it is pending, oil temperatures follow
	Warmed                              // Solution has them as well, or Err says why not
	SolveFailed                         // Err says why there is no result
	SolveCancelled                      // by CancelSolve
	Saved                               // Revision is on disk
	Autosaved                           // Revision is kept against a crash
	AutosaveFailed                      // Err; it is tried again after the next edit
	Advising                            // Done of Total, of what is to be put right first and measured
	FaultsFound                         // Faults has those of the present solution
	Advised                             // Advice has it, or Err says why not
)

// Event is something the screens may want to show.
type Event struct {
	Kind        EventKind
	Revision    int
	Done, Total int // parts of the solving
	Err         error
}

func (d *Document) emit(e Event) {
	if d.opt.Notify != nil {
		d.opt.Notify(e)
	}
}

// Fault is an error of the program itself, where it should have had an answer.
type Fault struct {
	Value any    // what the program said
	Stack string // where, for the report of it
}

func (f *Fault) Error() string {
	return fmt.Sprintf("the program met an error of its own (%v); nothing was changed, please report it with this file", f.Value)
}

// guarded turns a panic into a Fault.
func guarded(do func() error) (err error) {
	defer func() {
		if v := recover(); v != nil {
			err = &Fault{Value: v, Stack: string(debug.Stack())}
		}
	}()
	return do()
}
