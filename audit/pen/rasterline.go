package pen

import (
	"image"
	"image/color"
	"image/draw"
	"math"
)

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
		r.dashed, r.ends = dashes(r.dashed[:0], r.ends[:0], pts, st.Dash)
		from := 0
		for _, to := range r.ends {
			r.solid(r.dashed[from:to], false, square, st)
			from = to
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
	bars := square && st.C.A == 255 && st.W == math.Round(st.W)
	for i := 0; i < n; i += size {
		m := min(i+size, n)
		box := bounds(pts[i : m+1]).Inset(-int(h) - 2)
		if box.Intersect(r.clip).Empty() {
			continue
		}
		r.work, r.polys, r.round = r.work[:0], r.polys[:0], r.round[:0]
		for j := i; j < m; j++ {
			first, last := j == 0 && !closed, j == n-1 && !closed
			if bars {
				r.bar(pts[j], pts[j+1], h, !first, !last, st.C)
				continue
			}
			r.piece(pts[j], pts[j+1], h, square && !first, square && !last)
			if !square && !last {
				r.polys = append(r.polys, r.circle(pts[j+1], h))
			}
		}
		if !bars {
			r.fill(st.C, r.polys...)
		}
	}
}

// lengthened is the line from a to b, longer by h at the ends asked for, and its direction
// times h; ok is false for one without length.
func lengthened(a, b Pt, h float64, longA, longB bool) (p, q, u Pt, ok bool) {
	l := math.Hypot(b.X-a.X, b.Y-a.Y)
	if l == 0 {
		return a, b, u, false
	}
	u = Pt{(b.X - a.X) / l * h, (b.Y - a.Y) / l * h}
	if longA {
		a = Pt{a.X - u.X, a.Y - u.Y}
	}
	if longB {
		b = Pt{b.X + u.X, b.Y + u.Y}
	}
	return a, b, u, true
}

// piece adds the rectangle of half width h about the line from a to b to the polygons at
// hand.
func (r *Raster) piece(a, b Pt, h float64, longA, longB bool) {
	a, b, u, ok := lengthened(a, b, h, longA, longB)
	if !ok {
		return
	}
	n := len(r.work)
	r.work = append(r.work, Pt{a.X - u.Y, a.Y + u.X}, Pt{b.X - u.Y, b.Y + u.X}, Pt{b.X + u.Y, b.Y - u.X}, Pt{a.X + u.Y, a.Y - u.X})
	r.polys = append(r.polys, r.work[n:len(r.work):len(r.work)])
}

// bar is piece for an upright or level line in one opaque colour whose long edges lie
// between pixels: what it covers are whole pixels, but for a share of those at its ends.
func (r *Raster) bar(a, b Pt, h float64, longA, longB bool, c color.NRGBA) {
	a, b, u, ok := lengthened(a, b, h, longA, longB)
	if !ok {
		return
	}
	x0, x1 := min(a.X, b.X)-math.Abs(u.Y), max(a.X, b.X)+math.Abs(u.Y)
	y0, y1 := min(a.Y, b.Y)-math.Abs(u.X), max(a.Y, b.Y)+math.Abs(u.X)
	if a.Y == b.Y {
		lo, hi := int(math.Round(y0)), int(math.Round(y1))
		r.along(x0, x1, c, func(i, j int) image.Rectangle { return image.Rect(i, lo, j, hi) })
	} else {
		lo, hi := int(math.Round(x0)), int(math.Round(x1))
		r.along(y0, y1, c, func(i, j int) image.Rectangle { return image.Rect(lo, i, hi, j) })
	}
}

// along paints the pixels from one place to another, those at the ends by their share.
func (r *Raster) along(from, to float64, c color.NRGBA, pixels func(i, j int) image.Rectangle) {
	i, j := int(math.Ceil(from-1e-6)), int(math.Floor(to+1e-6))
	if i > j { // within one pixel
		r.wash(pixels(j, i), c, to-from)
		return
	}
	r.wash(pixels(i-1, i), c, float64(i)-from)
	r.wash(pixels(i, j), c, 1)
	r.wash(pixels(j, j+1), c, to-float64(j))
}

// wash paints a share of a colour over whole pixels.
func (r *Raster) wash(box image.Rectangle, c color.NRGBA, share float64) {
	if box = box.Intersect(r.clip); box.Empty() || share < 1.0/512 {
		return
	}
	c.A = uint8(math.Round(float64(c.A) * min(share, 1)))
	r.colour.C = c
	draw.Draw(r.img, box, &r.colour, image.Point{}, draw.Over)
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

// dashes adds the strokes of the pattern on a line to out, and where each ends there.
func dashes(out []Pt, ends []int, pts []Pt, pattern []float64) ([]Pt, []int) {
	total, sum := 0.0, 0.0
	for i := 1; i < len(pts); i++ {
		total += math.Hypot(pts[i].X-pts[i-1].X, pts[i].Y-pts[i-1].Y)
	}
	for _, d := range pattern {
		sum += d
	}
	if total/sum*float64(len(pattern)) > maxDashes {
		return append(out, pts...), append(ends, len(out)+len(pts))
	}
	k, left := 0, pattern[0]
	from := len(out) // of the stroke at hand
	out = append(out, pts[0])
	for i := 1; i < len(pts); i++ {
		a, b := pts[i-1], pts[i]
		l := math.Hypot(b.X-a.X, b.Y-a.Y)
		for at := 0.0; l > 0; {
			step := min(left, l-at)
			at, left = at+step, left-step
			q := Pt{a.X + (b.X-a.X)*at/l, a.Y + (b.Y-a.Y)*at/l}
			if k%2 == 0 {
				out = append(out, q)
			}
			if left <= 0 { // the stroke or gap is used up: change over
				if k%2 == 0 && len(out)-from > 1 {
					ends = append(ends, len(out))
				} else {
					out = out[:from]
				}
				k++
				left, from = pattern[k%len(pattern)], len(out)
				out = append(out, q)
			}
			if at >= l {
				break
			}
		}
	}
	if k%2 == 0 && len(out)-from > 1 {
		return out, append(ends, len(out))
	}
	return out[:from], ends
}
