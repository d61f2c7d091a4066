package frame

import (
	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
)

// page lays the window out: verdict, rule, rail, station, rule, strip, status. In a low
// window the strip gives room to the station, which scrolls when even that is too little.
type page struct{ f *Frame }

// Heights of the strip [units at scale 1] and from which height of the page it has them.
const (
	stripHigh, stripHighFrom = 150, 620
	stripLow, stripLowFrom   = 100, 470
	stripSlim                = 66
)

func stripHeight(page float32) float32 {
	switch {
	case page >= stripHighFrom:
		return stripHigh
	case page >= stripLowFrom:
		return stripLow
	}
	return stripSlim
}

// MinSize keeps verdict, strip and a piece of the station in sight.
func (p *page) MinSize(o []fyne.CanvasObject) fyne.Size {
	k := widgets.Scale()
	return fyne.NewSize(420*k, (verdictHeight+stripSlim+120)*k+o[6].MinSize().Height)
}

// Layout places all.
func (p *page) Layout(o []fyne.CanvasObject, size fyne.Size) {
	k := widgets.Scale()
	verdict, strip, status, rule := verdictHeight*k, stripHeight(size.Height/k)*k, o[6].MinSize().Height, o[1].MinSize().Height
	bottom := size.Height - status - strip - rule
	rail := o[2].MinSize().Width
	put := func(i int, x, y, w, h float32) {
		o[i].Move(fyne.NewPos(x, y))
		o[i].Resize(fyne.NewSize(max(0, w), max(0, h)))
	}
	put(0, 0, 0, size.Width, verdict)
	put(1, 0, verdict, size.Width, rule)
	put(2, 0, verdict+rule, rail, bottom-verdict-rule)
	put(3, rail, verdict+rule, size.Width-rail, bottom-verdict-rule)
	put(4, 0, bottom, size.Width, rule)
	put(5, 0, bottom+rule, size.Width, strip)
	put(6, 0, size.Height-status, size.Width, status)
}

// column shares the height of the rail among its words, between a least and a wanted height.
type column struct{}

const (
	railHigh, railLow = 52, 32
	railGap           = 4
)

// MinSize has every word at its least height.
func (column) MinSize(o []fyne.CanvasObject) fyne.Size {
	m := fyne.Size{}
	for _, c := range o {
		m = m.Max(c.MinSize())
	}
	k := widgets.Scale()
	return fyne.NewSize(m.Width, float32(len(o))*(railLow+railGap)*k)
}

// Layout places the words from the top.
func (column) Layout(o []fyne.CanvasObject, size fyne.Size) {
	k := widgets.Scale()
	each := max(railLow*k, min(railHigh*k, size.Height/float32(max(1, len(o)))-railGap*k))
	for i, c := range o {
		c.Move(fyne.NewPos(0, float32(i)*(each+railGap*k)))
		c.Resize(fyne.NewSize(size.Width, each))
	}
}
