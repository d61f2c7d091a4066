package logger

import (
	"bytes"
	"encoding/csv"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"time"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
)

var update = flag.Bool("update", false, "write testdata/quirks anew from the true values")

var quirks = []quirk{
	plain("01-preamble", style{head: "Press line 4\nDevice: logger, serial 0815\nRange: 0-400\n\nt [s],p1 [bar],q1 [L/min],v1 [mm/s]"}),
	{name: "01-no-head", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		text := style{sep: ";"}.text(x)
		return []byte(text[strings.Index(text, "\n")+1:]), []string{"time_s", "column 2", "column 3", "column 4"}, [][]float64{x.t, x.p, x.q, x.v}
	}},
	plain("02-units-row", style{sep: ";", head: "t;p1;q1;v1\ns;bar;L/min;mm/s"}),
	plain("02-unit-after-slash", style{sep: ";", head: "Zeit/s;p1/bar;q1/(L/min);v1 in mm/s"}),
	plain("03-tab-trailing", style{sep: "\t", lines: func(l []string) []string {
		for i := range l {
			l[i] += "\t"
		}
		return l
	}}),
	plain("03-space", style{sep: " ", head: "t_s p1_bar q1_lpm v1_mmps"}),
	{name: "03-fixed-width", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		var b strings.Builder
		fmt.Fprintf(&b, "%10s%12s%14s%12s%8s\n", "Time (s)", "p1 (bar)", "q1 (L/min)", "v1 (mm/s)", "n (rpm)")
		for i := range x.t {
			n := ""
			if i%5 == 0 {
				n = "1480"
			}
			fmt.Fprintf(&b, "%10.3f%12.1f%14.2f%12.1f%8s\n", x.t[i], x.p[i], x.q[i], x.v[i], n)
		}
		h, c := x.want()
		rpm := make([]float64, len(x.t))
		for i := range rpm {
			rpm[i] = 1480 * math.Pi / 30
		}
		return []byte(b.String()), append(h, "n"), append(c, rpm)
	}},
	plain("04-decimal-comma", style{sep: ";", dec: ","}),
	from("04-thousands-space", func(x truth) (string, truth) {
		var b strings.Builder
		b.WriteString("t [s];p1 [kPa];q1 [L/min];v1 [mm/s]\n")
		for i := range x.t {
			p := strconv.FormatFloat(x.p[i]*100, 'f', 0, 64)
			if n := len(p); n > 3 {
				p = p[:n-3] + "\u202f" + p[n-3:]
			}
			fmt.Fprintf(&b, "%s;%s;%s;%s\n", comma(x.t[i], 3), p, comma(x.q[i], 2), comma(x.v[i], 1))
		}
		return b.String(), x
	}),
	{name: "05-utf16", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		h, c := x.want()
		return encoded(unicode.UTF16(unicode.LittleEndian, unicode.UseBOM).NewEncoder(), style{sep: "\t", end: "\r\n"}.text(x)), h, c
	}},
	{name: "05-latin1", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		h, c := x.want()
		h[3] = "Öltemperatur"
		for i := range c[3] {
			c[3][i] = x.v[i] + 273.15
		}
		return encoded(charmap.ISO8859_1.NewEncoder(), style{sep: ";", dec: ",", head: "Zeit [s];p1 [bar];q1 [l/min];Öltemperatur [°C]"}.text(x)), h, c
	}},
	plain("05-mark", style{sep: ";", head: "\ufefft [s];p1 [bar];q1 [L/min];v1 [mm/s]"}),
	plain("06-crlf", style{end: "\r\n"}),
	plain("06-cr", style{end: "\r"}),
	plain("07-milliseconds", style{head: "t [ms],p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string { return strconv.FormatFloat(s*1000, 'f', 0, 64) }}),
	plain("07-clock", style{head: "Time,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: at(noon, "15:04:05.000")}),
	plain("07-date-and-clock", style{sep: ";", dec: ",", head: "Datum;Uhrzeit;p1 [bar];q1 [L/min];v1 [mm/s]", stamp: at(noon, "02.01.2006;15:04:05,000")}),
	plain("07-month-first", style{head: "Stamp,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: at(noon, "01/02/2006 15:04:05.000")}),
	plain("07-twelve-hours", style{head: "Stamp,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: at(noon.Add(60*time.Second), "2006-01-02 03:04:05.000 PM")}),
	plain("07-epoch", style{head: "timestamp,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string { return fmt.Sprintf("%.3f", 1711367933+s) }}),
	{name: "07-serial", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		h, c := x.want()
		return []byte(style{head: "Date,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string { return strconv.FormatFloat(45376.5+s/86400, 'f', 12, 64) }}.text(x)), h, c
	}},
	plain("07-first-row-dated", style{sep: ";", head: "date;time;p1 [bar];q1 [L/min];v1 [mm/s]", stamp: func(s float64) string {
		if s == 0 {
			return at(noon, "2006-01-02;15:04:05.000")(s)
		}
		return at(noon, ";15:04:05.000")(s)
	}}),
	plain("07-no-fraction", style{head: "time,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: at(noon, "15:04:05")}),
	{name: "07-ambiguous-date", refused: "the day may be 3 April or 4 March, and the next day another month or another day", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		k := 0
		return []byte(style{head: "Stamp,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string {
			if k++; k > 75 {
				return "04/05/2024 " + at(noon, "15:04:05.000")(s)
			}
			return "03/04/2024 " + at(noon, "15:04:05.000")(s)
		}}.text(x)), nil, nil
	}},
	from("08-clock-reset", func(x truth) (string, truth) {
		text := style{stamp: func(s float64) string {
			if s > 7.95 {
				s -= 8
			}
			return fmt.Sprintf("%.3f", s)
		}}.text(x)
		return text, x
	}),
	plain("08-summer-time-ends", style{head: "Stamp,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string {
		start := time.Date(2024, 10, 27, 2, 59, 53, 0, time.UTC)
		if s >= 7 {
			start = start.Add(-time.Hour)
		}
		return at(start, "2006-01-02 15:04:05.000")(s)
	}}),
	plain("08-summer-time-begins", style{head: "Stamp,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string {
		start := time.Date(2024, 3, 31, 1, 59, 53, 0, time.UTC)
		if s >= 7 {
			start = start.Add(time.Hour)
		}
		return at(start, "2006-01-02 15:04:05.000")(s)
	}}),
	plain("08-midnight", style{head: "time,p1 [bar],q1 [L/min],v1 [mm/s]", stamp: at(time.Date(2024, 3, 31, 23, 59, 53, 0, time.UTC), "15:04:05.000")}),
	from("09-record-counter", func(x truth) (string, truth) {
		i := 0
		text := style{head: "No,t [s],p1 [bar],q1 [L/min],v1 [mm/s]", stamp: func(s float64) string { i++; return fmt.Sprintf("%d,%.3f", i, s) }, lines: func(l []string) []string {
			return append(append([]string{}, l[:60]...), l[64:]...)
		}}.text(x)
		return text, x.part(func(i int) bool { return i < 60 || i >= 64 })
	}),
	from("10-missing-doubled-unordered", func(x truth) (string, truth) {
		text := style{lines: func(l []string) []string {
			out := append(append([]string{}, l[:30]...), l[36:]...)
			out[50], out[51] = out[51], out[50]
			return insert(out, 80, out[79])
		}}.text(x)
		return text, x.part(func(i int) bool { return i < 30 || i >= 36 })
	}),
	from("11-current-loop", func(x truth) (string, truth) {
		var b strings.Builder
		b.WriteString("p1: 4-20 mA = 0-400 bar\nt [s],p1 [mA],q1 [L/min],v1 [mm/s]\n")
		for i := range x.t {
			mA := 4 + x.p[i]/400*16
			if i == 70 || i == 71 { // a broken wire: taken as a straight line between the rows around
				mA = 0.02
				x.p[i] = x.p[69] + (x.p[72]-x.p[69])*float64(i-69)/3
			}
			fmt.Fprintf(&b, "%.3f,%.4f,%.2f,%.1f\n", x.t[i], mA, x.q[i], x.v[i])
		}
		return b.String(), x
	}),
	from("11-voltage", func(x truth) (string, truth) {
		var b strings.Builder
		b.WriteString("t [s];p1 [V] 0-10 V = 0-250 bar;q1 [L/min];v1 [mm/s]\n")
		for i := range x.t {
			fmt.Fprintf(&b, "%.3f;%.4f;%.2f;%.1f\n", x.t[i], x.p[i]/25, x.q[i], x.v[i])
		}
		return b.String(), x
	}),
	from("12-zero-offset", func(x truth) (string, truth) {
		for i := range 40 {
			x.p[i] = 0
		}
		y := truth{t: x.t, q: x.q, v: x.v}
		for _, p := range x.p {
			y.p = append(y.p, p-0.8)
		}
		return style{}.text(y), x
	}),
	from("13-clipped", func(x truth) (string, truth) {
		for i := range x.p {
			x.p[i] = math.Min(x.p[i], 130)
		}
		return style{}.text(x), x
	}),
	{name: "14-extremes", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		var b strings.Builder
		b.WriteString("t [s],p1 [bar] mean,p1 [bar] min,p1 [bar] max\n")
		c := [][]float64{x.t, nil, nil, nil}
		for i := range x.t {
			fmt.Fprintf(&b, "%.3f,%.1f,%.1f,%.1f\n", x.t[i], x.p[i], x.p[i]-2.5, x.p[i]+3.1)
			c[1], c[2], c[3] = append(c[1], x.p[i]*1e5), append(c[2], x.p[i]*1e5-2.5e5), append(c[3], x.p[i]*1e5+3.1e5)
		}
		return []byte(b.String()), []string{"time_s", "p1 mean", "p1 min", "p1 max"}, c
	}},
	{name: "15-clamp-reversed", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		var b strings.Builder
		b.WriteString("t [s],P L1 [kW],P L2 [kW],P L3 [kW]\n")
		c := [][]float64{x.t, nil, nil, nil}
		for i := range x.t {
			p := math.Round(x.p[i]) / 10
			fmt.Fprintf(&b, "%.3f,%.1f,%.1f,%.1f\n", x.t[i], p, -(p + 0.2), p-0.1)
			c[1], c[2], c[3] = append(c[1], p*1e3), append(c[2], (p+0.2)*1e3), append(c[3], (p-0.1)*1e3)
		}
		return []byte(b.String()), []string{"time_s", "P L1", "P L2", "P L3"}, c
	}},
	{name: "16-energy-counter", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		var b strings.Builder
		b.WriteString("t [s];E1 [kWh];E2 [kWh]\n")
		c := [][]float64{x.t, nil, nil}
		for i := range x.t {
			over, set := 9985+0.25*float64(i), 523+0.5*float64(i)
			c[1], c[2] = append(c[1], over*3.6e6), append(c[2], set*3.6e6)
			if over >= 10000 {
				over -= 10000
			}
			if i >= 90 { // set back to nothing at row 90, with half a kWh uncounted
				set = 0.5 * float64(i-90)
				c[2][i] -= 0.5 * 3.6e6
			}
			fmt.Fprintf(&b, "%.3f;%.2f;%.1f\n", x.t[i], over, set)
		}
		return []byte(b.String()), []string{"time_s", "E1", "E2"}, c
	}},
	from("17-mixed-rates", func(x truth) (string, truth) {
		for i := range x.q { // known at every fifth row only, straight between
			k := i / 5 * 5
			if k+5 < len(x.q) {
				x.q[i] = x.q[k] + (x.q[k+5]-x.q[k])*float64(i-k)/5
			} else {
				x.q[i] = x.q[k]
			}
		}
		k := 0
		text := style{sep: ";", lines: func(l []string) []string {
			for i := range l {
				c := strings.Split(l[i], ";")
				if k++; i%5 != 0 {
					c[2] = ""
				}
				l[i] = strings.Join(c, ";")
			}
			return l
		}}.text(x)
		return text, x
	}),
	plain("18-marks", style{sep: ";", head: "t [s];p1 [bar];q1 [L/min];v1 [mm/s];Comment", lines: func(l []string) []string {
		for i := range l {
			if l[i] += ";"; i == 42 {
				l[i] += "door open"
			}
		}
		return insert(l, 90, "# tool changed")
	}}),
	plain("19-footer", style{lines: func(l []string) []string {
		return append(l, "", "Statistics,,,", "Max,159.9,68.00,140.0", "Rows: 150")
	}}),
	plain("20-quotes-and-units", style{sep: ";", dec: ",", head: "\"t [s]\";\"p1\";\"q1\";\"v1\"", lines: func(l []string) []string {
		for i := range l {
			c := strings.Split(l[i], ";")
			l[i] = fmt.Sprintf(`"%s";"%s bar";"%s L/min";%s mm/s`, c[0], c[1], c[2], strings.Replace(c[3], "-", "\u2212", 1))
		}
		return l
	}}),
	from("20-no-values", func(x truth) (string, truth) {
		marks := []string{"NaN", "----", "OL", "#N/A", ""}
		text := style{sep: ";", lines: func(l []string) []string {
			for k, m := range marks {
				c := strings.Split(l[20+10*k], ";")
				c[1] = m
				l[20+10*k] = strings.Join(c, ";")
			}
			return l
		}}.text(x)
		for k := range marks {
			i := 20 + 10*k
			x.p[i] = (x.p[i-1] + x.p[i+1]) / 2
		}
		return text, x
	}),
	plain("21-repeated-heads", style{lines: func(l []string) []string {
		h := "t [s],p1 [bar],q1 [L/min],v1 [mm/s]"
		return insert(insert(l, 100, h), 50, h)
	}}),
	{name: "23-absolute", make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		h, c := x.want()
		for i := range c[1] {
			c[1][i] -= 101325
		}
		return []byte(style{head: "t [s],p1 [bar(a)],q1 [L/min],v1 [mm/s]"}.text(x)), h, c
	}},
	{name: "xx-commas-for-both", refused: "commas separate and mark decimals", make: func() ([]byte, []string, [][]float64) {
		return []byte(style{dec: ","}.text(truthOf(150, 0.1))), nil, nil
	}},
	{name: "xx-thousand-or-decimal", refused: "1.234 may be a thousand or one and a bit", make: func() ([]byte, []string, [][]float64) {
		return []byte("t [s];p1 [kPa]\n1;1.234\n2;2.345\n3;3.456\n4;2.222\n5;1.111\n"), nil, nil
	}},
}

// Quirks of loggers, each a small file in testdata/quirks made from known values: it is
// read to those values, to rounding, or refused in words. The numbers are those of the
// list of quirks that the reader is built for; 22, files cut where a spreadsheet ends, is
// TestCutFile.
func TestQuirks(t *testing.T) {
	for _, q := range quirks {
		base := filepath.Join("testdata", "quirks", q.name)
		file, head, columns := q.make()
		want := bytes.Buffer{}
		if q.refused == "" {
			w := csv.NewWriter(&want)
			_ = w.Write(head)
			for i := range columns[0] {
				row := make([]string, len(columns))
				for k := range columns {
					row[k] = strconv.FormatFloat(columns[k][i], 'g', 12, 64)
				}
				_ = w.Write(row)
			}
			w.Flush()
		}
		beside, text := base+".want.csv", want.Bytes()
		if q.refused != "" {
			beside, text = base+".refused.txt", []byte(q.refused+"\n")
		}
		for path, data := range map[string][]byte{base + ".csv": file, beside: text} {
			if *update {
				if err := os.WriteFile(path, data, 0o644); err != nil {
					t.Fatal(err)
				}
			} else if kept, err := os.ReadFile(path); err != nil || !bytes.Equal(kept, data) {
				t.Errorf("%s is not what its maker writes (%v); run the test with -update", path, err)
			}
		}
	}
	if n := folder(t, "testdata/quirks", closeness{ofLargest: 1e-9, ofStep: 1e-5}); n != len(quirks) {
		t.Errorf("%d files, %d quirks", n, len(quirks))
	}
}
