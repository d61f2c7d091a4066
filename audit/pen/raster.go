package pen

import (
	"image"
	"image/color"
	"image/draw"
	"math"
	"slices"
	"sync"

	"golang.org/x/image/vector"
)

// Raster draws on an image, one user unit a pixel before any Push. Lines
// parallel to an axis and rectangles are moved to whole pixels so that they are
// crisp; everything else is anti-aliased.
type Raster struct {
	clipped
	img    *image.RGBA
	z      vector.Rasterizer
	poly   [2][]Pt // scratch of the polygon clipper
	work   []Pt    // scratch of the strokes
	polys  [][]Pt
	round  []Pt // scratch of circles
	dashed []Pt // scratch of dashes, and where each ends
	ends   []int

	colour image.Uniform
}

var _ Pen = (*Raster)(nil)

// NewRaster returns a pen on img, which keeps what it shows.
func NewRaster(img *image.RGBA) *Raster {
	r := &Raster{}
	r.Reset(img)
	return r
}

// Reset starts anew on img: no Push, no clip, nothing skipped.
func (r *Raster) Reset(img *image.RGBA) {
	r.base = newBase()
	r.img, r.clip, r.clips = img, img.Bounds(), r.clips[:0]
}

// Image returns the image the pen draws on.
func (r *Raster) Image() *image.RGBA { return r.img }

// Clear paints the whole image in one colour, clip or not.
func (r *Raster) Clear(c color.NRGBA) {
	draw.Draw(r.img, r.img.Bounds(), image.NewUniform(c), image.Point{}, draw.Src)
}

// TextWidth returns the width of s in user units.
func (r *Raster) TextWidth(s string, size float64, bold bool) float64 {
	return TextWidth(s, size, bold)
}

// Polyline implements Pen.
func (r *Raster) Polyline(p []Pt, closed bool, fill color.NRGBA, s Stroke) {
	pts, st := r.all(p), r.stroke(s)
	if !r.okPts(st.W, pts...) || len(pts) == 0 {
		return
	}
	r.path(pts, closed, fill, st)
}

// curveTol is how far a curve may be left by what is drawn of it [px].
const curveTol = 0.1

// Bezier implements Pen.
func (r *Raster) Bezier(start Pt, pieces []Cubic, closed bool, fill color.NRGBA, s Stroke) {
	a, c, st := r.at(start), r.curve(pieces), r.stroke(s)
	if !r.okCurve(st.W, a, c) {
		return
	}
	r.path(flatten(a, c, curveTol), closed, fill, st)
}

// Circle implements Pen.
func (r *Raster) Circle(c Pt, radius float64, fill color.NRGBA, s Stroke) {
	m, rad, st := r.at(c), radius*r.cur.s, r.stroke(s)
	if !r.okPts(st.W, m) || !r.ok(rad) || rad < 0 {
		return
	}
	r.round = r.round[:0]
	if fill.A > 0 {
		r.fill(fill, r.circle(m, rad))
	}
	switch {
	case st.W <= 0 || st.C.A == 0:
	case len(st.Dash) > 0:
		pts := r.circle(m, rad)
		r.line(append(pts, pts[0]), false, st)
	default: // a ring: the outer circle less the inner one run backwards
		in := r.circle(m, max(0, rad-st.W/2))
		slices.Reverse(in)
		r.fill(st.C, r.circle(m, rad+st.W/2), in)
	}
}

// Arc implements Pen.
func (r *Raster) Arc(c Pt, radius, a0, a1 float64, s Stroke) {
	m, rad, st := r.at(c), radius*r.cur.s, r.stroke(s)
	if !r.okPts(st.W, m) || !r.ok(rad, a0, a1) || rad < 0 {
		return
	}
	start, pieces := arcCubics(m, rad, a0, sweep(a0, a1))
	r.line(flatten(start, pieces, 0.05), false, st)
}

// path fills and strokes points in pixels.
func (r *Raster) path(pts []Pt, closed bool, fill color.NRGBA, st Stroke) {
	if fill.A > 0 && len(pts) > 2 {
		if box, ok := rectangle(pts); ok {
			r.wash(box, fill, 1)
		} else {
			r.fill(fill, pts)
		}
	}
	r.line(pts, closed, st)
}

// rectangle returns the whole pixels of an axis-parallel rectangle, at least
// one across so that a thin bar stays visible; ok is false for other shapes and
// for a rectangle without area.
func rectangle(p []Pt) (image.Rectangle, bool) {
	if len(p) != 4 {
		return image.Rectangle{}, false
	}
	a, c := p[0], p[2]
	upright := p[1] == Pt{c.X, a.Y} && p[3] == Pt{a.X, c.Y}
	lying := p[1] == Pt{a.X, c.Y} && p[3] == Pt{c.X, a.Y}
	if !upright && !lying || a.X == c.X || a.Y == c.Y {
		return image.Rectangle{}, false
	}
	x0, x1 := wholePixels(a.X, c.X)
	y0, y1 := wholePixels(a.Y, c.Y)
	return image.Rect(x0, y0, x1, y1), true
}

func wholePixels(a, b float64) (int, int) {
	if a > b {
		a, b = b, a
	}
	i, j := int(math.Round(a)), int(math.Round(b))
	if i == j {
		i = int(math.Floor((a + b) / 2))
		j = i + 1
	}
	return i, j
}

// circle returns the points of a circle in the turning sense strokes use, which stay until
// r.round is emptied.
func (r *Raster) circle(c Pt, rad float64) []Pt {
	n := int(max(8, min(mostChords, 10*math.Sqrt(rad)))) // chords leave it by 0.05 px
	from := len(r.round)
	for _, q := range unitCircles[n]() {
		r.round = append(r.round, Pt{c.X + rad*q.X, c.Y + rad*q.Y})
	}
	return r.round[from:len(r.round):len(r.round)]
}

const mostChords = 400

// unitCircles are the points of a circle of radius 1 by their number, made when first asked for.
var unitCircles = func() (list [mostChords + 1]func() []Pt) {
	for n := range list {
		list[n] = sync.OnceValue(func() []Pt {
			out := make([]Pt, n)
			for i := range out {
				sin, cos := math.Sincos(-2 * math.Pi * float64(i) / float64(n))
				out[i] = Pt{cos, sin}
			}
			return out
		})
	}
	return list
}()

// fill paints the union of polygons that turn the same way; one that turns the
// other way is a hole. Work is limited to the pixels they touch.
func (r *Raster) fill(c color.NRGBA, polys ...[]Pt) {
	box := image.Rectangle{}
	for _, p := range polys {
		box = box.Union(bounds(p))
	}
	box = box.Intersect(r.clip)
	if box.Empty() || c.A == 0 {
		return
	}
	r.z.Reset(box.Dx(), box.Dy())
	for _, p := range polys {
		p = r.clipPoly(p, box)
		for i, q := range p {
			x, y := float32(q.X-float64(box.Min.X)), float32(q.Y-float64(box.Min.Y))
			if i == 0 {
				r.z.MoveTo(x, y)
			} else {
				r.z.LineTo(x, y)
			}
		}
		if len(p) > 0 {
			r.z.ClosePath()
		}
	}
	r.colour.C = c
	r.z.Draw(r.img, box, &r.colour, image.Point{})
}

// bounds returns the pixels the points span.
func bounds(p []Pt) image.Rectangle {
	if len(p) == 0 {
		return image.Rectangle{}
	}
	lo, hi := p[0], p[0]
	for _, q := range p[1:] {
		lo = Pt{min(lo.X, q.X), min(lo.Y, q.Y)}
		hi = Pt{max(hi.X, q.X), max(hi.Y, q.Y)}
	}
	return image.Rect(int(math.Floor(lo.X)), int(math.Floor(lo.Y)), int(math.Ceil(hi.X))+1, int(math.Ceil(hi.Y))+1)
}

// clipPoly cuts a polygon to the box and one pixel round it, because the
// rasteriser's fixed-point numbers do not reach far outside (Sutherland and
// Hodgman's method, one edge of the box at a time). The result is valid until
// the next call.
func (r *Raster) clipPoly(p []Pt, box image.Rectangle) []Pt {
	if bounds(p).In(box) {
		return p
	}
	x0, y0 := float64(box.Min.X-1), float64(box.Min.Y-1)
	x1, y1 := float64(box.Max.X+1), float64(box.Max.Y+1)
	inside := [4]func(Pt) float64{ // ≥ 0 inside
		func(q Pt) float64 { return q.X - x0 }, func(q Pt) float64 { return x1 - q.X },
		func(q Pt) float64 { return q.Y - y0 }, func(q Pt) float64 { return y1 - q.Y },
	}
	for k, d := range inside {
		out := r.poly[k%2][:0]
		for i, b := range p {
			a := p[(i+len(p)-1)%len(p)]
			da, db := d(a), d(b)
			if (da < 0) != (db < 0) {
				t := da / (da - db)
				out = append(out, Pt{a.X + t*(b.X-a.X), a.Y + t*(b.Y-a.Y)})
			}
			if db >= 0 {
				out = append(out, b)
			}
		}
		r.poly[k%2], p = out, out
	}
	return p
}
