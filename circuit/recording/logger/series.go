package logger

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// Series is one channel of a recording.
type Series struct {
	Channel
	Dim units.Dim

	unit  units.Unit
	ready []float64 // of a channel of another recording: SI, NaN where there is no value
	raw   column    // in the unit of the file, of the signal where it is scaled
	index []int32
	time  []float64

	empty, unread, other, faults, beyond seen
	words                                map[string]*seen // markers of no value
	suffixes                             map[string]float64
	loop                                 bool // a signal of 4 to 20 mA, scaled or not

	shift   float64 // SI, added: zero offset, air pressure
	sign    float64
	adds    []jump // of a counter: what is added from a row on, in the unit of the file
	removed []int  // rows that are taken as having no value, rising
	hold    bool   // no value: the last one holds
}

func newSeries(c Channel) (*Series, error) {
	s := &Series{Channel: c, Dim: units.Ratio, unit: units.Unit{Factor: 1}, sign: 1, words: map[string]*seen{}, suffixes: map[string]float64{}}
	if c.Quantity != "" {
		known := false
		for d := units.Dim(0); d.Name() != "unknown quantity"; d++ {
			if d.Name() == c.Quantity {
				s.Dim, known = d, true
			}
		}
		if !known {
			return nil, fmt.Errorf("column %q: there is no quantity %q", c.Column, c.Quantity)
		}
		u, ok := units.Find(c.Unit, s.Dim)
		if !ok {
			_, err := units.ParseUnit(c.Unit, s.Dim)
			return nil, fmt.Errorf("column %q: %w", c.Column, err)
		}
		s.unit = u
	}
	if k := c.Scaling; k != nil {
		if k.From[0] == k.From[1] || k.To[0] == k.To[1] || !finite(k.From[0], k.From[1], k.To[0], k.To[1]) {
			return nil, fmt.Errorf("column %q: its scaling has two equal ends or none", c.Column)
		}
		if k.Signal != "mA" && k.Signal != "V" {
			return nil, fmt.Errorf("column %q: its signal is %q; write mA or V", c.Column, k.Signal)
		}
	}
	return s, nil
}

func finite(xs ...float64) bool {
	for _, x := range xs {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			return false
		}
	}
	return true
}

// take reads a cell.
func (s *Series) take(im *importer, cell []byte) {
	x, decimals, rest, ok := im.n.parse(cell)
	switch {
	case ok && len(rest) == 0:
	case len(cell) == 0:
		s.empty.at(im.line)
		x, decimals = math.NaN(), 0
	case ok:
		f, known := s.suffix(rest)
		if !known {
			s.unread.with(im.line, cell)
			x, decimals = math.NaN(), 0
		} else if f != 1 {
			s.other.with(im.line, cell)
			x, decimals = x*f, -1
		}
	case isBlank(cell):
		w := s.words[string(cell)]
		if w == nil {
			if w = new(seen); len(s.words) < 100 {
				s.words[string(cell)] = w
			}
		}
		w.with(im.line, cell)
		x, decimals = math.NaN(), 0
	default:
		s.unread.with(im.line, cell)
		x, decimals = math.NaN(), 0
	}
	s.raw.add(x, decimals)
}

// suffix returns the factor by which a unit after a number differs from that of the column.
func (s *Series) suffix(rest []byte) (float64, bool) {
	if f, ok := s.suffixes[string(rest)]; ok {
		return f, f != 0
	}
	f := 0.0
	text := string(trim(rest))
	if text == s.Unit {
		f = 1
	} else if u, ok := units.Find(text, s.Dim); ok && s.Scaling == nil && (s.Quantity != "" || text == "%") && u.Offset == s.unit.Offset {
		f = u.Factor / s.unit.Factor
	} else if s.Scaling != nil && text == s.Scaling.Signal {
		f = 1
	}
	if len(s.suffixes) < 1000 {
		s.suffixes[string(append([]byte(nil), rest...))] = f
	}
	return f, f != 0
}

// Len is the number of rows.
func (s *Series) Len() int { return len(s.time) }

// Values returns the channel in SI: one number a row, none of them NaN. It is made anew at each call.
func (s *Series) Values() []float64 { return s.fill(make([]float64, len(s.time))) }

func (s *Series) fill(v []float64) []float64 {
	s.si(v)
	s.bridge(v)
	return v
}

// NE 43 keeps 3.8 to 20.5 mA for what is measured; up to 3.6 mA and from 21 mA on a
// signal tells a fault of its transmitter (NAMUR recommendation NE 43, from memory).
const (
	faultLow, faultHigh = 3.6, 21.0
	validLow, validHigh = 3.8, 20.5
	voltLow, voltHigh   = -0.5, 10.5 // of 0 to 10 V; common practice, no source
)

// fault reports whether a signal is that of a broken wire or transmitter, not of a quantity.
func (s *Series) fault(x float64) bool {
	switch {
	case s.loop:
		return x < faultLow || x > faultHigh
	case s.Scaling != nil && s.Scaling.Signal == "V" && s.Scaling.From == [2]float64{0, 10}:
		return x < voltLow || x > voltHigh
	}
	return false
}

// si turns the rows into SI, NaN where there is no value.
func (s *Series) si(v []float64) {
	if s.ready != nil {
		copy(v, s.ready)
		return
	}
	add, k := 0.0, 0
	for i := range v {
		row := i
		if s.index != nil {
			row = int(s.index[i])
		}
		x := s.raw.at(row)
		if s.fault(x) {
			x = math.NaN()
		}
		if c := s.Scaling; c != nil {
			x = c.To[0] + (x-c.From[0])*(c.To[1]-c.To[0])/(c.From[1]-c.From[0])
		}
		for k < len(s.adds) && i >= s.adds[k].row {
			add += s.adds[k].by
			k++
		}
		x = s.unit.ToSI(x + add)
		v[i] = s.sign*x + s.shift
	}
	for _, i := range s.removed {
		v[i] = math.NaN()
	}
}

// bridge fills rows without a value: a straight line between those around, or the last one.
func (s *Series) bridge(v []float64) {
	last := -1
	for i := 0; i < len(v); i++ {
		if v[i] != v[i] {
			continue
		}
		if last < i-1 {
			s.across(v, last, i)
		}
		last = i
	}
	for i := last + 1; i < len(v) && last >= 0; i++ {
		v[i] = v[last]
	}
	if last < 0 {
		clear(v)
	}
}

func (s *Series) across(v []float64, a, b int) {
	for i := a + 1; i < b; i++ {
		switch {
		case a < 0:
			v[i] = v[b]
		case s.hold:
			v[i] = v[a]
		default:
			v[i] = v[a] + (v[b]-v[a])*(s.time[i]-s.time[a])/(s.time[b]-s.time[a])
		}
	}
}
