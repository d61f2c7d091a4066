package audit

import (
	"fmt"
	"os"
	"regexp"
	"strings"
	"testing"

	"barlitre/circuit"
)

// small is a short file that can be read.
func small(t *testing.T) string {
	t.Helper()
	data, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	return string(data)
}

// refusedFor parses small.yaml with one text in place of another and returns what is found there.
func refusedFor(t *testing.T, old, new string) string {
	t.Helper()
	text := small(t)
	if !strings.Contains(text, old) {
		t.Fatalf("no %q in the file", old)
	}
	text = strings.Replace(text, old, new, 1)
	from := 1 + strings.Count(text[:strings.Index(text, new)], "\n")
	to := from + strings.Count(new, "\n")
	_, found := Parse([]byte(text), nil, "")
	var said []string
	for _, n := range found {
		if n.Level == circuit.Stops && n.Line >= from && n.Line <= to {
			said = append(said, n.Text)
		}
	}
	return strings.Join(said, "\n")
}

// wordOfFile is a key or choice of several parts.
var wordOfFile = regexp.MustCompile(`[a-z0-9]+_[a-z0-9_]+`)

// besideName are the parts of a text that may have words of the file: brackets, quotes and the names of commands.
var besideName = regexp.MustCompile("\\([^()]*\\)|\"[^\"]*\"|`[^`]*`")

// speaks fails where a refusal does not name a key as the window does, with the key in brackets, or has another word of the file.
func speaks(t *testing.T, said, title, key string) {
	t.Helper()
	if want := circuit.WithWord(title, key); !strings.Contains(said, want+":") {
		t.Errorf("%q does not name %s", said, want)
	}
	if w := wordOfFile.FindString(besideName.ReplaceAllString(said, "")); w != "" {
		t.Errorf("%q is a word of the file: %s", w, said)
	}
}

// Every parameter of every kind is refused by its title, whatever is wrong with it.
func TestParametersRefusedByTitle(t *testing.T) {
	n := 0
	for _, k := range circuit.Catalog() {
		for i := range k.Params {
			p := &k.Params[i]
			for _, wrong := range []string{"", "[1, 2]", "1 bsr", "{value: 1 bsr}"} {
				if p.Type != circuit.Number && wrong != "" && wrong != "[1, 2]" {
					continue
				}
				said := refusedFor(t, "T1: {kind: tank}", fmt.Sprintf("T1: {kind: tank}\n    X7: {kind: %s, %s: %s}", k.Name, p.Key, wrong))
				if wrong == "{value: 1 bsr}" {
					said = strings.Replace(said, ", value:", ":", 1)
				}
				speaks(t, said, p.Title, p.Key)
				n++
			}
		}
	}
	if n < 500 {
		t.Errorf("only %d refusals were read", n)
	}
}

// So is what the sections say.
func TestSectionsRefusedByTitle(t *testing.T) {
	for _, v := range (&File{}).OilValues() {
		speaks(t, refusedFor(t, "\noil: {", fmt.Sprintf("\noil: {%s: [1, 2], ", v.Key)), v.Title, v.Key)
	}
	for key, title := range titles["oil"] {
		speaks(t, refusedFor(t, "\noil: {", fmt.Sprintf("\noil: {%s: [1, 2], ", key)), title, key)
	}
	for _, k := range HeatKeys {
		speaks(t, refusedFor(t, "\naxes:", fmt.Sprintf("\nheat: {%s: {no: 1}}\naxes:", k.Key)), k.Title, k.Key)
		speaks(t, refusedFor(t, "\n  blocks:", fmt.Sprintf("\n  heat: {%s: {no: 1}}\n  blocks:", k.Key)), k.Title, k.Key)
	}
	for _, section := range []string{"site", "report", "energy", "calendar"} {
		for key, title := range titles[section] {
			speaks(t, refusedFor(t, "\nenergy: {price: 0.18 EUR/kWh}\naxes:", fmt.Sprintf("\n%s: {%s: [[1]]}\naxes:", section, key)), title, key)
		}
	}
	for key, title := range titles["duty"] {
		speaks(t, refusedFor(t, "\n  points:", fmt.Sprintf("\n  %s: {a: b}\n  points:", key)), title, key)
	}
	for key, title := range titles["circuit"] {
		speaks(t, refusedFor(t, "\n  blocks:", fmt.Sprintf("\n  %s: [[1]]\n  blocks:", key)), title, key)
	}
	for key, title := range titles["block"] {
		speaks(t, refusedFor(t, "T1: {kind: tank}", fmt.Sprintf("T1: {kind: tank}\n    X7: {kind: tank, %s: {a: b}}", key)), title, key)
	}
}

// The title of the window leads to the key as well as a misspelt key does.
func TestTitleWrittenForKey(t *testing.T) {
	for _, c := range [][3]string{
		{"crack: 160 bar", "cracks at: 160 bar", "did you mean cracks at (crack)?"},
		{"kind: cylinder", "kind: hydraulic cylinder", "did you mean cylinder, differential (cylinder)?"},
		{"kind: relief", "kind: relief valve", "did you mean relief valve (relief)?"},
		{"pump_at_rest: keep", "pump_at_rest: switched off", "did you mean switched off (stop)?"},
		{"crack: 160 bar", "xyzzy: 160 bar", "unknown key for this kind of block, relief valve (relief); `barlitre blocks relief` lists its keys"},
	} {
		if said := refusedFor(t, c[0], c[1]); !strings.Contains(said, c[2]) {
			t.Errorf("%s: %s", c[1], said)
		}
	}
}

// What could not be read is told once, not again as something that is missing.
func TestSaidOnce(t *testing.T) {
	for old, new := range map[string]string{
		"crack: 160 bar":         "crack: 160",
		"\n    T1: {kind: tank}": "\n    T1: {kind: }",
		"ram: linear":            "ram: lineal",
		"C1.A - RV1.P":           "C1.A RV1.P",
		"T1: {kind: tank}":       "T1: tank",
		"kind: relief":           "kind: releif",
		", crack: 160 bar}":      ", craks: 160 bar}",
		"hold: valve":            "hold: vavle",
		"pump_at_rest: keep":     "pump_at_rest: koop",
	} {
		text := strings.Replace(small(t), old, new, 1)
		f, _ := Parse([]byte(text), nil, "")
		var said []string
		for _, n := range f.Check() {
			if n.Level == circuit.Stops && n.Duty == "" {
				said = append(said, n.Error())
			}
		}
		if len(said) != 1 {
			t.Errorf("%s: %q", new, said)
		}
	}
}
