package figures

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/machines/units"
	"barlitre/samples"
)

// The band lies where the numbers are, and labels keep apart at the widths of panel, window and paper.
func TestServiceFigure(t *testing.T) {
	data, err := samples.Read("transfer-station.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, _ := audit.Parse(data, nil, "transfer-station.yaml")
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	for _, v := range s.Circuits[1].Services {
		for _, system := range []units.System{units.Metric, units.US, units.SI} {
			fig, ok := ServiceOf(v, system)
			if !ok {
				t.Fatalf("%s: no figure", v.Block)
			}
			if band := fig.Plot.Lanes[0].Series[0]; !strings.Contains(band.Name, "assumed") || band.Base == nil {
				t.Errorf("band %q", band.Name)
			}
			for _, w := range []float64{250, 400, 900} {
				r := pen.NewRecorder()
				h := fig.Height(w)
				fig.Draw(r, w, h, Light)
				checkLabels(t, v.Block, r, w, h)
			}
		}
	}
}

// A band is a closed area between its two courses, and breaks where one is missing.
func TestBand(t *testing.T) {
	nan := math.NaN()
	p := Plot{Axis: "x", Lanes: []Lane{{Unit: "%", Range: [2]float64{0, 100}, Series: []Series{
		{Name: "band", X: []float64{0, 1, 2, 3, 4, 5}, Y: []float64{60, 60, nan, 80, 80, 80}, Base: []float64{40, 40, 40, 20, 20, 20}, Role: RoleGain},
		{Name: "line", X: []float64{0, 5}, Y: []float64{50, 50}}}}}}
	r := pen.NewRecorder()
	area := p.Draw(r, 400, 200, Light)
	bands := 0
	for _, s := range r.Shapes() {
		lo, hi := s.Bounds()
		if s.Fill.A == bandTint && lo.Y >= area.Lanes[0].Y { // above the lane is the legend
			bands++
			if bands == 1 && (lo.Y != area.YAt(0, 60) || hi.Y != area.YAt(0, 40)) {
				t.Errorf("the first part lies from %g to %g", lo.Y, hi.Y)
			}
		}
	}
	if bands != 2 {
		t.Errorf("%d parts of the band", bands)
	}
}
