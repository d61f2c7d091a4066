package audit

import (
	"strings"
	"testing"
)

// TestIssueFields: the fields of the title block are read, put where there is no section
// yet, changed, emptied, and kept as text even where they look like a number or a date.
func TestIssueFields(t *testing.T) {
	f, _ := Read("../samples/baling-press.yaml")
	if f.Issue != (Issue{}) {
		t.Fatalf("the sample has %+v", f.Issue)
	}
	for _, x := range []struct{ target, text string }{
		{"report.revision", "1"}, {"report.number", "2024-0017"}, {"report.owner", "Sample & Sons: works"}, {"report.approved", "N. N."},
	} {
		if err := f.Put(x.target, x.text); err != nil {
			t.Fatal(err)
		}
	}
	want := Issue{Owner: "Sample & Sons: works", Number: "2024-0017", Revision: "1", Approved: "N. N."}
	again, found := Parse(f.Bytes(), nil, "")
	if f.Issue != want || again.Issue != want || len(found) > len(f.Findings()) {
		t.Errorf("put %+v, read again %+v, %v", f.Issue, again.Issue, found)
	}
	if err := f.Put("report.approved", ""); err != nil || f.Issue.Approved != "" {
		t.Errorf("emptied: %v, %+v", err, f.Issue)
	}
	_, found = Parse([]byte(strings.Replace(string(f.Bytes()), "revision:", "revison:", 1)), nil, "")
	if len(found) == 0 || !strings.Contains(found[0].Text, "revision") {
		t.Errorf("a misspelt key: %v", found)
	}
}
