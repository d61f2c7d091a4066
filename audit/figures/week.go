package figures

import (
	"fmt"
	"image/color"

	"barlitre/audit"
	"barlitre/audit/calendar"
	"barlitre/audit/pen"
)

// Week shows the week of a shift calendar: a row for each day, shifts with their names, and breaks in them.
type Week struct{ Calendar *audit.Calendar }

const (
	weekMinWidth = 300.0
	weekRow      = 20.0
	weekLegend   = 24.0
)

// Height is the height at which the week looks well.
func (f Week) Height() float64 { return 7*weekRow + axisHeight + weekLegend + 6 }

// Draw draws the week into 0…w × 0…h.
func (f Week) Draw(p pen.Pen, w, h float64, pal Palette) {
	if f.Calendar == nil || len(f.Calendar.Shifts) == 0 {
		if w > 0 && h > 0 && finite(w) && finite(h) {
			empty(p, w, h, "No shifts yet", pal)
		}
		return
	}
	k, fw, fh, ok := room(w, h, weekMinWidth, f.Height())
	if !ok {
		return
	}
	p.Push(0, 0, k)
	defer p.Pop()
	left := 40.0
	row := (fh - axisHeight - weekLegend - 6) / 7
	width := fw - left - 14
	for d, name := range calendar.DayNames {
		y := 2 + float64(d)*row
		p.Text(pen.Pt{X: 0, Y: y + row/2 + capHalf*textSize}, name, textSize, pal.Ink, pen.Left, false)
		shape(p, left, y+1, width, row-2, faded(pal.Pale, 60))
	}
	for hour := 0.0; hour <= 24; hour += 6 {
		x := left + width*hour/24
		hairline(p, x, 2, x, 2+7*row+3, pal.Edge)
		p.Text(pen.Pt{X: x, Y: 2 + 7*row + 15}, fmt.Sprintf("%.0f:00", hour), smallSize, pal.Secondary, pen.Center, false)
	}
	week, _, err := calendar.WeekOf(f.Calendar.Shifts)
	if err != nil {
		p.Text(pen.Pt{X: left, Y: 2 + 7*row + 14}, pen.Shorten(err.Error(), smallSize, false, width), smallSize, pal.Danger, pen.Left, false)
		return
	}
	for _, s := range week {
		f.stretch(p, s, left, width, row, pal)
	}
	f.legend(p, left, 2+7*row+axisHeight+8, pal)
}

// stretch draws a shift or a break, cut at midnight.
func (f Week) stretch(p pen.Pen, s calendar.Stretch, left, width, row float64, pal Palette) {
	for from := s.From; from < s.To; {
		day := int(from / calendar.Day)
		to := min(s.To, float64(day+1)*calendar.Day)
		x0 := left + width*(from-float64(day)*calendar.Day)/calendar.Day
		x1 := left + width*(to-float64(day)*calendar.Day)/calendar.Day
		y, h := 2+float64(day)*row+1, row-2
		fill := f.color(s, pal)
		shape(p, x0, y, x1-x0, h, fill)
		if s.Break {
			pen.Line(p, pen.Pt{X: x0, Y: y + h}, pen.Pt{X: x1, Y: y}, pen.Stroke{W: 1, C: pal.Ink}) // the second sign beside the colour
		} else {
			hairline(p, x0, y, x0, y+h, pal.Card)
			if name := f.Calendar.Shifts[s.Shift].Name; p.TextWidth(name, smallSize, false) < x1-x0-8 {
				p.Text(pen.Pt{X: x0 + 5, Y: y + h/2 + capHalf*smallSize}, name, smallSize, pal.On(fill), pen.Left, false)
			}
		}
		from = to
	}
}

func (f Week) color(s calendar.Stretch, pal Palette) color.NRGBA {
	if !s.Break {
		return pal.Gain
	}
	if f.Calendar.InBreaks == calendar.Off {
		return pal.Pale
	}
	return pal.Bar
}

func (f Week) legend(p pen.Pen, x, y float64, pal Palette) {
	sign := func(c color.NRGBA, stroke bool, text string) {
		shape(p, x, y, 14, 10, c)
		if stroke {
			pen.Line(p, pen.Pt{X: x, Y: y + 10}, pen.Pt{X: x + 14, Y: y}, pen.Stroke{W: 1, C: pal.Ink})
		}
		p.Text(pen.Pt{X: x + 19, Y: y + 9}, text, smallSize, pal.Secondary, pen.Left, false)
		x += 19 + p.TextWidth(text, smallSize, false) + 16
	}
	sign(pal.Gain, false, "shift")
	breaks := calendar.Stretch{Break: true}
	sign(f.color(breaks, pal), true, "break, "+string(f.Calendar.InBreaks))
	sign(faded(pal.Pale, 60), false, "off")
}
