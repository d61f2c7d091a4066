package sheet

import (
	"fmt"
	"image"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// drives is an invented audit with every kind of machine and drive, and a pump with measured points.
const drives = `format: barlitre/1
title: Machines and drives, invented
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear, hoist: rotary}
energy: {price: 0.18 EUR/kWh, fuel_price: 1.6 EUR/L}
duties:
- name: day
  hours: 1000 h
  points:
    t: [0 s, 0.1 s, 2 s, 2.1 s, 4 s]
    ram.speed: [0 m/s, 0.1 m/s, 0.1 m/s, 0 m/s, 0 m/s]
    ram.load: [5 kN, 5 kN, 50 kN, 5 kN, 5 kN]
    hoist.speed: [0 rad/s, 5 rad/s, 5 rad/s, 0 rad/s, 0 rad/s]
    hoist.load: [100 N m, 100 N m, 100 N m, 100 N m, 100 N m]
circuits:
- name: As found
  pump_at_rest: keep
  blocks:
    T1: {kind: tank, at: [24, 60]}
    M1: {kind: electric_motor, rated_power: 22 kW, efficiency_class: IE3, speed: 1480 rpm, slip: yes, at: [8, 48]}
    P1: {kind: pump, displacement: {value: 45 cm3/rev, origin: name plate}, points: pump.csv, points_viscosity: 26 mPa s, rating: 280 bar, max_speed: 2500 rpm, at: [24, 48]}
    RV1: {kind: relief, crack: 160 bar, at: [44, 48]}
    V1: {kind: valve, follows: ram, centre: closed, nominal_flow: 60 L/min, nominal_drop: 5 bar, at: [30, 26]}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm, at: [30, 10]}
    E1: {kind: engine, rated_power: 30 kW, speed: 1800 rpm, at: [56, 48]}
    P2: {kind: pump, displacement: 28 cm3/rev, follows: hoist, both_directions: yes, family: axial_piston, at: [70, 48]}
    CP1: {kind: charge_pump, displacement: 6 cm3/rev, charge: 20 bar, at: [80, 60]}
    CK1: {kind: check, nominal_flow: 20 L/min, at: [66, 60]}
    CK2: {kind: check, nominal_flow: 20 L/min, at: [74, 60]}
    T2: {kind: tank, at: [84, 68]}
    H1: {kind: motor, displacement: 250 cm3/rev, axis: hoist, hold: brake, family: radial_piston, at: [70, 20]}
  lines: [M1.shaft - P1.shaft, P1.S - T1.T, P1.P - RV1.P - V1.P, RV1.T - V1.T - T1.T, V1.A - C1.A, V1.B - C1.B,
    E1.shaft - P2.shaft - CP1.shaft, P2.P - H1.A - CK1.out, P2.S - H1.B - CK2.out, CP1.P - CK1.in - CK2.in, CP1.S - CP1.T - T2.T]
- name: Speed-controlled
  role: proposal
  retrofit_cost: 20000 EUR
  pump_at_rest: stop
  blocks:
    T1: {kind: tank, at: [24, 60]}
    FC1: {kind: converter, rated_power: 22 kW, at: [2, 60]}
    M1: {kind: electric_motor, type: permanent_magnet, rated_power: 15 kW, efficiency: 0.94, speed: 2000 rpm, follows: ram, both_directions: yes, at: [8, 48]}
    P1: {kind: pump, displacement: 45 cm3/rev, family: external_gear, rating: 280 bar, max_speed: 2500 rpm, at: [24, 48]}
    C1: {kind: double_rod, axis: ram, hold: brake, bore: 80 mm, rod: 56 mm, at: [30, 10]}
    E1: {kind: engine, rated_power: 30 kW, speed: 1800 rpm, at: [56, 48]}
    P2: {kind: pump, displacement: 28 cm3/rev, follows: hoist, both_directions: yes, family: axial_piston, at: [70, 48]}
    CP1: {kind: charge_pump, displacement: 6 cm3/rev, charge: 20 bar, at: [80, 60]}
    CK1: {kind: check, nominal_flow: 20 L/min, at: [66, 60]}
    CK2: {kind: check, nominal_flow: 20 L/min, at: [74, 60]}
    T2: {kind: tank, at: [84, 68]}
    H1: {kind: motor, displacement: 250 cm3/rev, axis: hoist, hold: brake, family: radial_piston, at: [70, 20]}
  lines: [FC1.M - M1.E, M1.shaft - P1.shaft, P1.S - C1.B - T1.T, P1.P - C1.A,
    E1.shaft - P2.shaft - CP1.shaft, P2.P - H1.A - CK1.out, P2.S - H1.B - CK2.out, CP1.P - CK1.in - CK2.in, CP1.S - CP1.T - T2.T]
`

// points is a table of measured points of an invented pump.
func points() string {
	law := machines.Displacement{D: 45 * units.CubicCentimetrePerRev, Cs: 9e-9, Kd: 1.2, Cf: 0.02, Cv: 5e4, Tc: 2}
	var b strings.Builder
	b.WriteString("n [1/min], dp [bar], q [L/min], T [N m]\n")
	for _, n := range []float64{700, 1200, 1800, 2400} {
		for i, bar := range []float64{20, 60, 120, 200, 260} {
			w, dp := n*units.RPM, bar*units.Bar
			q, T := law.Flow(1, w, dp, 0.026, 870, 1.4e9), law.Torque(1, w, dp, 0.026, 870)
			scatter := 1 + 0.004*math.Sin(float64(i)*7+n)
			fmt.Fprintf(&b, "%g, %g, %.6g, %.6g\n", n, bar, q/units.LitrePerMinute, T*scatter)
		}
	}
	return b.String()
}

// openDrives shows the audit with its table beside it.
func openDrives(t testing.TB, size fyne.Size) (b *bench, dir string) {
	t.Helper()
	dir = t.TempDir()
	for name, text := range map[string]string{"drives.yaml": drives, "pump.csv": points()} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	b = newBench(t, "", size)
	if found, err := b.doc.Open(filepath.Join(dir, "drives.yaml")); err != nil || circuit.AnyStops(found) {
		t.Fatal(err, found)
	}
	b.solved()
	return b, dir
}

// drawn waits until the picture in the panel is drawn.
func (b *bench) drawn() {
	b.t.Helper()
	g := b.s.panel.gallery
	for end := time.Now().Add(20 * time.Second); len(g.list) > 0 && !g.picture.Ready(); time.Sleep(5 * time.Millisecond) {
		b.win.Canvas().Capture()
		if time.Now().After(end) {
			b.t.Fatal("the picture is not drawn")
		}
	}
}

// tall shows the whole panel of a block and draws it: to memory, and where pictures are
// asked for to be looked at. No row may be left without room.
func (b *bench) tall(circuit int, block, name string) {
	b.Select(circuit, block)
	for range 3 {
		b.win.Resize(fyne.NewSize(1201*widgets.Scale(), b.s.panel.list.MinSize().Height/panelShare+400*widgets.Scale()))
		b.win.Resize(fyne.NewSize(1200*widgets.Scale(), b.s.panel.list.MinSize().Height/panelShare+400*widgets.Scale()))
	}
	b.drawn()
	b.picture(name)
	list := b.s.panel.list
	for _, r := range b.s.panel.rows {
		if o := r.object(); o.Size().Height < o.MinSize().Height-1 || o.Position().Y+o.Size().Height > list.Size().Height+1 {
			b.t.Errorf("%s: a row at %g is %g high, needs %g, in a list %g high", block, o.Position().Y, o.Size().Height, o.MinSize().Height, list.Size().Height)
		}
	}
}

// filled checks that every row of a block has a title, and a value, a default or a hint; that the block has its year
// and, at a displacement machine, a picture.
func (b *bench) filled(picture bool) {
	b.t.Helper()
	p := b.s.panel
	if len(p.rows) == 0 {
		b.t.Errorf("%s has no rows", b.block)
	}
	for _, r := range p.rows {
		switch r := r.(type) {
		case *numberRow:
			if r.title.Text == "" || r.field.Text+r.field.PlaceHolder+r.note.Text == "" || r.field.Bad() {
				b.t.Errorf("%s: the row %s shows %q", b.block, r.key(), r.field.Text)
			}
		case *choiceRow:
			if r.title.Text == "" || r.sel.Selected == "" {
				b.t.Errorf("%s: nothing is chosen in the row %s", b.block, r.key())
			}
		}
	}
	if !p.year.figure.Visible() || p.gallery.content.Visible() != picture {
		b.t.Errorf("%s: year %v, picture %v", b.block, p.year.figure.Visible(), p.gallery.content.Visible())
	}
}

func TestMachinePanels(t *testing.T) {
	b, _ := openDrives(t, fyne.NewSize(1200, 590))
	for _, c := range b.Solution().Circuits {
		for _, f := range c.Findings {
			if f.Level == circuit.Stops {
				t.Fatalf("%s: %s", c.Circuit.Name, f.Text)
			}
		}
	}
	for _, x := range []struct {
		at      int
		block   string
		picture bool
	}{{0, "P1", true}, {0, "M1", false}, {0, "E1", false}, {0, "P2", true}, {0, "H1", true}, {1, "FC1", false}, {1, "M1", false}, {1, "P1", true}} {
		b.tall(x.at, x.block, fmt.Sprintf("panel-%d-%s", x.at, x.block))
		b.filled(x.picture)
	}
	for _, s := range circuit.Sections {
		b.s.panel.expanded[s] = true
	}
	b.theme(true, 1.5)
	b.tall(0, "P1", "panel-all-dark-150")
	b.filled(true)
	b.tall(0, "M1", "panel-all-M1-dark-150")
	b.filled(false)
	b.s.panel.gallery.choose(b.s.panel.gallery.choice.Options[0])
	b.tall(0, "P2", "panel-all-P2-dark-150")
	b.filled(true)
}

// row finds a row of the panel by the key of its parameter.
func (b *bench) row(key string) row {
	b.t.Helper()
	for _, r := range b.s.panel.rows {
		if k, ok := r.(interface{ key() string }); ok && k.key() == key {
			return r
		}
	}
	b.t.Fatalf("the panel shows no row %s", key)
	return nil
}

// Defaults that follow from a family follow it when it is changed, and go back when it is taken out.
func TestFamilyMovesTheDefaults(t *testing.T) {
	b, _ := openDrives(t, window)
	b.Select(1, "P1")
	b.s.panel.showParameter("slip")
	seen := map[string]string{}
	for _, family := range []string{"external_gear", "vane", none} {
		b.row("family").(*choiceRow).sel.SetSelected(family)
		b.pump()
		block := b.doc.File().Circuits[1].Block("P1")
		if got := block.Word("family"); got != strings.Trim(family, none) {
			t.Fatalf("chosen %q, the file has %q", family, got)
		}
		v, _, _ := circuit.KindNamed("pump").Value(block, "slip")
		r := b.field("slip")
		if want := r.number(v.SI, r.unitNow()); r.field.PlaceHolder != want || r.field.Text != "" || seen[want] != "" {
			t.Errorf("%s: the slip stands as %q, the catalog has %q", family, r.field.PlaceHolder, want)
		}
		if family != none && !strings.Contains(r.note.Text, "best point") || r.origin.Selected != string(v.Origin) {
			t.Errorf("%s: the slip is said to be %q, origin %q", family, r.note.Text, r.origin.Selected)
		}
		seen[r.field.PlaceHolder] = family
	}
	if b.row("family").(*choiceRow).sel.Selected != none {
		t.Error("a family that was taken out still stands there")
	}
}

// Measured points are typed, chosen beside the audit file, and dropped; a file elsewhere is refused with what to do.
func TestMeasuredPointsInThePanel(t *testing.T) {
	b, dir := openDrives(t, window)
	b.Select(0, "P1")
	r := b.row("points").(*fileRow)
	if r.field.Text != "pump.csv" || !r.drop.Visible() {
		t.Fatalf("the points stand as %q", r.field.Text)
	}
	elsewhere := filepath.Join(t.TempDir(), "pump.csv")
	for path, want := range map[string]string{elsewhere: "copy it to " + dir, filepath.Join(dir, "none.csv"): "none.csv"} {
		r.handed(r.chosen(path))
		if !strings.Contains(r.note.Text, want) || b.doc.File().Circuits[0].Block("P1").Word("points") != "pump.csv" {
			t.Errorf("%s: said %q", path, r.note.Text)
		}
	}
	b.s.panel.expanded[circuit.Coefficients] = true
	b.s.panel.rebuildHere()
	if r := b.field("slip"); r.origin.Selected != string(circuit.Measured) || !strings.Contains(r.note.Text, "20 points of pump.csv") {
		t.Errorf("the slip of measured points: %q, %q", r.origin.Selected, r.note.Text)
	}
	b.s.panel.showParameter("points_viscosity")
	b.field("points_viscosity").takeOut()
	b.pump()
	r = b.row("points").(*fileRow)
	r.drop.do()
	b.pump()
	if got := b.doc.File().Circuits[0].Block("P1"); got.Word("points") != "" || r.field.Text != "" || r.drop.Visible() {
		t.Errorf("after drop: %q, the field %q: %s", got.Word("points"), r.field.Text, r.note.Text)
	}
	r.handed(r.chosen(filepath.Join(dir, "pump.csv")))
	b.pump()
	if b.doc.File().Circuits[0].Block("P1").Fit == nil || r.field.Text != "pump.csv" {
		t.Errorf("chosen again: %q, %s", r.field.Text, r.note.Text)
	}
}

// An audit without a file has no place for measured points.
func TestPointsNeedASavedAudit(t *testing.T) {
	b := newBench(t, press, window)
	b.Select(0, "P1")
	b.s.panel.showParameter("points")
	r := b.row("points").(*fileRow)
	r.field.SetText("pump.csv")
	r.field.OnSubmitted("pump.csv")
	if !r.field.Bad() || !strings.Contains(r.note.Text, "save the audit first") {
		t.Errorf("said %q", r.note.Text)
	}
}

// Limits, year and picture of a machine show what report and gates have, both circuits side by side, and open.
func TestWhatIsAskedOfAMachine(t *testing.T) {
	b, _ := openDrives(t, window)
	b.comma = true
	b.Select(1, "M1")
	var shown strings.Builder
	for _, o := range b.s.panel.asked.content.Objects {
		if l, ok := o.(*widgets.Text); ok {
			shown.WriteString(l.DumpText() + "\n")
		}
	}
	n := 0
	for _, g := range b.Solution().Circuits[1].Duties[0].Gates {
		if g.Block != "M1" {
			continue
		}
		n++
		value, limit, passed := audit.GateText(g)
		for _, want := range []string{upper(g.Name), value, limit, passed, g.Reason} {
			if !strings.Contains(shown.String(), b.Local(want)) {
				t.Errorf("%q is not shown in\n%s", want, shown.String())
			}
		}
	}
	if n < 2 {
		t.Errorf("%d gates", n)
	}
	y, r := b.s.panel.year, b.Report()
	if len(y.heads) != 2 {
		t.Fatalf("set side by side: %v", y.heads)
	}
	for i, l := range y.lines {
		for k := range y.heads {
			if want := r.Circuits[k].Machine("M1").Figures[i]; l.figures[k] != want {
				t.Errorf("%s: %v, the report has %v", l.name, l.figures[k], want)
			}
		}
	}
	y.figure.Tapped(widgets.Part{Name: y.lines[2].name + "/" + y.heads[1]}, 0, 0)
	if len(b.explained) != 1 || b.explained[0] != y.lines[2].figures[1] {
		t.Errorf("a click opens %v", b.explained)
	}
	b.Select(0, "V1")
	if b.s.panel.year.figure.Visible() || b.s.panel.gallery.content.Visible() || b.s.panel.links.Visible() {
		t.Error("a valve is shown as a machine")
	}
}

// The picture of a machine is drawn apart from the window's goroutine, changes with the choice, and opens large.
func TestPictureOfAMachine(t *testing.T) {
	b, _ := openDrives(t, fyne.NewSize(1200, 2400))
	b.Select(0, "P1")
	g := b.s.panel.gallery
	if got := g.choice.Options; len(got) != 2 {
		t.Fatalf("pictures of a fixed pump with points: %v", got)
	}
	if g.picture.Ready() {
		t.Error("drawn before it was shown")
	}
	b.win.Resize(fyne.NewSize(1201, 2401))
	b.drawn()
	first := b.win.Canvas().Capture()
	g.choose(g.choice.Options[1])
	b.drawn()
	if second := b.win.Canvas().Capture(); sameImage(first, second) {
		t.Error("another picture looks the same")
	}
	g.open()
	if len(b.kept) != 1 {
		t.Fatal("no dialog opened")
	}
	b.kept[0].Hide()
	b.Select(0, "P2")
	if got := g.choice.Options; len(got) != 2 || got[0] != "Efficiency over setting" {
		t.Errorf("pictures of a pump that strokes back: %v", got)
	}
}

func sameImage(a, b image.Image) bool {
	for y := a.Bounds().Min.Y; y < a.Bounds().Max.Y; y++ {
		for x := a.Bounds().Min.X; x < a.Bounds().Max.X; x++ {
			if a.At(x, y) != b.At(x, y) {
				return false
			}
		}
	}
	return true
}
