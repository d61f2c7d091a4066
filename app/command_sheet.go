package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"os/signal"
	"slices"
	"strings"
	"time"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pdf"
	"barlitre/machines/units"
)

// sheetCall is what the command line of `barlitre sheet` asks for.
type sheetCall struct {
	file, out      string
	circuits       []string
	duty, at, size string
	cycle          bool
	hide           figures.Signs
	system         units.System
}

func parseSheet(args []string, errs io.Writer) (c sheetCall, err error) {
	f := flag.NewFlagSet("barlitre sheet", flag.ContinueOnError)
	f.SetOutput(errs)
	f.StringVar(&c.out, "pdf", "", "write the sheets to `OUT`")
	f.Func("circuit", "print this `CIRCUIT`; may be repeated; all when not given", func(s string) error {
		c.circuits = append(c.circuits, s)
		return nil
	})
	f.StringVar(&c.duty, "duty", "", "results of this `DUTY`; with neither duty nor time those where most power is drawn")
	f.StringVar(&c.at, "at", "", "results at this `TIME` of the duty, such as 2.5 s")
	f.StringVar(&c.size, "paper", pdf.A4.Name, "`A4` or A3, landscape")
	f.BoolVar(&c.cycle, "cycle", false, "discs show the heat of the cycle, not of the instant")
	f.Func("hide", "leave `SIGNS` out, with commas between: tint,width,chevrons,discs,numbers", c.hideSigns)
	system := f.String("units", "metric", "units of the drawing: `metric`, us or si")
	files, err := parseMixed(f, args)
	if err != nil {
		return c, err
	}
	if c.system, err = systemNamed(*system); err != nil {
		return c, err
	}
	if len(files) != 1 || c.out == "" {
		return c, errors.New("name one audit file, and with -pdf where the sheets go")
	}
	c.file = files[0]
	return c, nil
}

func (c *sheetCall) hideSigns(list string) error {
	for _, word := range strings.Split(list, ",") {
		i := slices.IndexFunc(figures.AllSigns, func(s figures.Signs) bool { return s.Word() == strings.TrimSpace(word) })
		if i < 0 {
			return fmt.Errorf("%q is none of tint, width, chevrons, discs, numbers", word)
		}
		c.hide |= figures.AllSigns[i]
	}
	return nil
}

// printSheets prints circuits as they are drawn.
func printSheets(args []string, out, errs io.Writer) int {
	c, err := parseSheet(args, errs)
	if errors.Is(err, flag.ErrHelp) {
		return exitOK
	}
	fail := func(err error) int {
		fmt.Fprintln(errs, "barlitre sheet:", err)
		return exitUnreadable
	}
	if err != nil {
		return fail(err)
	}
	f, found := audit.Read(c.file)
	if f == nil {
		printFindings(errs, c.file, found)
		return exitUnreadable
	}
	ctx, cancel := signal.NotifyContext(context.Background(), os.Interrupt)
	defer cancel()
	s, err := audit.Solve(ctx, f, audit.Options{})
	if errors.Is(err, context.Canceled) {
		return fail(err)
	}
	if err != nil { // it is drawn without results
		fmt.Fprintf(errs, "%s: %v\n", c.file, err)
	}
	v, err := c.view(f, s)
	if err != nil {
		return fail(err)
	}
	err = writeWhole(c.out, func(w io.Writer) error {
		return pdf.WriteSheets(w, f, s, v, pdf.Options{System: c.system, Date: time.Now()})
	})
	if err != nil {
		return fail(err)
	}
	fmt.Fprintf(out, "Sheets written to %s\n", c.out)
	if s == nil {
		return exitUnsolvable
	}
	return exitOf(s, c.file, errs)
}

// view is what the sheets show.
func (c *sheetCall) view(f *audit.File, s *audit.Solution) (pdf.View, error) {
	v := pdf.View{}
	if s != nil {
		v = pdf.BusiestView(s)
	}
	v.Circuits, v.Cycle, v.Hide = c.circuits, c.cycle, c.hide
	i := slices.IndexFunc(pdf.Papers, func(p pdf.Paper) bool { return strings.EqualFold(p.Name, c.size) })
	if i < 0 {
		return v, fmt.Errorf("-paper %s: use A4 or A3", c.size)
	}
	v.Paper = pdf.Papers[i]
	if c.duty != "" {
		v.Duty, v.At = -1, 0
		for i, d := range f.Duties {
			if d.Name == c.duty {
				v.Duty = i
			}
		}
		if v.Duty < 0 {
			return v, fmt.Errorf("-duty: there is no duty %q in %s", c.duty, c.file)
		}
	}
	if c.at != "" {
		t, _, err := units.Parse(c.at, units.Time)
		if err != nil {
			return v, fmt.Errorf("-at: %w", err)
		}
		if d := f.Duties[v.Duty].Time; len(d) > 0 && (t < d[0] || t > d[len(d)-1]) {
			return v, fmt.Errorf("-at %s: duty %q lasts from %g to %g s", c.at, f.Duties[v.Duty].Name, d[0], d[len(d)-1])
		}
		v.At = t
	}
	return v, nil
}
