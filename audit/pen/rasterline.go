package pen

import "math"

// chunk is how many pieces of an opaque line share one rasteriser pass: few
// enough that the box they span stays small, many enough to save passes.
const chunk = 12

// line strokes points in pixels.
func (r *Raster) line(pts []Pt, closed bool, st Stroke) {
	if st.W <= 0 || st.C.A == 0 || len(pts) < 2 {
		return
	}
	if closed && pts[0] != pts[len(pts)-1] {
		pts = append(pts[:len(pts):len(pts)], pts[0])
	}
	square := axisParallel(pts)
	if square {
		pts, st.W = snap(pts, st.W)
	}
	if len(st.Dash) > 0 {
		for _, d := range dashes(pts, st.Dash) {
			r.solid(d, false, square, st)
		}
		return
	}
	r.solid(pts, closed, square, st)
}

// solid strokes without dashes. A translucent line is one pass, or its joints
// would show twice; an opaque one is cut into chunks with small boxes.
func (r *Raster) solid(pts []Pt, closed, square bool, st Stroke) {
	n, size := len(pts)-1, chunk
	if st.C.A < 255 {
		size = n
	}
	h := st.W / 2
	for i := 0; i < n; i += size {
		m := min(i+size, n)
		var polys [][]Pt
		box := bounds(pts[i : m+1]).Inset(-int(h) - 2)
		if box.Intersect(r.clip).Empty() {
			continue
		}
		for j := i; j < m; j++ {
			first, last := j == 0 && !closed, j == n-1 && !closed
			polys = append(polys, piece(pts[j], pts[j+1], h, square && !first, square && !last))
			if !square && !last {
				polys = append(polys, circle(pts[j+1], h))
			}
		}
		r.fill(st.C, polys...)
	}
}

// piece returns the rectangle of half width h about the line from a to b,
// longer by h at the ends asked for.
func piece(a, b Pt, h float64, longA, longB bool) []Pt {
	l := math.Hypot(b.X-a.X, b.Y-a.Y)
	if l == 0 {
		return nil
	}
	u := Pt{(b.X - a.X) / l * h, (b.Y - a.Y) / l * h}
	if longA {
		a = Pt{a.X - u.X, a.Y - u.Y}
	}
	if longB {
		b = Pt{b.X + u.X, b.Y + u.Y}
	}
	return []Pt{{a.X - u.Y, a.Y + u.X}, {b.X - u.Y, b.Y + u.X}, {b.X + u.Y, b.Y - u.X}, {a.X + u.Y, a.Y - u.X}}
}

// axisParallel reports whether every piece is horizontal or vertical.
func axisParallel(p []Pt) bool {
	for i := 1; i < len(p); i++ {
		if p[i].X != p[i-1].X && p[i].Y != p[i-1].Y {
			return false
		}
	}
	return true
}

// snap moves axis-parallel lines so that both their edges lie between pixels.
// Widths up to 2.5 become whole; wider ones keep theirs, for it may carry a
// meaning, and only one edge is crisp.
func snap(p []Pt, w float64) ([]Pt, float64) {
	if w < 2.5 {
		w = max(1, math.Round(w))
	}
	out := make([]Pt, len(p))
	for i, q := range p {
		out[i] = Pt{math.Round(q.X-w/2) + w/2, math.Round(q.Y-w/2) + w/2}
	}
	return out, w
}

// maxDashes bounds the work for a fine pattern on a long line; beyond it the
// line is drawn solid, as it would look anyway.
const maxDashes = 20000

// dashes cuts a line into the strokes of the pattern.
func dashes(pts []Pt, pattern []float64) [][]Pt {
	total, sum := 0.0, 0.0
	for i := 1; i < len(pts); i++ {
		total += math.Hypot(pts[i].X-pts[i-1].X, pts[i].Y-pts[i-1].Y)
	}
	for _, d := range pattern {
		sum += d
	}
	if total/sum*float64(len(pattern)) > maxDashes {
		return [][]Pt{pts}
	}
	var out [][]Pt
	k, left := 0, pattern[0]
	cur := []Pt{pts[0]}
	for i := 1; i < len(pts); i++ {
		a, b := pts[i-1], pts[i]
		l := math.Hypot(b.X-a.X, b.Y-a.Y)
		for at := 0.0; l > 0; {
			step := min(left, l-at)
			at, left = at+step, left-step
			q := Pt{a.X + (b.X-a.X)*at/l, a.Y + (b.Y-a.Y)*at/l}
			if k%2 == 0 {
				cur = append(cur, q)
			}
			if left <= 0 { // the stroke or gap is used up: change over
				if k%2 == 0 && len(cur) > 1 {
					out = append(out, cur)
				}
				k++
				left, cur = pattern[k%len(pattern)], []Pt{q}
			}
			if at >= l {
				break
			}
		}
	}
	if k%2 == 0 && len(cur) > 1 {
		out = append(out, cur)
	}
	return out
}
