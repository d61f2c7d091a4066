package sheet

import (
	"bytes"
	"math"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/circuit"
	"barlitre/machines/units"
)

const press = "baling-press.yaml"

var window = fyne.NewSize(1200, 590)

func TestClickSelects(t *testing.T) {
	b := newBench(t, press, window)
	b.click(0, b.middle(0, "RV1"), 0)
	if b.circuit != 0 || b.block != "RV1" {
		t.Fatalf("a click on RV1 selects %d %q", b.circuit, b.block)
	}
	title, sub := b.s.panel.titles()
	if title != "RV1" || !strings.HasPrefix(sub, "relief valve") {
		t.Errorf("the panel shows %q, %q", title, sub)
	}
	if got := b.field("crack").field.Text; got != "220" {
		t.Errorf("the field of the setting shows %q, the file has 220 bar", got)
	}
	if got := b.field("crack").origin.Selected; got != "measured" {
		t.Errorf("its origin is %q, the file has measured", got)
	}
	b.click(1, b.middle(1, "P1"), 0)
	if b.circuit != 1 || b.block != "P1" || len(b.s.editors[0].selected) != 0 {
		t.Errorf("after a click on the other sheet: %d %q, %v still selected on the first", b.circuit, b.block, b.s.editors[0].selected)
	}
	w, h := b.s.editors[1].room()
	b.click(1, fyne.NewPos(float32(w)-3, float32(h)-3), 0)
	if b.circuit != 1 || b.block != "" {
		t.Errorf("a click on the ground leaves %d %q selected", b.circuit, b.block)
	}
}

func TestShiftAndBox(t *testing.T) {
	b := newBench(t, press, window)
	e := b.s.editors[0]
	b.click(0, b.middle(0, "RV1"), 0)
	b.click(0, b.middle(0, "V1"), fyne.KeyModifierShift)
	if got := strings.Join(e.ids(), " "); got != "RV1 V1" {
		t.Errorf("Shift adds: %q", got)
	}
	b.click(0, b.middle(0, "RV1"), fyne.KeyModifierShift)
	if got := strings.Join(e.ids(), " "); got != "V1" || b.block != "V1" {
		t.Errorf("Shift takes away: %q, at hand %q", got, b.block)
	}
	w, h := e.room()
	b.drag(0, fyne.NewPos(1, 1), fyne.NewPos(float32(w)-1, float32(h)-1), desktop.MouseButtonPrimary, 0)
	if len(e.selected) != len(e.drawn.Blocks) {
		t.Errorf("a box over all selects %d of %d blocks", len(e.selected), len(e.drawn.Blocks))
	}
	if e.band.Visible() {
		t.Error("the box stays after the drag")
	}
}

func TestTabGoesThroughAllBlocks(t *testing.T) {
	b := newBench(t, press, window)
	b.win.Canvas().Focus(b.s.editors[0])
	seen := map[string]bool{}
	n := len(b.s.editors[0].drawn.Blocks)
	for range n {
		b.key(0, fyne.KeyTab)
		seen[b.block] = true
	}
	if len(seen) != n || seen[""] {
		t.Errorf("%d Tabs reach %d of %d blocks", n, len(seen), n)
	}
	if b.win.Canvas().Focused() != b.s.editors[0] {
		t.Fatal("the focus left before the last block")
	}
	b.key(0, fyne.KeyTab)
	if b.win.Canvas().Focused() == b.s.editors[0] {
		t.Error("Tab after the last block does not leave the sheet")
	}
	back := b.block
	b.s.editors[0].KeyDown(&fyne.KeyEvent{Name: desktop.KeyShiftLeft})
	b.key(0, fyne.KeyTab)
	if b.block == back || b.block == "" {
		t.Errorf("Shift+Tab goes from %q to %q", back, b.block)
	}
}

func TestCommonScales(t *testing.T) {
	b := newBench(t, press, window)
	s0, s1 := b.s.editors[0].opt.Scales, b.s.editors[1].opt.Scales
	if s0 != s1 || s0.Pressure <= 0 || s0.Flow <= 0 || s0.Heat <= 0 || s0.Energy <= 0 {
		t.Fatalf("scales %+v and %+v", s0, s1)
	}
	own0, own1 := figures.ScalesOf(b.s.run(0)), figures.ScalesOf(b.s.run(1))
	if own0 == own1 || s0.Heat != math.Max(own0.Heat, own1.Heat) || s0.Pressure != math.Max(own0.Pressure, own1.Pressure) {
		t.Errorf("%+v is not the larger of %+v and %+v", s0, own0, own1)
	}
	if b.s.editors[0].zoom != b.s.editors[1].zoom {
		t.Errorf("fitted at zooms %g and %g: widths do not compare", b.s.editors[0].zoom, b.s.editors[1].zoom)
	}
}

func TestClockAndHeatSwitch(t *testing.T) {
	b := newBench(t, press, window)
	b.SetClock(23)
	for i, e := range b.s.editors {
		if e.state == nil || e.state.T != 23 || e.state.Energy {
			t.Fatalf("sheet %d does not follow the clock: %+v", i, e.state)
		}
	}
	now := b.s.editors[0].state.Heat("RV1")
	b.press("sheet.signs")
	widgets.Named("sheet.sign.cycle").(*widgets.Check).SetChecked(true)
	e := b.s.editors[0]
	var want float64
	for _, l := range b.s.run(0).Balance.Losses {
		if l.Block == "RV1" {
			want += l.Energy.Total()
		}
	}
	if got := e.state.Heat("RV1"); !e.state.Energy || !close(got, want, 1e-9*want) || got == now {
		t.Errorf("over the cycle RV1 turns %g J to heat, the balance has %g (%g W now)", got, want, now)
	}
	b.Select(0, "RV1")
	var text []string
	for _, r := range b.s.panel.live.rows() {
		text = append(text, r.name+"="+strings.Join(r.values, "|"))
	}
	all := strings.Join(text, "\n")
	for _, part := range []string{"P, inlet=222", "in\n", "Heat=" + b.Text(now, units.Power, 3), b.Text(want, units.Energy, 3)} {
		if !strings.Contains(all, part) {
			t.Errorf("the live values lack %q:\n%s", part, all)
		}
	}
}

func TestFindingsJump(t *testing.T) {
	b := newBench(t, press, window)
	f := b.s.findings
	if len(f.list) == 0 {
		t.Fatal("the sample has findings, none are shown")
	}
	safety := false
	for i, g := range f.list {
		if g.Block == "" {
			continue
		}
		f.open(i)
		if c := b.doc.File().Circuits[b.circuit]; c.Name != g.Circuit || b.block != g.Block {
			t.Errorf("finding %d of %s/%s selects %s/%s", i, g.Circuit, g.Block, c.Name, b.block)
		}
		if !b.s.editors[b.circuit].selected[g.Block] {
			t.Errorf("finding %d does not mark %s on the sheet", i, g.Block)
		}
		safety = safety || g.Level == circuit.Caution && strings.Contains(g.Text, "raise")
	}
	if !safety {
		t.Error("no finding warns against raising a relief valve")
	}
	// A displacement too small for the speed asked for: a finding with a time.
	if err := b.doc.Set("As found/P1.displacement", "30 cm3/rev"); err != nil {
		t.Fatal(err)
	}
	b.solved()
	b.Select(-1, "")
	for i, g := range f.list {
		if g.Time > 0 {
			b.SetClock(0)
			f.open(i)
			if b.clock != g.Time || b.doc.File().Duties[b.duty].Name != g.Duty && g.Duty != "" {
				t.Errorf("%q: the clock stands at %g, expected %g", g.Text, b.clock, g.Time)
			}
			return
		}
	}
	t.Error("no finding tells a time after the pump was made too small")
}

func TestHoverReads(t *testing.T) {
	b := newBench(t, press, window)
	b.SetClock(23)
	e := b.s.editors[0]
	e.MouseMoved(event(b.middle(0, "RV1"), 0, 0))
	if got := e.hover.text(); !strings.Contains(got, "RV1") || !strings.Contains(got, "heat") {
		t.Errorf("over RV1 the label says %q", got)
	}
	e.redraw()
	b.picture("hover")
	for _, r := range e.sheet.Regions(0, 0, 1, e.opt.HideLabels) {
		if r.Kind != figures.SheetLine || r.W*r.H == 0 {
			continue
		}
		ox, oy := e.sheet.Origin()
		p := fyne.NewPos(float32(e.x+(ox+r.X+r.W/2)*e.zoom), float32(e.y+(oy+r.Y+r.H/2)*e.zoom))
		block, net, _ := e.hit(p)
		if block != "" || !hasPort(e.sheet.Net(net), "P1.P") {
			continue
		}
		e.MouseMoved(event(p, 0, 0))
		pressure, _ := e.state.Signal("P1.P.p")
		flow, _ := e.state.Signal("P1.P.q")
		for _, want := range []string{b.Text(pressure, units.Pressure, 3), b.Text(math.Abs(flow), units.Flow, 3), b.Text(math.Abs(flow*pressure), units.Power, 3)} {
			if !strings.Contains(e.hover.text(), want) {
				t.Errorf("over the pressure line the label says %q, expected %s in it", e.hover.text(), want)
			}
		}
		e.MouseOut()
		if e.hover.text() != "" {
			t.Error("the label stays after the pointer left")
		}
		return
	}
	t.Error("the pressure line was not found")
}

func hasPort(list []circuit.PortRef, name string) bool {
	for _, p := range list {
		if p.String() == name {
			return true
		}
	}
	return false
}

func TestWideAndFold(t *testing.T) {
	b := newBench(t, press, window)
	b.click(1, b.middle(1, "P1"), 0)
	both := b.s.editors[1].Size().Width
	b.s.editors[1].TypedRune('w')
	if b.s.cards[0].content.Visible() || b.s.editors[1].Size().Width < 1.7*both {
		t.Errorf("W: first sheet shown %v, second %g wide, was %g", b.s.cards[0].content.Visible(), b.s.editors[1].Size().Width, both)
	}
	b.Select(0, "RV1") // as from a finding
	if !b.s.cards[0].content.Visible() || b.s.cards[1].content.Visible() {
		t.Error("a block of the other circuit does not bring its sheet")
	}
	test.Tap(b.s.bar.wide)
	if !b.s.cards[0].content.Visible() || !b.s.cards[1].content.Visible() {
		t.Error("the button does not bring both back")
	}
	b.win.Resize(fyne.NewSize(1100, 590))
	if b.s.panel.content.Visible() || !b.s.edge.Visible() {
		t.Error("the panel does not fold in a narrow window")
	}
	b.s.edge.Tapped(widgets.Part{}, 0, 0)
	if !b.s.panel.content.Visible() || b.s.edge.Visible() {
		t.Error("the edge does not bring the panel back")
	}
	test.Tap(b.s.bar.panel)
	if b.s.panel.content.Visible() {
		t.Error("the button does not fold the panel")
	}
}

func TestDumpNames(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "RV1")
	b.win.Canvas().Capture()
	var out bytes.Buffer
	widgets.Dump(&out, b.win.Canvas())
	for _, want := range []string{"sheet.0\tAs found [RV1]\t", "sheet.0/RV1\tRV1 · relief valve", "sheet.1/P1\t", "field.crack\t220\t", "field.crack.origin\tmeasured\t",
		"sheet.findings\t", "sheet.findings/0\tCaution", "sheet.wide\tShow one sheet (W)\t", "sheet.fit\tFit (F)\t", "sheet.signs\tResults shown…\t", "sheet.circuits\tCircuits…\t", "sheet.live/Heat\t"} {
		if !strings.Contains(out.String(), want) {
			t.Errorf("the dump lacks %q", want)
		}
	}
	if t.Failed() {
		t.Log(out.String())
	}
}

func TestSmallEnough(t *testing.T) {
	b := newBench(t, press, window)
	if m := b.s.Content().MinSize(); m.Width >= 900 || m.Height >= 480 {
		t.Errorf("the page needs %v", m)
	}
}

func TestWrap(t *testing.T) {
	for _, text := range []string{"one two three four five six", "unbreakablewordthatislong and more", "", "a", "two  spaces here and there"} {
		lines := wrap(text, 11, 60)
		if got := strings.Join(lines, " "); strings.Join(strings.Fields(got), "") != strings.Join(strings.Fields(text), "") {
			t.Errorf("%q became %q", text, lines)
		}
	}
}

// The page takes the keys when it is shown, and hands on those it has no use for.
func TestKeysAtOnce(t *testing.T) {
	b := newBench(t, press, window)
	if b.win.Canvas().Focused() != b.s.editors[0] {
		t.Fatalf("the keys go to %T", b.win.Canvas().Focused())
	}
	if b.s.editors[0].ring.Visible() {
		t.Error("the frame of the focus shows before a key was used")
	}
	var passed []fyne.KeyName
	b.win.Canvas().SetOnTypedKey(func(k *fyne.KeyEvent) { passed = append(passed, k.Name) })
	b.key(0, fyne.KeyF1, fyne.KeyEscape)
	if len(passed) != 2 || !b.s.editors[0].ring.Visible() {
		t.Errorf("passed on %v; frame of the focus %v", passed, b.s.editors[0].ring.Visible())
	}
}
