package audit

import (
	"testing"

	"barlitre/circuit"
)

// Every kind that loses energy belongs to a group, so that no table says "other".
func TestEveryKindHasAGroup(t *testing.T) {
	for _, k := range circuit.Catalog() {
		c := &circuit.Circuit{Blocks: []circuit.Block{{ID: "X", Kind: k.Name}}}
		for _, l := range k.Losses {
			if g := groupOf(c, LossRow{Block: "X", Kind: l.Name}); g == otherGroup {
				t.Errorf("%s, %s is in no group", k.Name, l.Name)
			}
		}
	}
}

// What a relief valve lets round while it is vented unloads the pump: it is no spill.
func TestVentedReliefUnloads(t *testing.T) {
	c := &circuit.Circuit{Blocks: []circuit.Block{{ID: "RV1", Kind: "relief"}}}
	for _, l := range circuit.KindNamed("relief").Losses {
		want := reliefGroup
		if l.Name != "relief spill" {
			want = aroundGroup
		}
		if g := groupOf(c, LossRow{Block: "RV1", Kind: l.Name}); g != want {
			t.Errorf("%s is told with %s", l.Name, g)
		}
	}
}
