package pen

import (
	"bytes"
	"image"
	"image/color"
	"math"
	"testing"
)

// apart is the largest and the mean difference of a channel between two images.
func apart(t *testing.T, a, b *image.RGBA) (most, mean float64) {
	t.Helper()
	if a.Rect != b.Rect {
		t.Fatal("sizes", a.Rect, b.Rect)
	}
	for i := range a.Pix {
		d := math.Abs(float64(a.Pix[i]) - float64(b.Pix[i]))
		most, mean = max(most, d), mean+d/float64(len(a.Pix))
	}
	return most, mean
}

// A mosaic shows what a raster does. The edge of a slanting shape may differ: in an image
// below 512 px the rasteriser of golang.org/x/image/vector counts in 1/512 px and may be off
// by that on each row of a tile.
func TestMosaicShowsWhatARasterShows(t *testing.T) {
	for _, k := range []float64{1, 0.7, 2.3} {
		r, m := raster(int(400*k)+3, int(300*k)+3), NewMosaic(int(400*k)+3, int(300*k)+3)
		m.Begin(white)
		for _, p := range []Pen{r, m} {
			p.Push(1.3, 0.4, k)
			scene(p)
			p.Pop()
		}
		if n := m.Flush(); n != len(m.tiles) {
			t.Errorf("at %g the first picture took %d of %d tiles", k, n, len(m.tiles))
		}
		if most, mean := apart(t, r.Image(), m.Image()); most > 255*tileSize/512 || mean > 0.02 {
			t.Errorf("at %g a channel is off by %g of 255, all by %.3g", k, most, mean)
		}
	}
}

// Only what changed is drawn, and the picture is that of a mosaic that never showed
// anything else.
func TestMosaicDrawsWhatChanged(t *testing.T) {
	dot := func(m *Mosaic, x float64, c color.NRGBA) int {
		m.Begin(white)
		scene(m)
		m.Circle(Pt{x, 250}, 5, c, Stroke{})
		return m.Flush()
	}
	m := NewMosaic(400, 300)
	dot(m, 330, ink)
	if n := dot(m, 330, ink); n != 0 {
		t.Errorf("the same picture again took %d tiles", n)
	}
	if n := dot(m, 330, teal); n < 1 || n > 2 {
		t.Errorf("another colour of a dot took %d tiles", n)
	}
	if n := dot(m, 30, teal); n < 2 || n > 4 {
		t.Errorf("a dot moved away took %d tiles", n)
	}
	fresh := NewMosaic(400, 300)
	dot(fresh, 30, teal)
	if !bytes.Equal(fresh.Image().Pix, m.Image().Pix) {
		t.Error("what was drawn in steps differs from what was drawn at once")
	}
}

// Upright and level lines stand on whole pixels: a change that no pixel shows is none.
func TestMosaicPassesOverWhatNoPixelShows(t *testing.T) {
	m := NewMosaic(200, 200)
	line := func(w float64) int {
		m.Begin(white)
		m.Polyline([]Pt{{10, 10}, {150, 10}, {150, 90}}, false, none, Stroke{W: w, C: ink})
		return m.Flush()
	}
	line(1.1)
	if n := line(1.2); n != 0 {
		t.Errorf("a width of 1.2 for 1.1 px took %d tiles", n)
	}
	if line(2) == 0 {
		t.Error("a width of 2 for 1 px was passed over")
	}
}

// Rewind takes back what was drawn after a mark and keeps what came before.
func TestMosaicRewinds(t *testing.T) {
	m, want := NewMosaic(400, 300), NewMosaic(400, 300)
	m.Begin(white)
	scene(m)
	mark := m.Mark()
	m.Push(3, 3, 2)
	m.ClipRect(0, 0, 10, 10)
	m.Circle(Pt{50, 50}, 40, ink, Stroke{})
	m.Flush()
	m.Rewind(mark)
	want.Begin(white)
	scene(want)
	for _, p := range []*Mosaic{m, want} {
		p.Circle(Pt{350, 250}, 20, teal, Stroke{})
		p.Flush()
	}
	if !bytes.Equal(m.Image().Pix, want.Image().Pix) {
		t.Error("what was taken back left a trace")
	}
}
