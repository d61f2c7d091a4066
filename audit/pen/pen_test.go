package pen

import (
	"bytes"
	"image"
	"image/color"
	"math"
	"regexp"
	"strings"
	"testing"
	"time"

	"github.com/jung-kurt/gofpdf"
)

var (
	ink   = color.NRGBA{0x20, 0x30, 0x3A, 255}
	teal  = color.NRGBA{0x0B, 0x7A, 0x75, 255}
	amber = color.NRGBA{0xD9, 0x82, 0x00, 128}
	none  = color.NRGBA{}
	white = color.NRGBA{255, 255, 255, 255}
	day   = time.Date(2024, 3, 1, 12, 0, 0, 0, time.UTC)
)

// scene uses every call of the interface, in figure units 0…400 × 0…300.
func scene(p Pen) {
	RoundRect(p, 5, 5, 390, 290, 6, white, Stroke{W: 1, C: ink})
	Rect(p, 20, 20, 100, 30, teal, Stroke{})
	Line(p, Pt{20, 60}, Pt{120, 60}, Stroke{W: 1, C: ink, Dash: []float64{4, 2}})
	p.Polyline([]Pt{{20, 80}, {60, 120}, {120, 90}}, false, none, Stroke{W: 3, C: ink})
	p.Polyline([]Pt{{140, 80}, {180, 120}, {220, 90}}, true, amber, Stroke{W: 2, C: amber})
	p.Bezier(Pt{20, 160}, []Cubic{{Pt{60, 120}, Pt{80, 200}, Pt{120, 160}}}, false, none, Stroke{W: 2, C: teal})
	p.Circle(Pt{180, 160}, 20, amber, Stroke{W: 4, C: ink})
	p.Arc(Pt{240, 160}, 20, 0, 90, Stroke{W: 2, C: ink})
	p.ClipRect(20, 200, 50, 50)
	p.ClipRect(40, 200, 100, 40)
	Rect(p, 0, 180, 400, 120, teal, Stroke{})
	p.Text(Pt{42, 230}, "clipped text", 12, ink, Left, false)
	p.Unclip()
	p.Unclip()
	p.Text(Pt{300, 40}, "Δp ≤ 160 bar, η 0.91", 12.5, ink, Center, false)
	p.Push(200, 200, 0.5)
	p.Text(Pt{0, 40}, "half size", 30, ink, Left, true)
	p.Pop()
	p.RotatedText(Pt{385, 200}, "upwards", 12, -90, ink, Left, false)
}

func raster(w, h int) *Raster {
	r := NewRaster(image.NewRGBA(image.Rect(0, 0, w, h)))
	r.Clear(white)
	return r
}

func pdfBytes(t *testing.T, draw func(Pen)) []byte {
	t.Helper()
	f := NewPDF("P", day)
	f.SetCompression(false)
	f.AddPage()
	p := NewPDFPen(f)
	p.Push(10, 10, 0.25)
	draw(p)
	p.Pop()
	var b bytes.Buffer
	if err := f.Output(&b); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func TestSameSceneOnEveryPen(t *testing.T) {
	r := raster(400, 300)
	scene(r)
	for _, at := range []struct {
		what string
		x, y int
		want color.NRGBA
	}{
		{"bar", 70, 35, teal},
		{"ring of the circle", 200, 160, ink},
		{"arc, clockwise from +x is below right", 254, 174, ink},
		{"no arc above", 254, 146, white},
		{"inside both clips", 60, 210, teal},
		{"inside the outer clip only", 30, 210, white},
		{"below the inner clip", 60, 245, white},
		{"right of the outer clip", 80, 220, white},
		{"wide line", 40, 100, ink},
	} {
		if got := color.NRGBAModel.Convert(r.img.At(at.x, at.y)).(color.NRGBA); got != at.want {
			t.Errorf("%s (%d, %d): %v, want %v", at.what, at.x, at.y, got, at.want)
		}
	}
	rec := NewRecorder()
	scene(rec)
	if n := len(rec.Boxes()); n != 4 {
		t.Errorf("%d texts recorded, want 4", n)
	}
	if !rec.Boxes()[0].Cut || rec.Boxes()[1].Cut {
		t.Error("the clipped text and only that must be marked as cut")
	}
	if n := len(rec.Shapes()); n != 9 {
		t.Errorf("%d shapes recorded, want 9", n)
	}
	if s := r.Skipped() + rec.Skipped(); s != 0 {
		t.Errorf("%d calls skipped", s)
	}
	pdf := string(pdfBytes(t, scene))
	for what, op := range map[string]string{
		"bar from 15 to 40 mm": `\n42\.52 799\.37 m`,
		"curve":                ` c\n`, "clip": ` re W n\n`, "dash": `\[2\.83 1\.42\] 0\.00 d`, "translucent": `/ca 0\.502`,
	} {
		if !regexp.MustCompile(op).MatchString(pdf) {
			t.Errorf("the PDF has no %s (%s)", what, op)
		}
	}
}

func TestPDFIsDeterministic(t *testing.T) {
	a, b := pdfBytes(t, scene), pdfBytes(t, scene)
	if !bytes.Equal(a, b) {
		t.Error("two documents with equal content differ")
	}
	if !bytes.Contains(a, []byte("D:20240301120000")) {
		t.Error("the date given is not in the document")
	}
}

// TestPDFFontAfterClip guards against the font that a page forgets when a clip
// or a rotation ends: each text must be preceded by its own font since then.
func TestPDFFontAfterClip(t *testing.T) {
	pdf := string(pdfBytes(t, func(p Pen) {
		p.Text(Pt{0, 20}, "a", 12, ink, Left, false)
		p.ClipRect(0, 0, 100, 100)
		p.Text(Pt{0, 40}, "b", 20, ink, Left, true)
		p.Unclip()
		p.RotatedText(Pt{0, 60}, "c", 20, 45, ink, Left, true)
	}))
	if ends, again := strings.Count(pdf, "\nQ\n"), len(regexp.MustCompile(`\nQ\nBT /F\w+ [\d.]+ Tf ET`).FindAllString(pdf, -1)); ends != 2 || again != 2 {
		t.Errorf("%d of %d ends are followed by the font, want 2 of 2", again, ends)
	}
}

func TestPDFDocumentPositionIsKept(t *testing.T) {
	f := NewPDF("P", day)
	f.AddPage()
	f.SetXY(33, 44)
	scene(NewPDFPen(f))
	if x, y := f.GetXY(); x != 33 || y != 44 {
		t.Errorf("position is now %v, %v", x, y)
	}
}

func TestTextWidthAgreesWithThePDFLibrary(t *testing.T) {
	f := NewPDF("P", day)
	f.AddPage()
	for _, s := range []string{"Pump P1, slip and friction", "Δp = 166.4 bar · 63.9 L/min", "1\u202f234.5 kWh", "η ≤ 0.91", "iiiiWWWW"} {
		for _, bold := range []bool{false, true} {
			f.SetFont(PDFFont, map[bool]string{true: "B"}[bold], 0)
			f.SetFontUnitSize(4)
			want, got := f.GetStringWidth(s), TextWidth(s, 4, bold)
			// The library rounds each advance to a thousandth of an em, up to
			// half a thousandth of some 0.3 em: below 1 %.
			if math.Abs(got-want) > 0.01*want {
				t.Errorf("%q bold %v: %v, the PDF library says %v", s, bold, got, want)
			}
		}
	}
	for _, p := range []Pen{raster(10, 10), NewRecorder(), NewPDFPen(f)} {
		if got := p.TextWidth("Energy", 12, false); got != TextWidth("Energy", 12, false) {
			t.Errorf("%T measures %v", p, got)
		}
	}
}

// TestRasterTextIsAsWideAsMeasured compares the pixels inked with the measure.
func TestRasterTextIsAsWideAsMeasured(t *testing.T) {
	r := raster(600, 60)
	s := "Nothing but the width of HHHHHHHHHHHHH"
	r.Text(Pt{20, 40}, s, 24, ink, Left, false)
	x0, x1 := 600, 0
	for x := range 600 {
		for y := range 60 {
			if r.img.RGBAAt(x, y).R < 128 {
				x0, x1 = min(x0, x), max(x1, x+1)
			}
		}
	}
	want := TextWidth(s, 24, false)
	// N and H have side bearings of about 0.09 em each, 4.3 px together.
	if got := float64(x1 - x0); got > want || got < want-5.5 {
		t.Errorf("inked %v px, measured %v", got, want)
	}
}

func TestHostileInput(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	hostile := func(p Pen) {
		for _, s := range []string{"🛢️ oil", "a\xffb", "tab\tnew\nline", "\x00", "", strings.Repeat("M", 5000), "油圧", "\u202e"} {
			p.Text(Pt{10, 10}, s, 12, ink, Right, true)
			p.RotatedText(Pt{10, 10}, s, 12, 30, ink, Center, false)
			p.TextWidth(s, 12, false)
		}
		s := Stroke{W: 1, C: ink}
		for _, bad := range []float64{nan, inf, -inf, 1e300} {
			p.Polyline([]Pt{{0, 0}, {bad, 1}}, true, ink, s)
			p.Bezier(Pt{0, 0}, []Cubic{{Pt{1, 1}, Pt{2, bad}, Pt{3, 3}}}, false, ink, s)
			p.Circle(Pt{bad, 0}, 1, ink, s)
			p.Circle(Pt{0, 0}, bad, ink, s)
			p.Arc(Pt{0, 0}, 1, 0, bad, s)
			p.Text(Pt{bad, 0}, "x", 12, ink, Left, false)
			p.Text(Pt{0, 0}, "x", bad, ink, Left, false)
			p.RotatedText(Pt{0, 0}, "x", 12, bad, ink, Left, false)
			p.Polyline([]Pt{{0, 0}, {1, 1}}, false, ink, Stroke{W: bad, C: ink})
			p.Push(bad, 0, 1)
			p.Circle(Pt{0, 0}, 1, ink, s)
			p.Pop()
			p.ClipRect(bad, 0, 1, 1)
			p.Unclip()
		}
		p.Push(0, 0, 0)
		p.Circle(Pt{0, 0}, 1, ink, s)
		p.Pop()
		p.Pop()    // no partner
		p.Unclip() // no partner
		p.Polyline(nil, true, ink, s)
		p.Polyline([]Pt{{1, 1}}, true, ink, s)
		p.Bezier(Pt{}, nil, true, ink, s)
		p.Polyline([]Pt{{-9e6, -9e6}, {9e6, 8e6}, {0, 9e6}}, true, amber, Stroke{W: 5, C: ink, Dash: []float64{1e-9, 2e-9}})
		p.Polyline([]Pt{{0, 0}, {50, 50}}, false, ink, Stroke{W: 1, C: ink, Dash: []float64{nan, -1}})
		p.Circle(Pt{5, 5}, -1, ink, s)
		p.Arc(Pt{5, 5}, 3, 10, 5000, s)
		p.Arc(Pt{5, 5}, 0, 0, 0, s)
	}
	// Per bad number 9 shapes and texts, a circle under a bad Push and a clip; then
	// a circle under scale 0, Pop and Unclip. A width of −∞ is merely no outline.
	const want = 4*11 + 3 - 1
	r, rec, m := raster(100, 100), NewRecorder(), NewMosaic(100, 100)
	hostile(r)
	hostile(m)
	m.Flush()
	hostile(rec)
	f := NewPDF("L", day)
	f.AddPage()
	d := NewPDFPen(f)
	hostile(d)
	var b bytes.Buffer
	if err := f.Output(&b); err != nil {
		t.Fatal(err)
	}
	if bytes.Contains(b.Bytes(), []byte("NaN")) || bytes.Contains(b.Bytes(), []byte("Inf ")) {
		t.Error("a number that is none is in the PDF")
	}
	for name, n := range map[string]int{"raster": r.Skipped(), "recorder": rec.Skipped(), "mosaic": m.Skipped(), "pdf": d.Skipped()} {
		if n != want {
			t.Errorf("%s skipped %d calls, want %d", name, n, want)
		}
	}
}

func TestClean(t *testing.T) {
	for in, want := range map[string]string{
		"plain µ Δ ≤": "plain µ Δ ≤", "a\xffb": "a\uFFFDb", "🛢️ x": "\uFFFD x", "a\tb\nc": "a b c",
		"1\u202f234": "1\u202f234", "油": "\uFFFD", "a\u200bb": "ab",
	} {
		if got := Clean(in); got != want {
			t.Errorf("Clean(%q) = %q, want %q", in, got, want)
		}
	}
}

func TestShorten(t *testing.T) {
	long := "Pressure relief valve RV1, main line"
	full := TextWidth(long, 12, false)
	if got := Shorten(long, 12, false, full); got != long {
		t.Errorf("a text that fits became %q", got)
	}
	for w := full - 1; w > 0; w -= 7 {
		got := Shorten(long, 12, false, w)
		if TextWidth(got, 12, false) > w {
			t.Errorf("%q is wider than %v", got, w)
		}
		if got != "" && (!strings.HasSuffix(got, "…") || !strings.HasPrefix(long, strings.TrimSuffix(got, "…"))) {
			t.Errorf("%q is not a beginning with an ellipsis", got)
		}
	}
	if got := Shorten(long, 12, false, 1); got != "" {
		t.Errorf("1 unit holds %q", got)
	}
}

// TestTwoDocumentsAtOnce runs under the race detector in the full checks.
func TestTwoDocumentsAtOnce(t *testing.T) {
	done := make(chan error)
	for range 3 {
		go func() {
			f := NewPDF("P", day)
			f.AddPage()
			scene(NewPDFPen(f))
			scene(raster(400, 300))
			done <- f.Output(&bytes.Buffer{})
		}()
	}
	for range 3 {
		if err := <-done; err != nil {
			t.Error(err)
		}
	}
}

func TestArcCubicsStayOnTheCircle(t *testing.T) {
	for _, turn := range []float64{10, 90, 200, -135, 360} {
		start, pieces := arcCubics(Pt{5, 7}, 100, 30, turn)
		for _, p := range flatten(start, pieces, 0.01) {
			if r := math.Hypot(p.X-5, p.Y-7); math.Abs(r-100) > 0.05 { // 0.03 % and the chords
				t.Errorf("turn %v: a point at radius %v, want 100", turn, r)
			}
		}
		end := pieces[len(pieces)-1].To
		sin, cos := math.Sincos((30 + turn) * math.Pi / 180)
		if math.Hypot(end.X-5-100*cos, end.Y-7-100*sin) > 1e-9 {
			t.Errorf("turn %v ends at %v", turn, end)
		}
	}
}

// TestTranslucentLineHasOneShade checks that joints do not show.
func TestTranslucentLineHasOneShade(t *testing.T) {
	r := raster(200, 100)
	r.Polyline([]Pt{{10, 10}, {60, 80}, {110, 10}, {160, 80}, {60, 80}}, false, none, Stroke{W: 12, C: color.NRGBA{0, 0, 0, 128}})
	darkest := uint8(255)
	for i := 0; i < len(r.img.Pix); i += 4 {
		darkest = min(darkest, r.img.Pix[i])
	}
	if darkest < 126 {
		t.Errorf("darkest pixel %d, a single layer of half black gives 127", darkest)
	}
}

func TestHairlineIsCrisp(t *testing.T) {
	r := raster(50, 20)
	Line(r, Pt{5, 10.3}, Pt{45, 10.3}, Stroke{W: 1, C: ink})
	inked := 0
	for y := range 20 {
		if c := r.img.RGBAAt(25, y); c != (color.RGBA{255, 255, 255, 255}) {
			inked++
			if c.R != ink.R {
				t.Errorf("row %d is %v, want full ink", y, c)
			}
		}
	}
	if inked != 1 {
		t.Errorf("%d rows inked, want 1", inked)
	}
}

func TestFontsOnAForeignDocument(t *testing.T) {
	f := gofpdf.New("P", "pt", "A5", "")
	Fonts(f)
	f.AddPage()
	for _, style := range []string{"", "B", "I"} {
		f.SetFont(PDFFont, style, 10)
		f.Text(20, 20, Clean("η 🛢"))
	}
	if f.Error() != nil {
		t.Error(f.Error())
	}
}

func BenchmarkRasterText(b *testing.B) {
	r := raster(400, 100)
	for range b.N {
		r.Text(Pt{10, 50}, "pump P1 slip and friction 23.5", 12.5, ink, Left, false)
	}
}

func BenchmarkRasterLine(b *testing.B) {
	r := raster(900, 400)
	p := make([]Pt, 1800)
	for i := range p {
		p[i] = Pt{float64(i) / 2, 200 + 150*math.Sin(float64(i)*0.9)}
	}
	for range b.N {
		r.Polyline(p, false, none, Stroke{W: 1.5, C: ink})
	}
}
