package logger

import (
	"bytes"
	"fmt"
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
		g.signal(n, i, c)
	}
	g.sameNames()
}

// signal asks what a signal of 4 to 20 mA means where nothing says it.
func (g *guesser) signal(n *numbers, i int, c Channel) {
	if c.Quantity != units.Current.Name() || c.Unit != "mA" || c.Scaling != nil || c.Kind != "" || c.Text {
		return
	}
	in, all := 0, 0
	for _, x := range g.values(n, i) {
		if x == x {
			if all++; x >= faultLow && x <= faultHigh {
				in++
			}
		}
	}
	if all > 0 && 10*in >= 9*all {
		g.ask(c.Column+ScalingField, fmt.Sprintf("%s is a signal of 4 to 20\u202fmA and nothing says what it means; say what its ends are, as in \"0 to 250 bar\", or \"mA\" to keep it as a current", c.Column))
	}
}

// sameNames asks where two channels of one quantity have one name in the head.
func (g *guesser) sameNames() {
	if g.Head == 0 {
		return
	}
	first := map[string]int{}
	for i, cell := range g.cellsOf(g.Head) {
		name, _ := nameAndUnit(string(cell))
		if i >= len(g.names) || name == "" {
			continue
		}
		k, twice := first[name]
		if !twice {
			first[name] = i
			continue
		}
		a, b := g.Channel(g.names[k]), g.Channel(g.names[i])
		if a == nil || b == nil || a.Text || b.Text || a.Quantity != b.Quantity {
			continue
		}
		g.ask("names", fmt.Sprintf("columns %d and %d are both named %q; they are read as %q and %q, in their order: make sure which is which, and say so", k+1, i+1, name, a.Column, b.Column), "in their order")
		return
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
