package rate

import "testing"

func TestPercentIsInPlainDigits(t *testing.T) {
	for share, want := range map[float64]string{1.9: "190\u202f%", 0.123: "12\u202f%", 0.0123: "1.2\u202f%"} {
		if got := percent(share); got != want {
			t.Errorf("%g is %q, want %q", share, got, want)
		}
	}
}
