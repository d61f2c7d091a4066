package audit

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// What is copied from one file can be pasted into any other, flow style too.
func TestCopyPaste(t *testing.T) {
	f := full(t)
	e := f.Circuit("As found")
	var ids []string
	for _, b := range e.Blocks {
		ids = append(ids, b.ID)
	}
	text, err := f.Copy("As found", ids...)
	if err != nil {
		t.Fatal(err)
	}
	for name, target := range map[string]string{
		"block style": "format: barlitre/1\noil: {grade: ISO VG 46, temperature: 50 C}\nduties:\n- {name: d, points: {t: [0 s, 1 s]}}\naxes: {ram: linear, drum: rotary}\ncircuits:\n- name: new\n",
		"flow style":  "{format: barlitre/1, oil: {grade: ISO VG 46, temperature: 50 C}, axes: {ram: linear, drum: rotary}, duties: [{name: d, points: {t: [0 s, 1 s]}}], circuits: [{name: new}]}",
	} {
		g := mustParse(t, target)
		got, err := g.Paste("new", text, [2]float64{10, 0})
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		c := g.Circuit("new")
		if len(c.Blocks) != len(ids) || len(c.Lines) != len(e.Lines) {
			t.Errorf("%s: %d blocks, %d lines", name, len(c.Blocks), len(c.Lines))
		}
		for _, b := range e.Blocks {
			p := c.Block(got[b.ID])
			if p == nil || p.Kind != b.Kind || len(p.Values) != len(b.Values) || p.Word("axis") != b.Word("axis") {
				t.Errorf("%s: %s is pasted as %+v", name, b.ID, p)
				continue
			}
			for key, v := range b.Values {
				w := p.Values[key]
				if w.SI != v.SI || w.Origin != v.Origin || w.Note != v.Note {
					t.Errorf("%s: %s.%s: %v became %v", name, b.ID, key, v, w)
				}
			}
			if b.At != nil && (p.At == nil || p.At[0] != b.At[0]+10) {
				t.Errorf("%s: %s lies at %v", name, b.ID, p.At)
			}
		}
		again, err := g.Paste("new", text, [2]float64{})
		if err != nil {
			t.Fatal(err)
		}
		for _, b := range e.Blocks {
			if p := g.Circuit("new").Block(again[b.ID]); p.Word("axis")+p.Word("follows") != "" {
				t.Errorf("%s: %s takes an axis that is taken", name, p.ID)
			}
		}
	}
	for _, bad := range []string{"", "hello", "a: [", "format: barlitre/1\n"} {
		if _, err := f.Paste("As found", bad, [2]float64{}); err == nil || !strings.Contains(err.Error(), "holds no blocks") {
			t.Errorf("%q: got %v", bad, err)
		}
	}
	s := sheetFile(t)
	got, err := s.Duplicate("As found", [2]float64{1, 1}, "F1", "CK1", "V1")
	if err != nil || got["F1"] != "F2" || got["V1"] != "V2" {
		t.Fatalf("%v, %v", got, err)
	}
	c := s.Circuit("As found")
	if !slices.ContainsFunc(c.Lines, func(l circuit.Line) bool { return portsText(l.Ports) == "F2.B - CK2.in" }) || len(c.Groups) != 3 {
		t.Errorf("the copy has no lines or group of its own:\n%s", s.Bytes())
	}
}

// All files of the tests and samples are followed: a block can be added, connected and
// deleted again, and the text is then as before.
func TestDrawInAllFiles(t *testing.T) {
	var names []string
	for _, dir := range []string{"testdata/", "testdata/trials/", "testdata/published/", "../samples/", "../samples/starters/"} {
		list, err := os.ReadDir(dir)
		if err != nil {
			t.Fatal(err)
		}
		for _, n := range list {
			if strings.HasSuffix(n.Name(), ".yaml") {
				names = append(names, dir+n.Name())
			}
		}
	}
	for _, name := range names {
		f, _ := Read(name)
		if f == nil {
			t.Fatal(name)
		}
		before := f.Bytes()
		for _, e := range f.Circuits {
			port := e.Lines[0].Ports[0].String()
			id, err := f.AddBlock(e.Name, "junction", [2]float64{1, 2}, "")
			if e.TypeOf(e.Lines[0].Ports[0]) == circuit.Oil && err == nil {
				err = f.Connect(e.Name, id+".1", port)
			}
			if err == nil {
				err = f.Delete(e.Name, false, id)
			}
			if err != nil {
				t.Errorf("%s, %s: %v", name, e.Name, err)
			}
		}
		if len(names) < 20 || !bytes.Equal(before, f.Bytes()) && strings.Count(string(before), "  -  ") == 0 {
			t.Errorf("%s is not as before", name)
		}
	}
}

// Whatever is wrong with a file and however it is laid out: an edit is done or refused,
// never half, and none panics.
func TestEditsOfFaultyFiles(t *testing.T) {
	var names []string
	for _, pattern := range []string{"testdata/*.yaml", "testdata/wrong/*.yaml", "testdata/wrong_circuits/*.yaml", "testdata/published/*.yaml"} {
		list, err := filepath.Glob(pattern)
		if err != nil {
			t.Fatal(err)
		}
		names = append(names, list...)
	}
	done, refused := 0, 0
	for _, name := range names {
		f, _ := Read(name)
		if f == nil {
			continue
		}
		sheet, block, port, dutyName := "x", "P1", "P1.P", "x"
		if len(f.Circuits) > 0 {
			e := f.Circuits[len(f.Circuits)-1]
			sheet = e.Name
			if len(e.Blocks) > 0 {
				block = e.Blocks[len(e.Blocks)/2].ID
			}
			if len(e.Lines) > 0 {
				port = e.Lines[0].Ports[0].String()
			}
		}
		if len(f.Duties) > 0 {
			dutyName = f.Duties[0].Name
		}
		for what, edit := range map[string]func(g *File) error{
			"add":        func(g *File) error { _, err := g.AddBlock(sheet, "pump", [2]float64{1, 2}, ""); return err },
			"connect":    func(g *File) error { return g.Connect(sheet, port, "T1.T") },
			"join":       func(g *File) error { return g.JoinLines(sheet, 0, 1) },
			"disconnect": func(g *File) error { return g.Disconnect(sheet, port) },
			"delete":     func(g *File) error { return g.Delete(sheet, true, block) },
			"rename":     func(g *File) error { return g.Rename(sheet, block, "NEW1") },
			"turn":       func(g *File) error { return g.Rotate(sheet, 1, block) },
			"duplicate":  func(g *File) error { _, err := g.Duplicate(sheet, [2]float64{1, 1}, block); return err },
			"circuit":    func(g *File) error { return g.AddCircuit("new", Proposal) },
			"copy":       func(g *File) error { return g.CopyCircuit(sheet, "new") },
			"drop":       func(g *File) error { return g.DeleteCircuit(sheet) },
			"axis":       func(g *File) error { return g.AddAxis("new", duty.Rotary) },
			"duty":       func(g *File) error { return g.AddDuty("new", "1 s") },
			"row":        func(g *File) error { return g.AddRow(dutyName, 1, map[string]string{"t": "0 s"}) },
			"no row":     func(g *File) error { return g.RemoveRow(dutyName, 1) },
			"no duty":    func(g *File) error { return g.RemoveDuty(dutyName) },
			"hours":      func(g *File) error { return g.SetDuty(dutyName, "hours", "10 h") },
			"note":       func(g *File) error { _, err := g.AddNote(sheet, "note", [2]float64{1, 1}); return err },
			"group":      func(g *File) error { _, err := g.AddGroup(sheet, "group", block); return err },
			"oil":        func(g *File) error { return g.PutOil(map[string]string{"temperature": "50 C", "grade": "ISO VG 32"}) },
		} {
			g := *f
			if err := edit(&g); err != nil {
				refused++
				if !bytes.Equal(g.Bytes(), f.Bytes()) {
					t.Errorf("%s, %s: refused (%v), but the text changed", name, what, err)
				}
				continue
			}
			done++
			h, found := Parse(g.Bytes(), f.open, f.Path)
			if h == nil || len(found) > len(f.found)+1 {
				t.Errorf("%s, %s: %v\n%s", name, what, found, g.Bytes())
			}
		}
	}
	t.Logf("%d files, %d edits done, %d refused", len(names), done, refused)
	if done < 5*len(names) {
		t.Errorf("only %d edits of %d files were done", done, len(names))
	}
}

// Notes that are chosen go through the clipboard with the blocks, or alone, and come out
// shifted as far as these.
func TestCopyTakesNotes(t *testing.T) {
	f := full(t)
	if _, err := f.AddNote("As found", "spare: 12.5 L/min", [2]float64{3, 4}); err != nil {
		t.Fatal(err)
	}
	n := len(f.Circuit("As found").Notes)
	for _, ids := range [][]string{{"RV1"}, nil} {
		text, err := f.CopyNoted("As found", []int{n - 1}, ids...)
		if err != nil {
			t.Fatal(err)
		}
		if at, err := PartPlace(text); err != nil || at[0] > 3 || at[1] > 4 {
			t.Errorf("the part of %v begins at %v, %v", ids, at, err)
		}
		before := len(f.Circuit("As found").Notes)
		came, err := f.Paste("As found", text, [2]float64{10, 20})
		if err != nil || len(came) != len(ids) {
			t.Fatal(came, err)
		}
		notes := f.Circuit("As found").Notes
		if len(notes) != before+1 || notes[before] != (circuit.SheetNote{Text: "spare: 12.5 L/min", At: [2]float64{13, 24}}) {
			t.Errorf("notes after pasting %v: %v", ids, notes)
		}
	}
	if _, err := f.CopyNoted("As found", []int{99}); err == nil {
		t.Error("a note that is not there was copied")
	}
}
