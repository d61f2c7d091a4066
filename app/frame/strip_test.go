package frame

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/circuit/duty"
)

// The value at the clock is that of the row, also where a long track is drawn of few of its rows:
// the load here is the number of the row, but for peaks that are drawn beside it.
func TestStripReadsTheRows(t *testing.T) {
	b := newBench(t)
	b.drain()
	d := &duty.Duty{Name: "long"}
	var v []float64
	for i := range 200_000 {
		d.Time = append(d.Time, float64(i))
		x := 20.0
		if i%10 == 3 {
			x = 1e6
		}
		v = append(v, x)
	}
	d.Tracks = []duty.Track{{Of: "ram", What: duty.Load, Values: v}}
	b.strip.asked = nil
	b.strip.plot = b.strip.lanes(d, []duty.Axis{{Name: "ram"}})
	b.clock = 100_001
	if text := b.strip.atClock(); !strings.Contains(text, "0.0200 kN") {
		t.Errorf("the strip says %q", text)
	}
}

// A file is opened on the duty that stands for the year, not on one that does not run in it.
func TestOpensOnTheDutyOfTheYear(t *testing.T) {
	path := filepath.Join(t.TempDir(), "press.yaml")
	text := `format: barlitre/1
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear}
duties:
- name: assumed
  hours: 0 h
  points: {t: [0 s, 1 s], ram.speed: [0.5 m/s, 0.5 m/s], ram.load: [50 kN, 50 kN]}
- name: measured
  hours: 3000 h
  points: {t: [0 s, 1 s, 3 s], ram.speed: [0 m/s, 0 m/s, 0.1 m/s], ram.load: [5 kN, 5 kN, 5 kN]}
circuits: []
`
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	b := newBench(t)
	b.Open(path)
	b.until("the file", func() bool { return b.doc.Path() == path && b.duty == 1 })
	if b.clock != 3 || b.strip.picker.Selected != "measured" {
		t.Errorf("the clock stands at %g s of %s", b.clock, b.strip.picker.Selected)
	}
}

// The values at the clock lie over the numbers of the axis: one that they would cut is hidden
// whole, and its neighbours stay.
func TestClockCutsNoNumber(t *testing.T) {
	b := newBench(t)
	b.Open("") // 40 s, numbers every 5 s
	b.solved()
	b.win.Resize(fyne.NewSize(1280, 800))
	s := b.strip
	if len(s.numbers) != 9 {
		t.Fatalf("%d numbers on the axis of 40 s", len(s.numbers))
	}
	for at := 0.0; at <= 40; at += 0.1 {
		b.SetClock(at)
		k := widgets.Scale()
		from, to := float64(s.figure.cover.Position().X/k), float64((s.figure.cover.Position().X+s.figure.cover.Size().Width)/k)
		left, right := float64(s.figure.flag.Position().X/k), float64((s.figure.flag.Position().X+s.figure.flag.Size().Width)/k)
		if from > left+0.01 || to < right-0.01 {
			t.Errorf("at %g s the values stand out", at)
		}
		for i, n := range s.numbers {
			cut, hidden := n.from < right && n.to > left, n.from > from-0.01 && n.to < to+0.01
			if touched := n.from < to-0.01 && n.to > from+0.01; cut && !hidden || !cut && touched {
				t.Errorf("at %g s number %d at %v: cut %v, hidden %v by %g to %g", at, i, n, cut, hidden, from, to)
			}
		}
	}
}
