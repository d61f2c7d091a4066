package logger

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"math"
	"strings"
	"testing"
)

// joinedOf imports texts as the files of one recording, a.csv, b.csv and so on.
func joinedOf(t *testing.T, choices map[string]string, texts ...string) (*Recording, error) {
	t.Helper()
	var names []string
	var sizes []int64
	for k, s := range texts {
		names, sizes = append(names, string(rune('a'+k))+".csv"), append(sizes, int64(len(s)))
	}
	f, err := OpenSources(names, sizes, func(k int) (io.ReadCloser, error) {
		return io.NopCloser(bytes.NewReader([]byte(texts[k]))), nil
	})
	if err != nil {
		t.Fatal(err)
	}
	r := f.Guess()
	r.Choices = choices
	return f.Import(context.Background(), r, nil)
}

// hourly writes rows from..to of a recording with a date and a clock, a row each second.
func hourly(preamble string, from, to int) string {
	var b strings.Builder
	b.WriteString("\ufeff" + preamble + "Date;Time;p1 [bar];q1 [L/min]\n")
	for i := from; i < to; i++ {
		s := 9*3600 + i
		fmt.Fprintf(&b, "2024-06-17;%02d:%02d:%02d;%.1f;%.1f\n", s/3600, s%3600/60, s%60, pressureAt(i), 30+20*math.Cos(float64(i)/40))
	}
	return b.String()
}

func pressureAt(i int) float64 { return math.Round(1000+800*math.Sin(float64(i)/90)) / 10 }

// A recording of one file an hour: the second repeats ten rows of the first, twenty rows are
// missing before the third; every file has lines of its own above its rows.
func TestHourlyFiles(t *testing.T) {
	r, err := joinedOf(t, nil, hourly("Logger;7\nHour;9\n", 0, 3600), hourly("Logger;7\nHour;10\n", 3590, 7200), hourly("Logger;7\nHour;11\n", 7220, 9000))
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Time) != 9000-20 {
		t.Fatalf("%d rows: %v", len(r.Time), r.Corrections)
	}
	v := r.Series[0].Values()
	for i, x := range r.Time {
		at := i
		if i >= 7200 {
			at += 20
		}
		if x != float64(at) || math.Abs(v[i]-pressureAt(at)*1e5) > 1e-6 {
			t.Fatalf("row %d: %g s, %g Pa", i, x, v[i])
		}
	}
	if c := found(t, r, "overlap"); c.Count != 10 || c.Warns || c.File != "b.csv" || c.Line != 4 || !strings.Contains(c.Text, "10 of them with the same values") {
		t.Errorf("%+v", c)
	}
	if c := found(t, r, "gap between files"); c.Count != 1 || c.T != 7220 || !strings.Contains(c.Text, "of 21\u202fs") || c.File != "c.csv" || !c.Warns {
		t.Errorf("%+v", c)
	}
	if c := found(t, r, "joined"); c.Count != 3 {
		t.Errorf("%+v", c)
	}
	if c := found(t, r, "further heads"); c.Count != 2 { // "Hour;10" and "Hour;11"; the rest is as above the first rows
		t.Errorf("%+v", c)
	}
	if _, err := joinedOf(t, nil, hourly("", 3600, 7200), hourly("", 0, 3600)); err == nil || !strings.Contains(err.Error(), "b.csv begins 3600\u202fs before") {
		t.Errorf("in the wrong order: %v", err)
	}
}

// What was cut at the most rows of a spreadsheet goes on in a file without a head; only an end at that row is told as cut.
func TestFilesCutAtRows(t *testing.T) {
	part := func(from, to int, head string) string {
		var b strings.Builder
		b.WriteString(head)
		for i := from; i < to; i++ {
			fmt.Fprintf(&b, "%d.%d,%.1f\n", i/10, i%10, pressureAt(i))
		}
		return b.String()
	}
	r, err := joinedOf(t, nil, part(0, 65535, "t [s],p1 [bar]\n"), part(65535, 90000, ""))
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Time) != 90000 || r.Time[89999] != 8999.9 || r.Lines != 90001 {
		t.Errorf("%d rows to %g s, %v", len(r.Time), r.Time[len(r.Time)-1], r.Corrections)
	}
	for _, c := range r.Corrections {
		if c.Key != "joined" {
			t.Errorf("%v", c)
		}
	}
}

// Files that each count their time from 0 follow one another, as a clock that begins anew.
func TestFilesThatBeginAnew(t *testing.T) {
	var b strings.Builder
	b.WriteString("t [s],p1 [bar]\n")
	for i := range 100 {
		fmt.Fprintf(&b, "%d.%d,%.1f\n", i/10, i%10, pressureAt(i))
	}
	r, err := joinedOf(t, nil, b.String(), b.String())
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Time) != 200 || math.Abs(r.Time[199]-19.9) > 1e-9 {
		t.Errorf("%d rows to %g s: %v", len(r.Time), r.Time[len(r.Time)-1], r.Corrections)
	}
	if c := found(t, r, "clock reset"); c.File != "b.csv" || c.Line != 2 {
		t.Errorf("%+v", c)
	}
}

func TestNamesInOrder(t *testing.T) {
	names := []string{"p_10.csv", "p_2.csv", "p_1.csv", "o_3.csv"}
	if InOrder(names); strings.Join(names, " ") != "o_3.csv p_1.csv p_2.csv p_10.csv" {
		t.Error(names)
	}
}
