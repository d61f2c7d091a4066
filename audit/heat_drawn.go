package audit

import (
	"math"

	"barlitre/circuit"
)

// DrawnCooler is a cooler that is drawn in a circuit: it says where the cooler stands, unless the section heat does.
type DrawnCooler struct {
	Block string // "" where none is drawn
	Place string // a word of the key cooler_place
}

// drawnCooler finds the first cooler of a circuit and what feeds it: case oil alone, flushing oil alone, a pump alone, or
// else what comes back from the machine.
func drawnCooler(c *circuit.Circuit) DrawnCooler {
	for i := range c.Blocks {
		b := &c.Blocks[i]
		if b.Kind != "cooler" {
			continue
		}
		feeds := feedsOf(c, circuit.PortRef{Block: b.ID, Port: "A"})
		place := ""
		for _, p := range feeds {
			of := feedPlace(c.Block(p.Block), p.Port)
			if place == "" {
				place = of
			}
			if of != place {
				place = placeReturn
			}
		}
		if place == "" {
			place = HeatKeyNamed("cooler_place").Default
		}
		return DrawnCooler{b.ID, place}
	}
	return DrawnCooler{}
}

// feedPlace is the place of a cooler that one port feeds.
func feedPlace(b *circuit.Block, port string) string {
	switch {
	case port == "D":
		return placeDrain
	case b.Kind == "flushing":
		return placeFlushing
	case b.Passes() != circuit.NoPassage && port == "P":
		return placeOffLine
	}
	return placeReturn
}

// follows lists the ports by which oil came to the other port of a block that only passes it on.
var follows = map[string]bool{"filter": true, "check": true, "line": true, "orifice": true, "pressure_point": true, "flow_point": true, "junction": true}

// feedsOf lists the ports that feed a port through lines and blocks that only pass oil on, relief valves left out.
func feedsOf(c *circuit.Circuit, at circuit.PortRef) (out []circuit.PortRef) {
	seen := map[circuit.PortRef]bool{}
	var from func(at circuit.PortRef)
	from = func(at circuit.PortRef) {
		if seen[at] {
			return
		}
		seen[at] = true
		for _, l := range c.Lines {
			on := false
			for _, p := range l.Ports {
				on = on || p == at
			}
			if !on {
				continue
			}
			for _, p := range l.Ports {
				b := c.Block(p.Block)
				switch {
				case p == at || seen[p] || b == nil || b.Kind == "tank" || b.Kind == "relief" && p.Port == "P" || b.Kind == "cooler":
				case (b.Kind == "filter" || b.Kind == "check") && p.Port != "B": // it leads away
				case follows[b.Kind]:
					seen[p] = true
					for _, q := range circuit.KindNamed(b.Kind).Ports {
						if q.Type == circuit.Oil && q.Name != p.Port {
							from(circuit.PortRef{Block: b.ID, Port: q.Name})
						}
					}
				default:
					seen[p] = true
					out = append(out, p)
				}
			}
		}
	}
	from(at)
	return out
}

// loopAsDrawn takes the flow of a drawn off-line loop from the circuit, whose pump is booked there.
func (h HeatSection) loopAsDrawn(c *CircuitRun) {
	for key, si := range map[string]float64{"loop_flow": c.loopFlow(h.Drawn.Block), "loop_power": 0} {
		if _, given := h.Values[key]; !given && (si > 0 || key == "loop_power") {
			v := circuit.Given(si)
			v.Origin, v.Note = circuit.Assumed, "as drawn with "+h.Drawn.Block
			h.Values[key] = v
		}
	}
}

// loopFlow is the mean flow through a drawn cooler [m³/s] while the machine runs, 0 where that is not known.
func (c *CircuitRun) loopFlow(block string) float64 {
	volume, time := 0.0, 0.0
	for _, d := range c.Duties {
		if d.courses == nil {
			continue
		}
		for i, s := range d.courses.Signals {
			if s.Name != block+".A.q" || len(s.T) < 2 {
				continue
			}
			q := &d.courses.Signals[i]
			for k := 1; k < len(q.T); k++ {
				volume += (q.T[k] - q.T[k-1]) * (q.V[k] + q.V[k-1]) / 2
			}
			time += q.T[len(q.T)-1] - q.T[0]
		}
	}
	return math.Abs(ratio(volume, time))
}
