package figures

import (
	"math"

	"barlitre/audit/pen"
)

// legendAt is the place of a name in the legend of a lane: x from the left edge
// of the plot, row from the top.
type legendAt struct {
	text string
	x    float64
	row  int
}

// layLegend places the names of the series of a lane in rows of width w. A lane
// with one series has no legend: its title names it.
func layLegend(l Lane, w float64) []legendAt {
	if len(l.Series) < 2 {
		return nil
	}
	out := make([]legendAt, len(l.Series))
	x, row := 0.0, 0
	for i, s := range l.Series {
		text := pen.Shorten(s.Name, smallSize, false, w-legendSwatch-6)
		need := legendSwatch + 6 + pen.TextWidth(text, smallSize, false)
		if x > 0 && x+need > w {
			x, row = 0, row+1
		}
		out[i] = legendAt{text, x, row}
		x += need + 16
	}
	return out
}

func legendRows(l []legendAt) int {
	if len(l) == 0 {
		return 0
	}
	return l[len(l)-1].row + 1
}

// legend draws the legend of a lane above it.
func (d *plotLayout) legend(i int) {
	at := d.legends[i]
	top := d.area.Lanes[i].Y - legendRow*float64(legendRows(at)) - 3
	for n, e := range at {
		s := d.Lanes[i].Series[n]
		x, y := d.area.X+e.x, top+legendRow*(float64(e.row)+0.5)
		if s.Base != nil {
			d.p.Polyline([]pen.Pt{{X: x, Y: y - 4}, {X: x + legendSwatch, Y: y - 4}, {X: x + legendSwatch, Y: y + 4}, {X: x, Y: y + 4}}, true, faded(d.pal.Color(s.Role), bandTint), pen.Stroke{})
		} else {
			pen.Line(d.p, pen.Pt{X: x, Y: y}, pen.Pt{X: x + legendSwatch, Y: y},
				pen.Stroke{W: 2, C: d.pal.Color(s.Role), Dash: d.Lanes[i].dash(n)})
		}
		d.p.Text(pen.Pt{X: x + legendSwatch + 6, Y: y + capHalf*smallSize}, e.text, smallSize, d.pal.Ink, pen.Left, false)
	}
}

// phaseAt is a phase cut to the window, with its name where it goes.
type phaseAt struct {
	x0, x1 float64
	text   string // empty if there is no room
	x      float64
	row    int
}

// layPhases places the names of the phases: centred over the phase if they fit,
// else in a second row, where they may be wider than the phase, else shortened.
func (d *plotLayout) layPhases() {
	const gap = 6
	a := d.area
	free := [2]float64{a.X, a.X} // where the last name in each row ends
	for _, ph := range d.Phases {
		lo, hi := max(a.From, min(ph.From, ph.To)), min(a.To, max(ph.From, ph.To))
		if !(lo < hi) {
			continue
		}
		e := phaseAt{x0: a.XAt(lo), x1: a.XAt(hi)}
		mid := (e.x0 + e.x1) / 2
		name := pen.Clean(ph.Name)
		need := d.p.TextWidth(name, smallSize, false)
		left := max(a.X, min(a.X+a.W-need, mid-need/2))
		switch {
		case mid-need/2 >= e.x0+gap/2 && mid-need/2 >= free[0] && need <= e.x1-e.x0-gap:
			e.text, e.x = name, mid-need/2
		case need <= a.W && left >= free[1]:
			e.text, e.x, e.row = name, left, 1
		default:
			e.text = pen.Shorten(name, smallSize, false, e.x1-max(e.x0, free[0])-gap)
			if len([]rune(e.text)) < 3 {
				e.text = ""
			}
			e.x = max(e.x0+gap/2, free[0])
		}
		if e.text != "" {
			free[e.row] = e.x + d.p.TextWidth(e.text, smallSize, false) + gap
			d.bandH = max(d.bandH, phaseRow*float64(e.row+1))
		}
		d.bands = append(d.bands, e)
	}
}

// phases draws the names of the phases above the lanes.
func (d *plotLayout) phases() {
	for _, e := range d.bands {
		if e.text != "" {
			y := 2 + phaseRow*(float64(e.row)+0.5)
			d.p.Text(pen.Pt{X: e.x, Y: y + capHalf*smallSize}, e.text, smallSize, d.pal.Secondary, pen.Left, false)
		}
	}
}

// boundaries draws the limits of the phases through a lane.
func (d *plotLayout) boundaries(l LaneArea) {
	last := math.Inf(-1)
	for _, e := range d.bands {
		for _, x := range [2]float64{e.x0, e.x1} {
			if x > last+0.5 {
				hairline(d.p, x, l.Y-3, x, l.Y+l.H+3, d.pal.Edge)
				last = x
			}
		}
	}
}
