package main

import (
	"context"
	"flag"
	"fmt"
	"io"
	"os"
	"os/signal"
	"strings"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// eachSolved is a command that takes audit files, values to set and a family of units, and does something with the solution
// of each; it ends at the first error of that.
func eachSolved(name string, args []string, errs io.Writer, do func(ctx context.Context, s *audit.Solution, system units.System) error) int {
	files, set, system, err := readCall(name, args, errs, nil)
	if err == flag.ErrHelp {
		return exitOK
	}
	if err != nil {
		fmt.Fprintf(errs, "barlitre %s: %v\n", name, err)
		return exitUnreadable
	}
	ctx, cancel := signal.NotifyContext(context.Background(), os.Interrupt)
	defer cancel()
	worst := exitOK
	for _, path := range files {
		s, code := solveFile(ctx, name, path, set, audit.Options{}, errs)
		worst = worse(worst, code)
		if s == nil {
			continue
		}
		if err := do(ctx, s, system); err != nil {
			fmt.Fprintf(errs, "barlitre %s: %s: %v\n", name, path, err)
			return exitUnreadable
		}
	}
	return worst
}

// readCall parses a call that takes audit files, values to set and a family of units, and further options of its own.
func readCall(name string, args []string, errs io.Writer, more func(f *flag.FlagSet)) (files, set []string, system units.System, err error) {
	f := flag.NewFlagSet("barlitre "+name, flag.ContinueOnError)
	f.SetOutput(errs)
	f.Func("set", "set `[CIRCUIT/]BLOCK.PARAM=QUANTITY` before solving; may be repeated", func(s string) error {
		if !strings.Contains(s, "=") {
			return fmt.Errorf("%q has no =; write BLOCK.PARAM=QUANTITY, such as RV1.crack=\"150 bar\"", s)
		}
		set = append(set, s)
		return nil
	})
	family := f.String("units", "metric", "units of the text and the report: `metric`, us or si")
	if more != nil {
		more(f)
	}
	if files, err = parseMixed(f, args); err != nil {
		return nil, nil, system, err
	}
	if system, err = systemNamed(*family); err == nil && len(files) == 0 {
		err = fmt.Errorf("name at least one audit file")
	}
	return files, set, system, err
}

// solveFile reads and solves one audit file; the code says what went wrong, in words on errs.
func solveFile(ctx context.Context, command, path string, set []string, opt audit.Options, errs io.Writer) (*audit.Solution, int) {
	f, found := audit.Read(path)
	if f == nil {
		printFindings(errs, path, found)
		return nil, exitUnreadable
	}
	for _, s := range set {
		target, quantity, _ := strings.Cut(s, "=")
		if err := f.Set(strings.TrimSpace(target), quantity); err != nil {
			fmt.Fprintf(errs, "barlitre %s: -set %s: %v\n", command, s, err)
			return nil, exitUnreadable
		}
	}
	if found := f.Findings(); circuit.AnyStops(found) {
		printFindings(errs, path, found)
		return nil, exitUnsolvable
	}
	s, err := audit.Solve(ctx, f, opt)
	if err != nil {
		fmt.Fprintf(errs, "barlitre %s: %s: %v\n", command, path, err)
		return nil, exitUnreadable
	}
	return s, exitOf(s, path, errs)
}
