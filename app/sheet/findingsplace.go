package sheet

import (
	"slices"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/circuit"
)

// otherCircuits reports once that other circuits or those of another file are shown.
func (f *findings) otherCircuits() bool {
	left, right := f.s.shown()
	sides := [2]int{left, right}
	yes := f.opened || sides != f.sides
	f.opened, f.sides = false, sides
	return yes
}

// listPlace is where a list stands: at a finding, and how far below its upper end [at scale 1]; nil at the top.
type listPlace struct {
	finding *circuit.Finding
	below   float64
}

// place is where the list stands.
func (f *findings) place() listPlace {
	below := float64(f.scroll.Offset.Y / widgets.Scale())
	if below <= 0 {
		return listPlace{}
	}
	for i := range f.list {
		h := f.height(i)
		if below < h {
			return listPlace{&f.list[i], below}
		}
		below -= h
	}
	return listPlace{}
}

// keepPlace stands at the finding at which the list stood, where that is still there, and never beyond the end.
func (f *findings) keepPlace(was listPlace) {
	y := f.scroll.Offset.Y
	if was.finding != nil {
		if i := slices.Index(f.list, *was.finding); i >= 0 {
			y = float32(f.above(i)+was.below) * widgets.Scale()
		}
	}
	f.scrollY(y)
}

// scrollTo brings a finding to the top of the list.
func (f *findings) scrollTo(i int) {
	f.scrollY(float32(f.above(i)) * widgets.Scale())
	f.figure.Refresh()
}

// scrollY scrolls so far, as far as there is a list.
func (f *findings) scrollY(y float32) {
	end := f.MinSize().Height - f.scroll.Size().Height
	f.scroll.ScrollToOffset(fyne.NewPos(0, max(0, min(y, end))))
}

// above is the height of what stands above a finding [at scale 1].
func (f *findings) above(i int) float64 {
	y := 0.0
	for k := range f.list[:max(0, i)] {
		y += f.height(k)
	}
	return y
}
