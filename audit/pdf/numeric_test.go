package pdf

import "testing"

// Numbers stand to the right, sentences to the left, even one that begins with a number.
func TestNumbersStandRight(t *testing.T) {
	for cell, want := range map[string]bool{"12\u202f000\u202fkWh": true, "−3": true, "n/a": true, "–": true, "not given": true, "none needed": true, "± 0.12\u202fK": true, "≤ 229\u202fbar": true, "▲ alarm in 20\u202fmin": false, "0.262\u202fkW to 0.663\u202fkW": true,
		"1.9 years (1.5 to 2.6)": true, "oil": false, "2.00 times the rated torque of 142\u202fN·m and what else it takes": false,
		"4430\u202fN·m at the axis, over gear ratio 20.00 and its efficiency": false} {
		if numeric(cell) != want {
			t.Errorf("%q: %v", cell, !want)
		}
	}
}
