package drawing

import "math"

// arrow draws a polyline with a filled head at its last point. The line ends
// at the foot of the head, so that it does not blunt the tip.
func (r *stepReader) arrow(pts []Pt, length, width float64) {
	n := len(pts)
	tip, d := pts[n-1], pts[n-1].sub(pts[n-2])
	u := d.scale(1 / math.Hypot(d.X, d.Y))
	foot := tip.sub(u.scale(length))
	side := Pt{-u.Y, u.X}.scale(width / 2)
	shaft := append(append([]Pt(nil), pts[:n-1]...), foot)
	r.put(Prim{Kind: Line, Pts: shaft})
	r.put(Prim{Kind: Poly, Filled: true, Pts: []Pt{tip, foot.add(side), foot.sub(side)}})
}

// zigzag is a spring of five strokes from a to b, w aside.
func zigzag(a, b Pt, w float64) []Pt {
	const strokes = 5
	d := b.sub(a)
	side := Pt{-d.Y, d.X}.scale(w / math.Hypot(d.X, d.Y))
	pts := []Pt{a}
	for i := 0; i < strokes; i++ {
		pts = append(pts, lerp(a, b, (float64(i)+0.5)/strokes).add(side))
		side = side.scale(-1)
	}
	return append(pts, b)
}

// measure sets the bounding box from primitives and ports, and the places
// of tag and value from the box.
func (s *Symbol) measure() {
	lo, hi := Pt{math.Inf(1), math.Inf(1)}, Pt{math.Inf(-1), math.Inf(-1)}
	grow := func(p Pt) {
		lo = Pt{math.Min(lo.X, p.X), math.Min(lo.Y, p.Y)}
		hi = Pt{math.Max(hi.X, p.X), math.Max(hi.Y, p.Y)}
	}
	for _, p := range s.Prims {
		for _, q := range p.extremes() {
			grow(q)
		}
	}
	for _, p := range s.Ports {
		grow(p.At)
	}
	if lo.X > hi.X {
		lo, hi = Pt{}, Pt{}
	}
	s.Min, s.Max = lo, hi
	s.Tag = Pt{hi.X + 0.75, lo.Y + 1}
	s.Value = Pt{hi.X + 0.75, lo.Y + 3}
	if s.above && hi.X-lo.X > hi.Y-lo.Y {
		s.Tag, s.Value = Pt{lo.X, lo.Y - 3.2}, Pt{lo.X, lo.Y - 1.3}
		return
	}
	for _, p := range s.Ports {
		// A line that leaves to the right would strike through the lettering.
		if p.Dir.X > 0 && p.At.Y > s.Tag.Y-1 && p.At.Y < s.Value.Y+0.9 {
			s.Tag.Y, s.Value.Y = p.At.Y-3.2, p.At.Y-1.3
		}
	}
}

// extremes gives points whose box is the box of the primitive. Letters stand
// inside other lines and count with their middle only.
func (p Prim) extremes() []Pt {
	switch p.Kind {
	case Circle:
		return []Pt{{p.C.X - p.R, p.C.Y - p.R}, {p.C.X + p.R, p.C.Y + p.R}}
	case Text:
		return []Pt{p.C}
	case Arc:
		pts := []Pt{p.onArc(p.A0), p.onArc(p.A1)}
		for a := math.Ceil(p.A0/90) * 90; a < p.A1; a += 90 {
			pts = append(pts, p.onArc(a))
		}
		return pts
	}
	return p.Pts
}

func (p Prim) onArc(degrees float64) Pt {
	sin, cos := math.Sincos(degrees * math.Pi / 180)
	return p.C.add(Pt{p.R * cos, p.R * sin})
}
