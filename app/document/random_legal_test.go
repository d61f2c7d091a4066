package document

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"barlitre/circuit"
)

// circuitText returns the lines of a circuit.
func circuitText(text, name string) string {
	lines := strings.SplitAfter(text, "\n")
	at := slices.IndexFunc(lines, func(l string) bool { return strings.HasPrefix(l, "- ") && strings.Contains(l, name) })
	if at < 0 {
		return ""
	}
	end := at + 1
	for end < len(lines) && (strings.HasPrefix(lines[end], " ") || lines[end] == "\n") {
		end++
	}
	return strings.Join(lines[at:end], "")
}

// blockText returns the lines of a block, from its id to the last that is indented further.
func blockText(text, name, id string) string {
	lines := strings.SplitAfter(circuitText(text, name), "\n")
	at := slices.IndexFunc(lines, func(l string) bool { return strings.HasPrefix(l, "    "+id+":") })
	if at < 0 {
		return ""
	}
	end := at + 1
	for end < len(lines) && strings.HasPrefix(lines[end], "     ") {
		end++
	}
	return strings.Join(lines[at:end], "")
}

var commentMark = regexp.MustCompile(`# c\d+\b`)

func comments(text string) map[string]bool {
	out := map[string]bool{}
	for _, c := range commentMark.FindAllString(text, -1) {
		out[c] = true
	}
	return out
}

// fault says what is illegal in the lines of a circuit: a check of its own, which
// shares no code with that of the program.
func fault(c *circuit.Circuit) string {
	of, joined := map[circuit.PortRef]int{}, map[int]int{} // port to line, line to node
	var node func(i int) int
	node = func(i int) int {
		for joined[i] != i {
			i = joined[i]
		}
		return i
	}
	for i, l := range c.Lines {
		joined[i] = i
		if len(l.Ports) < 2 {
			return fmt.Sprintf("line %d has %d ports", i, len(l.Ports))
		}
		for _, p := range l.Ports {
			b := c.Block(p.Block)
			if b == nil || circuit.KindNamed(b.Kind).Port(p.Port) == nil {
				return fmt.Sprint("no port ", p)
			}
			if j, twice := of[p]; twice && (b.Kind != "tank" || i == j) {
				return fmt.Sprint(p, " stands twice")
			}
			of[p] = i
		}
	}
	for i, l := range c.Lines { // all that a tank or a junction joins is one node
		for j, m := range c.Lines[:i] {
			for _, p := range l.Ports {
				for _, q := range m.Ports {
					if kind := c.Block(p.Block).Kind; p.Block == q.Block && (kind == "tank" || kind == "junction") {
						joined[node(i)] = node(j)
					}
				}
			}
		}
	}
	types, signals, held := map[int]map[circuit.PortType]bool{}, map[int]int{}, map[int]map[string]bool{}
	for i, l := range c.Lines {
		n := node(i)
		if types[n] == nil {
			types[n], held[n] = map[circuit.PortType]bool{}, map[string]bool{}
		}
		for _, p := range l.Ports {
			b := c.Block(p.Block)
			if b.Kind == "junction" {
				continue
			}
			port := circuit.KindNamed(b.Kind).Port(p.Port)
			types[n][port.Type] = true
			if port.Source {
				signals[n]++
			}
			if b.Kind == "tank" {
				held[n]["tank"] = true
			} else if b.Kind == "pressure_source" {
				held[n][b.ID] = true
			}
		}
	}
	for n, t := range types {
		switch {
		case t[circuit.Shaft] && len(t) > 1, t[circuit.Electric] && len(t) > 1:
			return fmt.Sprintf("line at %v joins %v", c.Lines[n].Ports[0], t)
		case signals[n] > 1, signals[n] > 0 && t[circuit.Oil]:
			return fmt.Sprintf("signals at %v", c.Lines[n].Ports[0])
		case len(held[n]) > 1:
			return fmt.Sprintf("%v hold %v", held[n], c.Lines[n].Ports[0])
		}
	}
	return ""
}
