package pdf

import (
	"fmt"
	"image/color"

	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

// The page [mm]: A4 upright.
const (
	pageW, pageH = 210.0, 297.0
	side         = 18.0
	top          = 20.0
	bottom       = pageH - 19
	fullW        = pageW - 2*side
)

// furniture is what every page carries in its margins.
type furniture struct {
	title, site string // above, from the second page on
	left        string // below
	of          int    // pages in all
}

const disclaimer = "Estimate – not a design release"

func (l *layout) furniture(pages int) furniture {
	return furniture{title: l.title(), site: l.site, left: l.date + " · " + l.fileName(), of: pages}
}

// sheet is the page being filled, from the top down.
type sheet struct {
	to     paper
	p      pen.Pen
	pal    figures.Palette
	y      float64 // where the next thing goes
	number int     // of the page
	ends   []float64
	room   float64 // share of the usual space between things
	scale  float64 // of figures, mm a figure unit
	accent color.NRGBA
	furniture
}

func newSheet(to paper, room float64, f furniture) *sheet {
	return &sheet{to: to, pal: figures.Light, room: room, scale: figureScale, accent: figures.Light.Gain, furniture: f}
}

// newPage ends the page and begins the next.
func (s *sheet) newPage() {
	if s.number > 0 {
		s.finish()
	}
	s.p = s.to.page()
	s.number++
	s.y = top
	if s.number > 1 {
		s.runningHead()
	}
	s.footer()
}

// finish notes how far the page was filled.
func (s *sheet) finish() { s.ends = append(s.ends, s.y) }

func (s *sheet) runningHead() {
	st := style{size: smallSize, c: s.pal.Secondary}
	site := pen.Shorten(s.site, st.size, false, 0.4*fullW)
	w := pen.TextWidth(site, st.size, false)
	s.put(side, 12.5, pen.Shorten(s.title, st.size, false, fullW-w-6), st, pen.Left)
	s.put(side+fullW, 12.5, site, st, pen.Right)
	s.rule(side, side+fullW, 14.5, s.pal.Edge)
}

func (s *sheet) footer() {
	st := style{size: smallSize, c: s.pal.Secondary}
	y := pageH - 11.0
	s.rule(side, side+fullW, y-4.4, s.pal.Edge)
	w := pen.TextWidth(disclaimer, st.size, false)
	s.put(side, y, pen.Shorten(s.left, st.size, false, (fullW-w)/2-4), st, pen.Left)
	s.put(pageW/2, y, disclaimer, st, pen.Center)
	s.put(side+fullW, y, fmt.Sprintf("page %d of %d", s.number, s.of), st, pen.Right)
}

// put writes one line with its baseline at y.
func (s *sheet) put(x, y float64, text string, st style, al pen.Align) {
	s.p.Text(pen.Pt{X: x, Y: y}, text, st.size, st.c, al, st.bold)
}

func (s *sheet) rule(x0, x1, y float64, c color.NRGBA) {
	pen.Line(s.p, pen.Pt{X: x0, Y: y}, pen.Pt{X: x1, Y: y}, pen.Stroke{W: 0.2, C: c})
}

func (s *sheet) fill(x, y, w, h float64, c color.NRGBA) { pen.Rect(s.p, x, y, w, h, c, pen.Stroke{}) }

// fresh reports whether nothing stands on the page yet.
func (s *sheet) fresh() bool { return s.y <= top }

// need begins a new page unless h is left on this one.
func (s *sheet) need(h float64) {
	if s.y+h > bottom && !s.fresh() {
		s.newPage()
	}
}

// gap leaves room below what stands there already.
func (s *sheet) gap(h float64) {
	if !s.fresh() {
		s.y += h * s.room
	}
}

// The scale of figures [mm a figure unit]: text of 12.5 units is 2.8 mm high, and
// never below 2.3 mm where a figure is made smaller to fit the page.
const (
	figureScale = 0.225
	figureLeast = 0.185
)

// figure draws a picture that takes h figure units at width w, both in figure
// units. It is made a little smaller where that saves a page break.
func (s *sheet) figure(h func(w float64) float64, draw func(p pen.Pen, w, h float64)) {
	s.gap(2)
	k := s.scale
	high := k * h(fullW/k)
	if left := bottom - s.y; high > left {
		small := figureLeast * h(fullW/figureLeast)
		if small > left && !s.fresh() {
			s.newPage()
			left = bottom - s.y
		}
		if high = min(high, left); small <= left && high == left {
			k = figureLeast
			high = small
		}
	}
	s.p.Push(side, s.y, k)
	draw(s.p, fullW/k, high/k)
	s.p.Pop()
	s.y += high
}
