package main

import (
	"context"
	"errors"
	"flag"
	"fmt"
	"io"
	"maps"
	"math"
	"os"
	"os/signal"
	"path/filepath"
	"strings"
	"time"

	"barlitre/audit"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// importCall is what the command line of `barlitre import` asks for.
type importCall struct {
	files   []string
	rows    int
	yaml    bool
	answers [][2]string
	told    string // file of what is known of the recording
	choices map[string]string
	rate    []string // two channels
	cycles  []string // channels that move, then those that are held
	held    []string
	also    []*importAlso
}

func parseImport(args []string, errs io.Writer) (importCall, error) {
	c := importCall{choices: map[string]string{}}
	f := flag.NewFlagSet("barlitre import", flag.ContinueOnError)
	f.SetOutput(errs)
	f.IntVar(&c.rows, "rows", 5, "how many of the first and last lines to show")
	f.BoolVar(&c.yaml, "yaml", false, "print what a duty of an audit file has to say of this recording")
	f.Func("answer", "answer a question, as in `order=dmy`", func(s string) error {
		field, choice, ok := strings.Cut(s, "=")
		c.answers = append(c.answers, [2]string{field, choice})
		return unless(ok, "write FIELD=CHOICE")
	})
	f.StringVar(&c.told, "told", "", "lay over the guess what `FILE` says of the recording (YAML with answers, recipe, channels)")
	f.Func("choose", "answer a correction otherwise, as in `\"p1: zero offset=leave\"`", func(s string) error {
		key, choice, ok := strings.Cut(s, "=")
		c.choices[key] = choice
		return unless(ok, "write KEY=CHOICE")
	})
	f.Func("rate", "check whether `EFFORT,FLOW` (two channels whose product is power) are logged fast enough", func(s string) error {
		c.rate = strings.Split(s, ",")
		return unless(len(c.rate) == 2, "name two channels, as in p1,q1")
	})
	f.Func("cycles", "find cycles and states by `CHANNEL,...` that move", func(s string) error { c.cycles = strings.Split(s, ","); return nil })
	f.Func("held", "with -cycles: `CHANNEL,...` that are held, such as pressures", func(s string) error { c.held = strings.Split(s, ","); return nil })
	f.Func("also", "set the channels of another logger beside these: `FILE`, or FILE,FILE,... where it was split", c.addAlso)
	f.Func("clock", "how the clock of the -also before it is set: `CHANNEL=ITS CHANNEL` that both logged, or a time that is added to its times, as in -6.8s", c.setClock)
	files, err := parseMixed(f, args)
	switch {
	case err != nil:
		return c, err
	case len(files) == 0:
		return c, errors.New("name one recording, or the files that it was split into")
	case c.rows < 0 || c.rows > 1000:
		return c, errors.New("-rows must lie between 0 and 1000")
	}
	c.files, err = listed(files)
	return c, err
}

// listed puts files in the place of patterns such as press_*.csv, in the order in which people count.
func listed(names []string) (out []string, err error) {
	for _, n := range names {
		if _, err := os.Stat(n); err == nil || !strings.ContainsAny(n, "*?[") {
			out = append(out, n)
			continue
		}
		found, err := filepath.Glob(n)
		if err != nil || len(found) == 0 {
			return nil, fmt.Errorf("%s: there is no such file", n)
		}
		logger.InOrder(found)
		out = append(out, found...)
	}
	return out, nil
}

func unless(ok bool, text string) error {
	if !ok {
		return errors.New(text)
	}
	return nil
}

// importFile reads a recording as an audit would and prints what was guessed, found and done.
func importFile(args []string, out, errs io.Writer) int {
	c, err := parseImport(args, errs)
	if errors.Is(err, flag.ErrHelp) {
		return exitOK
	}
	if err == nil {
		err = c.run(out, errs)
	}
	if err != nil {
		fmt.Fprintln(errs, "barlitre import:", err)
		return exitUnreadable
	}
	return exitOK
}

func (c *importCall) run(out, errs io.Writer) error {
	file, err := logger.OpenFiles(c.files...)
	if err != nil {
		return err
	}
	r := file.Guess()
	if c.told != "" {
		text, err := os.ReadFile(c.told)
		if err != nil {
			return err
		}
		if err := r.Tell(text); err != nil {
			return fmt.Errorf("%s: %w", c.told, err)
		}
	}
	if err := c.openAlso(r); err != nil {
		return err
	}
	for _, a := range c.answers {
		if err := c.answered(&r, a[0], a[1]); err != nil {
			return err
		}
	}
	if r.Choices == nil {
		r.Choices = c.choices
	}
	maps.Copy(r.Choices, c.choices)
	printRecipe(out, file, r)
	if p, err := file.Preview(r, c.rows); err == nil {
		printPreview(out, r, p)
	}
	printQuestions(out, r)
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt)
	defer stop()
	rec, err := file.Import(ctx, r, progressLine(errs))
	if err != nil {
		return err
	}
	printRecording(out, rec)
	setup := audit.Setup{File: filepath.Base(c.files[0]), More: basesOf(c.files[1:]), SHA256: rec.SHA256, Recipe: r}
	if rec, setup.Also, err = c.beside(ctx, rec, out, errs); err != nil {
		return err
	}
	if len(c.rate) > 0 {
		if err := printRate(out, rec, c.rate); err != nil {
			return err
		}
	}
	if len(c.cycles) > 0 {
		if err := printCycles(out, rec, c.cycles, c.held, c.rate); err != nil {
			return err
		}
	}
	if c.yaml {
		text, err := setup.Text()
		if err != nil {
			return err
		}
		heading(out, "For a duty of an audit file")
		fmt.Fprintln(out, text)
		fmt.Fprintln(out)
		wrap(out, "Give the duty its hours a year besides, and 0 h to a duty that it stands in place of: the year has both otherwise.")
	}
	return nil
}

// printQuestions puts what a file leaves open.
func printQuestions(w io.Writer, r logger.Recipe) {
	for _, q := range r.Open() {
		heading(w, "Question")
		wrap(w, fmt.Sprintf("%s: %s (-answer \"%s=…\")", q.Field, q.Text, q.Field))
	}
}

func basesOf(paths []string) (names []string) {
	for _, p := range paths {
		names = append(names, filepath.Base(p))
	}
	return names
}

// progressLine shows how far a long file is, in one line that it writes over.
func progressLine(w io.Writer) func(done, total int64) {
	last := time.Now()
	return func(done, total int64) {
		if done < total && time.Since(last) < 500*time.Millisecond || total < 64<<20 {
			return
		}
		last = time.Now()
		fmt.Fprintf(w, "\r%d of %d MB", done>>20, total>>20)
		if done >= total {
			fmt.Fprintln(w)
		}
	}
}

func printRecipe(w io.Writer, f *logger.File, r logger.Recipe) {
	fmt.Fprintf(w, "%s, %d bytes\n", f.Name, f.Size)
	heading(w, "Guess")
	head := "none"
	if r.Head > 0 {
		head = fmt.Sprintf("line %d", r.Head)
	}
	if r.UnitsRow > 0 {
		head += fmt.Sprintf(", units in line %d", r.UnitsRow)
	}
	rows := [][]string{{"text", r.Encoding}, {"separator", r.Separator}, {"decimal sign", r.Decimal}, {"head", head}, {"first row", fmt.Sprintf("line %d", r.First)},
		{"time stamps", strings.TrimSpace(fmt.Sprintf("%s %s %s %s", r.Time.Form, strings.Join(r.Time.Columns, " and "), r.Time.Order, r.Time.Unit))}}
	if r.Thousands != "" {
		rows = append(rows, []string{"thousands", fmt.Sprintf("%q", r.Thousands)})
	}
	if r.Time.Counter != "" {
		rows = append(rows, []string{"record counter", r.Time.Counter})
	}
	for _, c := range r.Channels {
		rows = append(rows, []string{c.Column, channelText(c)})
	}
	table(w, rows)
	for _, why := range r.Reasons {
		wrap(w, why)
	}
}

func channelText(c logger.Channel) string {
	if c.Text {
		return "text, kept as marks"
	}
	text := c.Quantity
	if text == "" {
		text = "plain number"
	}
	if c.Unit != "" {
		text += " in " + c.Unit
	}
	if s := c.Scaling; s != nil {
		text += fmt.Sprintf(", %g to %g %s for %g to %g", s.From[0], s.From[1], s.Signal, s.To[0], s.To[1])
	}
	if c.Absolute {
		text += ", against vacuum"
	}
	if c.Counter {
		text += ", counts up"
	}
	if c.Kind != "" {
		text += ", " + string(c.Kind) + " of an interval"
	}
	return text
}

func printPreview(w io.Writer, r logger.Recipe, p *logger.Preview) {
	var names []string
	for _, c := range r.Channels {
		names = append(names, c.Column)
	}
	for _, part := range []struct {
		title string
		rows  []logger.PreviewRow
	}{{"First lines", p.First}, {"Last lines", p.Last}} {
		heading(w, part.title)
		for _, row := range part.rows {
			at := "     …"
			if row.Line > 0 {
				at = fmt.Sprintf("%6d", row.Line)
			}
			fmt.Fprintf(w, "%s  %s\n", at, row.Text)
			if !row.Row {
				continue
			}
			var read []string
			for i, x := range row.SI {
				if !math.IsNaN(x) {
					read = append(read, fmt.Sprintf("%s %.6g", names[i], x))
				}
			}
			fmt.Fprintf(w, "        = t %s s, %s (SI)\n", row.Time, strings.Join(read, ", "))
		}
	}
}

func printRecording(w io.Writer, rec *logger.Recording) {
	heading(w, "Read")
	show := func(x float64, d units.Dim) string { return units.Format(x, units.Preferred(d, units.Metric), 5) }
	rows := [][]string{{"rows", fmt.Sprint(len(rec.Time))}, {"lasts", show(rec.Time[len(rec.Time)-1]-rec.Time[0], units.Time)}, {"a row every", show(rec.Interval, units.Time)}, {"SHA-256", rec.SHA256}}
	if rec.Start != "" {
		rows = append(rows, []string{"begins", rec.Start})
	}
	for _, s := range rec.Series {
		low, high, sum := math.Inf(1), math.Inf(-1), 0.0
		v := s.Values()
		for _, x := range v {
			low, high, sum = math.Min(low, x), math.Max(high, x), sum+x
		}
		rows = append(rows, []string{s.Column, units.Range(show(low, s.Dim), show(high, s.Dim)) + ", mean " + show(sum/float64(len(v)), s.Dim)})
	}
	table(w, rows)
	heading(w, "Found and done")
	if len(rec.Corrections) == 0 {
		wrap(w, "nothing; the data are as they stand in the file")
	}
	for _, c := range rec.Corrections {
		text := c.String()
		if c.Warns {
			text = "⚠ " + text
		}
		if len(c.Choices) > 1 {
			text += fmt.Sprintf(" [%s = %s; may be %s]", c.Key, c.Choice, strings.Join(c.Choices, ", "))
		}
		wrap(w, text)
	}
	for i, m := range rec.Marks {
		if i == 20 {
			wrap(w, fmt.Sprintf("and %d marks more", len(rec.Marks)-i))
			break
		}
		wrap(w, fmt.Sprintf("mark at %.6g s, line %d: %s", m.T, m.Line, m.Text))
	}
}
