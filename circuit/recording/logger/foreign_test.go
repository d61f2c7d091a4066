package logger

import (
	"context"
	"encoding/csv"
	"errors"
	"io/fs"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"unicode"
)

// imported reads a file as the program does when nothing is told to it.
func imported(t *testing.T, path string) (*Recording, error) {
	t.Helper()
	f, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	return f.Import(context.Background(), f.Guess(), nil)
}

// bare keeps letters and digits of a name, in lower case.
func bare(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) {
			return unicode.ToLower(r)
		}
		return -1
	}, s)
}

// wanted reads true values: names, then columns.
func wanted(t *testing.T, path string) (names []string, columns [][]float64) {
	t.Helper()
	in, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer in.Close()
	rows, err := csv.NewReader(in).ReadAll()
	if err != nil {
		t.Fatal(path, err)
	}
	names, columns = rows[0], make([][]float64, len(rows[0]))
	for _, row := range rows[1:] {
		for i, c := range row {
			x, err := strconv.ParseFloat(c, 64)
			if c == "" {
				x, err = math.NaN(), nil
			}
			if err != nil {
				t.Fatal(path, err)
			}
			columns[i] = append(columns[i], x)
		}
	}
	return names, columns
}

// closeness is how near to the truth a recording must be read.
type closeness struct {
	value, ofLargest float64 // share of a value, and of the largest of its channel
	seconds, ofStep  float64 // s, and share of a step
}

// agrees compares a recording with true values; where there is none the recording must have none either.
func agrees(t *testing.T, rec *Recording, names []string, want [][]float64, close closeness) {
	t.Helper()
	if len(rec.Time) != len(want[0]) {
		t.Errorf("%d rows, want %d: %v", len(rec.Time), len(want[0]), rec.Corrections)
		return
	}
	for i, x := range want[0] {
		if got := rec.Time[i] - rec.Time[0]; math.Abs(got-(x-want[0][0])) > close.seconds+close.ofStep*rec.Interval {
			t.Errorf("row %d at %.9g s, want %.9g; %v", i+1, got, x-want[0][0], rec.Corrections)
			break
		}
	}
	for k := 1; k < len(names); k++ {
		s := channelNamed(rec, names[k])
		if s == nil && len(rec.Series) == len(names)-1 {
			s = rec.Series[k-1]
		}
		if s == nil {
			t.Errorf("no channel %q among %q", names[k], columnsOf(rec))
			continue
		}
		largest := 0.0
		for _, x := range want[k] {
			if x == x {
				largest = math.Max(largest, math.Abs(x))
			}
		}
		read := make([]float64, len(rec.Time))
		s.si(read)
		for i, x := range s.Values() { // where rows without a value are bridged
			w := want[k][i]
			if w != w && read[i] != read[i] {
				continue
			}
			if w != w || math.Abs(x-w) > math.Max(1e-12, close.ofLargest)*largest+close.value*math.Abs(w) {
				t.Errorf("%s, row %d: %.12g, want %.12g; %v", names[k], i+1, x, w, rec.Corrections)
				break
			}
		}
	}
}

func channelNamed(rec *Recording, name string) *Series {
	for _, c := range rec.Series {
		if bare(c.Column) == bare(name) {
			return c
		}
	}
	return nil
}

func columnsOf(rec *Recording) (names []string) {
	for _, c := range rec.Series {
		names = append(names, c.Column)
	}
	return names
}

// asTold is the guess with what a user says, if anything.
func asTold(t *testing.T, f *File, path string) Recipe {
	t.Helper()
	r := f.Guess()
	text, err := os.ReadFile(path)
	if err == nil {
		err = r.Tell(text)
	}
	if err != nil && !errors.Is(err, fs.ErrNotExist) {
		t.Fatalf("%s: %v", path, err)
	}
	return r
}

// folder imports every recording of a folder and compares it with what stands beside it.
func folder(t *testing.T, dir string, close closeness) (n int) {
	files, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range files {
		ext := filepath.Ext(e.Name())
		base := filepath.Join(dir, strings.TrimSuffix(e.Name(), ext))
		if !slices.Contains([]string{".csv", ".tsv", ".txt"}, ext) || strings.HasSuffix(base, ".want") || strings.HasSuffix(base, ".refused") {
			continue
		}
		n++
		t.Run(filepath.Base(base), func(t *testing.T) {
			f, err := Open(base + ext)
			if err != nil {
				t.Fatal(err)
			}
			rec, err := f.Import(context.Background(), asTold(t, f, base+".told.yaml"), nil)
			if why, e := os.ReadFile(base + ".refused.txt"); e == nil {
				if err == nil {
					t.Errorf("was read, must be refused or asked: %s", why)
				}
				return
			}
			if err != nil {
				t.Fatal(err)
			}
			names, want := wanted(t, base+".want.csv")
			agrees(t, rec, names, want, close)
		})
	}
	return n
}

// Recordings that somebody wrote who had not seen the reader; see testdata/foreign/README.md.
func TestForeign(t *testing.T) {
	if n := folder(t, "testdata/foreign", closeness{value: 1e-9, seconds: 0.2e-3}); n < 20 {
		t.Errorf("%d recordings only", n)
	}
}

// What is left as it is in them is told: cut peaks (34 cells at 400 bar), a sensor that stands still (from row 132 on).
func TestForeignIsWarnedOf(t *testing.T) {
	r, err := imported(t, "testdata/foreign/press_offset_clipped.csv")
	if err != nil {
		t.Fatal(err)
	}
	if c := found(t, r, "p head: clipped highest"); c.Count != 34 || !c.Warns {
		t.Errorf("%+v", c)
	}
	if c := found(t, r, "Oil temp: stuck"); c.Line != 133 || c.Count != len(r.Time)-131 || !c.Warns {
		t.Errorf("%+v, %d rows", c, len(r.Time))
	}
}

// Recordings of kinds that the others leave out: stamps of figures only, minutes that run over the hour, a clock with
// dots, a head over two lines, fillers and a loss of power, what is below zero between brackets, heads that change half way.
func TestOdd(t *testing.T) {
	folder(t, "testdata/odd", closeness{value: 1e-9, seconds: 0.2e-3})
}
