package pdf

import (
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
)

// What a preview shows is what is printed: the same texts on the same pages.
func TestPagesAreThoseOfTheDocument(t *testing.T) {
	s := solve(t, read(t))
	opt := Options{Date: day, Without: []Section{Parameters}}
	var pages []*pen.Recorder
	starts, err := Pages(s, opt, func(w, h float64) pen.Pen {
		pages = append(pages, pen.NewRecorder())
		return pages[len(pages)-1]
	})
	if err != nil {
		t.Fatal(err)
	}
	var shown []string
	for _, p := range pages {
		for _, b := range p.Boxes() {
			if text := pen.Clean(b.Text); text != "" {
				shown = append(shown, text)
			}
		}
	}
	if got, want := strings.Join(shown, "|"), strings.Join(texts(plain(t, s, opt)), "|"); got != want || len(shown) < 500 {
		t.Errorf("%d texts shown; they differ from those of the document", len(shown))
	}
	if _, there := starts[Parameters]; there || starts[Decision] != 1 || starts[Method] > len(pages) {
		t.Errorf("sections begin on %v of %d pages", starts, len(pages))
	}
	if _, err := Pages(&audit.Solution{}, opt, nil); err == nil {
		t.Error("nothing solved, no error")
	}
}
