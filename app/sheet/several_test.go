package sheet

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit/pen"
)

// TestSeveralBlocksAreEditedTogether: three relief valves with settings of their own show
// "several"; one typed value is one step of undo for all three, and leaves others alone.
func TestSeveralBlocksAreEditedTogether(t *testing.T) {
	b := newBench(t, press, window)
	before := string(b.doc.File().Bytes())
	b.click(0, b.middle(0, "RV1"), 0)
	b.click(0, b.middle(0, "RV2"), fyne.KeyModifierShift)
	b.click(0, b.middle(0, "RV3"), fyne.KeyModifierShift)
	if title, sub := b.s.panel.titles(); title != "RV1, RV2, RV3" || !strings.Contains(sub, "3 of kind relief valve") {
		t.Errorf("the panel is of %q, %q", title, sub)
	}
	b.solved()
	p := pen.NewRecorder()
	b.s.panel.live.draw(p, 270, 200)
	if head := p.Boxes()[0].Text; !strings.HasPrefix(head, "RV3 at ") {
		t.Errorf("the values of one of several stand under %q", head)
	}
	r := b.field("crack")
	if r.field.Text != "" || r.field.PlaceHolder != severalWord {
		t.Errorf("different settings show %q, %q", r.field.Text, r.field.PlaceHolder)
	}
	b.enter("crack", "3000 psi")
	b.pump()
	for _, id := range []string{"RV1", "RV2", "RV3"} {
		if v := b.doc.File().Circuits[0].Block(id).Values["crack"]; v.Text != "3000 psi" {
			t.Errorf("%s is set to %q", id, v.Text)
		}
	}
	if v := b.doc.File().Circuits[1].Block("RV1").Values["crack"].Text; v != "230 bar" {
		t.Errorf("RV1 of the other circuit is set to %q", v)
	}
	if r := b.field("crack"); !strings.Contains(r.field.Text, "3000") {
		t.Errorf("one setting of all shows %q", r.field.Text)
	}
	if name := b.doc.UndoName(); name != "Change 3 blocks: cracks at" {
		t.Errorf("undo would be called %q", name)
	}
	b.doc.Undo()
	b.pump()
	if string(b.doc.File().Bytes()) != before {
		t.Error("one undo does not bring all three back")
	}
	if r := b.field("crack"); r.field.PlaceHolder != severalWord {
		t.Errorf("after undo the field shows %q, %q", r.field.Text, r.field.PlaceHolder)
	}
	b.enter("crack", "-3 bar")
	if string(b.doc.File().Bytes()) != before {
		t.Error("a value that cannot be changed a file")
	}
	b.click(0, b.middle(0, "RV2"), fyne.KeyModifierShift)
	b.click(0, b.middle(0, "RV3"), fyne.KeyModifierShift)
	if title, _ := b.s.panel.titles(); title != "RV1" || b.field("crack").field.Text != "220" {
		t.Errorf("alone again: %q, %q", title, b.field("crack").field.Text)
	}
}

// TestBlocksOfOtherKindsStandAlone: the values are those of one, and it says so.
func TestBlocksOfOtherKindsStandAlone(t *testing.T) {
	b := newBench(t, press, window)
	b.click(0, b.middle(0, "RV1"), 0)
	b.click(0, b.middle(0, "V1"), fyne.KeyModifierShift)
	if title, sub := b.s.panel.titles(); title != "V1" || !strings.Contains(sub, "one of 2 selected") {
		t.Errorf("the panel is of %q, %q", title, sub)
	}
	if err := b.s.panel.set("As found/V1.nominal_flow", "120 L/min"); err != nil {
		t.Fatal(err)
	}
	if _, has := b.doc.File().Circuits[0].Block("RV1").Values["nominal_flow"]; has {
		t.Error("a relief valve got the flow of a directional valve")
	}
}

// TestCompareWithTheOtherCircuit: values of the same block stand side by side, what
// differs is marked and can be taken, as one step of undo.
func TestCompareWithTheOtherCircuit(t *testing.T) {
	b := newBench(t, press, window)
	b.click(0, b.middle(0, "RV1"), 0)
	if !b.s.panel.compareLine.Visible() {
		t.Fatal("RV1 is in both circuits, and nothing offers to compare")
	}
	row := func() *besideRow { return b.field("crack").beside }
	if row().content.Visible() {
		t.Error("compared without being asked")
	}
	alone := len(b.s.panel.live.rows())
	widgets.Named("sheet.compare").(*link).do()
	if text := b.s.panel.compare.Text; !strings.HasPrefix(text, "Stop comparing") {
		t.Errorf("while it compares the link says %q", text)
	}
	if text := b.field("override").beside.text.Text; !strings.HasPrefix(text, "= Pump-controlled: ") {
		t.Errorf("there is room for the whole name, and it says %q", text)
	}
	if rows := b.s.panel.live.rows(); alone == 0 || len(rows) != 2*alone || strings.TrimSpace(rows[1].name) != "Pump-controlled" || len(rows[1].values) != 1 {
		t.Errorf("the values now of both circuits: %v, were %d rows of one", rows, alone)
	}
	if r := row(); !strings.HasPrefix(r.text.Text, "≠ ") || !strings.HasSuffix(r.text.Text, "230 bar") || !r.take.Visible() {
		t.Errorf("beside 220 bar stands %q, to take: %v", row().text.Text, row().take.Visible())
	}
	before := string(b.doc.File().Bytes())
	row().take.do()
	b.pump()
	own, other := b.doc.File().Circuits[0].Block("RV1").Values["crack"], b.doc.File().Circuits[1].Block("RV1").Values["crack"]
	if own.SI != other.SI || own.Origin != other.Origin {
		t.Errorf("taken %+v of %+v", own, other)
	}
	if r := row(); !strings.HasPrefix(r.text.Text, "= ") || r.take.Visible() {
		t.Errorf("taken, beside it stands %q", r.text.Text)
	}
	b.doc.Undo()
	b.pump()
	if string(b.doc.File().Bytes()) != before {
		t.Error("one undo does not bring the value back")
	}
	b.click(0, b.middle(0, "V1"), 0)
	if b.s.panel.compareLine.Visible() {
		t.Error("V1 is in one circuit alone, and is compared")
	}
	b.solved()
	b.click(0, b.middle(0, "C1"), 0)
	b.picture("compare")
}

// enter types a text into a field and presses Enter.
func (b *bench) enter(key, text string) {
	b.t.Helper()
	f := b.field(key).field
	f.SetText(text)
	f.OnSubmitted(text)
}
