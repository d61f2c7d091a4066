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
