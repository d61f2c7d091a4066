package machines

import (
	"math"
	"testing"
)

// expect compares with a relative tolerance; the source of want stands in the name or beside the call.
func expect(t *testing.T, what string, got, want, rel float64) {
	t.Helper()
	if !(math.Abs(got-want) <= rel*math.Abs(want)+1e-300) {
		t.Errorf("%s: got %.8g, want %.8g within %g %%", what, got, want, 100*rel)
	}
}

// expectAbs compares with an absolute tolerance.
func expectAbs(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.8g, want %.8g within %g", what, got, want, tol)
	}
}

// expectSlope compares an analytic slope with a central difference of f at x.
func expectSlope(t *testing.T, what string, f func(float64) float64, slope, x, step, rel float64) {
	t.Helper()
	num := (f(x+step) - f(x-step)) / (2 * step)
	if !(math.Abs(slope-num) <= rel*math.Abs(num)+1e-300) {
		t.Errorf("%s at %g: slope %.8g, by difference %.8g", what, x, slope, num)
	}
}
