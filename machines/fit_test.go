package machines

import (
	"encoding/csv"
	"os"
	"path/filepath"
	"strconv"
	"testing"

	"barlitre/machines/units"
)

// pump57 reads the measured points of a 57 cm³ axial piston pump, which are not part of the project.
func pump57(t *testing.T) []Point {
	t.Helper()
	dir := os.Getenv("BARLITRE_DATA")
	if dir == "" {
		t.Skip("BARLITRE_DATA names no folder with measured pump points")
	}
	f, err := os.Open(filepath.Join(dir, "piston_pump_57cm3_points.csv"))
	if err != nil {
		t.Skip(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []Point
	for i, r := range rows[1:] {
		v := make([]float64, len(r))
		for j := range r {
			v[j], _ = strconv.ParseFloat(r[j], 64)
		}
		out = append(out, Point{W: v[1] * units.RPM, E: v[2] / 57, DP: v[3] * 1e6, Q: v[4] * lpm, T: v[5], Line: i + 2})
	}
	return out
}

func TestExperiment(t *testing.T) {
	pts := pump57(t)
	fluid := Fluid{Mu: 0.04, Rho: 870, Bulk: 1.4e9}
	base := Terms(TermLaminar | TermDead | TermPressure | TermViscous | TermConstant)
	for _, o := range []FitOptions{{Terms: base, Plain: true}, {Terms: base}, {Plain: true}, {}, {Terms: base | TermTurbulent}, {Terms: base | TermCompression}, {Terms: base | TermInertial}} {
		o.D, o.Fluid = 57*cm3, fluid
		f, err := FitPoints(pts, o)
		if err != nil {
			t.Fatal(err)
		}
		t.Logf("%+v rms %.3f held %.3f cond %.1f worst %.3f line %d\n %q", f.Law, 100*f.RMS, 100*f.HeldOut, f.Condition, 100*f.Residual[f.Worst], f.Points[f.Worst].Line, f.Warnings)
	}
}
