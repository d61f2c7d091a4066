package logger

import (
	"math"
	"sort"
	"time"

	"barlitre/machines/units"
)

// cell returns a cell of the line at hand, nothing where it has none.
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
		x, decimals = im.counted(), -1
		im.last = x
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

// counted is the time of a row without a stamp: by the counter of records where there is one,
// for then a lost row leaves its gap, else by the rows so far.
func (im *importer) counted() float64 {
	h := im.Recipe.Time.Interval
	if im.counterAt < 0 {
		return float64(im.rows) * h
	}
	switch c, _, _, ok := im.n.parse(im.cell(im.counterAt)); {
	case !im.begun:
		if im.count0 = c; !ok {
			im.count0 = 1
		}
		return 0
	case ok && math.Abs((c-im.count0)*h) < longest:
		return (c - im.count0) * h
	}
	return im.last + h
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
		im.Start = time.Unix(0, ns).UTC().Format(startForm)
	case Clock:
		im.Start = time.Unix(0, ns).UTC().Format("15:04:05.999")
	case Epoch:
		s := im.stamps.seconds(v)
		im.Start = time.Unix(0, 0).Add(time.Duration(s * 1e9)).UTC().Format(startForm)
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
