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

	"barlitre/audit"
	"barlitre/audit/pdf"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// auditCall is what the command line of `barlitre audit` asks for.
type auditCall struct {
	files          []string
	set            []string
	json, csv, pdf string
	sheets         bool
	system         units.System
}

func parseAudit(args []string, errs io.Writer) (auditCall, error) {
	var c auditCall
	f := flag.NewFlagSet("barlitre audit", flag.ContinueOnError)
	f.SetOutput(errs)
	f.Func("set", "set `[CIRCUIT/]BLOCK.PARAM=QUANTITY` before solving; may be repeated", func(s string) error {
		if !strings.Contains(s, "=") {
			return fmt.Errorf("%q has no =; write BLOCK.PARAM=QUANTITY, such as RV1.crack=\"150 bar\"", s)
		}
		c.set = append(c.set, s)
		return nil
	})
	f.StringVar(&c.json, "json", "", "write the results as JSON to `OUT`; - writes nothing but them to standard output")
	f.StringVar(&c.csv, "csv", "", "write every time step as CSV into the folder `DIR`")
	f.StringVar(&c.pdf, "pdf", "", "write the report to `OUT`; with several audit files a folder")
	f.BoolVar(&c.sheets, "sheets", false, "add each circuit to the report on a page of its own, with a title block")
	system := f.String("units", "metric", "units of the text and the report: `metric`, us or si")
	var err error
	if c.files, err = parseMixed(f, args); err != nil {
		return c, err
	}
	if c.system, err = systemNamed(*system); err != nil {
		return c, err
	}
	if len(c.files) == 0 {
		return c, errors.New("name at least one audit file")
	}
	return c, nil
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

// one audits one file.
func (c *auditCall) one(ctx context.Context, path string, text, errs io.Writer) (*audit.Result, int) {
	f, found := audit.Read(path)
	if f == nil {
		printFindings(errs, path, found)
		return nil, exitUnreadable
	}
	for _, s := range c.set {
		target, quantity, _ := strings.Cut(s, "=")
		if err := f.Set(strings.TrimSpace(target), quantity); err != nil {
			fmt.Fprintf(errs, "barlitre audit: -set %s: %v\n", s, err)
			return nil, exitUnreadable
		}
	}
	if found := f.Findings(); circuit.AnyStops(found) {
		printFindings(errs, path, found)
		return nil, exitUnsolvable
	}
	s, err := audit.Solve(ctx, f, audit.Options{CSV: c.csvFiles(path)})
	if err != nil {
		fmt.Fprintf(errs, "barlitre audit: %s: %v\n", path, err)
		return nil, exitUnreadable
	}
	report := s.Report(c.system)
	if c.json != "-" {
		printReport(text, report)
	}
	if c.pdf != "" {
		out := c.pdfPath(path)
		if err := writeWhole(out, func(w io.Writer) error {
			opt := pdf.Options{System: c.system, Date: time.Now()}
			if c.sheets {
				v := pdf.BusiestView(s)
				opt.Sheets = &v
			}
			return pdf.Write(w, s, opt)
		}); err != nil {
			fmt.Fprintln(errs, "barlitre audit:", err)
			return nil, exitUnreadable
		}
		fmt.Fprintf(text, "\nReport written to %s\n", out)
	}
	return s.Result(), exitOf(s, path, errs)
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

func (c *auditCall) pdfPath(path string) string {
	if info, err := os.Stat(c.pdf); c.several() || (err == nil && info.IsDir()) {
		return filepath.Join(c.pdf, baseName(path)+".pdf")
	}
	return c.pdf
}

// csvFiles opens the tables of one audit file, in a folder of its own where there are several.
func (c *auditCall) csvFiles(path string) func(string) (io.WriteCloser, error) {
	if c.csv == "" {
		return nil
	}
	dir := c.csv
	if c.several() {
		dir = filepath.Join(dir, baseName(path))
	}
	return func(name string) (io.WriteCloser, error) {
		if err := os.MkdirAll(dir, 0o755); err != nil {
			return nil, err
		}
		return os.Create(filepath.Join(dir, name))
	}
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

// writeWhole writes a file completely or leaves what was there.
func writeWhole(path string, write func(io.Writer) error) error {
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		return err
	}
	f, err := os.CreateTemp(filepath.Dir(path), "."+filepath.Base(path)+"-*")
	if err != nil {
		return err
	}
	defer os.Remove(f.Name())
	err = write(f)
	if closed := f.Close(); err == nil {
		err = closed
	}
	if err == nil {
		err = os.Chmod(f.Name(), 0o644)
	}
	if err == nil {
		err = os.Rename(f.Name(), path)
	}
	return err
}
