package sheet

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/circuit"
)

func TestValueReachesTheFile(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "RV1")
	for _, c := range []struct{ typed, written, shown, unit string }{
		{"210", "210 bar", "210", "bar"},
		{"212,5", "212.5 bar", "212.5", "bar"},
		{"3400 psi", "3400 psi", "3400", "psi"},
		{"3350", "3350 psi", "3350", "psi"}, // in the value's own unit
		{"22 MPa", "22 MPa", "22", "MPa"},
	} {
		r := b.field("crack")
		r.field.SetText(c.typed)
		r.field.OnSubmitted(c.typed)
		b.pump()
		v := b.doc.File().Circuits[0].Block("RV1").Values["crack"]
		if v.Text != c.written {
			t.Errorf("typed %q: the file has %q, expected %q", c.typed, v.Text, c.written)
		}
		if v.Origin != circuit.Measured {
			t.Errorf("typed %q: the origin is lost (%q)", c.typed, v.Origin)
		}
		if r.field.Text != c.shown || r.unit.Text != c.unit || r.field.Bad() {
			t.Errorf("typed %q: the field shows %q %q, refused %v", c.typed, r.field.Text, r.unit.Text, r.field.Bad())
		}
	}
	if other := b.doc.File().Circuits[1].Block("RV1").Values; other["crack"].Text != "230 bar" {
		t.Errorf("RV1 of the proposal changed to %v", other)
	}
	name, ok := b.doc.Undo()
	if !ok || !strings.Contains(name, "RV1") {
		t.Errorf("undo takes back %q", name)
	}
	b.pump()
	if got := b.field("crack").field.Text; got != "3350" {
		t.Errorf("after undo the field shows %q", got)
	}
}

func TestRefusedValueStays(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "RV1")
	before := b.doc.Revision()
	for _, c := range []struct{ typed, reason string }{
		{"12 kg", "bar"},     // the units of a pressure are listed
		{"abc", "number"},    // no number
		{"-5", "above"},      // out of range
		{"2000 bar", "1000"}, // out of range
		{"", "empty"},
	} {
		r := b.field("crack")
		r.field.SetText(c.typed)
		r.field.OnSubmitted(c.typed)
		b.pump()
		if !r.field.Bad() || r.field.Text != c.typed {
			t.Errorf("%q: refused %v, the field shows %q", c.typed, r.field.Bad(), r.field.Text)
		}
		if !strings.Contains(r.note.Text, c.reason) {
			t.Errorf("%q: the reason is %q, expected it to tell of %q", c.typed, r.note.Text, c.reason)
		}
		if b.doc.Revision() != before {
			t.Fatalf("%q reached the file", c.typed)
		}
	}
	r := b.field("crack")
	r.field.SetText("2000 bar")
	r.field.OnSubmitted("2000 bar")
	if !b.s.Mend() {
		t.Error("the station does not say that a refused value stands in it")
	}
	b.Select(0, "V1")
	b.Select(0, "RV1")
	if r := b.field("crack"); r.field.Text != "2000 bar" || !r.field.Bad() || !strings.Contains(r.note.Text, "1000") {
		t.Errorf("coming back, the refused value is %q, marked %v: %q", r.field.Text, r.field.Bad(), r.note.Text)
	}
	b.field("crack").field.TypedKey(&fyne.KeyEvent{Name: fyne.KeyEscape})
	if r := b.field("crack"); r.field.Text != "220" || r.field.Bad() {
		t.Errorf("Escape brings back %q, marked %v", r.field.Text, r.field.Bad())
	}
}

func TestFocusLossCommits(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "RV1")
	b.win.Canvas().Focus(b.field("crack").field)
	b.field("crack").field.SetText("228")
	b.click(0, b.middle(0, "V1"), 0)
	if got := b.doc.File().Circuits[0].Block("RV1").Values["crack"].Text; got != "228 bar" {
		t.Errorf("a click elsewhere leaves the file at %q", got)
	}
	if b.block != "V1" {
		t.Errorf("the click selected %q", b.block)
	}
}

func TestDecimalComma(t *testing.T) {
	b := newBench(t, press, window)
	b.comma = true
	b.s.Changed(station.Settings)
	b.Select(0, "RV1")
	r := b.field("crack")
	r.field.SetText("228,5")
	r.field.OnSubmitted("228,5")
	b.pump()
	if got := b.doc.File().Circuits[0].Block("RV1").Values["crack"].Text; got != "228.5 bar" {
		t.Errorf("the file has %q", got)
	}
	if r.field.Text != "228,5" {
		t.Errorf("the field shows %q", r.field.Text)
	}
}

func TestOriginChoiceAndNote(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "RV1")
	r := b.field("override")
	r.origin.SetSelected("data sheet")
	b.pump()
	v := func() circuit.Value { return b.doc.File().Circuits[0].Block("RV1").Values["override"] }
	if v().Origin != circuit.DataSheet {
		t.Errorf("the origin is %q", v().Origin)
	}
	r.toggle()
	for i, text := range []string{"4", "22", "seen on the bench"} {
		f := r.extra[i].field
		f.SetText(text)
		f.OnSubmitted(text)
		b.pump()
	}
	u := v().Unit
	if got := v(); !close(u.FromSI(got.Low), 4, 1e-9) || !close(u.FromSI(got.High), 22, 1e-9) || got.Note != "seen on the bench" {
		t.Errorf("low %g, high %g, note %q", u.FromSI(got.Low), u.FromSI(got.High), got.Note)
	}
	b.s.panel.groups[0].toggle.do()
	if r := b.field("vented"); !r.origin.Disabled() || r.field.Text != "" {
		t.Errorf("a value that is not given: origin open %v, field %q", !r.origin.Disabled(), r.field.Text)
	}
	b.Select(0, "V1")
	for _, row := range b.s.panel.rows {
		if c, ok := row.(*choiceRow); ok && c.param.Key == "centre" {
			c.sel.SetSelected("closed")
		}
	}
	b.pump()
	if got := b.doc.File().Circuits[0].Block("V1").Word("centre"); got != "closed" {
		t.Errorf("the centre is %q", got)
	}
	b.Select(0, "")
	for _, row := range b.s.panel.rows {
		if s, ok := row.(*selectRow); ok && s.target == "As found/pump_at_rest" {
			s.sel.SetSelected("switched off")
		}
	}
	if got := b.doc.File().Circuits[0].PumpAtRest; got != circuit.Stop {
		t.Errorf("pump_at_rest is %q", got)
	}
}

func TestFindingMarksItsField(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "C1")
	if err := b.doc.Set("As found/C1.rod", "130 mm"); err != nil {
		t.Fatal(err)
	}
	b.solved()
	if got := b.field("rod").warn.Text; !strings.Contains(got, "bore") {
		t.Errorf("below the rod stands %q", got)
	}
	if b.s.editors[0].opt.Findings["C1"] != circuit.Stops || !b.s.Mend() {
		t.Errorf("on the sheet C1 is marked %q; the station needs mending: %v", b.s.editors[0].opt.Findings["C1"], b.s.Mend())
	}
}

// A default that follows from other values of the block stands in the field with its reason.
func TestDerivedDefaultIsShown(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "M1")
	b.s.panel.showParameter("starts_per_hour")
	r := b.field("starts_per_hour")
	if r.field.Text != "" || r.field.PlaceHolder == "" || !strings.Contains(r.note.Text, "NEMA MG 10 from memory") {
		t.Errorf("text %q, in its place %q, said %q", r.field.Text, r.field.PlaceHolder, r.note.Text)
	}
}
