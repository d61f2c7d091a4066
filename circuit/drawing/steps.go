package drawing

import (
	"fmt"
	"strings"
)

// maxDepth bounds pieces that use pieces, so that a loop among them ends.
const maxDepth = 8

// stepReader turns the drawing steps of the data file into primitives.
type stepReader struct {
	pieces map[string][]string
	prims  []Prim
	part   string
}

func (r *stepReader) read(steps []string, at Pt, depth int) error {
	for _, step := range steps {
		if err := r.step(step, at, depth); err != nil {
			return fmt.Errorf("step %q: %w", step, err)
		}
	}
	return nil
}

func (r *stepReader) step(step string, at Pt, depth int) error {
	f := strings.Fields(step)
	if len(f) < 2 {
		return fmt.Errorf("too short")
	}
	verb, styleName, _ := strings.Cut(f[0], ":")
	switch verb {
	case "part":
		r.part = f[1]
		return nil
	case "use":
		return r.use(f[1:], at, depth)
	case "text":
		if len(f) != 5 {
			return fmt.Errorf("want x, y, height, word")
		}
		v, err := numbers(f[1:4])
		if err == nil {
			r.put(Prim{Kind: Text, C: Pt{v[0], v[1]}.add(at), H: v[2], Text: f[4]})
		}
		return err
	}
	style, ok := map[string]Style{"": Solid, "pilot": Pilot, "drain": Drain, "chain": Chain}[styleName]
	if !ok {
		return fmt.Errorf("no line style %q", styleName)
	}
	v, err := numbers(f[1:])
	if err != nil {
		return err
	}
	return r.shape(verb, style, v, at)
}

func (r *stepReader) use(f []string, at Pt, depth int) error {
	steps, ok := r.pieces[f[0]]
	if !ok {
		return fmt.Errorf("no piece %q", f[0])
	}
	if depth == maxDepth {
		return fmt.Errorf("pieces nested deeper than %d", maxDepth)
	}
	if len(f) == 3 {
		v, err := numbers(f[1:])
		if err != nil {
			return err
		}
		at = at.add(Pt{v[0], v[1]})
	}
	return r.read(steps, at, depth+1)
}

func (r *stepReader) put(p Prim) {
	p.Part = r.part
	r.prims = append(r.prims, p)
}

// wants is the count of numbers of the shapes that have a fixed one.
var wants = map[string]int{"ring": 3, "disc": 3, "arc": 5, "adjust": 3, "spring": 5}

func (r *stepReader) shape(verb string, style Style, v []float64, at Pt) error {
	n, fixed := wants[verb]
	if fixed && len(v) != n {
		return fmt.Errorf("want %d numbers, not %d", n, len(v))
	}
	if !fixed && (len(v) < 4 || len(v)%2 != 0) {
		return fmt.Errorf("want pairs of x and y, two at least")
	}
	c := Pt{v[0], v[1]}.add(at)
	switch verb {
	case "line":
		r.put(Prim{Kind: Line, Style: style, Pts: pairs(v, at)})
	case "poly", "fill":
		r.put(Prim{Kind: Poly, Style: style, Filled: verb == "fill", Pts: pairs(v, at)})
	case "ring", "disc":
		r.put(Prim{Kind: Circle, Filled: verb == "disc", C: c, R: v[2]})
	case "arc":
		r.put(Prim{Kind: Arc, C: c, R: v[2], A0: v[3], A1: v[4]})
	case "arrow":
		r.arrow(pairs(v, at), 0.9, 0.7)
	case "adjust":
		r.arrow([]Pt{c.add(Pt{-v[2], v[2]}), c.add(Pt{v[2], -v[2]})}, 1.1, 0.8)
	case "spring":
		r.put(Prim{Kind: Line, Pts: zigzag(c, Pt{v[2], v[3]}.add(at), v[4])})
	default:
		return fmt.Errorf("no shape %q", verb)
	}
	return nil
}

func pairs(v []float64, at Pt) []Pt {
	pts := make([]Pt, len(v)/2)
	for i := range pts {
		pts[i] = Pt{v[2*i], v[2*i+1]}.add(at)
	}
	return pts
}
