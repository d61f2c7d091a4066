package audit

import (
	"errors"
	"fmt"
	"io"
	"sync"
	"weak"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// layouts lets circuits that are solved at the same time share what a long duty is laid
// out in; it keeps nothing that none of them uses.
type layouts struct {
	mu   sync.Mutex
	laid map[layoutOf]weak.Pointer[duty.Series]
}

type layoutOf struct {
	duty    *duty.Duty
	inertia bool
}

func (l *layouts) series(c *circuit.Compiled, d *duty.Duty) *duty.Series {
	l.mu.Lock()
	defer l.mu.Unlock()
	of := layoutOf{d, c.HasInertia()}
	if s := l.laid[of].Value(); s != nil {
		return s
	}
	if l.laid == nil {
		l.laid = map[layoutOf]weak.Pointer[duty.Series]{}
	}
	s := c.Series(d)
	l.laid[of] = weak.Make(s)
	return s
}

// until passes time steps up to a time on.
type until struct {
	to   circuit.Receiver
	last float64
}

// Sample passes s on while its time has not come.
func (u *until) Sample(s *circuit.Sample) error {
	if s.T > u.last {
		return nil
	}
	return u.to.Sample(s)
}

// tableFile is a table with the file below it. It remembers its first error and
// lets the run go on to its end.
type tableFile struct {
	*StepTable
	name string
	file io.Closer
	err  error
}

func (j *job) openTable(c *circuit.Compiled, r *DutyRun, number int) (*tableFile, error) {
	if j.csv == nil {
		return nil, nil
	}
	name := TableName(j.number, j.run.Circuit.Name, number, r.Duty.Name)
	w, err := j.csv(name)
	if err != nil {
		return nil, fmt.Errorf("open %s: %w", name, err)
	}
	t, err := NewStepTable(w, c.Signals())
	if err != nil {
		return nil, errors.Join(fmt.Errorf("%s: %w", name, err), w.Close())
	}
	return &tableFile{StepTable: t, name: name, file: w}, nil
}

// Sample writes one row, unless an earlier one could not be written.
func (t *tableFile) Sample(s *circuit.Sample) error {
	if t.err == nil {
		t.err = t.StepTable.Sample(s)
	}
	return nil
}

// Join writes the rows of a part, unless an earlier one could not be written.
func (t *tableFile) Join(part circuit.Receiver) error {
	if t.err == nil {
		t.err = t.StepTable.Join(part)
	}
	return nil
}

func (t *tableFile) close() error {
	if err := errors.Join(t.err, t.StepTable.Close(), t.file.Close()); err != nil {
		return fmt.Errorf("%s: %w", t.name, err)
	}
	return nil
}
