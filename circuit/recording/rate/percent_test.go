package rate

import "testing"

func TestPercentIsInPlainDigits(t *testing.T) {
	for share, want := range map[float64]string{1.9: "190 %", 0.123: "12 %", 0.0123: "1.2 %"} {
		if got := percent(share); got != want {
			t.Errorf("%g is %q, want %q", share, got, want)
		}
	}
}
