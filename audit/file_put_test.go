package audit

import (
	"strings"
	"testing"
)

// Put adds what is missing, and what it adds reads back; the rest of the text stays.
func TestPut(t *testing.T) {
	const head = "format: barlitre/1\n"
	const two = head + "axes: {ram: linear}\nduties: []\ncircuits:\n- {name: As found, blocks: {}}\n- name: \"P/2\"\n  blocks: {} # none\n"
	for name, c := range map[string]struct{ before, target, quantity, after string }{
		"title":            {head + "title: Old # name\n", "title", "New: press", head + "title: \"New: press\" # name\n"},
		"title, new":       {head, "title", "Press", "format: barlitre/1\ntitle: Press\n"},
		"air":              {head + "oil: {temperature: 50 C}\n", "air.temperature", "30 C", head + "oil: {temperature: 50 C}\nair: {temperature: 30 C}\n"},
		"air, empty":       {head + "air:\noil: {temperature: 50 C}\n", "air.temperature", "30 C", head + "air: {temperature: 30 C}\noil: {temperature: 50 C}\n"},
		"air, there":       {head + "air: {temperature: 20 C}\n", "air.temperature", "30 C", head + "air: {temperature: 30 C}\n"},
		"energy":           {head + "title: x", "energy.price", "0.18 EUR/kWh", head + "title: x\nenergy: {price: 0.18 EUR/kWh}"},
		"site":             {head, "site.customer", "Works 3", "format: barlitre/1\nsite: {customer: Works 3}\n"},
		"customer gone":    {head + "site: {name: a, customer: b}\n", "site.customer", " ", head + "site: {name: a, customer: \"\"}\n"},
		"cost":             {two, "P/2/retrofit_cost.likely", "26000 EUR", two + "  retrofit_cost: {likely: 26000 EUR}\n"},
		"cost, bare":       {two + "  retrofit_cost: 20000 EUR\n", "P/2/retrofit_cost.likely", "26000 EUR", two + "  retrofit_cost: {likely: 26000 EUR}\n"},
		"cost, bare, high": {two + "  retrofit_cost: \"20000 EUR\" # c\n", "P/2/retrofit_cost.high", "26000 EUR", two + "  retrofit_cost: {likely: 20000 EUR, low: 20000 EUR, high: 26000 EUR} # c\n"},
		"cost, bare, note": {two + "  retrofit_cost: 20000 EUR\n", "P/2/retrofit_cost.note", "quote", two + "  retrofit_cost: {likely: 20000 EUR, note: quote}\n"},
		"cost, low":        {two + "  retrofit_cost: {likely: 20000 EUR}\n", "P/2/retrofit_cost.low", "15000 EUR", two + "  retrofit_cost: {likely: 20000 EUR, low: 15000 EUR, high: 20000 EUR}\n"},
		"cost, low, block": {two + "  retrofit_cost:\n    likely: 20000 EUR\n", "P/2/retrofit_cost.low", "15000 EUR", two + "  retrofit_cost:\n    likely: 20000 EUR\n    low: 15000 EUR\n    high: 20000 EUR\n"},
	} {
		t.Run(name, func(t *testing.T) {
			f, _ := Parse([]byte(c.before), nil, "")
			if f == nil {
				t.Fatal("not readable")
			}
			if err := f.Put(c.target, c.quantity); err != nil {
				t.Fatal(err)
			}
			if got := string(f.Bytes()); got != c.after {
				t.Errorf("got\n%s\nwant\n%s", got, c.after)
			}
		})
	}
}

func TestPutRefuses(t *testing.T) {
	const text = "format: barlitre/1\ncircuits:\n- {name: A}\n- {name: B}\n- {name: C, retrofit_cost: {low: 1 EUR, likely: 2 EUR, high: 3 EUR}}\n"
	for _, c := range [][3]string{
		{"B/retrofit_cost.low", "1 EUR", "likely"}, {"A/retrofit_cost.likely", "1 EUR", "proposals"}, {"C/retrofit_cost.likely", "4 EUR", "between"},
		{"C/retrofit_cost.likely", "2 USD", "USD"}, {"air.temperature", "warm", "warm"}, {"air.temperature", "", "empty"}, {"D/retrofit_cost.likely", "1 EUR", "no circuit"},
	} {
		f, _ := Parse([]byte(text), nil, "")
		err := f.Put(c[0], c[1])
		if err == nil || !strings.Contains(err.Error(), c[2]) || string(f.Bytes()) != text {
			t.Errorf("%s = %q: error %v, want one about %q and the same text", c[0], c[1], err, c[2])
		}
	}
}

func TestPutHours(t *testing.T) {
	const text = "format: barlitre/1\nduties:\n- {name: a, hours: 10 h}\n- name: b, shift\n  repeats: yes\n"
	f, _ := Parse([]byte(text), nil, "")
	if err := f.PutHours("a", "20 h"); err != nil {
		t.Fatal(err)
	}
	if err := f.PutHours("b, shift", "1200 h"); err != nil {
		t.Fatal(err)
	}
	if want := strings.Replace(text, "10 h", "20 h", 1) + "  hours: 1200 h\n"; string(f.Bytes()) != want || f.Duties[1].Hours != 1200*3600 {
		t.Errorf("%v h, text\n%s", f.Duties[1].Hours, f.Bytes())
	}
	for name, hours := range map[string]string{"a": "9000 h", "c": "1 h", "b, shift": ""} {
		if f.PutHours(name, hours) == nil {
			t.Errorf("duty %s took %q", name, hours)
		}
	}
}
