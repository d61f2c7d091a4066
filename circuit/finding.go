package circuit

import (
	"fmt"
	"slices"
	"strings"
)

// Level ranks a finding.
type Level string

// The levels: a finding that stops cannot be solved; a warning is likely an
// error or a limit passed; a note is worth knowing; a caution is about harm.
const (
	Stops   Level = "stops"
	Warns   Level = "warns"
	Note    Level = "note"
	Caution Level = "caution"
)

// Finding is one thing that check, run or audit has to say about a circuit.
// Text names the block and says what to do.
type Finding struct {
	Level     Level   `json:"level"`
	Circuit   string  `json:"circuit,omitempty"`
	Duty      string  `json:"duty,omitempty"`
	Besides   string  `json:"duties_besides,omitempty"` // further duties in which the same shows, one a line
	Block     string  `json:"block,omitempty"`
	Parameter string  `json:"parameter,omitempty"`
	Time      float64 `json:"t_s,omitempty"` // s, where it shows first or worst
	Text      string  `json:"text"`
	Line      int     `json:"line,omitempty"` // in the file
	Cause     Cause   `json:"-"`              // what mends it hangs on this
	Port      PortRef `json:"-"`              // where one is meant
	Axis      string  `json:"-"`              // where one is meant
}

// Cause says what a finding is about, for what mends it; "" where there is no one cure.
type Cause string

// The causes. Those named by a parameter have it in Finding.Parameter.
const (
	MissingValue  Cause = "missing value"  // a parameter that must be given
	OpenPort      Cause = "open port"      // a port that must be connected
	OpenLine      Cause = "open line"      // a line that leads nowhere
	NoTank        Cause = "no tank"        // oil without a way to a tank; Port may lead there
	NoRelief      Cause = "no relief"      // a side without a relief valve
	ReliefTooLow  Cause = "relief too low" // it opens before a pump stops delivering
	NoDrive       Cause = "no drive"       // nothing turns a shaft
	NoConverter   Cause = "no converter"   // a motor that only a converter can run so
	NeedsNoValue  Cause = "needs no value" // a parameter that must go
	HeldByValve   Cause = "held by valve"  // what shuts its oil in is a valve
	HeldOtherwise Cause = "held otherwise" // than the actuator beside it
	RestNotSaid   Cause = "rest not said"  // what pumps do while all stands
	JoinsNothing  Cause = "joins nothing"  // a junction
	NoLoadSignal  Cause = "no load signal" // a pump that follows a load pressure
	NoFollower    Cause = "no follower"    // an axis without a control; Block is the only one that can follow it
	UnknownAxis   Cause = "unknown axis"   // Axis is named and not there
	UnknownBlock  Cause = "unknown block"  // the block of Port is named and not there
	LoadNotHeld   Cause = "load not held"  // by a valve or brake of its own; the choice is the user's
)

// because gives a finding its cause, and the port that is meant: by its name for one of
// the block that it is about, or "".
func (f *Finding) because(c Cause, port string) {
	f.Cause = c
	if port != "" {
		f.Port = PortRef{f.Block, port}
	}
}

func (f Finding) Error() string {
	if f.Line > 0 {
		return fmt.Sprintf("line %d: %s", f.Line, f.Text)
	}
	return f.Text
}

// Duties names the duties in which it shows, "day and night"; "" where it is of none or of all.
func (f *Finding) Duties() string {
	if f.Duty == "" {
		return ""
	}
	return Names(f.duties())
}

func (f *Finding) duties() []string {
	if f.Besides == "" {
		return []string{f.Duty}
	}
	return append([]string{f.Duty}, strings.Split(f.Besides, "\n")...)
}

// ShowsIn adds a duty to those in which it shows.
func (f *Finding) ShowsIn(duty string) {
	switch {
	case slices.Contains(f.duties(), duty):
	case f.Besides == "":
		f.Besides = duty
	default:
		f.Besides += "\n" + duty
	}
}

// Marked reports whether a finding is of that block and not of all of its kind, so that
// it is worth a mark where the block is drawn: what stops, what is likely wrong, and a
// caution that check or a run found there. Notes and general cautions are not.
func (f *Finding) Marked() bool {
	switch f.Level {
	case Stops, Warns:
		return f.Block != ""
	case Caution:
		return f.Block != "" && (f.Cause != "" || f.Time > 0)
	}
	return false
}

// ToMend reports whether a finding asks for something to be mended: it keeps the circuit from being solved or is
// likely an error.
func (f *Finding) ToMend() bool { return f.Level == Stops || f.Level == Warns }

// Tally counts findings. It is the one count behind all that a window says of them.
type Tally struct {
	All    int
	Faults int // that keep a circuit from being solved
	ToMend int // further ones that are to be mended
}

// TallyOf counts.
func TallyOf(fs []Finding) Tally {
	t := Tally{All: len(fs)}
	for i := range fs {
		switch {
		case fs[i].Level == Stops:
			t.Faults++
		case fs[i].ToMend():
			t.ToMend++
		}
	}
	return t
}

// String says how many there are, and what they ask for: "27, 3 to mend".
func (t Tally) String() string {
	text := fmt.Sprint(t.All)
	if t.All == 0 {
		return text
	}
	switch {
	case t.Faults == 1:
		text += ", 1 fault"
	case t.Faults > 1:
		text += fmt.Sprintf(", %d faults", t.Faults)
	case t.ToMend == 0:
		text += ", none to mend"
	}
	if t.ToMend > 0 {
		text += fmt.Sprintf(", %d to mend", t.ToMend)
	}
	return text
}

// AnyStops reports whether a finding keeps the circuit from being solved.
func AnyStops(fs []Finding) bool {
	for _, f := range fs {
		if f.Level == Stops {
			return true
		}
	}
	return false
}
