package fixfirst_test

import (
	"context"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
	"barlitre/samples"
)

// sources are the texts of the samples and starters, by name.
func sources(t *testing.T) map[string][]byte {
	t.Helper()
	out := map[string][]byte{}
	for _, name := range samples.Names() {
		data, err := samples.Read(name)
		if err != nil {
			t.Fatal(err)
		}
		out[strings.TrimSuffix(name, ".yaml")] = data
	}
	for _, s := range samples.Starters() {
		data, err := samples.ReadStarter(s.Name)
		if err != nil {
			t.Fatal(err)
		}
		out[strings.TrimSuffix(s.Name, ".yaml")] = data
	}
	return out
}

func parse(t *testing.T, data []byte) *audit.File {
	t.Helper()
	f, found := audit.Parse(data, nil, "")
	if f == nil {
		t.Fatal(found)
	}
	return f
}

// asFound leaves a file its circuits as found alone: the proposals need not be solved to look for faults.
func asFound(f *audit.File) *audit.File {
	g := f.Clone()
	var kept []audit.CircuitEntry
	for _, c := range g.Circuits {
		if c.Role != audit.Proposal {
			kept = append(kept, c)
		}
	}
	g.Circuits = kept
	return g
}

func solve(t *testing.T, f *audit.File) *audit.Solution {
	t.Helper()
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// faults lists what is found that is no habit.
func faults(s *audit.Solution) []*fixfirst.Finding {
	var out []*fixfirst.Finding
	for _, run := range s.Circuits {
		for _, f := range fixfirst.Detect(s, run, units.Metric) {
			if !f.Habit && !run.Proposal {
				out = append(out, f)
			}
		}
	}
	return out
}
