package audit

import (
	"bytes"
	"fmt"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/recording"
	"barlitre/machines"
)

// measured reads the measured points of a machine and fits its law to them.
func (r *reader) measured(s scope, b *circuit.Block, kind *circuit.Kind, n *yaml.Node) {
	table, name := r.beside(s, n, "points")
	full, ok := b.Values["points_displacement"] // of another machine than the block
	if !ok {
		full, ok = b.Values["displacement"]
	}
	if table == nil || !ok || full.SI <= 0 {
		return // said already, or said by the check
	}
	got, _, err := machines.ReadPoints(table.asWritten(), table.Lines(), full.SI)
	if err != nil {
		r.bad(s, n, "points", "%s: %v", name, err)
		return
	}
	fluid := machines.Fluid{Rho: machines.DefaultDensity15, Bulk: machines.DefaultBulkModulus}
	if c, err := r.file.Conditions(); err == nil {
		fluid.Rho, fluid.Bulk, fluid.Air = c.Density, c.BulkModulus, c.Air
	}
	mu, _, _ := kind.Value(b, "points_viscosity")
	fluid.Mu = mu.SI
	if fluid.Mu <= 0 {
		return // said by the check
	}
	if b.Fit, err = machines.FitPoints(got.Points, machines.FitOptions{D: full.SI, Fluid: fluid}); err != nil {
		r.bad(s, n, "points", "%s: %v; give more points, or the coefficients", name, err)
	}
}

// FitTable fits a loss law to a table of measured points: the text of a CSV file as recording.ReadTable and
// machines.ReadPoints take it. name is for messages; full is the displacement at full setting [m³/rad], 0 for the largest
// in the table, and comes back.
func FitTable(name string, data []byte, full float64, oil machines.Fluid) (*machines.Measured, float64, *machines.Fit, error) {
	table, faults := recording.ReadTable(name, bytes.NewReader(data))
	if table == nil {
		return nil, full, nil, faults[0]
	}
	got, full, err := machines.ReadPoints(pointColumns(table), table.Lines(), full)
	if err != nil {
		return nil, full, nil, fmt.Errorf("%s: %w", name, err)
	}
	f, err := machines.FitPoints(got.Points, machines.FitOptions{D: full, Fluid: oil})
	if err != nil {
		return nil, full, nil, fmt.Errorf("%s: %w; give more points", name, err)
	}
	return got, full, f, nil
}

// pointColumns hands a table over to the reader of measured points.
func pointColumns(t *recording.Table) []machines.Column {
	var out []machines.Column
	for _, c := range t.Columns {
		out = append(out, machines.Column{Name: c.Name, Unit: c.Unit, Values: c.Values})
	}
	return out
}
