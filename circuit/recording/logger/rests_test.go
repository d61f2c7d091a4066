package logger

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"
)

// A ram that stands 5 s in every cycle, each time where leakage left it, is not stuck; one that
// stands once is (made up: 20 Hz, cycles of 15 s with the phases of a small press).
func TestRestsAreNotStuck(t *testing.T) {
	for _, c := range []struct {
		cycles int
		stuck  bool
	}{{8, false}, {1, true}} {
		r := rand.New(rand.NewPCG(4, 4))
		var text strings.Builder
		text.WriteString("t [s];p [bar];x [mm]\n")
		x := 50.0
		for i := range 20 * 120 {
			at := i % 300
			if c.cycles == 1 && i >= 300 { // it goes on without a stand
				at = i % 200
			}
			switch {
			case at < 80:
				x += 7.3
			case at >= 120 && at < 200 || c.cycles == 1 && at < 200:
				x -= 7.299
			}
			fmt.Fprintf(&text, "%.2f;%.1f;%.2f\n", 0.05*float64(i), 180+r.NormFloat64(), x)
		}
		found := false
		for _, k := range rec(t, text.String()).Corrections {
			found = found || strings.Contains(k.Text, "never still elsewhere")
		}
		if found != c.stuck {
			t.Errorf("%d cycles with stands: stuck is said: %v", c.cycles, found)
		}
	}
}
