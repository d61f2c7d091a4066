package duty

import (
	"math"
	"reflect"
	"testing"
)

// What is kept of a long column is of that column, that length and that question alone.
func TestWhatIsKnownOfLongColumns(t *testing.T) {
	const rows = 2 * longColumn
	time, values := make([]float64, rows), make([]float64, rows)
	for i := range time {
		time[i], values[i] = float64(i), -2*math.Sin(float64(i))
	}
	values[rows-1] = -7
	with := func(w What, n int, v []float64) *Duty {
		return &Duty{Name: "d", Time: time[:n], Tracks: []Track{{Of: "ram", What: w, Values: v[:n]}}}
	}
	for range 2 { // the second time from what is known
		if got := with(Speed, rows, values).Check(); len(got) != 0 {
			t.Fatal(got)
		}
		if top := with(Speed, rows, values).column("ram", Speed).top(); top != 7 {
			t.Errorf("largest %g, want 7", top)
		}
		if top := with(Speed, rows-1, values).column("ram", Speed).top(); top == 7 || top < 1.99 {
			t.Errorf("largest of one row less: %g, want about 2", top)
		}
		if got := with(Command, rows, values).Check(); len(got) != 1 || got[0].Track != "ram.command" {
			t.Errorf("as a command: %v", got)
		}
		if got := with(SetPressure, rows, values).Check(); len(got) != 1 {
			t.Errorf("as a set pressure: %v", got)
		}
	}
	broken := append([]float64(nil), values...)
	broken[rows/2] = math.NaN()
	first := with(Speed, rows, broken).Check()
	if len(first) != 1 || !reflect.DeepEqual(with(Speed, rows, broken).Check(), first) {
		t.Errorf("a value that is no number: %v, then %v", first, with(Speed, rows, broken).Check())
	}
	backwards := append([]float64(nil), time...)
	backwards[5] = 3.5
	d := with(Speed, rows, values)
	d.Time = backwards
	if got := d.Check(); len(got) != 1 || got[0].Track != "" {
		t.Errorf("time that runs backwards: %v", got)
	}
}
