package audit

import (
	"bytes"
	"context"
	"encoding/json"
	"math"
	"strings"
	"testing"
)

// A cooler that is drawn says where the cooler stands, unless the section does; the flow of an off-line loop is that of its pump.
func TestDrawnCoolerIsThePlace(t *testing.T) {
	const cooler = "    CL1: {kind: cooler, nominal_flow: 60 L/min}\n    T9: {kind: tank}\n"
	const loop = "    T8: {kind: tank}\n    M9: {kind: electric_motor, rated_power: 0.55 kW, efficiency: 0.8, speed: 1450 rpm}\n    P9: {kind: pump, displacement: 20 cm3/rev}\n"
	for _, x := range []struct{ name, without, blocks, lines, want string }{
		{"case drain", "  cooler_place: return\n", cooler, "  - P1.D - CL1.A\n  - CL1.B - T9.T\n", placeDrain},
		{"the section says otherwise", "", cooler, "  - P1.D - CL1.A\n  - CL1.B - T9.T\n", ""},
		{"return line, behind its filter", "  cooler_place: return\n", cooler, "  - F1.B - CL1.A\n  - CL1.B - T9.T\n", placeReturn},
		{"loop", "  cooler_place: return\n", cooler + loop, "  - M9.shaft - P9.shaft\n  - T8.T - P9.S\n  - P9.P - CL1.A\n  - CL1.B - T9.T\n", placeOffLine},
	} {
		f, found := Read("../samples/baling-press.yaml")
		if f == nil {
			t.Fatal(found)
		}
		text := strings.ReplaceAll(string(f.Bytes()), x.without, "")
		text = strings.Replace(text, "  blocks:\n", "  blocks:\n"+x.blocks, 1)
		if strings.Contains(x.lines, "F1.B") {
			text = strings.Replace(text, "  - F1.B - T3.T\n", "", 1)
			text = strings.Replace(text, "    T3: {kind: tank, at: [53, 48]}\n", "", 1)
		}
		text = strings.Replace(text, "  lines:\n", "  lines:\n"+x.lines, 1)
		f.Replace([]byte(text))
		s, err := Solve(context.Background(), f, Options{})
		if err != nil {
			t.Fatal(err)
		}
		c := s.Circuits[0]
		h := c.Warmth
		if h == nil || h.Week == nil || h.Section.Drawn.Place != x.want {
			t.Errorf("%s: %+v, %v", x.name, h, c.Findings)
			continue
		}
		said := false
		for _, f := range c.Findings {
			said = said || strings.Contains(f.Text, "where CL1 is drawn")
		}
		if said != (x.want != "") {
			t.Errorf("%s: the report says of the place: %t", x.name, said)
		}
		if x.want != placeOffLine {
			continue
		}
		// 20 cm³ at some 1450 rpm less slip; its motor is a block, so that no pump is booked beside it.
		if q := h.Plant.Cooler.LoopFlow * 60e3; q < 26 || q > 30 || h.Plant.Cooler.LoopPower != 0 {
			t.Errorf("%s: %g L/min, %g W", x.name, q, h.Plant.Cooler.LoopPower)
		}
	}
}

// The results hold the temperatures of the study, and null where there is none.
func TestTemperaturesInResults(t *testing.T) {
	s := sampleWith(t, "handling-machine.yaml", nil)
	var buf bytes.Buffer
	if err := s.Result().Write(&buf); err != nil {
		t.Fatal(err)
	}
	var r Result
	if err := json.Unmarshal(buf.Bytes(), &r); err != nil {
		t.Fatal(err)
	}
	for i, c := range s.Circuits {
		w, h := r.Circuits[i].Warmth, c.Warmth
		if w == nil || float64(w.Running) != h.Week.Ran || len(w.Needed) != 3 || len(w.Checks) != len(h.Checks) || float64(w.Installed) != h.Rate() {
			t.Fatalf("%+v", w)
		}
		top, _ := h.Hot.Highest()
		if float64(w.HotDay) != top || !(w.Highest <= w.HotDay) || math.Abs(float64(w.DrawnStated)*kWh-c.unbooked().drawnByMachine()) > 0.01*float64(w.DrawnStated)*kWh {
			t.Errorf("%s: hot day %g, ordinary %g, drawn %g kWh", c.Circuit.Name, w.HotDay, w.Highest, w.DrawnStated)
		}
	}
	if w := s.warmthResult(nil); w != nil {
		t.Error("a circuit without tank has temperatures")
	}
}

// drawnByMachine is the year without cooling [J].
func (c *CircuitRun) drawnByMachine() float64 { return year(c.Duties, nil, 0).Drawn.Total() }
