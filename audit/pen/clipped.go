package pen

import (
	"image"
	"math"
)

// clipped is the base of pens that draw on pixels: they clip to these.
type clipped struct {
	base
	clip  image.Rectangle // in force
	clips []image.Rectangle
}

// ClipRect limits drawing to the pixels the rectangle touches.
func (c *clipped) ClipRect(x, y, w, h float64) {
	c.clips = append(c.clips, c.clip)
	a, b := c.at(Pt{x, y}), c.at(Pt{x + w, y + h})
	if c.okPts(0, a, b) {
		c.clip = c.clip.Intersect(touched(a, b))
	}
}

// Unclip ends the last ClipRect.
func (c *clipped) Unclip() {
	n := len(c.clips) - 1
	if n < 0 {
		c.skipped++
		return
	}
	c.clip, c.clips = c.clips[n], c.clips[:n]
}

// touched returns the pixels a rectangle touches.
func touched(a, b Pt) image.Rectangle {
	return image.Rect(int(math.Floor(a.X+1e-6)), int(math.Floor(a.Y+1e-6)), int(math.Ceil(b.X-1e-6)), int(math.Ceil(b.Y-1e-6)))
}
