package main

import (
	"fmt"
	"io"
	"math"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// blocks prints the catalog, straight from what the program itself uses.
func blocks(args []string, out, errs io.Writer) int {
	if len(args) == 0 {
		group := ""
		for _, k := range circuit.Catalog() {
			if k.Group != group {
				group = k.Group
				fmt.Fprintf(out, "%s\n", group)
			}
			fmt.Fprintf(out, "  %-16s %s\n", k.Name, k.Title)
		}
		fmt.Fprintln(out, "\nbarlitre blocks KIND tells all of one. A shaft is a line between ports called shaft.")
		return exitOK
	}
	for i, name := range args {
		k := circuit.KindNamed(name)
		if k == nil {
			fmt.Fprintf(errs, "barlitre blocks: there is no kind of block %q; barlitre blocks lists them\n", name)
			return exitUnreadable
		}
		if i > 0 {
			fmt.Fprintln(out)
		}
		printKind(out, k)
	}
	return exitOK
}

func printKind(w io.Writer, k *circuit.Kind) {
	fmt.Fprintf(w, "%s: %s\n%s\n", k.Name, k.Title, k.Text)
	fmt.Fprintln(w, "\nPorts")
	for _, p := range k.Ports {
		opt := ""
		if p.Optional {
			opt = " (may stay open)"
		}
		fmt.Fprintf(w, "  %-6s %-9s %s%s\n", p.Name, p.Type, p.Text, opt)
	}
	if len(k.Params) > 0 {
		fmt.Fprintln(w, "\nParameters")
	}
	for i := range k.Params {
		printParam(w, &k.Params[i])
	}
	if len(k.Losses) > 0 {
		fmt.Fprintln(w, "\nLosses")
	}
	for _, l := range k.Losses {
		fmt.Fprintf(w, "  %-20s to %-9s %s\n", l.Name, l.Sink, l.Text)
	}
	fmt.Fprintln(w, "\nEquations")
	for _, e := range k.Equations {
		fmt.Fprintf(w, "  %s\n      source: %s\n", e.Text, e.Source)
	}
}

func printParam(w io.Writer, p *circuit.Param) {
	name := p.Key
	if p.Symbol != "" {
		name += " (" + p.Symbol + ")"
	}
	fmt.Fprintf(w, "  %-26s %s: %s\n", name, p.Title, p.Text)
	var facts []string
	switch p.Type {
	case circuit.Choice:
		facts = append(facts, strings.Join(p.Choices, " | "))
	case circuit.AxisRef:
		facts = append(facts, "name of an axis")
	case circuit.FileRef:
		facts = append(facts, "name of a file")
	default:
		facts = append(facts, units.Preferred(p.Dim, units.Metric).Label(), interval(p))
	}
	switch {
	case p.Need:
		facts = append(facts, "must be given")
	case p.Derived != "":
		facts = append(facts, "default: "+p.Derived)
	case p.Default != "" && p.Origin != "":
		facts = append(facts, fmt.Sprintf("default %s, %s: %s", p.Default, p.Origin, p.Source))
	case p.Default != "":
		facts = append(facts, "default "+p.Default)
	}
	var said []string
	for _, f := range facts {
		if f != "" {
			said = append(said, f)
		}
	}
	fmt.Fprintf(w, "  %-26s   %s\n", "", strings.Join(said, "; "))
}

// interval writes the range of a number in its usual unit.
func interval(p *circuit.Param) string {
	u := units.Preferred(p.Dim, units.Metric)
	num := func(x float64) string { return units.Number(u.FromSI(x), 4) }
	low := "from " + num(p.Min)
	if p.Above {
		low = "above " + num(p.Min)
	}
	switch {
	case math.IsInf(p.Max, 1) && math.IsInf(p.Min, -1):
		return ""
	case math.IsInf(p.Max, 1):
		return low
	}
	return low + " to " + num(p.Max)
}
