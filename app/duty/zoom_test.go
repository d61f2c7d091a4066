package duty

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
)

// Points are dragged where the plot is zoomed as they are elsewhere: the place under the pointer is what is taken, the
// window stays, and points outside it are not touched.
func TestPointsAreDraggedWhenZoomed(t *testing.T) {
	f, s := shown(t, sample(t, "baling-press.yaml"), nil)
	f.Settle(1190, 590)
	s.plot.Look(22, 25)
	before := f.Document.File().Duties[0].Time[7]
	dragTo(t, s, "ram load/7", 25, 20)
	d := f.Document.File().Duties[0]
	if moved := d.Time[7] - before; moved < 0.01 || moved > 0.3 {
		t.Errorf("the point moved by %g s over 25 pixels of a window of 3 s", moved)
	}
	if from, to := s.plot.Window(); math.Abs(from-22) > 1e-9 || math.Abs(to-25) > 1e-9 {
		t.Errorf("after the drag %g to %g is shown", from, to)
	}
	for _, p := range s.plot.Parts() {
		if strings.HasSuffix(p.Name, "/0") {
			t.Errorf("%s lies outside of what is shown", p.Name)
		}
	}
	f.Picture("duty-zoom", 1190, 590)
	f.Theme(true, 1.5)
	f.Picture("duty-zoom-dark-150", 930, 560)
	s.ctx.SetDuty(1)
	s.reload()
	if from, to := s.plot.Window(); to-from < 30 {
		t.Errorf("another duty shows %g to %g", from, to)
	}
}

// A recording of many rows is drawn from a pyramid that is made beside the window; the values at the clock are those
// of its rows.
func TestLongRecordingIsDrawn(t *testing.T) {
	var table strings.Builder
	table.WriteString("t [s],ram.speed [m/s],ram.load [kN]\n")
	const rows = 120_000
	for i := range rows {
		load := 5.0
		if i == 77_777 {
			load = 90
		}
		fmt.Fprintf(&table, "%d,%.3f,%g\n", i, 0.1*math.Sin(2*math.Pi*float64(i)/200), load)
	}
	text := strings.Replace(emptyAudit, "axes: {}", "axes: {ram: linear}", 1)
	text = strings.Replace(text, "duties: []", "duties:\n- name: day\n  file: day.csv", 1)
	f, s := shown(t, text, map[string]string{"day.csv": table.String()})
	f.Settle(1190, 590)
	key := &s.tracks[2].values[0]
	for end := time.Now().Add(20 * time.Second); s.courses.kept[key] == nil && time.Now().Before(end); {
		time.Sleep(20 * time.Millisecond)
		f.Settle(1190, 590)
	}
	if s.courses.kept[key] == nil {
		t.Fatal("the recording is not drawn after 20 s")
	}
	f.Picture("duty-long", 1190, 590)
	wheel := func(dy float32) {
		s.plot.Scrolled(&fyne.ScrollEvent{PointEvent: fyne.PointEvent{Position: fyne.NewPos(500, 60)}, Scrolled: fyne.NewDelta(0, dy)})
	}
	for range 20 {
		wheel(40)
	}
	from, to := s.plot.Window()
	if to-from > 2000 {
		t.Errorf("the wheel shows %g to %g", from, to)
	}
	s.plot.Look(77_770, 77_785)
	if got := s.valueAt(1, 77_777); !strings.HasPrefix(got, "90.0") {
		t.Errorf("at the peak the clock reads %q", got)
	}
	f.Picture("duty-long-near", 1190, 590)
}

// Times of a long recording are told apart in the table, though every so manieth is a whole second.
func TestTimesOfALongTableAreToldApart(t *testing.T) {
	k := track{name: "t"}
	k.unit.Factor = 1
	for i := range 400_000 {
		k.values = append(k.values, 0.01*float64(i))
	}
	if n := decimals(k); n != 2 {
		t.Errorf("%d places", n)
	}
}
