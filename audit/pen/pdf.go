package pen

import (
	"bytes"
	"image/color"
	"time"

	"github.com/jung-kurt/gofpdf"

	"barlitre/assets"
)

// PDFFont is the name of the font family in documents made by NewPDF, with the
// styles "", "B" and "I".
const PDFFont = "ui"

// NewPDF returns an empty A4 document in mm (orientation "P" or "L") with the
// fonts in it. Equal content and equal date give equal bytes: the date is the
// one given, never the clock. "{nb}" in a text becomes the number of pages.
func NewPDF(orientation string, date time.Time) *gofpdf.Fpdf {
	f := gofpdf.New(orientation, "mm", "A4", "")
	f.AliasNbPages("{nb}") // before the fonts: only then their subsets keep the digits
	f.SetCatalogSort(true)
	f.SetCreationDate(date)
	f.SetModificationDate(date)
	f.SetProducer("Barlitre", true)
	Fonts(f)
	f.SetFont(PDFFont, "", 9)
	return f
}

// Fonts adds the font family to a document as PDFFont. Each document gets its
// own copy of the font bytes, for the library writes into them.
func Fonts(f *gofpdf.Fpdf) {
	f.AddUTF8FontFromBytes(PDFFont, "", bytes.Clone(assets.FontRegular))
	f.AddUTF8FontFromBytes(PDFFont, "B", bytes.Clone(assets.FontBold))
	f.AddUTF8FontFromBytes(PDFFont, "I", bytes.Clone(assets.FontOblique))
}

// PDF draws on the current page of a document that has the fonts of Fonts, in
// the unit of the document. It leaves the position of the document as it was,
// but not its font, colours and line width: set them before writing cells. A
// page must not end between ClipRect and Unclip. Errors are the document's, see
// its Error method.
type PDF struct {
	base
	doc   *gofpdf.Fpdf
	clips []bool // whether the matching ClipRect reached the page
}

var _ Pen = (*PDF)(nil)

// NewPDFPen returns a pen on the current page of f.
func NewPDFPen(f *gofpdf.Fpdf) *PDF { return &PDF{base: newBase(), doc: f} }

// TextWidth returns the width of s in user units.
func (d *PDF) TextWidth(s string, size float64, bold bool) float64 {
	return TextWidth(s, size, bold)
}

// ClipRect implements Pen.
func (d *PDF) ClipRect(x, y, w, h float64) {
	a, b := d.at(Pt{x, y}), d.at(Pt{x + w, y + h})
	ok := d.okPts(0, a, b)
	d.clips = append(d.clips, ok)
	if ok {
		d.doc.ClipRect(a.X, a.Y, max(0, b.X-a.X), max(0, b.Y-a.Y), false)
	}
}

// Unclip implements Pen.
func (d *PDF) Unclip() {
	n := len(d.clips) - 1
	if n < 0 {
		d.skipped++
		return
	}
	on := d.clips[n]
	d.clips = d.clips[:n]
	if on {
		d.doc.ClipEnd()
		d.fontAgain()
	}
}

// fontAgain repeats the font in the page: leaving a clip or a rotation brings
// back the one from before, which the library does not know.
func (d *PDF) fontAgain() {
	if pt, _ := d.doc.GetFontSize(); pt > 0 {
		d.doc.SetFontSize(pt)
	}
}

// Polyline implements Pen.
func (d *PDF) Polyline(p []Pt, closed bool, fill color.NRGBA, s Stroke) {
	pts, st := d.all(p), d.stroke(s)
	if !d.okPts(st.W, pts...) || len(pts) < 2 {
		return
	}
	d.paint(fill, st, func() {
		d.doc.MoveTo(pts[0].X, pts[0].Y)
		for _, q := range pts[1:] {
			d.doc.LineTo(q.X, q.Y)
		}
		if closed {
			d.doc.ClosePath()
		}
	})
}

// Bezier implements Pen.
func (d *PDF) Bezier(start Pt, pieces []Cubic, closed bool, fill color.NRGBA, s Stroke) {
	a, c, st := d.at(start), d.curve(pieces), d.stroke(s)
	if !d.okCurve(st.W, a, c) || len(c) == 0 {
		return
	}
	d.paint(fill, st, func() { d.trace(a, c, closed) })
}

// trace writes a curve into the page.
func (d *PDF) trace(start Pt, pieces []Cubic, closed bool) {
	d.doc.MoveTo(start.X, start.Y)
	for _, c := range pieces {
		if c.C2 == c.To {
			d.doc.LineTo(c.To.X, c.To.Y)
			continue
		}
		d.doc.CurveBezierCubicTo(c.C1.X, c.C1.Y, c.C2.X, c.C2.Y, c.To.X, c.To.Y)
	}
	if closed {
		d.doc.ClosePath()
	}
}

// Circle implements Pen.
func (d *PDF) Circle(c Pt, r float64, fill color.NRGBA, s Stroke) {
	d.arc(c, r, 0, 360, true, fill, s)
}

// Arc implements Pen.
func (d *PDF) Arc(c Pt, r, a0, a1 float64, s Stroke) {
	d.arc(c, r, a0, a1, false, color.NRGBA{}, s)
}

func (d *PDF) arc(c Pt, r, a0, a1 float64, closed bool, fill color.NRGBA, s Stroke) {
	m, rad, st := d.at(c), r*d.cur.s, d.stroke(s)
	if !d.okPts(st.W, m) || !d.ok(rad, a0, a1) || rad < 0 {
		return
	}
	start, pieces := arcCubics(m, rad, a0, sweep(a0, a1))
	d.paint(fill, st, func() { d.trace(start, pieces, closed) })
}

// paint fills and strokes the path that trace writes. All settings are written
// each time, because what the page has in force after a clip is not what the
// library remembers.
func (d *PDF) paint(fill color.NRGBA, st Stroke, trace func()) {
	x, y := d.doc.GetXY()
	if fill.A > 0 {
		d.doc.SetFillColor(int(fill.R), int(fill.G), int(fill.B))
		d.translucent(fill.A, func() { trace(); d.doc.DrawPath("F") })
	}
	if st.W > 0 && st.C.A > 0 {
		d.doc.SetDrawColor(int(st.C.R), int(st.C.G), int(st.C.B))
		d.doc.SetLineWidth(st.W)
		d.doc.SetLineJoinStyle("round")
		d.doc.SetLineCapStyle("butt")
		d.doc.SetDashPattern(st.Dash, 0)
		d.translucent(st.C.A, func() { trace(); d.doc.DrawPath("D") })
		if len(st.Dash) > 0 {
			d.doc.SetDashPattern(nil, 0)
		}
	}
	d.doc.SetXY(x, y)
}

// translucent draws with the given alpha and goes back to opaque.
func (d *PDF) translucent(alpha uint8, draw func()) {
	if alpha == 255 {
		draw()
		return
	}
	d.doc.SetAlpha(float64(alpha)/255, "Normal")
	draw()
	d.doc.SetAlpha(1, "Normal")
}

// Text implements Pen.
func (d *PDF) Text(p Pt, s string, size float64, c color.NRGBA, al Align, bold bool) {
	q, em := d.at(p), size*d.cur.s
	if !d.okPts(em, q) || em <= 0 {
		return
	}
	s = Clean(s)
	d.write(Pt{q.X + al.shift()*TextWidth(s, em, bold), q.Y}, s, em, c, bold)
}

// RotatedText implements Pen.
func (d *PDF) RotatedText(p Pt, s string, size, deg float64, c color.NRGBA, al Align, bold bool) {
	q, em := d.at(p), size*d.cur.s
	if !d.okPts(em, q) || !d.ok(deg) || em <= 0 {
		return
	}
	s = Clean(s)
	d.doc.TransformBegin()
	d.doc.TransformRotate(-deg, q.X, q.Y) // the library turns anticlockwise
	d.write(Pt{q.X + al.shift()*TextWidth(s, em, bold), q.Y}, s, em, c, bold)
	d.doc.TransformEnd()
	d.fontAgain()
}

// write puts cleaned text on the page.
func (d *PDF) write(q Pt, s string, em float64, c color.NRGBA, bold bool) {
	if s == "" || c.A == 0 {
		return
	}
	style := ""
	if bold {
		style = "B"
	}
	d.doc.SetFont(PDFFont, style, 0)
	d.doc.SetFontUnitSize(em)
	// The library writes the text colour only if it differs from the fill colour.
	d.doc.SetFillColor(int(c.R), int(c.G), int(c.B))
	d.doc.SetTextColor(int(c.R), int(c.G), int(c.B))
	d.translucent(c.A, func() { d.doc.Text(q.X, q.Y, s) })
}
