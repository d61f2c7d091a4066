package document

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// drawer builds a file by the calls of a document alone, as a user would draw it.
type drawer struct {
	testing.TB
	d *Document
}

func (b drawer) do(err error) {
	b.Helper()
	if err != nil {
		b.Fatal(err)
	}
}

// like draws what another file holds.
func (b drawer) like(f *audit.File) {
	b.Helper()
	b.do(b.d.PutOil(map[string]string{"temperature": f.Oil.Temperature.Text, "density": f.Oil.Density.Text, "viscosity": f.Oil.Viscosity.Text}))
	for target, text := range map[string]string{"title": f.Title, "site.currency": f.Site.Currency, "site.note": f.Site.Note,
		"air.temperature": f.Air.Text, "energy.price": f.Price.Text} {
		b.do(b.d.Edit("Set "+target, func(g *audit.File) error { return g.Put(target, text) }))
	}
	for _, a := range f.Axes {
		b.do(b.d.AddAxis(a.Name, a.Kind))
	}
	for _, e := range f.Circuits {
		b.do(b.d.AddCircuit(e.Name, e.Role))
		b.do(b.d.Set(e.Name+"/pump_at_rest", string(e.PumpAtRest)))
		for i := range e.Blocks {
			b.block(e.Name, &e.Blocks[i])
		}
		for _, l := range e.Lines {
			for _, p := range l.Ports[1:] {
				b.do(b.d.Connect(e.Name, l.Ports[0].String(), p.String()))
			}
		}
	}
	for _, d := range f.Duties {
		b.duty(d)
	}
}

func (b drawer) block(circuitName string, want *circuit.Block) {
	b.Helper()
	id, err := b.d.AddBlock(circuitName, want.Kind, [2]float64{1, 2})
	b.do(err)
	b.do(b.d.Rename(circuitName, id, want.ID))
	at := circuitName + "/" + want.ID + "."
	drawn := b.d.File().Circuit(circuitName).Block(want.ID)
	for key := range drawn.Values {
		if _, ok := want.Values[key]; !ok {
			b.do(b.d.Clear(at + key))
		}
	}
	for key := range drawn.Words {
		if _, ok := want.Words[key]; !ok {
			b.do(b.d.Clear(at + key))
		}
	}
	for key, v := range want.Values {
		b.do(b.d.Set(at+key, v.Text))
	}
	for key, w := range want.Words {
		b.do(b.d.Set(at+key, w.Text))
	}
}

func (b drawer) duty(d *duty.Duty) {
	b.Helper()
	n := len(d.Time)
	b.do(b.d.AddDuty(d.Name, fmt.Sprintf("%g s", d.Time[n-1])))
	for i := 1; i < n-1; i++ {
		b.do(b.d.AddRow(d.Name, i, map[string]string{"t": fmt.Sprintf("%g s", d.Time[i])}))
	}
	for _, t := range d.Tracks {
		name := t.Of + "." + t.What.String()
		unit := map[string]string{"speed": "m/s", "load": "N", "command": ""}[t.What.String()]
		for _, a := range b.d.File().Axes {
			if a.Name == t.Of && a.Kind == duty.Rotary && unit != "" {
				unit = map[string]string{"speed": "rad/s", "load": "N m"}[t.What.String()]
			}
		}
		b.do(b.d.AddTrack(d.Name, name, unit))
		for i, v := range t.Values {
			b.do(b.d.SetPoint(d.Name, name, i, fmt.Sprintf("%g", v)))
		}
	}
	for key, value := range map[string]string{"hours": fmt.Sprintf("%g h", d.Hours/3600), "step": fmt.Sprintf("%g ms", d.Step*1e3), "repeats": yesNo(d.Repeats), "instants": yesNo(!d.Sampled)} {
		b.do(b.d.SetDuty(d.Name, key, value))
	}
	for _, p := range d.Phases {
		b.do(b.d.SetPhase(d.Name, p.Name, fmt.Sprintf("%g s", p.From)))
	}
}

func yesNo(x bool) string {
	if x {
		return "yes"
	}
	return "no"
}

// energies lists what the balance of a run holds, by name [J].
func energies(c *audit.CircuitRun, i int) map[string]float64 {
	b := c.Duties[i].Balance
	out := map[string]float64{"drawn": b.SupplyIn.Total(), "returned": b.Returned.Total()}
	for _, r := range append(append([]audit.LossRow{}, b.Losses...), b.Stored...) {
		out[r.Block+" "+r.Kind] = r.Energy.Total()
	}
	for _, w := range b.Work {
		out["work of "+w.Axis] = w.Positive.Total() + w.Negative.Total()
	}
	return out
}

// An empty audit comes by calls alone to each trial circuit, with the energies of its file.
func TestTrialsDrawnFromEmpty(t *testing.T) {
	for i := 1; i <= 6; i++ {
		t.Run(fmt.Sprintf("C%d", i), func(t *testing.T) {
			want, found := audit.Read(fmt.Sprintf("../../audit/testdata/trials/c%d.yaml", i))
			if want == nil || circuit.AnyStops(found) {
				t.Fatal(found)
			}
			b := newBench(t, quick, Options{})
			check(t, b.OpenEmpty())
			drawer{t, b.Document}.like(want)
			got := b.File()
			if stops := got.Check(); circuit.AnyStops(stops) {
				t.Fatalf("%v\n%s", stops, got.Bytes())
			}
			a, err := audit.Solve(context.Background(), want, audit.Options{})
			check(t, err)
			z, err := audit.Solve(context.Background(), got, audit.Options{})
			check(t, err)
			for c := range a.Circuits {
				for k := range a.Circuits[c].Duties {
					sameEnergies(t, energies(a.Circuits[c], k), energies(z.Circuits[c], k))
				}
			}
			for _, ok := b.Undo(); ok; _, ok = b.Undo() {
			}
			if string(b.File().Bytes()) != emptyText {
				t.Errorf("undone to the start it is\n%s", b.File().Bytes())
			}
		})
	}
}

func sameEnergies(t *testing.T, want, got map[string]float64) {
	t.Helper()
	if len(want) != len(got) || want["drawn"] == 0 {
		t.Fatalf("rows %v, want %v", got, want)
	}
	worst := 0.0
	for name, x := range want {
		y, ok := got[name]
		if d := math.Abs(y-x) / want["drawn"]; !ok || !(d <= 1e-9) {
			t.Errorf("%s: %.12g J, want %.12g J", name, y, x)
		} else {
			worst = math.Max(worst, d)
		}
	}
	t.Logf("%d rows, the largest difference is %.2g of the energy drawn", len(want), worst)
}

// Every edit has a name for undo.
func TestDrawingIsUndoneByName(t *testing.T) {
	b := newBench(t, quick, Options{})
	b.openPress(t)
	before := string(b.File().Bytes())
	name := b.File().Circuits[0].Name
	for _, c := range []struct {
		want string
		do   func() error
	}{
		{"Add pump P2", func() error { _, err := b.AddBlock(name, "pump", [2]float64{1, 2}); return err }},
		{"Connect P2.P and RV1.P", func() error { return b.Connect(name, "P2.P", "RV1.P") }},
		{"Disconnect P2.P", func() error { return b.Disconnect(name, "P2.P") }},
		{"Rename P2", func() error { return b.Rename(name, "P2", "MP") }},
		{"Rotate MP", func() error { return b.Rotate(name, 1, "MP") }},
		{"Move MP", func() error { return b.MoveBy(name, [2]float64{1, 1}, "MP") }},
		{"Duplicate 2 blocks", func() error { _, err := b.Duplicate(name, [2]float64{5, 5}, "MP", "RV1"); return err }},
		{"Delete MP", func() error { return b.Delete(name, true, "MP") }},
		{"Copy " + name + " to Third", func() error { return b.CopyCircuit(name, "Third") }},
		{"Add note", func() error { _, err := b.AddNote("Third", "to check: RV1", [2]float64{3, 4}); return err }},
		{"Add axis arm", func() error { return b.AddAxis("arm", duty.Rotary) }},
	} {
		check(t, c.do())
		if got := b.UndoName(); got != c.want {
			t.Errorf("undo is called %q, want %q", got, c.want)
		}
	}
	for _, ok := b.Undo(); ok; _, ok = b.Undo() {
	}
	if string(b.File().Bytes()) != before {
		t.Error("undone to the start the text is not as before")
	}
	if _, err := b.AddBlock("nowhere", "pump", [2]float64{}); err == nil || !strings.Contains(err.Error(), `no circuit "nowhere"`) {
		t.Errorf("got %v", err)
	}
}
