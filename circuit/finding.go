package circuit

import "fmt"

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
	Block     string  `json:"block,omitempty"`
	Parameter string  `json:"parameter,omitempty"`
	Time      float64 `json:"t_s,omitempty"` // s, where it shows first or worst
	Text      string  `json:"text"`
	Line      int     `json:"line,omitempty"` // in the file
}

func (f Finding) Error() string {
	if f.Line > 0 {
		return fmt.Sprintf("line %d: %s", f.Line, f.Text)
	}
	return f.Text
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
