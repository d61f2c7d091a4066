package sheet

import (
	"math"
	"slices"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// withCause is the place of the first finding of a cause, −1 for none.
func (f *findings) withCause(c circuit.Cause) int {
	return slices.IndexFunc(f.list, func(g circuit.Finding) bool { return g.Cause == c })
}

// TestCureFromTheList: without its relief valve the pump line has a finding with a
// button; pressing it draws a valve, connected to the line and a tank, and one undo
// takes it out again.
func TestCureFromTheList(t *testing.T) {
	b := newBench(t, press, window)
	if err := b.doc.Delete("As found", false, "RV1", "T2"); err != nil {
		t.Fatal(err)
	}
	b.pump()
	b.solved()
	before := string(b.doc.File().Bytes())
	list := b.s.findings
	i := list.withCause(circuit.NoRelief)
	if i < 0 || list.cures[i] == nil {
		t.Fatalf("no cure in %v", list.list)
	}
	b.win.Canvas().Capture()
	k := slices.IndexFunc(list.Parts(), func(p widgets.Part) bool {
		return strings.HasSuffix(p.Name, cureSuffix) && p.Text == list.cures[i].Name
	})
	if k < 0 {
		t.Fatalf("no button among %v", list.Parts())
	}
	if b.s.editors[0].opt.Findings["P1"] != circuit.Caution {
		t.Errorf("P1 is marked %q", b.s.editors[0].opt.Findings["P1"])
	}
	if text := b.s.editors[0].blockText("P1"); !strings.Contains(text, "Caution: ") || !strings.Contains(text, list.cures[i].Name) {
		t.Errorf("the pointer reads %q at P1", text)
	}
	list.figure.Tapped(list.Parts()[k], 0, 0)
	b.pump()
	b.solved()
	valve := b.doc.File().Circuits[0].Block("RV1")
	if valve == nil || valve.Kind != "relief" || b.block != "RV1" {
		t.Fatalf("pressed, there is %v, selected %q; said %v", valve, b.block, b.said)
	}
	if list.withCause(circuit.NoRelief) >= 0 || list.withCause(circuit.OpenPort) >= 0 {
		t.Errorf("still found: %v", list.list)
	}
	if said := b.said[len(b.said)-1]; !strings.Contains(said, "assumed") || !strings.Contains(said, "Ctrl+Z") {
		t.Errorf("said %q", said)
	}
	b.doc.Undo()
	b.pump()
	if string(b.doc.File().Bytes()) != before {
		t.Error("one undo does not take the cure back")
	}
}

// TestCureByKey: M in the list mends what the keys are at; a number that only the user
// knows leads to its field.
func TestCureByKey(t *testing.T) {
	b := newBench(t, press, window)
	name := b.doc.File().Circuits[0].Name
	if err := b.doc.Set(name+"/C1.hold", "pump"); err != nil {
		t.Fatal(err)
	}
	b.pump()
	b.solved()
	list := b.s.findings
	i := list.withCause(circuit.HeldByValve)
	if i < 0 {
		t.Fatalf("findings %v", list.list)
	}
	b.win.Canvas().Focus(list)
	for range i {
		list.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDown})
	}
	list.TypedRune('m')
	b.pump()
	if hold := b.doc.File().Circuits[0].Block("C1").Word("hold"); hold != "valve" {
		t.Errorf("held by %q", hold)
	}
}

// TestSelectionLeadsToItsFinding: a click on a marked block brings its finding to the top.
func TestSelectionLeadsToItsFinding(t *testing.T) {
	b := newBench(t, press, window)
	list := b.s.findings
	marked := slices.IndexFunc(list.list, func(g circuit.Finding) bool { return g.Circuit == "As found" && g.Marked() })
	if marked < 0 {
		t.Fatal("the sample has no marked block")
	}
	list.at = len(list.list) - 1
	b.click(0, b.middle(0, list.list[marked].Block), 0)
	if list.list[list.at].Block != list.list[marked].Block {
		t.Errorf("at %v", list.list[list.at])
	}
}

// TestHoverReadsTheLine: velocity where an inner diameter is known, else why there is none;
// each way of a valve with its flow.
func TestHoverReadsTheLine(t *testing.T) {
	b := newBench(t, press, window)
	b.SetClock(23)
	e := b.s.editors[0]
	known, unknown := false, false
	for net := 0; ; net++ {
		ports := e.sheet.Net(net)
		if len(ports) == 0 {
			break
		}
		text := strings.Join(e.lineLines(net), "\n")
		onLine := slices.ContainsFunc(ports, func(p circuit.PortRef) bool { return p.Block == "L1" })
		if onLine {
			v, _ := e.state.Signal("L1.v")
			known = known || strings.Contains(text, b.Text(math.Abs(v), units.Velocity, 3)+" in L1, inner diameter 38")
		} else if strings.Contains(text, "L/min") {
			unknown = unknown || strings.Contains(text, "no inner diameter")
		}
	}
	if !known || !unknown {
		t.Errorf("velocity read where it is known: %v; said where it is not: %v", known, unknown)
	}
	text := e.blockText("V1")
	for _, want := range []string{"position: P to A, B to T, open ", "P → A: ", "B → T: ", " drop, "} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not in %q", want, text)
		}
	}
	b.SetClock(5)
	if text := e.blockText("V1"); !strings.Contains(text, "centre, P to T") || strings.Contains(text, "P → A") {
		t.Errorf("at rest a tandem centre reads %q", text)
	}
}

// TestSignsAreSwitchedOff: each switch takes its sign off both sheets and the legend.
func TestSignsAreSwitchedOff(t *testing.T) {
	b := newBench(t, press, window)
	b.press("sheet.signs")
	for _, sign := range figures.AllSigns {
		check := widgets.Named("sheet.sign." + sign.Word()).(*widgets.Check)
		if !check.Checked {
			t.Errorf("%s is off at first", sign)
		}
		check.SetChecked(false)
		for i, e := range b.s.editors {
			if e.opt.Hide&sign == 0 {
				t.Errorf("sheet %d still shows %s", i, sign)
			}
		}
	}
	if got := b.s.bar.signs.Text; got != "Results shown (5 off)…" {
		t.Errorf("the button says %q", got)
	}
}
