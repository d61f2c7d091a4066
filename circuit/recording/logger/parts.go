package logger

import (
	"context"
	"crypto/sha256"
	"encoding/hex"
	"fmt"
	"io"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"barlitre/machines/units"
)

// part is one of the files that a recording was split into.
type part struct {
	name string
	size int64
	open func() (io.ReadCloser, error)
}

// OpenFiles opens several files as one recording that was split into them, such as one an
// hour, or at the most rows that a spreadsheet holds. They are given in order of time.
func OpenFiles(paths ...string) (*File, error) {
	var names []string
	var sizes []int64
	for _, p := range paths {
		info, err := os.Stat(p)
		if err != nil {
			return nil, err
		}
		names, sizes = append(names, filepath.Base(p)), append(sizes, info.Size())
	}
	return OpenSources(names, sizes, func(k int) (io.ReadCloser, error) { return os.Open(paths[k]) })
}

// OpenSources is OpenSource for a recording that was split: reopen gives part k from its start.
func OpenSources(names []string, sizes []int64, reopen func(k int) (io.ReadCloser, error)) (*File, error) {
	if len(names) == 0 {
		return nil, fmt.Errorf("no file is named")
	}
	f := &File{Name: NameOf(names)}
	for k, name := range names {
		f.parts = append(f.parts, part{name, sizes[k], func() (io.ReadCloser, error) { return reopen(k) }})
		f.Size += sizes[k]
	}
	return f, f.ends()
}

// NameOf is what a recording of these files is called.
func NameOf(names []string) string {
	if n := len(names); n > 1 {
		return fmt.Sprintf("%s to %s (%d files)", names[0], names[n-1], n)
	}
	return names[0]
}

// Sum returns the SHA-256 of files one after another, as a Recording has it, with progress and cancel as Import has them.
func Sum(ctx context.Context, sizes []int64, open func(k int) (io.ReadCloser, error), progress func(done, total int64)) (string, error) {
	src := &watched{sum: sha256.New(), ctx: ctx, progress: progress}
	for _, n := range sizes {
		src.total += n
	}
	for k := range sizes {
		in, err := open(k)
		if err != nil {
			return "", err
		}
		src.in = in
		_, err = io.Copy(io.Discard, src)
		in.Close()
		if err != nil {
			return "", err
		}
	}
	return hex.EncodeToString(src.sum.Sum(nil)), nil
}

// ends reads the start of the first part and the end of the last one.
func (f *File) ends() error {
	first, last := f.parts[0], f.parts[len(f.parts)-1]
	in, err := first.open()
	if err != nil {
		return err
	}
	defer in.Close()
	if f.head, err = io.ReadAll(io.LimitReader(in, headBytes)); err != nil {
		return err
	}
	if len(f.parts) > 1 {
		if in, err = last.open(); err != nil {
			return err
		}
		defer in.Close()
		if last.size <= headBytes {
			f.tail, err = io.ReadAll(in)
			return err
		}
	} else if f.tail = f.head; last.size <= headBytes {
		return nil
	}
	if s, ok := in.(io.Seeker); ok {
		if _, err := s.Seek(-tailBytes, io.SeekEnd); err != nil {
			return err
		}
	}
	f.tail, err = io.ReadAll(in)
	return err
}

// whole reports whether the head is all that there is.
func (f *File) whole() bool { return len(f.parts) == 1 && f.Size <= headBytes }

// InOrder sorts names of files as people count: part2 before part10.
func InOrder(names []string) {
	slices.SortStableFunc(names, func(a, b string) int { return strings.Compare(counting(a), counting(b)) })
}

// counting writes numbers with leading zeros.
func counting(name string) string {
	var b strings.Builder
	for i := 0; i < len(name); {
		k := i
		for k < len(name) && name[k] >= '0' && name[k] <= '9' {
			k++
		}
		if k > i {
			fmt.Fprintf(&b, "%030s", name[i:k])
			i = k
			continue
		}
		b.WriteByte(name[i])
		i++
	}
	return b.String()
}

// begun is where a part begins.
type begun struct{ row, line int }

// begin makes ready for part k.
func (im *importer) begin() {
	im.parts = append(im.parts, begun{im.rows, im.Lines})
	im.others.ends(im.rows)
}

// further reports whether the line at hand stands above the first row of a part that is not the first.
func (im *importer) further() bool {
	n := len(im.parts)
	return n > 1 && im.parts[n-1].row == im.rows
}

// joints looks at where one part follows another. Rows that a part repeats of the one
// before are dropped: their times become NaN.
func (tl *timeline) joints() error {
	if len(tl.parts) < 2 {
		return nil
	}
	tl.Corrections = append(tl.Corrections, Correction{Key: "joined", Count: len(tl.parts), Text: fmt.Sprintf("%d files make one recording", len(tl.parts)), Done: "joined in the order in which they are named"})
	over, gap := Correction{Key: "overlap", Choices: []string{"keep first", "append"}, Warns: true}, Correction{Key: "gap between files"}
	over.Choice = tl.choice(over.Key, over.Choices...)
	same, most, widest := 0, 0.0, 0.0
	for k := 1; k < len(tl.parts); k++ {
		a, b, end := tl.parts[k-1].row, tl.parts[k].row, tl.rows
		if k+1 < len(tl.parts) {
			end = tl.parts[k+1].row
		}
		for a > 0 && tl.t[a] != tl.t[a] { // dropped
			a--
		}
		if b == 0 || b == end || b == a {
			continue
		}
		last := tl.latest(a, b)
		d := tl.t[b] - last
		switch {
		case d > 1.5*tl.dt && tl.Recipe.Time.Form != Spaced:
			if gap.Count++; d > widest {
				widest, gap.Line, gap.T = d, tl.lineOf(b), tl.t[b]
			}
		case d <= 0 && tl.absolute() && tl.t[b] < tl.t[a] && over.Choice == "keep first":
			return fmt.Errorf("%s begins %s before the file before it; name them in order of time", tl.f.parts[k].name, units.Seconds(tl.t[a]-tl.t[b], 6))
		case d <= 0 && tl.repeats(a, b, last) && over.Choice == "keep first":
			if over.Count == 0 {
				over.Line, over.T = tl.lineOf(b), tl.t[b]
			}
			n, alike := tl.dropTo(b, end, last)
			over.Count, same, most = over.Count+n, same+alike, max(most, -d)
		}
	}
	if over.Count > 0 {
		over.Text = fmt.Sprintf("%s of a file that the one before has already, by up to %s; %d of them with the same values", counted(over.Count, "row"), units.Seconds(most, 6), same)
		over.Done, over.Warns = "left out, the file before counts", same < over.Count
		tl.Corrections = append(tl.Corrections, over)
	}
	if gap.Count > 0 {
		gap.Text = fmt.Sprintf("%s between the files, the widest of %s", counted(gap.Count, "gap"), units.Seconds(widest, 6))
		gap.Done = "the times are kept; what lies between is taken as a straight line"
		gap.Warns = widest > 10*tl.dt
		tl.Corrections = append(tl.Corrections, gap)
	}
	return nil
}

// absolute reports whether the stamps of one part mean the same in another.
func (tl *timeline) absolute() bool {
	f := tl.Recipe.Time.Form
	return f == Dated || f == Epoch || f == Serial
}

// repeats reports whether the part at b begins within the one at a, and not anew: stamps
// that count from the start of a file begin in its first half.
func (tl *timeline) repeats(a, b int, last float64) bool {
	if tl.absolute() {
		return true
	}
	return tl.t[b] > tl.t[a]+(last-tl.t[a])/2
}

// latest is the highest time of rows a to b.
func (tl *timeline) latest(a, b int) float64 {
	last := tl.t[a]
	for _, x := range tl.t[a:b] {
		if x > last {
			last = x
		}
	}
	return last
}

// dropTo drops rows from b on up to a time; alike is how many have the values of the row before them at their time.
func (tl *timeline) dropTo(b, end int, last float64) (n, alike int) {
	k := b - 1
	for k > 0 && !(tl.t[k] < tl.t[b]) {
		k--
	}
	for i := b; i < end && tl.t[i] <= last; i++ {
		for k < b-1 && !(tl.t[k] >= tl.t[i]) {
			k++
		}
		if tl.t[k] == tl.t[i] && tl.alike(k, i) {
			alike++
		}
		n++
		tl.dropped = append(tl.dropped, i)
	}
	for _, i := range tl.dropped[len(tl.dropped)-n:] {
		tl.t[i] = math.NaN()
	}
	return n, alike
}

// place turns lines of a recording of several files into lines of one of them.
func (im *importer) place() {
	if len(im.parts) < 2 {
		return
	}
	of := func(line int) (string, int) {
		k := len(im.parts) - 1
		for k > 0 && im.parts[k].line >= line {
			k--
		}
		return im.f.parts[k].name, line - im.parts[k].line
	}
	for i := range im.Corrections {
		if c := &im.Corrections[i]; c.Line > 0 {
			c.File, c.Line = of(c.Line)
		}
	}
	for i := range im.Marks {
		if m := &im.Marks[i]; m.Line > 0 {
			m.File, m.Line = of(m.Line)
		}
	}
}
