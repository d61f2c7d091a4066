package widgets

import (
	"fmt"
	"image"
	"math"
	"syscall"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"

	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// longPlot is a plot of several tracks of n points.
func longPlot(tb testing.TB, n, tracks int) *ClockPlot {
	tb.Helper()
	test.NewTempApp(tb)
	x, plain := make([]float64, n), units.Unit{Factor: 1}
	for i := range x {
		x[i] = 0.001 * float64(i)
	}
	p := figures.Plot{Axis: "time", AxisUnit: "s"}
	for k := range tracks {
		y := make([]float64, n)
		seed := uint32(k + 1)
		for i := range y {
			seed = seed*1664525 + 1013904223
			y[i] = math.Sin(float64(i)*float64(k+1)/5000) + float64(seed>>16)/65536
		}
		p.Lanes = append(p.Lanes, figures.Lane{Title: fmt.Sprint("track ", k+1), Unit: "bar",
			Series: []figures.Series{{Name: "measured", Long: &figures.Long{Pyramid: figures.NewPyramid(x, y), X: plain, Y: plain}}}})
	}
	c := NewClockPlot(fyne.NewSize(300, 120), func() figures.Palette { return figures.Light })
	c.Zooms = true
	c.Resize(fyne.NewSize(1000, 420))
	c.SetPlot(p)
	return c
}

func wheel(c *ClockPlot, x, dy float32) {
	c.Scrolled(&fyne.ScrollEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(x, 100)}, Scrolled: fyne.NewDelta(0, dy)})
}

// The place under the pointer stays where it is, the window stays on the axis, and all is shown again by F.
func TestPlotZoom(t *testing.T) {
	c := longPlot(t, 100_000, 2)
	at := func(x float32) float64 { return c.area.At(float64(x / Scale())) }
	if from, to := c.Window(); from != 0 || math.Abs(to-99.999) > 1e-9 {
		t.Fatalf("%g to %g", from, to)
	}
	for range 40 {
		before := at(600)
		wheel(c, 600, 20)
		if d := at(600) - before; math.Abs(d) > 1e-9 {
			t.Fatalf("the place under the pointer moved by %g", d)
		}
	}
	from, to := c.Window()
	if to-from > 2 || !c.zoomed {
		t.Errorf("40 steps show %g to %g", from, to)
	}
	place, p0 := at(400), fyne.NewPos(400, 90)
	c.MouseDown(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: p0}, Button: desktop.MouseButtonTertiary})
	c.Dragged(&fyne.DragEvent{PointEvent: fyne.PointEvent{Position: p0.AddXY(37, 5)}})
	c.DragEnd()
	if d := at(437) - place; math.Abs(d) > 1e-6 {
		t.Errorf("dragged with the middle button the place moved by %g off the pointer", d)
	}
	for range 300 {
		c.panBy(1000)
	}
	if _, to := c.Window(); to != c.whole[1] {
		t.Errorf("panned to %g, the axis ends at %g", to, c.whole[1])
	}
	c.TypedRune('f')
	if from, to := c.Window(); from != c.whole[0] || to != c.whole[1] || c.zoomed {
		t.Errorf("F shows %g to %g", from, to)
	}
	c.SetClock(50)
	c.TypedRune('+')
	if from, to := c.Window(); math.Abs((from+to)/2-50) > 0.1 || math.Abs(to-from-100/plotZoomStep) > 0.1 {
		t.Errorf("+ shows %g to %g, the clock is at 50", from, to)
	}
	c.Look(10, 12)
	c.SetClock(13)
	if from, to := c.Window(); from > 13 || to < 13 || math.Abs(to-from-2) > 1e-9 {
		t.Errorf("the clock at 13 is not in %g to %g", from, to)
	}
	c.SetPlot(c.plot)
	plain := longPlot(t, 1000, 1)
	plain.Zooms = false
	passed := 0
	plain.Outer = func(*fyne.ScrollEvent) { passed++ }
	wheel(plain, 300, 20)
	if passed != 1 || plain.zoomed {
		t.Error("a plot that does not zoom keeps the wheel from the page")
	}
}

// A peak of one point among a hundred thousand is seen when all is shown.
func TestPlotKeepsPeaks(t *testing.T) {
	c := longPlot(t, 100_000, 1)
	l := c.plot.Lanes[0].Series[0].Long
	before := dark(c.paint(1000, 420))
	x, y := make([]float64, l.Len()), make([]float64, l.Len())
	for i := range x {
		x[i] = 0.001 * float64(i)
	}
	y[77_777] = 5
	p := figures.Plot{Lanes: []figures.Lane{{Title: "a", Series: []figures.Series{{Long: &figures.Long{Pyramid: figures.NewPyramid(x, y), X: l.X, Y: l.Y}}}}}}
	c.SetPlot(p)
	img := c.paint(1000, 420)
	at := int(c.area.XAt(77.777))
	if h := c.area.Lanes[0].H; columnOf(img, at, c.area.Lanes[0].Y, h) < int(0.8*h) {
		t.Errorf("the peak at column %d has %d dark pixels of %g", at, columnOf(img, at, c.area.Lanes[0].Y, h), h)
	}
	if before == 0 {
		t.Error("nothing was drawn")
	}
}

func dark(img image.Image) (n int) {
	b := img.Bounds()
	for x := b.Min.X; x < b.Max.X; x++ {
		n += columnOf(img, x, 0, float64(b.Dy()))
	}
	return n
}

// columnOf counts the dark pixels in the columns about x.
func columnOf(img image.Image, x int, top, height float64) int {
	n := 0
	for y := int(top); y < int(top+height); y++ {
		for d := -1; d <= 1; d++ {
			if r, _, _, _ := img.At(x+d, y).RGBA(); r < 0x7000 {
				n++
				break
			}
		}
	}
	return n
}

// benchPoints is how long each track is.
const benchPoints = 10_000_000

func benchPlot(b *testing.B, step func(c *ClockPlot, i int)) {
	c := longPlot(b, benchPoints, 4)
	c.Look(1000, 3000)
	b.ResetTimer()
	defer frames(b)()
	for i := range b.N {
		step(c, i)
		c.paint(1280, 538) // the size of the widget at 128 %
	}
}

// frames tells the time of the processor that a frame takes, which other programs that run at the same time change little.
func frames(b *testing.B) func() {
	var from, to syscall.Rusage
	_ = syscall.Getrusage(syscall.RUSAGE_SELF, &from)
	return func() {
		_ = syscall.Getrusage(syscall.RUSAGE_SELF, &to)
		ms := func(t syscall.Timeval) float64 { return float64(t.Sec)*1e3 + float64(t.Usec)/1e3 }
		b.ReportMetric((ms(to.Utime)+ms(to.Stime)-ms(from.Utime)-ms(from.Stime))/float64(b.N), "cpu-ms/op")
	}
}

// Frames of a plot of four tracks of ten million points each.
func BenchmarkPlotPan(b *testing.B) {
	benchPlot(b, func(c *ClockPlot, i int) { c.panBy([]float64{15, -15}[i/100%2]) })
}

func BenchmarkPlotZoom(b *testing.B) {
	benchPlot(b, func(c *ClockPlot, i int) {
		wheel(c, 500, []float32{20, -20}[i/60%2])
	})
}

func BenchmarkPlotWhole(b *testing.B) { benchPlot(b, func(c *ClockPlot, _ int) { c.Fit() }) }
