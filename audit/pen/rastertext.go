package pen

import (
	"image"
	"image/color"
	"image/draw"
	"math"

	"golang.org/x/image/font/sfnt"
	"golang.org/x/image/math/fixed"
	"golang.org/x/image/vector"
)

const (
	smallest   = 3    // px; smaller text is not readable and is left out
	largest    = 96   // px; larger glyphs are not kept
	maxMasks   = 4000 // glyph pictures kept a face, about 1 MB at text size
	subPixels  = 4    // positions of a glyph within a pixel
	sizeSteps  = 4    // glyph pictures a pixel of size
	flattenTol = 0.05 // px
)

// maskKey names a glyph picture: size in quarter pixels, x in quarters of a pixel.
type maskKey struct {
	g    sfnt.GlyphIndex
	size uint16
	sub  uint8
}

// mask is the coverage of a glyph; its bounds are relative to the base point.
type mask struct{ img *image.Alpha }

// Text implements Pen.
func (r *Raster) Text(p Pt, s string, size float64, c color.NRGBA, al Align, bold bool) {
	q, px := r.at(p), size*r.cur.s
	if !r.okPts(px, q) || px < smallest {
		return
	}
	s = Clean(s)
	f := faceOf(bold)
	x := q.X + al.shift()*f.textWidth(s)*px
	if px > largest {
		r.outlineText(Pt{x, q.Y}, s, px, 0, c, f)
		return
	}
	r.colour.C = c
	y := int(math.Round(q.Y)) // letters of a line share a pixel row
	for _, g := range f.set(s, x, px) {
		at := g.img.Rect.Add(image.Pt(g.x, y))
		if to := at.Intersect(r.clip); !to.Empty() {
			draw.DrawMask(r.img, to, &r.colour, image.Point{}, g.img, g.img.Rect.Min.Add(to.Min.Sub(at.Min)), draw.Over)
		}
	}
}

// setGlyph is the picture of a letter and the pixel column it stands at.
type setGlyph struct {
	img *image.Alpha
	x   int
}

// set finds the pictures of the letters of a cleaned text that begins at x. They are
// drawn without the lock, so that several pens can write at once.
func (f *face) set(s string, x, px float64) []setGlyph {
	f.mu.Lock()
	defer f.mu.Unlock()
	out := make([]setGlyph, 0, len(s))
	for _, ch := range s {
		whole := math.Floor(x)
		if m := f.mask(f.glyph(ch), px, uint8((x-whole)*subPixels)); m.img != nil {
			out = append(out, setGlyph{m.img, int(whole)})
		}
		x += f.width(ch) * px
	}
	return out
}

// RotatedText implements Pen.
func (r *Raster) RotatedText(p Pt, s string, size, deg float64, c color.NRGBA, al Align, bold bool) {
	q, px := r.at(p), size*r.cur.s
	if !r.okPts(px, q) || !r.ok(deg) || px < smallest {
		return
	}
	s = Clean(s)
	f := faceOf(bold)
	sin, cos := math.Sincos(deg * math.Pi / 180)
	d := al.shift() * f.textWidth(s) * px
	r.outlineText(Pt{q.X + d*cos, q.Y + d*sin}, s, px, deg, c, f)
}

// outlineText fills the outlines of the letters, turned about their base points.
func (r *Raster) outlineText(p Pt, s string, px, deg float64, c color.NRGBA, f *face) {
	f.mu.Lock()
	defer f.mu.Unlock()
	sin, cos := math.Sincos(deg * math.Pi / 180)
	for _, ch := range s {
		polys := f.outline(f.glyph(ch), px)
		for _, poly := range polys {
			for i, q := range poly {
				poly[i] = Pt{p.X + q.X*cos - q.Y*sin, p.Y + q.X*sin + q.Y*cos}
			}
		}
		r.fill(c, polys...)
		w := f.width(ch) * px
		p = Pt{p.X + w*cos, p.Y + w*sin}
	}
}

// outline returns the contours of a glyph about its base point. The caller holds mu.
func (f *face) outline(g sfnt.GlyphIndex, px float64) [][]Pt {
	// Loaded at one pixel a font unit: exact, and independent of size.
	segs, err := f.font.LoadGlyph(&f.buf, g, fixed.I(int(f.units)), nil)
	if err != nil {
		return nil
	}
	k := px / f.units / 64
	pt := func(q fixed.Point26_6) Pt { return Pt{float64(q.X) * k, float64(q.Y) * k} }
	var out [][]Pt
	for _, s := range segs {
		if s.Op == sfnt.SegmentOpMoveTo {
			out = append(out, []Pt{pt(s.Args[0])})
			continue
		}
		n := len(out) - 1
		from := out[n][len(out[n])-1]
		switch s.Op {
		case sfnt.SegmentOpLineTo:
			out[n] = append(out[n], pt(s.Args[0]))
		case sfnt.SegmentOpQuadTo: // as a cubic: arms of two thirds
			c, to := pt(s.Args[0]), pt(s.Args[1])
			c1 := Pt{from.X + (c.X-from.X)*2/3, from.Y + (c.Y-from.Y)*2/3}
			c2 := Pt{to.X + (c.X-to.X)*2/3, to.Y + (c.Y-to.Y)*2/3}
			out[n] = append(out[n], flatten(from, []Cubic{{c1, c2, to}}, flattenTol)[1:]...)
		case sfnt.SegmentOpCubeTo:
			out[n] = append(out[n], flatten(from, []Cubic{{pt(s.Args[0]), pt(s.Args[1]), pt(s.Args[2])}}, flattenTol)[1:]...)
		}
	}
	return out
}

// mask returns the picture of a glyph, kept for the next time. The caller holds mu.
func (f *face) mask(g sfnt.GlyphIndex, px float64, sub uint8) mask {
	key := maskKey{g, uint16(math.Round(px * sizeSteps)), sub}
	if m, ok := f.masks[key]; ok {
		return m
	}
	if len(f.masks) >= maxMasks {
		clear(f.masks)
	}
	m := drawMask(f.outline(g, float64(key.size)/sizeSteps), float64(sub)/subPixels)
	f.masks[key] = m
	return m
}

// drawMask rasterises contours moved right by dx. A glyph without contours has no picture.
func drawMask(polys [][]Pt, dx float64) mask {
	box := image.Rectangle{}
	for _, p := range polys {
		box = box.Union(bounds(p))
	}
	if box.Empty() {
		return mask{}
	}
	box.Max.X++ // room for dx
	z := vector.NewRasterizer(box.Dx(), box.Dy())
	for _, p := range polys {
		for i, q := range p {
			x, y := float32(q.X+dx-float64(box.Min.X)), float32(q.Y-float64(box.Min.Y))
			if i == 0 {
				z.MoveTo(x, y)
			} else {
				z.LineTo(x, y)
			}
		}
		z.ClosePath()
	}
	img := image.NewAlpha(box)
	z.Draw(img, box, image.Opaque, image.Point{})
	return mask{img}
}
