package fixfirst_test

import "testing"

// drawnSo are the starters that show a waste on purpose: their own text tells of it. What is found there is no false alarm.
var drawnSo = map[string]string{
	"throttled-constant-flow": "RV1: unloading at pressure", // "nothing unloads it: the whole flow leaves over RV1"
}

// The samples and starters are sound: nothing is found in them but what their own text tells of.
func TestSound(t *testing.T) {
	for name, data := range sources(t) {
		t.Run(name, func(t *testing.T) {
			found := faults(solve(t, asFound(parse(t, data))))
			if want := drawnSo[name]; want != "" && len(found) != 1 {
				t.Errorf("found %d, want %s", len(found), want)
			}
			for _, f := range found {
				if f.Name() != drawnSo[name] {
					t.Errorf("%s: %s %v", f.Name(), f.Text, f.Evidence)
				}
			}
		})
	}
}
