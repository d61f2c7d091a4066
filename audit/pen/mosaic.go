package pen

import (
	"image"
	"image/color"
	"image/draw"
	"runtime"
	"sync"
)

// tileSize is the side of a tile [px]: small enough that little is drawn anew where
// something changed, large enough that few shapes lie on several.
const tileSize = 64

// Mosaic is a pen on an image that is drawn again and again, as while a clock runs: it
// notes what is to be drawn, and Flush draws only the tiles of the image on which that
// differs from the last time, several at once. Nothing is on the image before Flush.
type Mosaic struct {
	clipped
	img    *image.RGBA
	ground color.NRGBA
	ops    []op
	pts    []Pt // of all ops
	dashes []float64
	room   []Pt // for points on their way into an op
	across int
	tiles  []tile
	pens   []*Raster
}

// tile is a part of the image.
type tile struct {
	box   image.Rectangle
	ops   []int32 // what lies on it
	sum   uint64  // of all that
	shows uint64  // sum of what is on the image
}

var _ Pen = (*Mosaic)(nil)

// NewMosaic returns a pen on an image of a size in pixels.
func NewMosaic(w, h int) *Mosaic {
	m := &Mosaic{img: image.NewRGBA(image.Rect(0, 0, max(w, 1), max(h, 1)))}
	b := m.img.Rect
	m.across = (b.Dx() + tileSize - 1) / tileSize
	for y := 0; y < b.Dy(); y += tileSize {
		for x := 0; x < b.Dx(); x += tileSize {
			m.tiles = append(m.tiles, tile{box: image.Rect(x, y, x+tileSize, y+tileSize).Intersect(b)})
		}
	}
	for range min(runtime.GOMAXPROCS(0), 4) {
		m.pens = append(m.pens, NewRaster(m.img))
	}
	m.Begin(color.NRGBA{})
	return m
}

// Image returns the image as of the last Flush.
func (m *Mosaic) Image() *image.RGBA { return m.img }

// Mark is a place in what was drawn since Begin.
type Mark struct{ ops, pts, dashes int }

// Begin starts a new picture on a ground: no Push, no clip, nothing drawn.
func (m *Mosaic) Begin(ground color.NRGBA) {
	m.ground = ground
	m.Rewind(Mark{})
}

// Mark returns how far the picture has got.
func (m *Mosaic) Mark() Mark { return Mark{len(m.ops), len(m.pts), len(m.dashes)} }

// Rewind takes back what was drawn since a mark, which must be of the same picture.
func (m *Mosaic) Rewind(to Mark) {
	m.base = newBase()
	m.clip, m.clips = m.img.Rect, m.clips[:0]
	m.ops, m.pts, m.dashes = m.ops[:to.ops], m.pts[:to.pts], m.dashes[:to.dashes]
}

// Flush brings the image up to date and returns how many tiles were drawn.
func (m *Mosaic) Flush() int {
	start := mix(mix(1, uint64(m.ground.R)|uint64(m.ground.G)<<8|uint64(m.ground.B)<<16|uint64(m.ground.A)<<24), 0)
	for i := range m.tiles {
		m.tiles[i].ops, m.tiles[i].sum = m.tiles[i].ops[:0], start
	}
	for i := range m.ops {
		b := m.ops[i].box
		for y := b.Min.Y / tileSize; y*tileSize < b.Max.Y; y++ {
			for x := b.Min.X / tileSize; x*tileSize < b.Max.X; x++ {
				t := &m.tiles[y*m.across+x]
				t.ops = append(t.ops, int32(i))
				t.sum = mix(t.sum, m.ops[i].sum)
			}
		}
	}
	var todo []*tile
	for i := range m.tiles {
		if t := &m.tiles[i]; t.sum != t.shows {
			todo = append(todo, t)
		}
	}
	m.drawTiles(todo)
	return len(todo)
}

// drawTiles draws tiles, one goroutine a pen; each has what it draws on to itself.
func (m *Mosaic) drawTiles(todo []*tile) {
	next := make(chan *tile, len(todo))
	for _, t := range todo {
		next <- t
	}
	close(next)
	var wait sync.WaitGroup
	for _, r := range m.pens[:min(len(m.pens), len(todo))] {
		wait.Add(1)
		go func() {
			defer wait.Done()
			for t := range next {
				m.drawTile(r, t)
			}
		}()
	}
	wait.Wait()
}

func (m *Mosaic) drawTile(r *Raster, t *tile) {
	r.Reset(m.img)
	r.clip = t.box
	draw.Draw(m.img, t.box, image.NewUniform(m.ground), image.Point{}, draw.Src)
	for _, i := range t.ops {
		o := &m.ops[i]
		r.clip = t.box.Intersect(o.clip)
		m.play(r, o)
	}
	t.shows = t.sum
}

// TextWidth returns the width of s in user units.
func (m *Mosaic) TextWidth(s string, size float64, bold bool) float64 {
	return TextWidth(s, size, bold)
}
