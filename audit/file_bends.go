package audit

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// Bend lays a line by hand: lines are what it consists of, by their places in
// Circuit.Lines, runs the pieces that it passes along. Without runs it is laid by the
// program again.
func (f *File) Bend(circuitName string, lines []int, runs [][2][2]float64) error {
	e, err := f.drawn(circuitName)
	if err != nil {
		return err
	}
	if len(lines) == 0 {
		return errors.New("no line is chosen; choose the line to bend")
	}
	var own []circuit.PortRef
	for _, i := range lines {
		if _, err := e.portOn(i); err != nil {
			return err
		}
		own = append(own, e.Lines[i].Ports...)
	}
	port, err := e.portOn(lines[0])
	if err != nil {
		return err
	}
	first := slices.IndexFunc(e.Bends, func(b circuit.SheetBend) bool { return slices.Contains(own, b.Port) })
	if first >= 0 {
		port = e.Bends[first].Port
	}
	want := circuit.SheetBend{Port: port, Runs: runs}
	for _, r := range runs {
		if !sound(r) {
			return fmt.Errorf("a piece of the line at %s goes from %v to %v; it must be upright or level", port, r[0], r[1])
		}
	}
	return f.sheetEdit(e, "line at "+port.String(), func(d *draft, ci int) error {
		if len(runs) > 0 && first >= 0 {
			if err := d.fill(item(child(d.circuit(ci), "bends"), first), "runs", runsText(runs)); err != nil {
				return err
			}
		}
		if err := d.cut(d.circuit(ci), "bends", true, func(i int) bool {
			return slices.Contains(own, e.Bends[i].Port) && (i != first || len(runs) == 0)
		}); err != nil || len(runs) == 0 || first >= 0 {
			return err
		}
		return d.add(d.circuit(ci), "bends", true, bendText(want))
	}, func(g *CircuitEntry) bool {
		return slices.ContainsFunc(g.Bends, func(b circuit.SheetBend) bool {
			return b.Port == port && slices.Equal(b.Runs, runs)
		}) == (len(runs) > 0)
	})
}

// sound tells whether a run is a piece of line that can be drawn.
func sound(r [2][2]float64) bool {
	for _, p := range r {
		for _, x := range p {
			if !(math.Abs(x) <= farthestPlace) {
				return false
			}
		}
	}
	return (r[0][0] == r[1][0]) != (r[0][1] == r[1][1])
}

// farthestPlace is the largest coordinate of a sheet [modules].
const farthestPlace = 1e4

// bends reads how lines were laid by hand.
func (r *reader) bends(s scope, n *yaml.Node, c *CircuitEntry) []circuit.SheetBend {
	var out []circuit.SheetBend
	for i, item := range r.items(s, n, "bends", "bends: [{port: P1.P, runs: [[10, 20, 24, 20]]}]") {
		in := s.in(fmt.Sprintf("bend %d", i+1))
		f := r.fields(in, item, "", "port", "runs")
		b := circuit.SheetBend{}
		port, err := portNamed(r.text(in, f, "port"))
		switch b.Port = port; {
		case err != nil:
			r.bad(in, item, "port", "must name a port of the line, as in port: P1.P")
		case !slices.ContainsFunc(c.Lines, func(l circuit.Line) bool { return slices.Contains(l.Ports, port) }):
			r.bad(in, item, "port", "%s stands on no line of the circuit; name a port of the line, or take the bend out", port)
		}
		for _, run := range r.items(in, f["runs"].value, "runs", "runs: [[10, 20, 24, 20]]") {
			if piece, ok := r.run(in, run); ok {
				b.Runs = append(b.Runs, piece)
			}
		}
		if isNull(f["runs"].value) || len(f["runs"].value.Content) == 0 {
			r.bad(in, item, "runs", "are missing; write where the line runs, as in runs: [[10, 20, 24, 20]]")
		}
		out = append(out, b)
	}
	return out
}

// run reads a piece of a line.
func (r *reader) run(s scope, n *yaml.Node) (piece [2][2]float64, ok bool) {
	if n.Kind != yaml.SequenceNode || len(n.Content) != 4 {
		r.bad(s, n, "runs", "a run is four numbers, from x, y to x, y, as in [10, 20, 24, 20]")
		return piece, false
	}
	for i, x := range n.Content {
		v, ok := r.quantity(s, x, "runs", units.Count)
		if !ok {
			return piece, false
		}
		piece[i/2][i%2] = v.SI
	}
	if !sound(piece) {
		r.bad(s, n, "runs", "a run goes upright or level, between -10000 and 10000; this one goes from %v to %v", piece[0], piece[1])
		return piece, false
	}
	return piece, true
}

func bendText(b circuit.SheetBend) string {
	return "{port: " + encode(b.Port.String(), true) + ", runs: " + runsText(b.Runs) + "}"
}

func runsText(runs [][2][2]float64) string {
	var list []string
	for _, r := range runs {
		var words []string
		for _, x := range [4]float64{r[0][0], r[0][1], r[1][0], r[1][1]} {
			words = append(words, strconv.FormatFloat(x, 'f', -1, 64))
		}
		list = append(list, "["+strings.Join(words, ", ")+"]")
	}
	return "[" + strings.Join(list, ", ") + "]"
}

// movedBends writes bends anew that to changes.
func (d *draft) movedBends(ci int, to func(circuit.SheetBend) (circuit.SheetBend, bool)) ([]splice, error) {
	var out []splice
	list := child(d.circuit(ci), "bends")
	for i, b := range d.file.Circuits[ci].Bends {
		moved, ok := to(b)
		if !ok || slices.Equal(moved.Runs, b.Runs) {
			continue
		}
		runs := child(item(list, i), "runs")
		if runs == nil || runs.Kind != yaml.SequenceNode {
			return nil, errLayout
		}
		from, err := d.src.start(runs)
		if err != nil {
			return nil, err
		}
		end, err := d.src.end(runs, list.Column-1)
		if err != nil {
			return nil, err
		}
		out = append(out, splice{from, end, runsText(moved.Runs)})
	}
	return out, nil
}

// renamedBends gives a block another id in the bends.
func (d *draft) renamedBends(m *yaml.Node, old, id string) ([]splice, error) {
	var out []splice
	list := child(m, "bends")
	for i := 0; list != nil && i < len(list.Content); i++ {
		n := child(list.Content[i], "port")
		if n == nil {
			continue
		}
		p, err := portNamed(n.Value)
		if err != nil || p.Block != old {
			continue
		}
		sp, err := d.src.put(list.Content[i], "port", encode(id+"."+p.Port, true))
		if err != nil {
			return nil, err
		}
		out = append(out, sp)
	}
	return out, nil
}

// keepBends lets bends follow their lines when lines change as setLines says: one whose
// port goes is told by another port of its line, one whose line goes, goes.
func (d *draft) keepBends(ci int, want map[int][]circuit.PortRef, added [][]circuit.PortRef) error {
	e := &d.file.Circuits[ci]
	after := wanted(e.Lines, want, added...)
	stays := func(p circuit.PortRef) bool {
		return slices.ContainsFunc(after, func(l []circuit.PortRef) bool { return slices.Contains(l, p) })
	}
	gone := map[int]bool{}
	var splices []splice
	for i, b := range e.Bends {
		if stays(b.Port) {
			continue
		}
		at := slices.IndexFunc(e.Lines, func(l circuit.Line) bool { return slices.Contains(l.Ports, b.Port) })
		other := -1
		if at >= 0 {
			other = slices.IndexFunc(e.Lines[at].Ports, func(p circuit.PortRef) bool {
				return stays(p) && e.Block(p.Block) != nil && e.Block(p.Block).Kind != "tank"
			})
		}
		if other < 0 {
			gone[i] = true
			continue
		}
		sp, err := d.src.put(item(child(d.circuit(ci), "bends"), i), "port", encode(e.Lines[at].Ports[other].String(), true))
		if err != nil {
			return err
		}
		splices = append(splices, sp)
	}
	if err := d.do(splices, nil); err != nil {
		return err
	}
	return d.cut(d.circuit(ci), "bends", false, func(i int) bool { return gone[i] })
}
