package sheet

import (
	"image"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
)

type auditFile = audit.File

// nowhere is a pen that leaves no trace.
func nowhere() pen.Pen { return pen.NewRaster(image.NewRGBA(image.Rect(0, 0, 1, 1))) }

// One step of the clock: states, live values, and both sheets drawn.
func BenchmarkClockStep(b *testing.B) {
	bench := newBench(b, press, fyne.NewSize(1190, 590))
	bench.Select(0, "RV1")
	e := bench.s.editors
	b.ResetTimer()
	for i := 0; b.Loop(); i++ {
		bench.clock = float64(i%400) / 10
		bench.s.Changed(station.Clock)
		for k := range e {
			e[k].paint(int(e[k].Size().Width), int(e[k].Size().Height))
		}
	}
}

// One step of a drag: lines and labels laid anew.
func BenchmarkDragStep(b *testing.B) {
	bench := newBench(b, press, fyne.NewSize(1190, 590))
	e := bench.s.editors[0]
	for i := 0; b.Loop(); i++ {
		e.moved = e.sheet.MoveAll([]string{"RV1"}, float64(i%5), 0)
	}
}

// The circuit laid out from the file, and its labels for the results.
func BenchmarkNewSheet(b *testing.B) {
	bench := newBench(b, press, fyne.NewSize(1190, 590))
	for b.Loop() {
		figures.NewSheet(bench.s.editors[1].drawn).Labelled(bench.s.editors[1].labels.Duties...)
	}
}
