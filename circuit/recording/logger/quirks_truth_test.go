package logger

import (
	"math"
	"strconv"
	"strings"
	"time"
)

// truth is what was measured: pressure [bar], flow [L/min], speed [mm/s], on the grid of
// the decimals that the files have, so that a right import meets it to rounding.
type truth struct {
	t, p, q, v []float64
}

func truthOf(rows int, dt float64) truth {
	var x truth
	for i := range rows {
		s := float64(i) * dt
		round := func(v, d float64) float64 { return math.Round(v*d) / d }
		x.t = append(x.t, round(s, 1000))
		x.p = append(x.p, round(85+60*math.Sin(0.9*s)+15*math.Sin(3.7*s), 10))
		x.q = append(x.q, round(40+25*math.Cos(0.9*s)+3*math.Sin(5.3*s), 100))
		x.v = append(x.v, round(120*math.Sin(0.9*s)+20*math.Sin(4.1*s+1), 10))
	}
	return x
}

// quirk makes a file and the values it was made from; refused means that it must not be read.
type quirk struct {
	name    string
	refused string
	make    func() (file []byte, head []string, columns [][]float64)
}

// style writes truth plainly, with one thing or another done to it.
type style struct {
	sep, dec, end, head string
	stamp               func(s float64) string
	cell                func(x float64, decimals int) string
	lines               func(lines []string) []string // of rows, before they are joined
}

func (k style) text(x truth) string {
	if k.sep == "" {
		k.sep = ","
	}
	if k.dec == "" {
		k.dec = "."
	}
	if k.end == "" {
		k.end = "\n"
	}
	if k.stamp == nil {
		k.stamp = func(s float64) string { return strings.Replace(strconv.FormatFloat(s, 'f', 3, 64), ".", k.dec, 1) }
	}
	if k.cell == nil {
		k.cell = func(v float64, d int) string {
			return strings.Replace(strconv.FormatFloat(v, 'f', d, 64), ".", k.dec, 1)
		}
	}
	var lines []string
	for i := range x.t {
		lines = append(lines, strings.Join([]string{k.stamp(x.t[i]), k.cell(x.p[i], 1), k.cell(x.q[i], 2), k.cell(x.v[i], 1)}, k.sep))
	}
	if k.lines != nil {
		lines = k.lines(lines)
	}
	if k.head == "" {
		k.head = strings.Join([]string{"t [s]", "p1 [bar]", "q1 [L/min]", "v1 [mm/s]"}, k.sep)
	}
	return k.head + k.end + strings.Join(lines, k.end) + k.end
}

func (x truth) want() ([]string, [][]float64) {
	scaled := func(v []float64, f func(float64) float64) (out []float64) {
		for _, a := range v {
			out = append(out, f(a))
		}
		return out
	}
	return []string{"time_s", "p1", "q1", "v1"}, [][]float64{x.t, scaled(x.p, func(a float64) float64 { return a * 1e5 }),
		scaled(x.q, func(a float64) float64 { return a / 60000 }), scaled(x.v, func(a float64) float64 { return a / 1000 })}
}

func (x truth) part(keep func(i int) bool) (y truth) {
	for i := range x.t {
		if keep(i) {
			y.t, y.p, y.q, y.v = append(y.t, x.t[i]), append(y.p, x.p[i]), append(y.q, x.q[i]), append(y.v, x.v[i])
		}
	}
	return y
}

func plain(name string, k style) quirk {
	return quirk{name: name, make: func() ([]byte, []string, [][]float64) {
		x := truthOf(150, 0.1)
		h, c := x.want()
		return []byte(k.text(x)), h, c
	}}
}

// from makes a file whose text and truth are both made by hand.
func from(name string, f func(x truth) (string, truth)) quirk {
	return quirk{name: name, make: func() ([]byte, []string, [][]float64) {
		text, y := f(truthOf(150, 0.1))
		h, c := y.want()
		return []byte(text), h, c
	}}
}

// at writes a stamp of a clock that starts at a moment.
func at(start time.Time, layout string) func(s float64) string {
	return func(s float64) string {
		return start.Add(time.Duration(math.Round(s*1e6)) * time.Microsecond).Format(layout)
	}
}

var noon = time.Date(2024, 3, 25, 11, 58, 53, 0, time.UTC)

func comma(x float64, decimals int) string {
	return strings.Replace(strconv.FormatFloat(x, 'f', decimals, 64), ".", ",", 1)
}

func insert(lines []string, i int, more ...string) []string {
	return append(append(append([]string{}, lines[:i]...), more...), lines[i:]...)
}

func encoded(e interface{ String(string) (string, error) }, s string) []byte {
	out, err := e.String(s)
	if err != nil {
		panic(err)
	}
	return []byte(out)
}
