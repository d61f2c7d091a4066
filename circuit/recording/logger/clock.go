package logger

import (
	"bytes"
	"math"
	"strings"
	"time"

	"barlitre/machines/units"
)

const dayNS = int64(86400e9)

// stamps reads time stamps as a recipe says.
type stamps struct {
	Time
	n       *numbers
	factor  float64 // s per unit, of numbers
	day     int64   // since 1970, of the last date
	hasDay  bool
	undated int // rows that took the day of the row before
	zoned   bool
}

func newStamps(t Time, n *numbers) stamps {
	s := stamps{Time: t, n: n, factor: 1}
	if u, ok := units.Find(t.Unit, units.Time); ok {
		s.factor = u.Factor
	}
	switch t.Unit {
	case "us", "µs", "μs":
		s.factor = 1e-6
	case "ns":
		s.factor = 1e-9
	}
	if t.Form == Serial {
		s.factor = units.Day
	}
	return s
}

// seconds turns a number into seconds; a division by a thousand is exact where a product is not.
func (s *stamps) seconds(x float64) float64 {
	if s.factor < 1 {
		return x / math.Round(1/s.factor)
	}
	return x * s.factor
}

// read returns a stamp in s, or in ns where it is of a clock.
func (s *stamps) read(a, b []byte) (ns int64, x float64, decimals int, ok bool) {
	switch s.Form {
	case Clock:
		ns, rest, ok := clock(a)
		return ns, 0, 0, ok && len(trim(rest)) == 0
	case Dated:
		ns, ok = s.dated(a, b)
		return ns, 0, 0, ok
	}
	x, decimals, rest, ok := s.n.parse(a)
	if len(rest) > 0 {
		_, known := units.Find(string(rest), units.Time)
		ok = ok && known
	}
	return 0, x, decimals, ok
}

func (s *stamps) dated(a, b []byte) (int64, bool) {
	if day, ns, ok := compact(a); ok {
		s.day, s.hasDay = day, true
		return day*dayNS + ns, true
	}
	if len(s.Columns) == 2 && len(a) == 0 && s.hasDay {
		a, b = b, nil
	}
	day, rest, ok := date(a, s.Order)
	if !ok {
		if !s.hasDay {
			return 0, false
		}
		day, rest = s.day, a // a clock alone, after a row with a date
	}
	rest = trim(rest)
	if len(rest) > 0 && (rest[0] == 'T' || rest[0] == ',' || rest[0] == '_') {
		rest = trim(rest[1:])
	}
	if len(rest) == 0 {
		rest = b
	}
	ns, left, timed := clock(rest)
	if !timed && !(ok && len(trim(rest)) == 0 && len(s.Columns) < 2) { // a midnight may be written as a date alone
		return 0, false
	}
	if zone, zoned := offset(trim(left)); zoned {
		ns -= zone
		s.zoned = true
	} else if len(trim(left)) > 0 {
		return 0, false
	}
	if !ok {
		s.undated++
	}
	s.day, s.hasDay = day, true
	return day*dayNS + ns, true
}

// digits reads up to max digits.
func digits(b []byte, max int) (v, n int) {
	for n < len(b) && n < max && b[n] >= '0' && b[n] <= '9' {
		v = v*10 + int(b[n]-'0')
		n++
	}
	return
}

// compact reads a stamp of figures only, yyyymmddhhmmss[.fff], with a T or a blank between
// date and clock or without; other numbers of so many figures are no valid dates.
func compact(b []byte) (day, ns int64, ok bool) {
	y, n := digits(b, 4)
	if n != 4 || y < 1970 || y > 2100 || len(b) < 14 {
		return 0, 0, false
	}
	rest := b[8:]
	if rest[0] == 'T' || rest[0] == ' ' || rest[0] == '_' {
		rest = rest[1:]
	}
	var v [5]int
	for k, from := range [][]byte{b[4:6], b[6:8], rest[:2], rest[2:4], rest[4:min(6, len(rest))]} {
		if v[k], n = digits(from, 2); n != 2 {
			return 0, 0, false
		}
	}
	at := time.Date(y, time.Month(v[0]), v[1], v[2], v[3], v[4], 0, time.UTC)
	if int(at.Month()) != v[0] || at.Day() != v[1] || at.Hour() != v[2] || at.Minute() != v[3] || at.Second() != v[4] {
		return 0, 0, false
	}
	frac, left := fraction(rest[6:])
	if len(left) > 0 {
		return 0, 0, false
	}
	s := at.Unix()
	return s / 86400, s%86400*1e9 + frac, true
}

// fraction reads .fff or ,fff in ns.
func fraction(b []byte) (ns int64, rest []byte) {
	if len(b) < 2 || b[0] != '.' && b[0] != ',' && b[0] != ':' {
		return 0, b
	}
	f, n := digits(b[1:], 9)
	if n == 0 {
		return 0, b
	}
	ns = int64(f)
	for k := n; k < 9; k++ {
		ns *= 10
	}
	for b = b[1+n:]; len(b) > 0 && b[0] >= '0' && b[0] <= '9'; {
		b = b[1:]
	}
	return ns, b
}

// clock reads h:mm[:ss[.fff]] with or without AM or PM, mm:ss.fff, or h.mm.ss[,fff], in ns after midnight.
func clock(b []byte) (ns int64, rest []byte, ok bool) {
	h, n := digits(b, 3)
	if n == 0 || len(b) < n+3 || b[n] != ':' && !(b[n] == '.' && len(b) >= n+6 && b[n+3] == '.') {
		return 0, b, false
	}
	colon := b[n]
	b = b[n+1:]
	m, n := digits(b, 2)
	if n != 2 || m > 59 {
		return 0, b, false
	}
	b = b[n:]
	if colon == ':' && len(b) > 0 && b[0] != ':' { // no hours: a fraction is one of seconds
		if f, left := fraction(b); len(left) < len(b) {
			return int64(h)*60e9 + int64(m)*1e9 + f, left, true
		}
	}
	ns = int64(h)*3600e9 + int64(m)*60e9
	if len(b) > 2 && b[0] == colon {
		sec, n := digits(b[1:], 2)
		if n != 2 || sec > 60 {
			return 0, b, false
		}
		ns += int64(sec) * 1e9
		var frac int64
		frac, b = fraction(b[3:])
		ns += frac
	}
	half := trim(b)
	if len(half) >= 2 && h >= 1 && h <= 12 {
		p := half[0] | 0x20
		mark := half[1] | 0x20
		skip := 2
		if half[1] == '.' && len(half) >= 3 {
			mark = half[2] | 0x20
			skip = min(4, len(half))
		}
		if (p == 'a' || p == 'p') && mark == 'm' {
			if h == 12 {
				ns -= 12 * 3600e9
			}
			if p == 'p' {
				ns += 12 * 3600e9
			}
			return ns, half[skip:], true
		}
	}
	return ns, b, true
}

// offset reads a time zone, Z or +hh:mm, in ns.
func offset(b []byte) (int64, bool) {
	if len(b) == 1 && (b[0] == 'Z' || b[0] == 'z') {
		return 0, true
	}
	if len(b) < 3 || b[0] != '+' && b[0] != '-' {
		return 0, false
	}
	h, n := digits(b[1:], 2)
	rest := bytes.TrimPrefix(b[1+n:], []byte(":"))
	m, k := digits(rest, 2)
	if n != 2 || k != len(rest) || h > 14 || m > 59 {
		return 0, false
	}
	z := int64(h)*3600e9 + int64(m)*60e9
	if b[0] == '-' {
		z = -z
	}
	return z, true
}

var months = []string{"jan", "feb", "mar", "apr", "may", "jun", "jul", "aug", "sep", "oct", "nov", "dec"}

// fields reads the three parts of a date; width is that of the first.
func fields(b []byte) (v [3]int, width, named int, rest []byte, ok bool) {
	named = -1
	for k := range 3 {
		if k > 0 {
			if len(b) == 0 || b[0] != '-' && b[0] != '/' && b[0] != '.' && !(b[0] == ' ' && (named >= 0 || k == 1)) {
				return v, 0, 0, b, false
			}
			b = b[1:]
		}
		x, n := digits(b, 4)
		if n == 0 && k < 2 && len(b) >= 3 {
			for i, m := range months {
				if strings.EqualFold(m, string(b[:3])) {
					x, n, named = i+1, 3, k
				}
			}
		}
		if n == 0 {
			return v, 0, 0, b, false
		}
		if k == 0 {
			width = n
		}
		if k == 2 && width != 4 && n != 2 && n != 4 {
			return v, 0, 0, b, false
		}
		v[k], b = x, b[n:]
	}
	return v, width, named, b, true
}

// date reads a date in days since 1970. A first part of four digits is a year, whatever the order.
func date(b []byte, order string) (day int64, rest []byte, ok bool) {
	v, width, named, rest, ok := fields(b)
	if !ok {
		return 0, b, false
	}
	var y, m, d int
	switch {
	case width == 4 || order == "ymd" && named != 0:
		y, m, d = v[0], v[1], v[2]
	case named == 0 || order == "mdy" && named < 0:
		m, d, y = v[0], v[1], v[2]
	default:
		d, m, y = v[0], v[1], v[2]
	}
	switch {
	case y < 70:
		y += 2000
	case y < 100:
		y += 1900
	}
	if m < 1 || m > 12 || d < 1 || d > 31 || y < 1900 || y > 2200 {
		return 0, b, false
	}
	at := time.Date(y, time.Month(m), d, 0, 0, 0, 0, time.UTC)
	if at.Day() != d {
		return 0, b, false
	}
	return at.Unix() / 86400, rest, true
}

// isStamp reports whether a cell is a date, a clock, or both.
func isStamp(cell []byte) (dated, clocked bool) {
	if _, _, ok := compact(cell); ok {
		return true, true
	}
	rest := cell
	for _, order := range []string{"dmy", "mdy", "ymd"} {
		if _, r, ok := date(cell, order); ok {
			dated = true
			rest = trim(r)
			break
		}
	}
	if len(rest) > 0 && dated && (rest[0] == 'T' || rest[0] == ',' || rest[0] == '_') {
		rest = trim(rest[1:])
	}
	if dated && len(rest) == 0 {
		return true, false
	}
	_, left, ok := clock(rest)
	left = trim(left)
	if _, zoned := offset(left); ok && (len(left) == 0 || zoned) {
		return dated, true
	}
	return false, false
}
