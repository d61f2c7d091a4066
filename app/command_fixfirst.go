package main

import (
	"context"
	"fmt"
	"io"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/machines/units"
)

// fixFirst finds and prices what is to be put right in the circuits as found of audit files.
func fixFirst(args []string, out, errs io.Writer) int {
	return eachSolved("fixfirst", args, errs, func(ctx context.Context, s *audit.Solution, system units.System) error {
		ladders, err := fixfirst.All(ctx, s, fixfirst.Options{System: system})
		if err != nil {
			return err
		}
		fmt.Fprintln(out, s.File.Title)
		for _, l := range ladders {
			printFixFirst(out, l.Page(system), true)
		}
		return nil
	})
}
