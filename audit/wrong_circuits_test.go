package audit

import (
	"path/filepath"
	"strings"
	"testing"

	"barlitre/circuit"
)

// wrongCircuits lists what each circuit of testdata/wrong_circuits must be refused for.
// All of them read well; each is drawn wrongly in one place.
var wrongCircuits = map[string]struct{ block, text string }{
	"check_wrong_way":             {"C1", "it must move, but the oil at its port A has no way out"},
	"closed_loop_without_charge":  {"F1", "no way to a tank or to a low-pressure source"},
	"floating_oil":                {"O1", "the oil at O1.A, O2.A, O1.B, O2.B has no way to a tank"},
	"held_by_pump_behind_valve":   {"C1", "held by the pump, but V1 throttles it; let the valve or a brake hold it (hold: valve or brake)"},
	"load_sensing_without_signal": {"P1", "needs a pilot line at its port LS"},
	"motion_load_and_command":     {"C1", "give exactly two of them"},
	"no_actuator":                 {"V1", "moves axis ram, which V1 follows; give a cylinder or motor that axis (axis: ram)"},
	"no_drive":                    {"P1", "port shaft (drive shaft) is not connected"},
	"nothing_follows":             {"V1", "V1 has to follow axis ram"},
	"open_return":                 {"F1", "port B (clean side) is not connected"},
	"port_in_two_lines":           {"V1", "write them as one line, or put a junction between"},
	"relief_without_setting":      {"RV1", "give its setting: the pressure at a flow (set, set_flow) or where it begins to open (crack)"},
	"relief_without_tank":         {"RV1", "port T (outlet) is not connected"},
	"rod_above_bore":              {"C1", "is not below the bore"},
	"rod_side_plugged":            {"C1", "it must move, but the oil at its port B has no way out"},
	"shaft_on_oil":                {"C1", "joins different things: oil (C1.B) and shaft (M1.shaft)"},
	"signal_on_oil":               {"F1", "signal outlet V1.LS stands on an oil line"},
	"source_on_tank":              {"S1", "hold one line at pressures of their own; separate them"},
	"pair_held_differently":       {"C2", "it moves axis ram together with C1, which is held by the valve; give both the same hold"},
	"two_controls":                {"V1", "P1 and V1 all follow axis ram; only one control can answer"},
	"two_drives":                  {"M2", "M1 and M2 each give the same shaft a speed; keep one"},
	"two_pressure_pumps":          {"P2", "both hold the pressure of one line"},
	"two_sources":                 {"S2", "S1 and S2 hold one line"},
	"unknown_port":                {"C1", "line names C1.P"},
	"unloads_with_nothing":        {"", "give a relief valve a vented pressure"},
	"valve_not_fed":               {"V1", "no pump and no pressure source feeds its port P"},
	"wrong_kind_of_axis":          {"C1", "axis ram is rotary"},
}

func TestWrongCircuits(t *testing.T) {
	paths, err := filepath.Glob("testdata/wrong_circuits/*.yaml")
	if err != nil || len(paths) != len(wrongCircuits) {
		t.Fatalf("%d files, %d in the table (%v)", len(paths), len(wrongCircuits), err)
	}
	for _, path := range paths {
		name := strings.TrimSuffix(filepath.Base(path), ".yaml")
		f, found := Read(path)
		if f == nil || circuit.AnyStops(found) {
			t.Errorf("%s: cannot be read: %v", name, found)
			continue
		}
		hit := false
		want := wrongCircuits[name]
		for _, n := range f.Check() {
			hit = hit || (n.Level == circuit.Stops && n.Block == want.block && n.Line > 10 && strings.Contains(n.Text, want.text))
		}
		if !hit {
			t.Errorf("%s: want %+v, got %v", name, want, f.Check())
		}
	}
}
