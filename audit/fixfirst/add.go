package fixfirst

import (
	"errors"
	"strings"

	"barlitre/audit"
)

// AddCured adds the circuit with its faults cured to a file, as a proposal of that name, to be looked at and changed. Cures
// of the oil and of running hours are not of one circuit and stay out.
func (l *Ladder) AddCured(f *audit.File, name string) error {
	if err := f.CopyCircuit(l.Circuit, name); err != nil {
		return err
	}
	done := 0
	for _, e := range l.Faultless() {
		rest, ok := strings.CutPrefix(e.Target, l.Circuit+"/")
		if !ok {
			continue
		}
		e.Target = name + "/" + rest
		if err := e.apply(f); err != nil {
			return err
		}
		done++
	}
	if done == 0 {
		return errors.New("no cure found changes the circuit itself")
	}
	return nil
}

// Changes reports whether AddCured has anything to change.
func (l *Ladder) Changes() bool {
	for _, e := range l.Faultless() {
		if strings.HasPrefix(e.Target, l.Circuit+"/") {
			return true
		}
	}
	return false
}
