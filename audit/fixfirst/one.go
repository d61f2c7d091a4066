package fixfirst

import (
	"context"
	"fmt"

	"barlitre/audit"
)

// Set is a cure of one value, target and quantity as audit.File.Set takes them.
func Set(target, quantity string) Edit { return Edit{set, target, quantity} }

// Apply puts edits into a copy of a file.
func Apply(f *audit.File, edits Cure) (*audit.File, error) {
	g := f.Clone()
	if g == nil {
		return nil, fmt.Errorf("the file cannot be read again")
	}
	for _, e := range edits {
		if err := e.apply(g); err != nil {
			return nil, err
		}
	}
	return g, nil
}

// SolveOne solves one circuit of a file and leaves the others out; the run is nil when it could not be solved. Oil temperatures are
// worked out only where the energy hangs on them.
func SolveOne(ctx context.Context, f *audit.File, name string) (*audit.Solution, *audit.CircuitRun, error) {
	one := f.Clone()
	for i := range one.Circuits {
		if one.Circuits[i].Name == name {
			one.Circuits = one.Circuits[i : i+1]
			break
		}
	}
	s, err := audit.SolveEnergy(ctx, one, audit.Options{})
	if err == nil && s.EnergyMayChange() {
		s, err = s.Warm(ctx)
	}
	if ctx.Err() != nil {
		return nil, nil, ctx.Err()
	}
	if err != nil || len(s.Circuits) != 1 || !s.Circuits[0].Year.Complete {
		return nil, nil, nil
	}
	return s, s.Circuits[0], nil
}
