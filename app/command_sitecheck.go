package main

import (
	"context"
	"fmt"
	"io"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/sitecheck"
	"barlitre/machines/units"
)

// siteCheck prints the test plan of the circuits as found, and what the readings in the file say.
func siteCheck(args []string, out, errs io.Writer) int {
	return eachSolved("sitecheck", args, errs, func(ctx context.Context, s *audit.Solution, system units.System) error {
		ladders, err := fixfirst.All(ctx, s, fixfirst.Options{System: system})
		if err != nil {
			return err
		}
		plans, err := sitecheck.All(ctx, s, sitecheck.Options{System: system, Ladders: ladders})
		if err != nil {
			return err
		}
		fmt.Fprintln(out, s.File.Title)
		for _, p := range plans {
			printSiteCheck(out, p, s.File.Readings)
		}
		return nil
	})
}

func printSiteCheck(w io.Writer, p *sitecheck.Plan, readings []audit.Reading) {
	heading(w, "Site check: "+p.Circuit)
	wrap(w, sitecheck.Intro)
	wrap(w, p.Basis())
	wrap(w, "States: "+sitecheck.StateText())
	rows := [][]string{{"", "stopped", "idling", "holding", "working"}}
	for _, pt := range p.Points {
		row := []string{pt.What + ", " + pt.Name}
		for _, s := range sitecheck.States() {
			row = append(row, p.Shown(pt, s.Name))
		}
		rows = append(rows, row)
		if drawn := p.RowAsDrawn(pt); drawn != nil {
			rows = append(rows, append([]string{"  as drawn"}, drawn...))
		}
	}
	fmt.Fprintln(w)
	table(w, rows)
	for _, pt := range p.Points {
		fmt.Fprintf(w, "\n  %s, %s\n", pt.What, pt.Place)
		wrap(w, "Gauge: "+pt.Gauge+"; "+pt.Rate+".")
		wrap(w, "Bad: "+p.Bad(pt)+".")
		wrap(w, "Caution: "+pt.Caution)
	}
	fmt.Fprintln(w)
	wrap(w, "Before you begin: "+sitecheck.Cautions)
	v := p.Compare(readings)
	auditTable(w, p.ReadTable(v))
	fmt.Fprintln(w)
	wrap(w, v.Text)
}
