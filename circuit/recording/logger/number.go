package logger

import (
	"bytes"
	"math"
	"strconv"
	"strings"
)

// numbers reads numbers as a file writes them.
type numbers struct {
	decimal, group byte // group: 0 = none, ' ' = any kind of space
	buf            []byte
}

func newNumbers(r *Recipe) *numbers {
	n := &numbers{decimal: '.'}
	if r.Decimal == "," {
		n.decimal = ','
	}
	if r.Thousands != "" {
		n.group = r.Thousands[0]
	}
	return n
}

var pow10 = func() (p [23]float64) {
	for i := range p {
		p[i], _ = strconv.ParseFloat("1e"+strconv.Itoa(i), 64)
	}
	return
}()

// parse reads the number that a cell begins with. decimals is how many it has, -1 where
// it is written with an exponent or too long to tell; rest is what follows it.
func (n *numbers) parse(cell []byte) (x float64, decimals int, rest []byte, ok bool) {
	if x, decimals, rest, ok = n.fast(cell); ok && len(rest) == 0 {
		return
	}
	if plain, changed := n.plain(cell); changed {
		cell = plain
		x, decimals, rest, ok = n.fast(cell)
	}
	switch last := len(cell) - 1; {
	case ok && len(rest) == 1 && rest[0] == '-' && cell[0] >= '0' && cell[0] <= '9': // a minus may stand behind
		return -x, decimals, nil, true
	case !ok && last > 1 && cell[0] == '(' && cell[last] == ')': // book-keepers put what is below zero between brackets
		if x, d, rest, ok := n.fast(cell[1:last]); ok && len(rest) == 0 && cell[1] >= '0' && cell[1] <= '9' {
			return -x, d, nil, true
		}
	}
	return
}

func (n *numbers) fast(cell []byte) (x float64, decimals int, rest []byte, ok bool) {
	i, neg := 0, false
	if i < len(cell) && (cell[i] == '-' || cell[i] == '+') {
		neg = cell[i] == '-'
		i++
	}
	start, point := i, -1
	var mant uint64
	digits := 0
	for ; i < len(cell); i++ {
		c := cell[i]
		if c >= '0' && c <= '9' {
			mant = mant*10 + uint64(c-'0')
			digits++
		} else if c == n.decimal && point < 0 {
			point = i
		} else if c == n.group && n.group != 0 && point < 0 && groupAt(cell, i, start) {
			continue
		} else {
			break
		}
	}
	if digits == 0 {
		return 0, 0, cell, false
	}
	if point >= 0 {
		decimals = i - point - 1
	}
	end := exponent(cell, i)
	if end == i && digits <= 15 && decimals < len(pow10) { // exact: both below 2^53 or a power that is exact
		if x = float64(mant) / pow10[decimals]; neg {
			x = -x
		}
		return x, decimals, cell[i:], true
	}
	x, ok = n.slow(cell[:end])
	return x, -1, cell[end:], ok
}

// groupAt reports whether the sign at i parts thousands: one to three digits before the first, three after it.
func groupAt(cell []byte, i, start int) bool {
	if i == start || i+3 >= len(cell) {
		return false
	}
	for k := i + 1; k <= i+3; k++ {
		if cell[k] < '0' || cell[k] > '9' {
			return false
		}
	}
	if i+4 < len(cell) && cell[i+4] >= '0' && cell[i+4] <= '9' {
		return false
	}
	run := 0
	for k := i - 1; k >= start && cell[k] >= '0' && cell[k] <= '9'; k-- {
		run++
	}
	return run >= 1 && run <= 3
}

func exponent(cell []byte, i int) int {
	if i >= len(cell) || cell[i] != 'e' && cell[i] != 'E' {
		return i
	}
	k := i + 1
	if k < len(cell) && (cell[k] == '-' || cell[k] == '+') {
		k++
	}
	first := k
	for k < len(cell) && cell[k] >= '0' && cell[k] <= '9' {
		k++
	}
	if k == first {
		return i
	}
	return k
}

func (n *numbers) slow(cell []byte) (float64, bool) {
	s := string(cell)
	if n.group != 0 {
		s = strings.ReplaceAll(s, string(n.group), "")
	}
	if n.decimal == ',' {
		s = strings.Replace(s, ",", ".", 1)
	}
	x, err := strconv.ParseFloat(s, 64)
	return x, err == nil && !math.IsInf(x, 0)
}

// typographic signs and what numbers are read with
var typographic = []struct {
	sign []byte
	as   byte
}{{[]byte("\u2212"), '-'}, {[]byte("\u2013"), '-'}, {[]byte("\u00a0"), ' '}, {[]byte("\u202f"), ' '}, {[]byte("\u2009"), ' '}, {[]byte("\u2019"), '\''}}

// plain brings typographic signs to ASCII in a buffer of its own.
func (n *numbers) plain(cell []byte) ([]byte, bool) {
	changed := false
	for _, c := range cell {
		if c >= 0x80 {
			changed = true
			break
		}
	}
	if !changed {
		return cell, false
	}
	n.buf = n.buf[:0]
	for i := 0; i < len(cell); {
		hit := false
		for _, t := range typographic {
			if bytes.HasPrefix(cell[i:], t.sign) {
				n.buf, hit = append(n.buf, t.as), true
				i += len(t.sign)
				break
			}
		}
		if !hit {
			n.buf = append(n.buf, cell[i])
			i++
		}
	}
	return trim(n.buf), true
}

// blanks are the ways to say that there is no value, in lower case.
var blanks = map[string]bool{"": true, "nan": true, "-nan": true, "n/a": true, "na": true, "#n/a": true, "#na": true, "null": true, "none": true, "ol": true,
	"o.l": true, "-ol": true, "overload": true, "over": true, "ovr": true, "overrange": true, "inf": true, "-inf": true, "+inf": true, "err": true, "error": true, "invalid": true, "bad": true,
	"#value!": true, "#div/0!": true, "#ref!": true, "#num!": true, "?": true, "fault": true, "no data": true, "fehler": true}

// isBlank reports whether a cell says that there is no value: nothing, a known word, or nothing but dashes and the like.
func isBlank(cell []byte) bool {
	if len(cell) == 0 {
		return true
	}
	if len(cell) > 9 {
		return len(bytes.Trim(cell, "-*+.# ")) == 0
	}
	var low [9]byte
	for i, c := range cell {
		if c >= 'A' && c <= 'Z' {
			c += 'a' - 'A'
		}
		low[i] = c
	}
	return blanks[string(low[:len(cell)])] || len(bytes.Trim(cell, "-*+.# ")) == 0
}
