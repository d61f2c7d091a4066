package main

import (
	"fmt"
	"io"

	"barlitre/audit"
	"barlitre/circuit"
)

// check prints what is wrong with audit files, each finding with its line.
func check(args []string, out, errs io.Writer) int {
	if len(args) == 0 {
		fmt.Fprintln(errs, "barlitre check: name at least one audit file")
		return exitUnreadable
	}
	worst := exitOK
	for _, path := range args {
		f, found := audit.Read(path)
		if f == nil {
			printFindings(out, path, found)
			worst = exitUnreadable
			continue
		}
		found = f.Check()
		printFindings(out, path, found)
		switch {
		case circuit.AnyStops(found):
			worst = max(worst, exitUnsolvable)
			fmt.Fprintf(out, "%s: cannot be solved\n", path)
		default:
			fmt.Fprintf(out, "%s: can be solved: %s over %s\n", path, count(len(f.Circuits), "circuit", "circuits"), count(len(f.Duties), "duty", "duties"))
		}
	}
	return worst
}

func count(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// printFindings writes findings as file:line: level: [circuit, duties] text.
func printFindings(w io.Writer, path string, found []circuit.Finding) {
	for _, f := range found {
		where := path
		if f.Line > 0 {
			where = fmt.Sprintf("%s:%d", path, f.Line)
		}
		if text := whereFound(f); text != "" {
			where += ": " + text
		}
		fmt.Fprintf(w, "%s: %s: %s\n", where, f.Level, f.Text)
	}
}

// whereFound names the circuit of a finding, and its duties where it is not of all.
func whereFound(f circuit.Finding) string {
	if f.Circuit == "" || f.Duty == "" {
		return f.Circuit + f.Duties()
	}
	return f.Circuit + ", " + f.Duties()
}
