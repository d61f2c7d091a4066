package logger

import (
	"bytes"
	"regexp"
	"strings"

	"barlitre/machines/units"
)

// columns says what each column holds, by its name, its unit and its cells.
func (g *guesser) columns() {
	g.names, g.units = g.header(g.lines, g.width)
	if g.Separator == "," && g.Decimal == "." && g.Head > 0 && 2*len(trimmed(g.cellsOf(g.Head))) == g.width {
		g.ask("separator", "the head has half as many cells as the rows: commas seem to separate columns and to mark decimals, and cannot be told apart; have the file written with semicolons, or with numbers in quotes")
	}
	preamble := bytes.Join(g.lines[:max(0, min(len(g.lines), max(g.Head, g.First)-1))], []byte("\n"))
	n := newNumbers(g.Recipe)
	for i, name := range g.names {
		c := Channel{Column: name, Unit: g.units[i], Kind: kindOf(name)}
		numbers, stamps, texts, suffix := 0, 0, 0, ""
		for _, cells := range g.rows {
			if i >= len(cells) || isBlank(cells[i]) {
				continue
			}
			if _, _, rest, ok := n.parse(cells[i]); ok && (len(trim(rest)) == 0 || unitAfter(rest)) {
				numbers++
				if s := string(trim(rest)); suffix == "" {
					suffix = s
				}
			} else if d, k := isStamp(cells[i]); d || k {
				stamps++
			} else {
				texts++
			}
		}
		switch {
		case stamps > numbers+texts:
			continue // found by times
		case texts > numbers || numbers == 0 && texts > 0:
			c.Text = true
		case numbers == 0 && (strings.HasPrefix(name, "column ") || g.commentName(name)):
			c.Text = true // nothing in it
		}
		if c.Unit == "" && suffix != "" {
			c.Unit = suffix
		}
		g.quantity(&c, preamble)
		g.Channels = append(g.Channels, c)
	}
}

func trimmed(cells [][]byte) [][]byte {
	for len(cells) > 0 && len(cells[len(cells)-1]) == 0 {
		cells = cells[:len(cells)-1]
	}
	return cells
}

func unitAfter(rest []byte) bool {
	_, ok := unitOf(string(trim(rest)))
	return ok
}

var commentWords = regexp.MustCompile(`(?i)comment|remark|note|marker|event|text|bemerkung|kommentar|ereignis|status|state|mode|flag`)

func (g *guesser) commentName(name string) bool { return commentWords.MatchString(name) }

// quantity tells what a unit and a name say of a channel.
func (g *guesser) quantity(c *Channel, preamble []byte) {
	u, ok := unitOf(c.Unit)
	if !ok || c.Text {
		return
	}
	c.Unit, c.Quantity, c.Absolute = u.Symbol, u.Dim.Name(), u.absolute
	if u.Dim == units.Pressure && regexp.MustCompile(`(?i)(^|[^a-z])abs(olute?)?($|[^a-z])`).MatchString(c.Column) {
		c.Absolute = true
	}
	c.Counter = u.Dim == units.Energy && c.Kind == ""
	if u.Dim != units.Current && u.Dim != units.Voltage {
		return
	}
	sources := []string{c.Column}
	for line := range bytes.Lines(preamble) {
		if s := string(line); strings.Contains(s, c.Column) {
			sources = append([]string{s}, sources...)
		} else if !g.namesOther(s) {
			sources = append(sources, s)
		}
	}
	for _, s := range sources {
		if k, unit, ok := scalingIn(s); ok && strings.EqualFold(k.Signal, c.Unit) {
			to, _ := unitOf(unit)
			c.Scaling, c.Unit, c.Quantity, c.Absolute = k, to.Symbol, to.Dim.Name(), to.absolute
			g.because(true, "%s: %q says what its signal means", c.Column, strings.TrimSpace(s))
			return
		}
	}
}

func (g *guesser) namesOther(line string) bool {
	for _, n := range g.names {
		if len(n) > 1 && strings.Contains(line, n) {
			return true
		}
	}
	return false
}
