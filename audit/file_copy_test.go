package audit

import (
	"bytes"
	"os"
	"slices"
	"strings"
	"testing"

	"barlitre/circuit"
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
