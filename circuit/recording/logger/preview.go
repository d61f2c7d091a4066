package logger

import (
	"bytes"
	"math"
	"strconv"
)

// Preview is what the first and the last lines of a file come to.
type Preview struct {
	Names       []string     // of the columns, in the order of the file
	First, Last []PreviewRow // lines from the start of the file; lines up to its end
}

// PreviewRow is a line as it stands and as it is read.
type PreviewRow struct {
	Line  int       // from 1; 0 where it is not known, near the end of a large file
	Text  string    // as it stands
	Row   bool      // a row; else it is passed over
	Time  string    // as read, s
	Cells []string  // as they stand, by column
	SI    []float64 // by channel of the recipe, NaN where there is no value or it is text
}

// Of the lines at the start a preview shows at least so many rows, within so many lines.
const (
	previewRows  = 3
	previewLines = 60
)

// Preview reads n lines at either end, at the start more where a long head comes before the
// rows, without the corrections of an import. It goes by what Open saw, so it takes no time.
func (f *File) Preview(r Recipe, n int) (*Preview, error) {
	if err := r.check(); err != nil && r.Time.Form != Spaced {
		return nil, err
	}
	im, err := f.importer(r)
	if err != nil {
		return nil, err
	}
	p := &Preview{Names: im.names}
	rows := 0
	for l := newLines(bytes.NewReader(text(f.head, r.Encoding))); len(p.First) < n || rows < min(n, previewRows) && l.n < previewLines; {
		line := l.next()
		if line == nil {
			break
		}
		row := im.preview(l.n, line)
		if p.First = append(p.First, row); row.Row {
			rows++
		}
	}
	var last [][]byte
	l := newLines(bytes.NewReader(text(f.evenTail(), r.Encoding)))
	for line := l.next(); line != nil; line = l.next() {
		if last = append(last, bytes.Clone(line)); len(last) > n {
			last = last[1:]
		}
	}
	known := f.whole()
	for i, line := range last {
		at := 0
		if known {
			at = l.n - len(last) + i + 1
		}
		p.Last = append(p.Last, im.preview(at, line))
	}
	return p, nil
}

// evenTail is the tail from an even place of the file, where signs of two bytes begin.
func (f *File) evenTail() []byte {
	if size := f.parts[len(f.parts)-1].size; size > headBytes && size%2 == 1 && len(f.tail) > 0 {
		return f.tail[1:]
	}
	return f.tail
}

func (im *importer) preview(at int, line []byte) PreviewRow {
	row := PreviewRow{Line: at, Text: string(bytes.ToValidUTF8(line, []byte("?")))}
	im.cells = im.split.split(line, im.cells[:0])
	for _, c := range im.cells {
		row.Cells = append(row.Cells, string(c))
	}
	if at > 0 && at < im.Recipe.First {
		return row
	}
	seconds := math.NaN()
	if im.Recipe.Time.Form == Spaced {
		row.Row = im.numeric()
	} else if ns, x, d, ok := im.stamps.read(im.cell(im.timeA), im.cell(im.timeB)); ok {
		row.Row = true
		seconds, _ = im.since(ns, x, d)
		im.begun = true
	}
	if !row.Row {
		return row
	}
	if seconds == seconds {
		row.Time = strconv.FormatFloat(seconds, 'g', 10, 64)
	}
	for _, c := range im.Recipe.Channels {
		row.SI = append(row.SI, im.siOf(c))
	}
	return row
}

// siOf reads the cell of a channel.
func (im *importer) siOf(c Channel) float64 {
	for i, s := range im.by {
		if s == nil || s.Column != c.Column {
			continue
		}
		x, _, rest, ok := im.n.parse(im.cell(i))
		f, known := 1.0, true
		if len(rest) > 0 {
			f, known = s.suffix(rest)
		}
		if !ok || !known {
			return math.NaN()
		}
		if k := c.Scaling; k != nil {
			x = k.To[0] + (x-k.From[0])*(k.To[1]-k.To[0])/(k.From[1]-k.From[0])
		}
		return s.unit.ToSI(x * f)
	}
	return math.NaN()
}
