package logger

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"math"
	"math/rand"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"

	"barlitre/machines/units"
)

func rec(t *testing.T, text string) *Recording {
	t.Helper()
	f, err := OpenBytes("x.csv", []byte(text))
	if err != nil {
		t.Fatal(err)
	}
	r, err := f.Import(context.Background(), f.Guess(), nil)
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// found returns a correction by its key.
func found(t *testing.T, r *Recording, key string) Correction {
	t.Helper()
	for _, c := range r.Corrections {
		if c.Key == key {
			return c
		}
	}
	t.Errorf("no correction %q in %v", key, r.Corrections)
	return Correction{}
}

// Every correction of the quirks is told, with its count and the first line; both counted
// by hand in the makers of the files.
func TestCorrectionsAreTold(t *testing.T) {
	for _, c := range []struct {
		file, key   string
		count, line int
	}{
		{"07-no-fraction", "one stamp", 135, 2}, {"08-clock-reset", "clock reset", 1, 82}, {"08-summer-time-ends", "summer time", 1, 72},
		{"08-summer-time-begins", "summer time", 1, 72}, {"08-midnight", "midnight", 1, 72},
		{"09-record-counter", "record counter", 4, 62}, {"09-record-counter", "missing rows", 4, 62},
		{"10-missing-doubled-unordered", "missing rows", 6, 32}, {"10-missing-doubled-unordered", "doubled rows", 1, 82}, {"10-missing-doubled-unordered", "out of order", 1, 53},
		{"11-current-loop", "p1: signal fault", 2, 73}, {"12-zero-offset", "p1: zero offset", 150, 2}, {"13-clipped", "p1: clipped highest", 23, 17},
		{"14-extremes", "p1 min: extremes", 150, 0}, {"15-clamp-reversed", "P L2: sign", 150, 0}, {"16-energy-counter", "E1: counter", 1, 62}, {"16-energy-counter", "E2: counter", 1, 92},
		{"17-mixed-rates", "q1: no value", 120, 3}, {"18-marks", "comments", 1, 92}, {"19-footer", "footer", 3, 153},
		{"20-no-values", "p1: no value", 1, 62}, {"21-repeated-heads", "repeated heads", 2, 52}, {"23-absolute", "p1: absolute pressure", 150, 0},
	} {
		r, err := imported(t, filepath.Join("testdata", "quirks", c.file+".csv"))
		if err != nil {
			t.Errorf("%s: %v", c.file, err)
			continue
		}
		if got := found(t, r, c.key); got.Count != c.count || c.line > 0 && got.Line != c.line {
			t.Errorf("%s: %+v, want %d from line %d", c.file, got, c.count, c.line)
		}
	}
	r, _ := imported(t, filepath.Join("testdata", "quirks", "18-marks.csv"))
	if len(r.Marks) != 2 || r.Marks[0].Text != "door open" || math.Abs(r.Marks[0].T-4.2) > 1e-9 || r.Marks[1].Text != "tool changed" {
		t.Errorf("marks %+v", r.Marks)
	}
}

// A plain file needs no correction, so none is told.
func TestSoundFileIsLeftAlone(t *testing.T) {
	x := truthOf(300, 0.1)
	r := rec(t, style{}.text(truth{x.t, x.p, x.q, x.p}))
	if len(r.Corrections) > 0 {
		t.Errorf("%v", r.Corrections)
	}
}

// Files that end where a spreadsheet ends are told (quirk 22).
func TestCutFile(t *testing.T) {
	var b strings.Builder
	b.WriteString("t [s],p [bar]\n")
	for i := range 65535 {
		fmt.Fprintf(&b, "%d.%d,%d.%d\n", i/10, i%10, 100+i%7, i%3)
	}
	found(t, rec(t, b.String()), "cut")
}

// Choices answer corrections otherwise: by the values that follow, worked out by hand.
func TestChoices(t *testing.T) {
	text := "t [s];p [bar]\n" + strings.Join([]string{"0;1", "1;2", "2;x", "3;4", "5;6", "4;5", "5;6", "6;7", "7;8", "8;9"}, "\n")
	read := func(choices map[string]string) (*Recording, error) {
		f, _ := OpenBytes("x.csv", []byte(text))
		r := f.Guess()
		r.Choices = choices
		return f.Import(context.Background(), r, nil)
	}
	plain, err := read(nil)
	if err != nil {
		t.Fatal(err)
	}
	if v := plain.Series[0].Values(); len(v) != 9 || v[2] != 3e5 || v[4] != 5e5 || v[5] != 6e5 {
		t.Errorf("%v", v)
	}
	held, err := read(map[string]string{"p: no value": "hold", "out of order": "drop"})
	if err != nil {
		t.Fatal(err)
	}
	if v := held.Series[0].Values(); len(v) != 8 || v[2] != 2e5 || v[4] != 6e5 {
		t.Errorf("%v", v)
	}
	if _, err := read(map[string]string{"doubled rows": "refuse"}); err == nil || !strings.Contains(err.Error(), "line 8: the row stands twice") {
		t.Errorf("%v", err)
	}
}

func TestSpikesAndStuckChannels(t *testing.T) {
	x := truthOf(600, 0.1)
	x.p[100], x.q[200] = 9876, x.q[200]+60
	for i := 300; i < 420; i++ {
		x.v[i] = x.v[300]
	}
	r := rec(t, style{}.text(x))
	if c := found(t, r, "p1: values of no sense"); c.Count != 1 || c.Choice != "remove" || math.Abs(r.Find("p1").Values()[100]-(x.p[99]+x.p[101])/2*1e5) > 1 {
		t.Errorf("%+v, %v", c, r.Find("p1").Values()[100])
	}
	if c := found(t, r, "q1: spikes"); c.Count != 1 || c.Choice != "leave" || c.Done != "" || r.Find("q1").Values()[200] != x.q[200]*units.LitrePerMinute {
		t.Errorf("%+v", c)
	}
	if c := found(t, r, "v1: stuck"); c.Count < 120 || c.Count > 121 {
		t.Errorf("%+v", c)
	}
}

// Rest with noise: the offset is the middle of it, not its end. Peaks cut off for half of the time are
// found; a flat top of a signal that is flat elsewhere too is none.
func TestRestAndPeaksWithNoise(t *testing.T) {
	r := rand.New(rand.NewSource(1))
	var b, flat strings.Builder
	b.WriteString("t [s];p1 [bar];p2 [bar]\n")
	flat.WriteString("t [s];p1 [bar]\n")
	for i := range 1200 {
		p := 0.0
		if i%120 > 20 {
			p = 140
		}
		s := float64(i) / 10
		fmt.Fprintf(&b, "%.1f;%.2f;%.1f\n", s, p-0.8+0.02*r.NormFloat64(), math.Min(250, 220+90*math.Sin(s)+r.NormFloat64()))
		fmt.Fprintf(&flat, "%.1f;%g\n", s, p)
	}
	x := rec(t, b.String())
	found(t, x, "p1: zero offset")
	found(t, x, "p2: clipped highest")
	low, n := 0.0, 0.0
	for i, p := range x.Find("p1").Values() {
		if i%120 <= 20 {
			low, n = low+p, n+1
		}
	}
	if math.Abs(low/n) > 0.003e5 { // 0.02 bar of noise over 210 rows: 0.0014 bar, and their median half as much more
		t.Errorf("at rest %g Pa are left", low/n)
	}
	if x := rec(t, flat.String()); len(x.Corrections) > 0 {
		t.Errorf("%v", x.Corrections)
	}
}

// A head longer than the lines asked for does not hide the first rows, from which the time
// of the last ones counts.
func TestPreviewBehindALongHead(t *testing.T) {
	f, _ := OpenBytes("x.csv", []byte("Press\nSite A\nOperator B\ntime;p [bar]\n10:00:10;1.5\n10:00:11;2.5\n10:00:12;3.5\n10:00:13;4.5\n10:00:14;5.5\n"))
	p, err := f.Preview(f.Guess(), 3)
	if err != nil {
		t.Fatal(err)
	}
	rows := 0
	for _, r := range p.First {
		if r.Row {
			rows++
		}
	}
	if last := p.Last[len(p.Last)-1]; rows != 3 || last.Time != "4" {
		t.Errorf("%d rows at the start, the last line is at %q", rows, last.Time)
	}
}

func TestPreviewAndQuestions(t *testing.T) {
	f, _ := OpenBytes("x.csv", []byte("Press\nt [s];p [kPa]\n1;1.234\n2;2.345\n3;3.456\nend\n"))
	r := f.Guess()
	if len(r.Questions) != 1 || r.Questions[0].Field != "decimal" || r.Head != 2 || r.First != 3 {
		t.Fatalf("%+v", r)
	}
	if err := r.Answer("decimal", ","); err != nil {
		t.Fatal(err)
	}
	p, err := f.Preview(r, 4)
	if err != nil {
		t.Fatal(err)
	}
	if p.First[2].Text != "1;1.234" || !p.First[2].Row || p.First[2].SI[0] != 1234e3 || p.First[0].Row || p.Last[3].Row || p.Last[3].Text != "end" || p.Last[2].SI[0] != 3456e3 || p.Last[2].Line != 5 {
		t.Errorf("%+v", p)
	}
	if p.First[2].Time != "1" {
		t.Errorf("time %q", p.First[2].Time)
	}
}

// A file without stamps takes its interval from the lines above, or asks.
func TestRowsWithoutStamps(t *testing.T) {
	rows := "p [bar];q [L/min]\n5;1\n7;2\n6;3\n5;1\n"
	if r := rec(t, "Sample interval: 20 ms\n"+rows); r.Interval != 0.02 || len(r.Time) != 4 {
		t.Errorf("%+v", r.Time)
	}
	f, _ := OpenBytes("x.csv", []byte(rows))
	r := f.Guess()
	if _, err := f.Import(context.Background(), r, nil); err == nil || !strings.Contains(err.Error(), "say it") {
		t.Errorf("%v", err)
	}
	if err := r.Answer("interval", "0.5 s"); err != nil {
		t.Fatal(err)
	}
	if rec, err := f.Import(context.Background(), r, nil); err != nil || rec.Time[3] != 1.5 {
		t.Error(err)
	}
}

// columnsRead: what is packed reads back to the bit.
func TestColumnKeepsEveryBit(t *testing.T) {
	var c column
	var want []float64
	for i := range 5*chunkRows + 17 {
		x, d := float64(i%3000)/100, 2
		switch i / chunkRows {
		case 1:
			x, d = float64(i)*123.456, 3
			x = math.Round(x*1000) / 1000
		case 2:
			x, d = math.Sin(float64(i)), -1
		case 3:
			x = math.NaN()
		}
		want = append(want, x)
		c.add(x, d)
	}
	for i, x := range want {
		if got := c.at(i); got != x && !(got != got && x != x) {
			t.Fatalf("row %d: %v, want %v", i, got, x)
		}
	}
	if c.full[0].small == nil || c.full[1].whole == nil || c.full[2].plain == nil {
		t.Error("not packed as meant")
	}
}

// endless is a recording of eight columns at 100 Hz, made as it is read.
type endless struct {
	size, left int64
	row        int
	buf        []byte
}

func (e *endless) Read(p []byte) (int, error) {
	if e.left <= 0 {
		return 0, io.EOF
	}
	for len(e.buf) < len(p) {
		if e.row == 0 {
			e.buf = append(e.buf, "t [s];p1 [bar];p2 [bar];q1 [L/min];x1 [mm];T1 [C];P [kW];n [rpm]\r\n"...)
		}
		i := e.row
		e.row++
		ramp := i % 1200
		e.buf = fmt.Appendf(e.buf, "%d,%02d;%d,%d;%d,%d;%d,%02d;%d,%d;%d,%d;%d,%03d;%d\r\n", i/100, i%100, 20+ramp/9, ramp%10, 10+ramp/20, i%10, 40+ramp%60, i%97, ramp/2, i%10, 48+i/500000, i/50000%10, 5+ramp%12, i%1000, 1480+i%7)
	}
	n := copy(p, e.buf)
	e.buf = e.buf[:copy(e.buf, e.buf[n:])]
	n = int(min(int64(n), e.left))
	e.left -= int64(n)
	return n, nil
}

// An import tells how far it is, ends when it is told to, and makes no garbage by the cell.
func TestLongImport(t *testing.T) {
	const size = 24 << 20
	data, err := io.ReadAll(&endless{size: size, left: size})
	if err != nil {
		t.Fatal(err)
	}
	f, err := OpenBytes("long.csv", data)
	if err != nil {
		t.Fatal(err)
	}
	r := f.Guess()
	told := 0
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	rec, err := f.Import(context.Background(), r, func(done, total int64) {
		if told++; total != size || done > size {
			t.Errorf("%d of %d", done, total)
		}
	})
	if err != nil {
		t.Fatal(err)
	}
	runtime.ReadMemStats(&after)
	if told < 4 || len(rec.Series) != 7 || len(rec.Time) < 350_000 {
		t.Errorf("told %d times, %d channels, %d rows, %v", told, len(rec.Series), len(rec.Time), rec.Corrections)
	}
	if per := float64(after.Mallocs-before.Mallocs) / float64(len(rec.Time)); per > 0.05 {
		t.Errorf("%.3f allocations a row", per)
	}
	ctx, cancel := context.WithCancel(context.Background())
	if _, err = f.Import(ctx, r, func(done, total int64) { cancel() }); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// TestGigabyte reads a gigabyte from disk. It runs with BARLITRE_LONG only.
func TestGigabyte(t *testing.T) {
	if os.Getenv("BARLITRE_LONG") == "" {
		t.Skip("set BARLITRE_LONG to read a gigabyte")
	}
	const size = 1 << 30
	path := filepath.Join(t.TempDir(), "long.csv")
	out, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := io.Copy(out, &endless{size: size, left: size}); err != nil {
		t.Fatal(err)
	}
	out.Close()
	f, err := Open(path)
	if err != nil {
		t.Fatal(err)
	}
	from := time.Now()
	told := 0
	rec, err := f.Import(context.Background(), f.Guess(), func(done, total int64) { told++ })
	if err != nil {
		t.Fatal(err)
	}
	took := time.Since(from)
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	t.Logf("%d rows of %d channels in %.1f s, told %d times, %.0f MB taken from the system", len(rec.Time), len(rec.Series), took.Seconds(), told, float64(m.Sys)/1e6)
	if took > 2*time.Minute || m.Sys > 1<<30 || told < 100 {
		t.Errorf("%v, %d MB, told %d times", took, m.Sys>>20, told)
	}
}

func FuzzImport(f *testing.F) {
	files, _ := filepath.Glob("testdata/[qof]*/*.[ct]*")
	for _, path := range files {
		if data, err := os.ReadFile(path); err == nil && len(data) < 8000 {
			f.Add(data[:min(len(data), 1500)])
		}
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		file, err := OpenBytes("x.csv", data)
		if err != nil {
			return // refused before anything is guessed
		}
		r := file.Guess()
		if p, err := file.Preview(r, 5); err == nil && len(p.First) > previewLines {
			t.Fatal("preview too long")
		}
		rec, err := file.Import(context.Background(), r, nil)
		if err != nil {
			return
		}
		lossless(t, data, rec)
		cut := bytes.LastIndexByte(data[:len(data)/2], '\n') + 1 // the same as two files
		parts := [][]byte{data[:cut], data[cut:]}
		file, err = OpenSources([]string{"a.csv", "b.csv"}, []int64{int64(cut), int64(len(data) - cut)}, func(k int) (io.ReadCloser, error) {
			return io.NopCloser(bytes.NewReader(parts[k])), nil
		})
		if err != nil || r.Encoding[:4] == "UTF-" && r.Encoding != "UTF-8" {
			return
		}
		if rec, err = file.Import(context.Background(), r, nil); err == nil {
			lossless(t, data, rec)
		}
	})
}

// lossless checks what holds of every import: times rise, values are finite and as many as
// times, and every line is a row or in a correction.
func lossless(t *testing.T, data []byte, rec *Recording) {
	for i := 1; i < len(rec.Time); i++ {
		if !(rec.Time[i] >= rec.Time[i-1]) {
			t.Fatalf("time runs back at row %d: %v", i, rec.Time[i-1:i+1])
		}
	}
	for _, s := range rec.Series {
		v := s.Values()
		if len(v) != len(rec.Time) {
			t.Fatalf("%s has %d values for %d times", s.Column, len(v), len(rec.Time))
		}
		for i, x := range v {
			if math.IsNaN(x) || math.IsInf(x, 0) {
				t.Fatalf("%s, row %d: %v", s.Column, i, x)
			}
		}
	}
	told := 0
	for _, c := range rec.Corrections {
		switch c.Key {
		case "repeated heads", "comments", "lines that are no rows", "footer", "doubled rows", "further heads", "overlap":
			told += c.Count
		case "one stamp":
			if c.Choice != "spread" {
				told += c.Count
			}
		}
	}
	full := 0
	for i, l := 0, newLines(bytes.NewReader(text(data, rec.Recipe.Encoding))); ; i++ {
		line := l.next()
		if line == nil {
			break
		}
		if b := bytes.TrimSpace(line); i+1 >= rec.Recipe.First && len(bytes.Trim(b, ";,|\t \"\x00")) > 0 {
			full++
		}
	}
	if len(rec.Time)+told < full {
		t.Fatalf("%d lines with something in them, %d rows, %d told of: %v", full, len(rec.Time), told, rec.Corrections)
	}
}
