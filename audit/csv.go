package audit

import (
	"encoding/csv"
	"fmt"
	"io"
	"strconv"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// StepTable writes the time steps of a run as CSV: a circuit.Receiver. The first column is
// `t [s]`, then one column a signal, named as the signal with its SI unit:
// `RV1.P.p [Pa]`, `RV1.P.q [m3/s]`, `C1.v [m/s]`; a plain number has no bracket. Two
// rows at one time are the two sides of a step.
type StepTable struct {
	w       io.Writer
	columns int
	rows    []byte // not yet written
}

// tableBuffer is how many bytes are written at once.
const tableBuffer = 1 << 16

// NewStepTable writes the head.
func NewStepTable(w io.Writer, signals []circuit.Signal) (*StepTable, error) {
	head := []string{"t [s]"}
	for _, s := range signals {
		name := s.Name
		if u := units.Preferred(s.Dim, units.SI).Symbol; u != "" {
			name += " [" + u + "]"
		}
		head = append(head, name)
	}
	c := csv.NewWriter(w)
	_ = c.Write(head)
	c.Flush()
	if err := c.Error(); err != nil {
		return nil, fmt.Errorf("write table: %w", err)
	}
	return &StepTable{w: w, columns: len(head)}, nil
}

// Sample writes one row. Numbers have as many digits as it takes to read them back unchanged.
func (t *StepTable) Sample(s *circuit.Sample) error {
	t.rows = strconv.AppendFloat(t.rows, s.T, 'g', -1, 64)
	for _, v := range s.Signals {
		t.rows = strconv.AppendFloat(append(t.rows, ','), v, 'g', -1, 64)
	}
	t.rows = append(t.rows, '\n')
	if t.w != nil && len(t.rows) >= tableBuffer {
		return t.Close()
	}
	return nil
}

// Part keeps its rows until their turn comes.
func (t *StepTable) Part(from, to int, _ *circuit.Sample) circuit.Receiver {
	return &StepTable{rows: make([]byte, 0, 20*t.columns*(to-from))}
}

// Join writes the rows of a part.
func (t *StepTable) Join(part circuit.Receiver) error {
	if _, err := t.w.Write(part.(*StepTable).rows); err != nil {
		return fmt.Errorf("write table: %w", err)
	}
	return nil
}

// Close writes what is buffered; it does not close the writer below.
func (t *StepTable) Close() error {
	_, err := t.w.Write(t.rows)
	t.rows = t.rows[:0]
	if err != nil {
		return fmt.Errorf("write table: %w", err)
	}
	return nil
}

// TableName makes the file name of a table: the circuit's and the duty's place and
// name, with nothing in it that a file system could take amiss. The places, from 1,
// keep names apart that differ only in signs left out here.
func TableName(circuitNo int, circuitName string, dutyNo int, dutyName string) string {
	return fmt.Sprintf("%d-%s-%d-%s.csv", circuitNo, plainName(circuitName), dutyNo, plainName(dutyName))
}

// plainName keeps ASCII letters and digits in lower case and turns the rest into
// single hyphens; at most 40 characters, "unnamed" when nothing is left.
func plainName(name string) string {
	var b strings.Builder
	for _, r := range strings.ToLower(name) {
		switch {
		case r >= 'a' && r <= 'z', r >= '0' && r <= '9':
			b.WriteRune(r)
		case b.Len() > 0 && !strings.HasSuffix(b.String(), "-"):
			b.WriteByte('-')
		}
		if b.Len() >= 40 {
			break
		}
	}
	if s := strings.Trim(b.String(), "-"); s != "" {
		return s
	}
	return "unnamed"
}
