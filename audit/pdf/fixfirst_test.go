package pdf

import (
	"context"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/sitecheck"
	"barlitre/machines/units"
	"barlitre/samples"
)

// adviceOf is a report with all that it may hold.
func adviceOf(t *testing.T, s *audit.Solution) Options {
	t.Helper()
	opt := Options{Date: day}
	ladders, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range ladders {
		opt.FixFirst = append(opt.FixFirst, l.Page(units.Metric))
	}
	if opt.SiteCheck, err = sitecheck.All(context.Background(), s, sitecheck.Options{Ladders: ladders}); err != nil {
		t.Fatal(err)
	}
	return opt
}

// The plan of every sample is one page, so is the decision with what is to be put right before, and what is wrong stands in the report with its price, its caution and the split.
func TestFixFirstAndSiteCheckPages(t *testing.T) {
	for _, name := range samples.Names() {
		data, err := samples.Read(name)
		if err != nil {
			t.Fatal(err)
		}
		f, _ := audit.Parse(data, nil, name)
		if name == "quayside-winch.yaml" {
			for _, set := range [][2]string{{"As found/RV1.crack", "200 bar"}, {"As found/P1.wear", "3"}} {
				if err := f.Set(set[0], set[1]); err != nil {
					t.Fatal(err)
				}
			}
		}
		s := solve(t, f)
		opt := adviceOf(t, s)
		opt.Without = []Section{Circuits, Energy, Machines, Duty, Heat, Money, Parameters, Findings}
		if n := pageOf(t, lay(t, name, s, opt), Basis); n != 1 && name != "quayside-winch.yaml" { // there two faults and what they are worth are told as well
			t.Errorf("%s: what is decided takes %d pages", name, n)
		}
		opt.Without = []Section{Decision, Basis, Circuits, Energy, Machines, Duty, Heat, Money, Parameters, Findings}
		pages := lay(t, name, s, opt)
		first := pageOf(t, pages, SiteCheck)
		if next := pageOf(t, pages, Method); next != first+1 {
			t.Errorf("%s: the site check takes %d pages", name, next-first)
		}
		if name != "quayside-winch.yaml" {
			continue
		}
		all := strings.Join(strings.Fields(everything(pages)), " ")
		for _, want := range []string{"RV1: relief at or below compensator", "P1: worn pump", "58 180 kWh", "what Closed circuit adds", "sealed by the machine's maker"} {
			if !strings.Contains(strings.ReplaceAll(all, "\u202f", " "), want) {
				t.Errorf("%q is not in the report", want)
			}
		}
	}
}
