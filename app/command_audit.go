package main

import (
	"context"
	"encoding/json"
	"errors"
	"flag"
	"fmt"
	"io"
	"os"
	"os/signal"
	"path/filepath"
	"strings"
	"time"

	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/pdf"
	"barlitre/audit/sitecheck"
	"barlitre/audit/whole"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// auditCall is what the command line of `barlitre audit` asks for.
type auditCall struct {
	files          []string
	set            []string
	json, csv, pdf string
	request        string
	sheets         bool
	system         units.System
}

func parseAudit(args []string, errs io.Writer) (c auditCall, err error) {
	c.files, c.set, c.system, err = readCall("audit", args, errs, func(f *flag.FlagSet) {
		f.StringVar(&c.json, "json", "", "write the results as JSON to `OUT`; - writes nothing but them to standard output")
		f.StringVar(&c.csv, "csv", "", "write every time step as CSV into the folder `DIR`")
		f.StringVar(&c.pdf, "pdf", "", "write the report to `OUT`; with several audit files a folder")
		f.StringVar(&c.request, "request", "", "write the cooler request sheet to `OUT`, a .pdf or a .csv; with several audit files a folder")
		f.BoolVar(&c.sheets, "sheets", false, "add each circuit to the report on a page of its own, with a title block")
	})
	return c, err
}

// systemNamed returns the units of a name on the command line.
func systemNamed(name string) (units.System, error) {
	switch name {
	case "metric":
		return units.Metric, nil
	case "us":
		return units.US, nil
	case "si":
		return units.SI, nil
	}
	return units.Metric, fmt.Errorf("-units %s: use metric, us or si", name)
}

// auditFiles solves audit files and writes what was asked for.
func auditFiles(args []string, out, errs io.Writer) int {
	c, err := parseAudit(args, errs)
	if errors.Is(err, flag.ErrHelp) {
		return exitOK
	}
	if err != nil {
		fmt.Fprintln(errs, "barlitre audit:", err)
		return exitUnreadable
	}
	ctx, cancel := signal.NotifyContext(context.Background(), os.Interrupt)
	defer cancel()
	text := out
	if c.json == "-" {
		text = errs // JSON stands alone on standard output
	}
	worst := exitOK
	var results []*audit.Result
	for _, path := range c.files {
		result, code := c.one(ctx, path, text, errs)
		worst = worse(worst, code)
		if result != nil {
			results = append(results, result)
		}
	}
	if c.json != "" && len(results) > 0 {
		if err := c.writeJSON(results, out); err != nil {
			fmt.Fprintln(errs, "barlitre audit:", err)
			return exitUnreadable
		}
	}
	return worst
}

// worse picks the code that says more: unreadable, then unsolvable, then unbalanced.
func worse(a, b int) int {
	for _, c := range []int{exitUnreadable, exitUnsolvable, exitUnbalanced} {
		if a == c || b == c {
			return c
		}
	}
	return exitOK
}

// solve solves one file, and puts its tables in place once all are whole: until then those of an earlier call stay.
func (c *auditCall) solve(ctx context.Context, path string, errs io.Writer) (*audit.Solution, int) {
	if c.csv == "" {
		return solveFile(ctx, "audit", path, c.set, audit.Options{}, errs)
	}
	tables := c.tables(path)
	defer tables.Close()
	s, code := solveFile(ctx, "audit", path, c.set, audit.Options{CSV: tables.Create}, errs)
	if s == nil {
		return nil, code
	}
	if err := tables.Place(""); err != nil {
		fmt.Fprintln(errs, "barlitre audit: tables:", err)
		return nil, exitUnreadable
	}
	return s, code
}

// one audits one file.
func (c *auditCall) one(ctx context.Context, path string, text, errs io.Writer) (*audit.Result, int) {
	s, code := c.solve(ctx, path, errs)
	if s == nil {
		return nil, code
	}
	ladders, err := fixfirst.All(ctx, s, fixfirst.Options{System: c.system})
	if err != nil {
		fmt.Fprintf(errs, "barlitre audit: %s: %v\n", path, err)
		return nil, exitUnreadable
	}
	report := s.Report(c.system)
	if c.json != "-" {
		printReport(text, report)
		for _, l := range ladders {
			printFixFirst(text, l.Page(c.system), false)
		}
	}
	if c.pdf != "" {
		out := c.pdfPath(path)
		opt := pdf.Options{System: c.system, Date: time.Now()}
		for _, l := range ladders {
			opt.FixFirst = append(opt.FixFirst, l.Page(c.system))
		}
		if opt.SiteCheck, err = sitecheck.All(ctx, s, sitecheck.Options{System: c.system, Ladders: ladders}); err != nil {
			fmt.Fprintf(errs, "barlitre audit: %s: %v\n", path, err)
			return nil, exitUnreadable
		}
		if c.sheets {
			v := pdf.BusiestView(s)
			opt.Sheets = &v
		}
		if err := writeWhole(out, func(w io.Writer) error {
			return pdf.Write(w, s, opt)
		}); err != nil {
			fmt.Fprintln(errs, "barlitre audit:", err)
			return nil, exitUnreadable
		}
		fmt.Fprintf(text, "\nReport written to %s\n", out)
	}
	if c.request != "" {
		if err := c.writeRequest(path, s, text); err != nil {
			fmt.Fprintln(errs, "barlitre audit:", err)
			return nil, exitUnreadable
		}
	}
	result := s.Result()
	for _, l := range ladders {
		result.FixFirst = append(result.FixFirst, l.Result())
	}
	return result, code
}

// exitOf says by its code how a solution went.
func exitOf(s *audit.Solution, path string, errs io.Writer) int {
	code := exitOK
	for _, r := range s.Circuits {
		for _, f := range r.Findings {
			if f.Level == circuit.Stops {
				printFindings(errs, path, []circuit.Finding{f})
				code = worse(code, exitUnsolvable)
			}
		}
		for _, d := range r.Duties {
			for _, u := range d.Certificate.Unsolved {
				fmt.Fprintf(errs, "%s: %s, %s: %s\n", path, r.Circuit.Name, d.Duty.Name, u)
			}
			if d.Certificate.Unbalanced > 0 {
				code = worse(code, exitUnbalanced)
			}
		}
	}
	return code
}

// several reports whether output needs a name for each audit file.
func (c *auditCall) several() bool { return len(c.files) > 1 }

func baseName(path string) string {
	return strings.TrimSuffix(filepath.Base(path), filepath.Ext(path))
}

func (c *auditCall) pdfPath(path string) string { return c.outPath(c.pdf, path, ".pdf") }

// outPath is where an output of an audit file goes: the name that was asked for, or a file of its own in a folder.
func (c *auditCall) outPath(asked, path, ending string) string {
	if info, err := os.Stat(asked); c.several() || (err == nil && info.IsDir()) {
		return filepath.Join(asked, baseName(path)+ending)
	}
	return asked
}

// writeRequest writes the cooler request sheet, as a page or as a table by the ending of its name.
func (c *auditCall) writeRequest(path string, s *audit.Solution, text io.Writer) error {
	out := c.outPath(c.request, path, "-cooler.pdf")
	err := writeWhole(out, func(w io.Writer) error {
		if strings.EqualFold(filepath.Ext(out), ".csv") {
			return audit.WriteRequestCSV(w, s.Requests(c.system))
		}
		return pdf.WriteRequest(w, s, pdf.Options{System: c.system, Date: time.Now()})
	})
	if err == nil {
		fmt.Fprintf(text, "\nCooler request sheet written to %s\n", out)
	}
	return err
}

// tables collects the tables of one audit file, in a folder of its own where there are several.
func (c *auditCall) tables(path string) *whole.Folder {
	dir := c.csv
	if c.several() {
		dir = filepath.Join(dir, baseName(path))
	}
	return whole.NewFolder(dir, true)
}

// writeJSON writes one result, or a list of them when there are several files.
func (c *auditCall) writeJSON(results []*audit.Result, out io.Writer) error {
	write := func(w io.Writer) error {
		if !c.several() {
			return results[0].Write(w)
		}
		e := json.NewEncoder(w)
		e.SetIndent("", "  ")
		e.SetEscapeHTML(false)
		return e.Encode(results)
	}
	if c.json == "-" {
		return write(out)
	}
	return writeWhole(c.json, write)
}

// writeWhole writes a file completely or leaves what was there; its folder is made.
func writeWhole(path string, write func(io.Writer) error) error {
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		return err
	}
	return station.WriteWhole(path, write)
}
