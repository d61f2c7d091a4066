package logger

import (
	"context"
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
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
			if err != nil {
				t.Fatal(path, err)
			}
			columns[i] = append(columns[i], x)
		}
	}
	return names, columns
}

// agrees compares a recording with true values; tol is a share of the largest value of a
// channel, of a step for the time.
func agrees(t *testing.T, rec *Recording, names []string, want [][]float64, tol, tolTime float64) {
	t.Helper()
	if len(rec.Time) != len(want[0]) {
		t.Errorf("%d rows, want %d: %v", len(rec.Time), len(want[0]), rec.Corrections)
		return
	}
	for i, x := range want[0] {
		if got := rec.Time[i] - rec.Time[0]; math.Abs(got-(x-want[0][0])) > tolTime*rec.Interval {
			t.Errorf("row %d at %.9g s, want %.9g", i+1, got, x-want[0][0])
			break
		}
	}
	for k := 1; k < len(names); k++ {
		var s *Series
		for _, c := range rec.Series {
			if bare(c.Column) == bare(names[k]) {
				s = c
			}
		}
		if s == nil && len(rec.Series) == len(names)-1 {
			s = rec.Series[k-1]
		}
		if s == nil {
			var have []string
			for _, c := range rec.Series {
				have = append(have, c.Column)
			}
			t.Errorf("no channel %q among %q", names[k], have)
			continue
		}
		largest := 0.0
		for _, x := range want[k] {
			largest = math.Max(largest, math.Abs(x))
		}
		for i, x := range s.Values() {
			if math.Abs(x-want[k][i]) > tol*largest {
				t.Errorf("%s, row %d: %.9g, want %.9g; %v", names[k], i+1, x, want[k][i], rec.Corrections)
				break
			}
		}
	}
}

// folder imports every recording of a folder and compares it with what stands beside it.
func folder(t *testing.T, dir string, tol, tolTime float64) (n int) {
	files, err := filepath.Glob(filepath.Join(dir, "*.csv"))
	if err != nil {
		t.Fatal(err)
	}
	for _, path := range files {
		base := strings.TrimSuffix(path, ".csv")
		if strings.HasSuffix(base, ".want") {
			continue
		}
		n++
		t.Run(filepath.Base(base), func(t *testing.T) {
			rec, err := imported(t, path)
			if why, e := os.ReadFile(base + ".refused.txt"); e == nil {
				if err == nil {
					t.Errorf("was read, must be refused: %s", why)
				}
				return
			}
			if err != nil {
				t.Fatal(err)
			}
			names, want := wanted(t, base+".want.csv")
			agrees(t, rec, names, want, tol, tolTime)
		})
	}
	return n
}

// Recordings that somebody wrote who had not seen the reader; see testdata/foreign/README.md.
func TestForeign(t *testing.T) {
	if folder(t, "testdata/foreign", 1e-3, 0.02) == 0 {
		t.Skip("testdata/foreign holds no recording yet")
	}
}
