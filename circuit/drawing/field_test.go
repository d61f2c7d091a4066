package drawing

import "testing"

// Of a line that was laid farther out than the grid reaches now, the part inside still counts.
func TestLinesAreCutAtTheRim(t *testing.T) {
	f := &field{x0: -10, y0: -10, w: 21, h: 21} // its rim lies at -10 and 10
	for _, c := range []struct {
		line, want [2]Pt
		ok         bool
	}{
		{[2]Pt{{-5, 0}, {5, 0}}, [2]Pt{{-5, 0}, {5, 0}}, true},
		{[2]Pt{{-30, 2}, {5, 2}}, [2]Pt{{-9, 2}, {5, 2}}, true},
		{[2]Pt{{3, 40}, {3, -40}}, [2]Pt{{3, 9}, {3, -9}}, true},
		{[2]Pt{{-30, 12}, {30, 12}}, [2]Pt{}, false},
		{[2]Pt{{-12, 0}, {-12, 5}}, [2]Pt{}, false},
	} {
		if got, ok := f.inside(c.line); ok != c.ok || ok && got != c.want {
			t.Errorf("%v: %v, %v", c.line, got, ok)
		}
	}
}
