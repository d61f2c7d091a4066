package drawing

// Crossing is a place where lines of two nets cross without being joined.
// The standard marks it by the missing dot; a gap in the Under net's line is
// a help for the eye.
type Crossing struct {
	At          Pt
	Over, Under int // Net of the vertical and of the horizontal line
}

// Crossings lists the crossings between routes of different nets, in the
// order of the routes.
func Crossings(routes []Route) []Crossing {
	var found []Crossing
	for _, over := range routes {
		for _, under := range routes {
			if over.Net == under.Net {
				continue
			}
			for _, v := range over.Segments {
				for _, h := range under.Segments {
					if at, ok := crosses(v, h); ok {
						found = append(found, Crossing{at, over.Net, under.Net})
					}
				}
			}
		}
	}
	return found
}

// crosses is where the vertical v and the horizontal h pass through each
// other, ends not counted.
func crosses(v, h [2]Pt) (Pt, bool) {
	if v[0].X != v[1].X || h[0].Y != h[1].Y {
		return Pt{}, false
	}
	x, y := v[0].X, h[0].Y
	a, b := Box{h[0], h[0]}.with(h[1]), Box{v[0], v[0]}.with(v[1])
	inside := a.Min.X < x && x < a.Max.X && b.Min.Y < y && y < b.Max.Y
	return Pt{x, y}, inside
}

// Flows shares the flows at a net's ports out to the route's segments.
// into[i] is the flow into the block at n.Ports[i], positive into the block;
// the answer is the flow along each segment, positive from its first to its
// second point, in the same unit. Flows that do not add up to zero (storage in
// the net) leave or enter where the route begins. A nil answer means that
// into does not fit the ports.
func (r Route) Flows(n Net, into []float64) []float64 {
	if len(into) != len(n.Ports) {
		return nil
	}
	need := map[Pt]float64{}
	for i, p := range n.Ports {
		need[p.At] += into[i]
	}
	ends := map[Pt][]int{}
	for i, s := range r.Segments {
		ends[s[0]] = append(ends[s[0]], i)
		ends[s[1]] = append(ends[s[1]], i)
	}
	flow := make([]float64, len(r.Segments))
	done := make([]bool, len(r.Segments))
	reached := map[Pt]bool{}
	var below func(at Pt) float64
	below = func(at Pt) float64 {
		reached[at] = true
		sum := need[at]
		for _, i := range ends[at] {
			far, sign := r.Segments[i][1], 1.0
			if far == at {
				far, sign = r.Segments[i][0], -1
			}
			if done[i] || reached[far] {
				continue
			}
			done[i] = true
			part := below(far)
			flow[i] = sign * part
			sum += part
		}
		return sum
	}
	for _, s := range r.Segments {
		if !reached[s[0]] {
			below(s[0])
		}
	}
	return flow
}
