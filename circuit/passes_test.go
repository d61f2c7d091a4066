package circuit

import "testing"

// Machines and drives turn power; flywheels and gearboxes pass on what they get, and an unknown kind does nothing.
func TestKindsThatPassPower(t *testing.T) {
	want := map[string]Passage{kindElectricMotor: PrimeMover, kindEngine: PrimeMover, kindPump: PumpShaft, kindChargePump: PumpShaft,
		kindSwitched: PumpShaft, kindHydraulicMotor: HydraulicMotor, kindConverter: Inverter}
	for _, k := range Catalog() {
		if b := (&Block{Kind: k.Name}); b.Passes() != want[k.Name] {
			t.Errorf("%s passes %d, want %d", k.Name, b.Passes(), want[k.Name])
		}
	}
	if p := (&Block{Kind: "no such kind"}).Passes(); p != NoPassage {
		t.Errorf("an unknown kind passes %d", p)
	}
}
