package logger

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"hash"
	"io"
	"sort"

	"barlitre/machines/units"
)

// Recording is what an import makes of a file.
type Recording struct {
	Name, SHA256 string // of the file as it was read; of all, one after another, where several are joined
	Recipe       Recipe
	Lines        int       // of the file
	Time         []float64 // s, rising
	Interval     float64   // s, the median step
	Start        string    // date and clock of the first row, "" where the file tells none
	Series       []*Series
	Marks        []Mark
	Corrections  []Correction
}

// Mark is a remark or an event that the file has beside its numbers.
type Mark struct {
	T    float64 // s
	Line int
	Text string
	File string // that Line is of, where several are joined
}

// maxMarks bounds the marks kept; more are counted.
const maxMarks = 10000

// Find returns a series by the name of its column, or nil.
func (r *Recording) Find(column string) *Series {
	for _, s := range r.Series {
		if s.Column == column {
			return s
		}
	}
	return nil
}

// importer reads rows.
type importer struct {
	*Recording
	f      *File
	names  []string
	units  []string // of the columns, as the head has them
	fault  error    // what ends the import
	split  splitter
	n      *numbers
	stamps stamps
	cells  [][]byte

	timeA, timeB, counterAt int
	texts                   []int     // columns of remarks
	by                      []*Series // by column
	raw                     column    // time stamps, s
	count                   column
	last                    float64 // s, of the last row, and where a counter began
	count0                  float64
	ns0                     int64
	x0                      float64
	begun                   bool

	parts    []begun
	steps    []step // where rows stop following line by line
	rows     int
	line     int
	heading  map[string]bool
	others   others
	said     []string // last remark, by column of remarks
	marks    []rowMark
	moreMark int
}

// step says that a row stands in a line, and the rows after it in the lines after it.
type step struct{ row, line int }

type rowMark struct {
	row, line int
	text      string
}

// Import reads the whole file. progress, which may be nil, is told how many bytes of the
// file are done, a few times a second at most speed. A cancelled context ends it.
func (f *File) Import(ctx context.Context, r Recipe, progress func(done, total int64)) (*Recording, error) {
	if q := r.Open(); len(q) > 0 {
		return nil, fmt.Errorf("%s: %s", f.Name, q[0].Text)
	}
	if err := r.check(); err != nil {
		return nil, fmt.Errorf("%s: %w", f.Name, err)
	}
	im, err := f.importer(r)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", f.Name, err)
	}
	sum := sha256.New()
	src := &watched{sum: sum, ctx: ctx, total: f.Size, progress: progress}
	for _, p := range f.parts {
		if err := im.part(p, src); err != nil {
			return nil, fmt.Errorf("%s: %w", p.name, err)
		}
	}
	im.SHA256 = hex.EncodeToString(sum.Sum(nil))
	if im.rows == 0 {
		return nil, fmt.Errorf("%s: no row was read: no line from %d on has a time stamp as the recipe says (%s)", f.Name, r.First, r.Time.Form)
	}
	if im.rows == 1 {
		return nil, fmt.Errorf("%s: has one row only; a recording has at least two", f.Name)
	}
	if err := im.finish(ctx); err != nil {
		return nil, fmt.Errorf("%s: %w", f.Name, err)
	}
	return im.Recording, nil
}

// watched counts and sums up what is read, and ends when it is told to.
type watched struct {
	in          io.Reader
	sum         hash.Hash
	ctx         context.Context
	done, total int64
	told        int64
	progress    func(done, total int64)
}

const tellBytes = 4 << 20

func (w *watched) Read(p []byte) (int, error) {
	if err := w.ctx.Err(); err != nil {
		return 0, err
	}
	n, err := w.in.Read(p)
	w.sum.Write(p[:n])
	w.done += int64(n)
	if w.progress != nil && (w.done-w.told >= tellBytes || err == io.EOF) {
		w.told = w.done
		w.progress(w.done, max(w.total, w.done))
	}
	return n, err
}

// check looks for what no file could be read with.
func (r *Recipe) check() error {
	in := func(what, s string, list []string) error {
		if !contains(list, s) {
			return fmt.Errorf("%s is %q, must be one of %q", what, s, list)
		}
		return nil
	}
	if err := in("encoding", r.Encoding, Encodings); err != nil {
		return err
	}
	if err := in("separator", r.Separator, Separators); err != nil {
		return err
	}
	if err := in("decimal sign", r.Decimal, []string{".", ","}); err != nil {
		return err
	}
	if err := in("sign between thousands", r.Thousands, []string{"", ".", ",", "'", " "}); err != nil {
		return err
	}
	if r.Thousands == r.Decimal {
		return fmt.Errorf("the decimal sign and the sign between thousands are both %q", r.Decimal)
	}
	if r.Separator == "fixed" && !sort.IntsAreSorted(r.Widths) || r.Separator == "fixed" && (len(r.Widths) < 2 || r.Widths[0] < 0) {
		return fmt.Errorf("a file of fixed width needs widths, rising, where its columns begin")
	}
	if !(r.Air == 0 || r.Air > 0.3*units.Bar && r.Air < 1.2*units.Bar) {
		return fmt.Errorf("the pressure of the air is %s, must lie between 30000 and 120000", units.Join(fmt.Sprintf("%g", r.Air), "Pa"))
	}
	for _, p := range r.Time.Pauses {
		if !(p > 0 && p < 1e9) {
			return fmt.Errorf("a pause is %s, must be above 0", units.Seconds(p, 6))
		}
	}
	switch t := r.Time; {
	case t.Form == Spaced && !(t.Interval > 0 && t.Interval < 1e9):
		return fmt.Errorf("rows without stamps need interval_s, above 0")
	case t.Form != Spaced && (len(t.Columns) == 0 || len(t.Columns) > 2 || len(t.Columns) == 2 && t.Form != Dated):
		return fmt.Errorf("%d columns hold the time stamps of form %q; name one, or for dated stamps a date and a clock", len(t.Columns), t.Form)
	case t.Form == Dated:
		return in("order of the date", t.Order, []string{"ymd", "dmy", "mdy"})
	default:
		return in("form of the time stamps", string(t.Form), []string{string(Elapsed), string(Clock), string(Dated), string(Serial), string(Epoch), string(Spaced)})
	}
}

// importer makes ready what a recipe says.
func (f *File) importer(r Recipe) (*importer, error) {
	im := &importer{Recording: &Recording{Name: f.Name, Recipe: r}, f: f, split: newSplitter(&r), n: newNumbers(&r), timeA: -1, timeB: -1, counterAt: -1, heading: map[string]bool{}}
	im.stamps = newStamps(r.Time, im.n)
	lines, err := f.heading(&r)
	if err != nil {
		return nil, err
	}
	width := 0
	for i, line := range lines {
		if i+1 < r.First && len(bytes.TrimSpace(line)) > 0 {
			im.heading[string(bytes.TrimSpace(line))] = true
		}
		if i+1 >= r.First {
			width = max(width, len(trimmed(im.split.split(line, nil))))
		}
	}
	im.names, im.units = r.header(lines, width)
	find := func(name string) (int, error) {
		for i, n := range im.names {
			if n == name {
				return i, nil
			}
		}
		var at int
		if k, _ := fmt.Sscanf(name, "column %d", &at); k == 1 && at >= 1 && at <= 4096 {
			for len(im.names) < at {
				im.names = append(im.names, fmt.Sprintf("column %d", len(im.names)+1))
			}
			return at - 1, nil
		}
		return -1, fmt.Errorf("there is no column %q; the file has %q", name, im.names)
	}
	for i, name := range r.Time.Columns {
		at, err := find(name)
		if err != nil {
			return nil, err
		}
		if i == 0 {
			im.timeA = at
		} else {
			im.timeB = at
		}
	}
	if r.Time.Counter != "" {
		if im.counterAt, err = find(r.Time.Counter); err != nil {
			return nil, err
		}
	}
	type at struct {
		s *Series
		i int
	}
	var found []at
	for _, c := range r.Channels {
		if c.Leave {
			continue
		}
		i, err := find(c.Column)
		if err != nil {
			return nil, err
		}
		if c.Text {
			im.texts = append(im.texts, i)
			continue
		}
		s, err := newSeries(c)
		if err != nil {
			return nil, err
		}
		found = append(found, at{s, i})
		im.Series = append(im.Series, s)
	}
	im.by, im.said = make([]*Series, len(im.names)), make([]string, len(im.names))
	for _, x := range found {
		im.by[x.i] = x.s
	}
	return im, nil
}

// part reads one of the files of a recording.
func (im *importer) part(p part, src *watched) error {
	in, err := p.open()
	if err != nil {
		return err
	}
	defer in.Close()
	src.in = in
	im.begin()
	return im.stream(src)
}

// stream reads all lines of a part.
func (im *importer) stream(src io.Reader) error {
	l := newLines(decoded(src, im.Recipe.Encoding))
	for {
		line := l.next()
		if line == nil {
			break
		}
		if im.line = im.Lines + l.n; im.line < im.Recipe.First {
			continue
		}
		im.cells = im.split.split(line, im.cells[:0])
		if !im.row() {
			if im.other(line); im.fault != nil {
				return im.fault
			}
		}
	}
	im.Lines += l.n
	if l.err != nil && l.err != io.EOF {
		if l.err == io.ErrShortBuffer {
			return fmt.Errorf("line %d is longer than %d MB; this is no table", l.n+1, maxLine>>20)
		}
		return l.err
	}
	return nil
}

// longest bounds time stamps [s], a few thousand years: what is beyond was damaged.
const longest = 1e11
