package audit

import (
	"slices"
	"strings"
	"testing"
)

// The duty that stands for all is the one that works most in the year: by hand, mean power
// times hours. One that does not run in the year comes last, however much it works in a cycle.
func TestDutiesByYear(t *testing.T) {
	const head = "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\naxes: {ram: linear}\nduties:\n"
	of := func(name, hours, v, load string) string {
		text := "- name: " + name + "\n"
		if hours != "" {
			text += "  hours: " + hours + "\n"
		}
		return text + "  points: {t: [0 s, 10 s], ram.speed: [" + v + ", " + v + "], ram.load: [" + load + ", " + load + "]}\n"
	}
	trial := of("trial run", "0 h", "0.5 m/s", "90 kN") // 45 kW, but never
	waiting := of("waiting", "5000 h", "0 m/s", "0 kN")
	lift := of("lift", "1000 h", "0.1 m/s", "10 kN")      // 1 kW: 1000 kWh
	lower := of("lower", "500 h", "-0.1 m/s", "30 kN")    // 3 kW driven: 1500 kWh
	none := of("no hours", "", "1 m/s", "1 kN")           // nor this
	also := of("waiting too", "6000 h", "0 m/s", "10 kN") // nothing moves: by hours
	for _, c := range []struct {
		text string
		want []int
	}{
		{trial + lift, []int{1, 0}},
		{trial + waiting + lift + lower + none, []int{3, 2, 1, 0, 4}},
		{waiting + also, []int{1, 0}},
		{trial + none, []int{0, 1}},
		{strings.Replace(lift, "t: [0 s, 10 s]", "t: [10 s, 0 s]", 1) + lower, []int{1, 0}},
	} {
		f, _ := Parse([]byte(head+c.text+"circuits: []\n"), nil, "")
		if got := f.DutiesByYear(); !slices.Equal(got, c.want) {
			t.Errorf("%v, want %v\n%s", got, c.want, c.text)
		}
	}
}
