package audit

import (
	"slices"
	"testing"

	"barlitre/circuit/duty"
)

// What a window draws of a long duty is few points, in their order, with every peak; a
// short one is drawn as it is.
func TestCourseKeepsPeaks(t *testing.T) {
	for _, n := range []int{2, PlotPoints, PlotPoints + 1, 100_000} {
		d := &duty.Duty{Time: make([]float64, n)}
		v := make([]float64, n)
		for k := range v {
			d.Time[k], v[k] = float64(k), float64(k%7)
		}
		v[n/3], v[n/2] = 99, -99
		k := CourseOf(d, duty.Track{Of: "ram", What: duty.Load, Values: v})
		if len(k.T) > PlotPoints || len(k.T) != len(k.V) || n <= PlotPoints && len(k.T) != n {
			t.Errorf("%d rows: %d points", n, len(k.T))
		}
		if !slices.IsSorted(k.T) || k.T[0] != 0 || k.T[len(k.T)-1] != float64(n-1) {
			t.Errorf("%d rows: from %g to %g", n, k.T[0], k.T[len(k.T)-1])
		}
		if n > 2 && (k.At(float64(n/3)) != 99 || k.At(float64(n/2)) != -99) {
			t.Errorf("%d rows: a peak is lost", n)
		}
	}
	if k := CourseOf(&duty.Duty{Time: []float64{0, 1, 2}}, duty.Track{Values: []float64{5}}); len(k.T) != 1 {
		t.Errorf("a column too short: %+v", k)
	}
}

// An edit reads the audit file again, but shares the columns of its recording.
func TestEditsShareARecording(t *testing.T) {
	f := readTest(t, "full.yaml")
	i := slices.IndexFunc(f.Sources, func(s Source) bool { return s.File != "" })
	if i < 0 {
		t.Fatal("no recorded duty")
	}
	before := f.Duties[i]
	if err := f.Set("oil.temperature", "47 C"); err != nil {
		t.Fatal(err)
	}
	after := f.Duties[i]
	if before == after || &before.Time[0] != &after.Time[0] {
		t.Error("time stamps are read again")
	}
	for k := range before.Tracks {
		if &before.Tracks[k].Values[0] != &after.Tracks[k].Values[0] {
			t.Errorf("%s is converted again", before.Tracks[k].Of)
		}
	}
}
