package audit

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// What four duties read of one recording in four ways stays, none drops another; what an edit
// ceases to need stays for one undo, and goes with the next such edit.
func TestWhatIsReadIsKept(t *testing.T) {
	dir := t.TempDir()
	if err := os.WriteFile(filepath.Join(dir, "a.csv"), []byte("t [s],v [m/s]\n0,1\n1,2\n2,3\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	text := "duties:\n"
	for n := range 4 {
		text += fmt.Sprintf("- {name: d%d, file: a.csv, import: {encoding: UTF-8, separator: ',', decimal: '.', head: 1, first: %d, time: {form: elapsed, columns: [t], unit: s}, channels: [{column: v, quantity: velocity, unit: m/s}]}, columns: {ram.speed: v}}\n", n, 2)
	}
	for n := range 4 { // each its own recipe
		text = strings.Replace(text, fmt.Sprintf("name: d%d, file: a.csv, import: {", n), fmt.Sprintf("name: d%d, file: a.csv, import: {choices: {nothing: 'n%d'}, ", n, n), 1)
	}
	text = strings.Replace(intakeHead, "duties: []\n", text, 1)
	f, found := Parse([]byte(text), Beside(filepath.Join(dir, "x.yaml")), filepath.Join(dir, "x.yaml"))
	if stops(found) > 0 || len(f.tables) != 4 {
		t.Fatalf("%d kept, %v", len(f.tables), found)
	}
	if err := os.Remove(filepath.Join(dir, "a.csv")); err != nil { // nothing can be read from here on
		t.Fatal(err)
	}
	for n := range 4 {
		if err := f.SetDuty(fmt.Sprintf("d%d", n), "hours", "100 h"); err != nil || len(f.tables) != 4 {
			t.Fatalf("%d kept, %v", len(f.tables), err)
		}
	}
	full := string(f.Bytes())
	without := func(n int) string {
		i := strings.Index(string(f.Bytes()), fmt.Sprintf("- {name: d%d", n))
		rest := string(f.Bytes())[i:]
		return string(f.Bytes())[:i] + rest[strings.Index(rest, "\n")+1:]
	}
	f.Replace([]byte(without(0)))
	if len(f.tables) != 4 {
		t.Errorf("%d kept after one duty went", len(f.tables))
	}
	if g := *f; stops(g.Replace([]byte(full))) > 0 {
		t.Error("the undo read again")
	}
	if f.Replace([]byte(without(1))); len(f.tables) != 3 {
		t.Errorf("%d kept after two went, want the two in use and the last one", len(f.tables))
	}
}
