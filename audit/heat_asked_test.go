package audit

import (
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// What is asked for is never less than heat over the difference of the entering temperatures, as the table states it and the
// definition of a cooler's capacity in the trade has it, nor less than the march needs.
func TestCapacityAskedSatisfiesItsFormula(t *testing.T) {
	s := sampleWith(t, "baling-press.yaml", nil)
	differs := false
	for _, c := range s.Circuits {
		for _, n := range c.Warmth.Needs {
			if n.Rate == 0 || n.Fault != "" {
				continue
			}
			formula := n.Heat / (n.Entering - n.Coolant)
			if n.Asked() < formula*(1-1e-12) || n.Asked() < n.Rate {
				t.Errorf("%s, %s: asked %g W/K, by the formula %g, by the march %g", c.Circuit.Name, n.Case, n.Asked(), formula, n.Rate)
			}
			differs = differs || formula > 1.01*n.Rate
		}
	}
	if !differs {
		t.Error("no case in which the two differ: the test tells nothing")
	}
}

// The finding tells of the worst row of the check matrix, as a warning where that is above the alarm.
func TestWorstRowIsTold(t *testing.T) {
	s := sampleWith(t, "quayside-winch.yaml", nil)
	for _, c := range s.Circuits {
		h := c.Warmth
		worst := h.Wanted + 0.05
		for _, k := range h.Checks {
			if !k.Fault && k.Highest > worst {
				worst = k.Highest
			}
			if cell := k.Cell(units.Metric); !k.Fault && k.Highest > 0 && strings.HasPrefix(cell, "▲") != (k.Highest >= h.Alarm) {
				t.Errorf("%s, alarm at %g K: %q", k.Case, h.Alarm, cell)
			}
		}
		if worst <= h.Wanted+0.05 {
			continue
		}
		told, level := "oil at "+printer{system: units.Metric}.degrees(worst), circuit.Note
		if worst >= h.Alarm {
			level = circuit.Caution // the days that the machine has are cooler
			if max(h.Checks[0].Highest, h.Checks[1].Highest) >= h.Alarm {
				level = circuit.Warns
			}
		}
		found := false
		for _, f := range s.warmthRemarks(c) {
			found = found || strings.HasPrefix(f.Text, told) && f.Level == level
		}
		if !found {
			t.Errorf("%s: no %s says %q", c.Circuit.Name, level, told)
		}
	}
}

// A circuit whose walls take all its heat has no sheet, and says so.
func TestNoCoolerNeededHasNoSheet(t *testing.T) {
	s := sampleWith(t, "quayside-winch.yaml", nil)
	h := s.Circuits[0].Warmth
	for i := range h.Needs {
		h.Needs[i].Heat, h.Needs[i].Rate, h.Needs[i].Fault = 0, 0, ""
	}
	if r := s.Requests(units.Metric)[0]; len(r.Groups) > 0 || !strings.HasPrefix(r.Missing, "No cooler is needed") {
		t.Errorf("sheet %+v", r)
	}
}

// A gate whose value is what rounding leaves of nothing asks 0; what the cooling draws is named where losses are summed; the
// range of a payback says what it is the range of.
func TestWordsOfSmallAndSummedFigures(t *testing.T) {
	if asked, _, _ := GateText(circuit.Gate{Value: 1.06e-6, Limit: 200, Unit: units.Preferred(units.Torque, units.Metric), Passed: true}); !strings.HasPrefix(asked, "0") {
		t.Errorf("asked %q", asked)
	}
	s := sampleWith(t, "quayside-winch.yaml", nil)
	r := s.Report(units.Metric)
	d := s.Circuits[0].Duties[0]
	page := dutyPage(printer{system: units.Metric}, d)
	if f := figureNamed(page.Figures, "of that, fan and pumps of the cooling"); f.Value != d.Balance.CoolingDrawn().Total() || f.Value <= 0 {
		t.Errorf("cooling in the losses: %+v", f)
	}
	if len(r.Decisions) > 0 && !strings.Contains(r.Decisions[0].Verdict, "range by its cost alone") {
		t.Errorf("verdict %q", r.Decisions[0].Verdict)
	}
}

// The sentence beside the coolers of a decision names what the request sheet asks for, to the digit; without the section heat
// there is nothing to name.
func TestCoolerOfTheDecisionIsTiedToTheRequest(t *testing.T) {
	s := sampleWith(t, "baling-press.yaml", nil)
	d := s.Report(units.Metric).Decisions[0]
	asked := map[string]string{}
	for _, r := range s.Requests(units.Metric) {
		for _, g := range r.Groups {
			for _, row := range g.Rows {
				asked[r.Circuit+" "+row.Name] = row.Value
			}
		}
	}
	for _, want := range []string{"As found " + asked["As found Capacity asked for"], "Pump-controlled none", "whole heat"} {
		if len(want) <= len("As found ") || !strings.Contains(d.Cooler, want) {
			t.Errorf("%q is not in %q", want, d.Cooler)
		}
	}
	for _, c := range s.Circuits {
		c.Warmth = nil
	}
	if text := s.Report(units.Metric).Decisions[0].Cooler; !strings.Contains(text, "whole heat") || strings.Contains(text, "request") {
		t.Errorf("nothing is known of the tank, and it says %q", text)
	}
}
