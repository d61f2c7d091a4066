package logger

import (
	"bytes"
	"fmt"
)

// notation finds the decimal sign and what parts thousands.
func (g *guesser) notation() {
	seen := styles{}
	for i, line := range g.lines {
		cells := g.split.split(line, nil)
		if !shapeOf(cells).row() {
			continue
		}
		if g.First == 0 {
			g.First = i + 1
		}
		for _, c := range cells {
			if d, k := isStamp(c); !d && !k && !isBlank(c) && looksNumber(c) {
				seen.add(c)
			}
		}
	}
	switch {
	case seen.comma > 0 && seen.point == 0 || seen.commaLast > 0:
		g.Decimal = ","
	case seen.comma == 0 && seen.point == 0 && seen.either[','] > 0 && seen.either['.'] == 0:
		g.Decimal = ","
		g.ambiguous(seen.example, ",")
	case seen.comma == 0 && seen.point == 0 && seen.either['.'] > 0 && seen.either[','] == 0 && g.Separator != ",":
		g.ambiguous(seen.example, ".")
	}
	other := byte(',')
	if g.Decimal == "," {
		other = '.'
	}
	switch {
	case seen.group[other] > 0 || seen.either[other] > 0 && (seen.comma > 0 || seen.point > 0):
		g.Thousands = string(other)
	case seen.group[' '] > 0:
		g.Thousands = " "
	case seen.group['\''] > 0:
		g.Thousands = "'"
	}
}

// ambiguous asks whether the only sign ever seen, always before three figures, is decimal.
func (g *guesser) ambiguous(example, sign string) {
	other := "."
	if sign == "." {
		other = ","
	}
	g.ask("decimal", fmt.Sprintf("%q may have three decimals or thousands: every number of the file has three figures after its %q; say which sign is the decimal one", example, sign), sign, other)
}

// styles counts what numbers show of their notation.
type styles struct {
	comma, point         int // a decimal sign for sure
	commaLast, pointLast int // both signs, this one last
	either               map[byte]int
	group                map[byte]int
	example              string
}

func (s *styles) add(cell []byte) {
	if s.either == nil {
		s.either, s.group = map[byte]int{}, map[byte]int{}
	}
	if n := (&numbers{}); true {
		if plain, changed := n.plain(cell); changed {
			cell = bytes.Clone(plain)
		}
	}
	for _, mark := range []byte{' ', '\''} {
		if i := bytes.IndexByte(cell, mark); i > 0 && groupAt(cell, i, sign(cell)) {
			s.group[mark]++
		}
	}
	i, j := bytes.LastIndexByte(cell, ','), bytes.LastIndexByte(cell, '.')
	switch {
	case i < 0 && j < 0:
	case i >= 0 && j >= 0 && i > j:
		s.commaLast++
		s.comma++
		s.group['.']++
	case i >= 0 && j >= 0:
		s.pointLast++
		s.point++
		s.group[',']++
	default:
		mark, at := byte(','), i
		if i < 0 {
			mark, at = '.', j
		}
		first := bytes.IndexByte(cell, mark)
		switch {
		case first != at: // twice
			s.group[mark]++
		case groupAt(cell, at, sign(cell)) && cell[sign(cell)] != '0':
			s.either[mark]++
			s.example = string(cell)
		case mark == ',':
			s.comma++
		default:
			s.point++
		}
	}
}

func sign(cell []byte) int {
	if len(cell) > 0 && (cell[0] == '-' || cell[0] == '+') {
		return 1
	}
	return 0
}
