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
	w   *csv.Writer
	row []string
}

// NewStepTable writes the head.
func NewStepTable(w io.Writer, signals []circuit.Signal) (*StepTable, error) {
	t := &StepTable{w: csv.NewWriter(w), row: make([]string, 1+len(signals))}
	t.row[0] = "t [s]"
	for i, s := range signals {
		t.row[1+i] = s.Name
		if u := units.Preferred(s.Dim, units.SI).Symbol; u != "" {
			t.row[1+i] += " [" + u + "]"
		}
	}
	if err := t.w.Write(t.row); err != nil {
		return nil, fmt.Errorf("write table: %w", err)
	}
	return t, nil
}

// Sample writes one row. Numbers have as many digits as it takes to read them back unchanged.
func (t *StepTable) Sample(s *circuit.Sample) error {
	t.row[0] = strconv.FormatFloat(s.T, 'g', -1, 64)
	for i, v := range s.Signals {
		t.row[1+i] = strconv.FormatFloat(v, 'g', -1, 64)
	}
	if err := t.w.Write(t.row); err != nil {
		return fmt.Errorf("write table: %w", err)
	}
	return nil
}

// Close writes what is buffered; it does not close the writer below.
func (t *StepTable) Close() error {
	t.w.Flush()
	if err := t.w.Error(); err != nil {
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
