package logger

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"hash"
	"io"
	"math"
	"sort"
	"time"

	"barlitre/machines/units"
)

// Recording is what an import makes of a file.
type Recording struct {
	Name, SHA256 string // of the file as it was read
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
	split  splitter
	n      *numbers
	stamps stamps
	cells  [][]byte

	timeA, timeB, counterAt int
	texts                   []int     // columns of remarks
	by                      []*Series // by column
	raw                     column    // time stamps, s
	count                   column
	ns0                     int64
	x0                      float64
	begun                   bool

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
	if len(r.Questions) > 0 {
		return nil, fmt.Errorf("%s: %s", f.Name, r.Questions[0].Text)
	}
	if err := r.check(); err != nil {
		return nil, fmt.Errorf("%s: %w", f.Name, err)
	}
	im, err := f.importer(r)
	if err != nil {
		return nil, fmt.Errorf("%s: %w", f.Name, err)
	}
	in, err := f.open()
	if err != nil {
		return nil, err
	}
	defer in.Close()
	sum := sha256.New()
	src := &watched{in: in, sum: sum, ctx: ctx, total: f.Size, progress: progress}
	if err := im.stream(src); err != nil {
		return nil, fmt.Errorf("%s: %w", f.Name, err)
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
	im.names, _ = r.header(lines, width)
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

// stream reads all lines.
func (im *importer) stream(src io.Reader) error {
	l := newLines(decoded(src, im.Recipe.Encoding))
	for {
		line := l.next()
		if line == nil {
			break
		}
		if im.line = l.n; im.line < im.Recipe.First {
			continue
		}
		im.cells = im.split.split(line, im.cells[:0])
		if !im.row() {
			im.other(line)
		}
	}
	im.Lines = l.n
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

func (im *importer) cell(i int) []byte {
	if i >= 0 && i < len(im.cells) {
		return im.cells[i]
	}
	return nil
}

// row takes the cells as a row; false when they are none.
func (im *importer) row() bool {
	x, decimals := 0.0, 0
	if im.Recipe.Time.Form == Spaced {
		if !im.numeric() {
			return false
		}
		x = float64(im.rows) * im.Recipe.Time.Interval
		decimals = -1
	} else {
		a, b := im.cell(im.timeA), im.cell(im.timeB)
		if len(a) == 0 && len(b) == 0 {
			return false
		}
		ns, v, d, ok := im.stamps.read(a, b)
		if !ok {
			return false
		}
		if x, decimals = im.since(ns, v, d); !(math.Abs(x) < longest) {
			return false
		}
	}
	if im.begun = true; len(im.steps) == 0 || im.line-im.rows != im.steps[len(im.steps)-1].line-im.steps[len(im.steps)-1].row {
		im.steps = append(im.steps, step{im.rows, im.line})
	}
	im.raw.add(x, decimals)
	if im.counterAt >= 0 {
		c, d, _, ok := im.n.parse(im.cell(im.counterAt))
		if !ok {
			c, d = math.NaN(), 0
		}
		im.count.add(c, d)
	}
	for i, s := range im.by {
		if s != nil {
			s.take(im, im.cell(i))
		}
	}
	im.remarks()
	im.lengths()
	im.rows++
	return true
}

// since turns a stamp into seconds: as they stand where they are elapsed, from the first row on otherwise.
func (im *importer) since(ns int64, v float64, d int) (float64, int) {
	if !im.begun {
		im.ns0, im.x0 = ns, v
		im.start(ns, v)
	}
	switch im.Recipe.Time.Form {
	case Clock, Dated:
		ns -= im.ns0
		switch {
		case ns%1e6 == 0:
			d = 3
		case ns%1e3 == 0:
			d = 6
		default:
			d = 9
		}
		return float64(ns) / 1e9, d
	case Elapsed:
		if im.stamps.factor == 1 {
			return v, d
		}
		if d >= 0 && im.stamps.factor == 1e-3 {
			return im.stamps.seconds(v), d + 3
		}
		return im.stamps.seconds(v), -1
	}
	x := v - im.x0
	if d >= 0 && d < len(pow10) {
		x = math.Round(x*pow10[d]) / pow10[d]
	}
	return im.stamps.seconds(x), -1
}

func (im *importer) start(ns int64, v float64) {
	switch im.Recipe.Time.Form {
	case Dated:
		im.Start = time.Unix(0, ns).UTC().Format("2006-01-02 15:04:05.999")
	case Clock:
		im.Start = time.Unix(0, ns).UTC().Format("15:04:05.999")
	case Epoch:
		s := im.stamps.seconds(v)
		im.Start = time.Unix(0, 0).Add(time.Duration(s * 1e9)).UTC().Format("2006-01-02 15:04:05.999")
	case Serial: // day 25569 is 1 January 1970
		im.Start = time.Unix(int64(math.Round((v-25569)*units.Day)), 0).UTC().Format("2006-01-02 15:04:05")
	}
}

// numeric reports whether a line without stamps is a row: numbers where numbers belong, and one at least.
func (im *importer) numeric() bool {
	some := false
	for i, s := range im.by {
		if s == nil {
			continue
		}
		c := im.cell(i)
		if _, _, rest, ok := im.n.parse(c); ok && (len(rest) == 0 || unitAfter(rest)) {
			some = true
		} else if !isBlank(c) {
			return false
		}
	}
	return some
}

func (im *importer) remarks() {
	for _, i := range im.texts {
		c := im.cell(i)
		if isBlank(c) {
			im.said[i] = ""
			continue
		}
		if string(c) == im.said[i] {
			continue
		}
		im.said[i] = string(c)
		if len(im.marks) >= maxMarks {
			im.moreMark++
			continue
		}
		im.marks = append(im.marks, rowMark{im.rows, im.line, im.said[i]})
	}
}

// lengths notes rows with cells too few or too many.
func (im *importer) lengths() {
	n := len(im.cells)
	for n > len(im.names) && len(im.cells[n-1]) == 0 {
		n--
	}
	if n > len(im.names) {
		im.others.long.at(im.line)
	}
	if n < len(im.names) && im.split.sep != 0 && (im.timeA >= n || im.lastUsed() >= n) {
		im.others.short.at(im.line)
	}
}

func (im *importer) lastUsed() int {
	for i := len(im.by) - 1; i >= 0; i-- {
		if im.by[i] != nil {
			return i
		}
	}
	return -1
}

// lineOf returns the line that a row stands in.
func (im *importer) lineOf(row int) int {
	i := sort.Search(len(im.steps), func(i int) bool { return im.steps[i].row > row }) - 1
	if i < 0 {
		return 0
	}
	return im.steps[i].line + row - im.steps[i].row
}
