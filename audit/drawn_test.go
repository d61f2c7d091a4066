package audit_test

import (
	"encoding/json"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit"
)

// TestDrawnTrials reads what the command line computed of trial circuits that a script has
// drawn in the window from nothing, and holds them to the independent calculation with
// scipy, trial circuits C1 and C4, as TestTrialCircuitEnergies does its files. The window
// leaves the instants of stopping and setting off in, which moves single losses of C1 and C4 by less than
// the tolerance. BARLITRE_DRAWN names the folder with c1.json and c4.json.
func TestDrawnTrials(t *testing.T) {
	dir := os.Getenv("BARLITRE_DRAWN")
	if dir == "" {
		t.Skip("BARLITRE_DRAWN names no folder")
	}
	read := 0
	for i, name := range trials {
		data, err := os.ReadFile(filepath.Join(dir, name+".json"))
		if os.IsNotExist(err) {
			continue
		}
		var r audit.Result
		if err == nil {
			err = json.Unmarshal(data, &r)
		}
		if err != nil || len(r.Circuits) != 1 || len(r.Circuits[0].Duties) != 1 {
			t.Fatalf("%s: %v; %d circuits", name, err, len(r.Circuits))
		}
		read++
		got := drawnEnergies(r.Circuits[0].Duties[0].Energy)
		for _, row := range trialEnergies {
			if want := row.want[i]; !math.IsNaN(want) && !strings.HasPrefix(row.key, "shaft") { // shaft work is no row of the result
				near(t, name+" "+row.key+" [kJ]", got[row.key], want, trialTolerance, 1e-5)
			}
		}
	}
	if read == 0 {
		t.Errorf("%s holds no result", dir)
	}
}

// drawnEnergies lists what a result holds [kJ], as energies does of a balance.
func drawnEnergies(e audit.EnergyResult) map[string]float64 {
	m := map[string]float64{"supply in": e.SupplyIn, "returned": e.Returned, "net": e.SupplyIn - e.Returned,
		"work positive": e.WorkPositive, "work negative": e.WorkNegative, "stored": e.Stored, "heat to oil": e.HeatToOil}
	for _, l := range e.Losses {
		m[l.Block+" "+l.Kind] += l.J
	}
	for k := range m {
		m[k] /= 1e3
	}
	return m
}
