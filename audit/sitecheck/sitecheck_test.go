package sitecheck_test

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/sitecheck"
	"barlitre/machines/units"
	"barlitre/samples"
)

func file(t *testing.T, name string) *audit.File {
	t.Helper()
	data, err := samples.Read(name)
	if err != nil {
		data, err = samples.ReadStarter(name)
	}
	if err != nil {
		t.Fatal(err)
	}
	f, found := audit.Parse(data, nil, "")
	if f == nil {
		t.Fatal(found)
	}
	f.Circuits = f.Circuits[:1]
	return f
}

var cache = &sitecheck.Cache{}

func plan(t *testing.T, f *audit.File) *sitecheck.Plan {
	t.Helper()
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	p, err := sitecheck.NewPlan(context.Background(), s, s.Circuits[0], sitecheck.Options{Cache: cache})
	if err != nil || p == nil {
		t.Fatal(p, err)
	}
	return p
}

// readOff reads a machine that is like f but for what is set: what gauges of 3 % would show there.
func readOff(t *testing.T, name string, set []string, noise float64) []audit.Reading {
	t.Helper()
	f := file(t, name)
	for _, s := range set {
		target, quantity, _ := strings.Cut(s, "=")
		if err := f.Set(target, quantity); err != nil {
			t.Fatal(err)
		}
	}
	f.Circuits = f.Circuits[:1]
	p := plan(t, f)
	r := rand.New(rand.NewPCG(4, 2))
	var out []audit.Reading
	for _, pt := range p.Points {
		for _, s := range sitecheck.States() {
			v := p.Sound[s.Name+"."+pt.Name].Mean
			if math.IsNaN(v) {
				continue
			}
			x := audit.Reading{State: s.Name, Point: pt.Name}
			x.SI = v * (1 + noise*(2*r.Float64()-1))
			if pt.Dim == units.Temperature {
				x.SI = v
			}
			out = append(out, x)
		}
	}
	return out
}

// The readings of a faulty machine, with the scatter of gauges and in a strength that was not tried, name its fault; those of a
// sound one agree.
func TestCompareNamesTheFault(t *testing.T) {
	for _, c := range []struct {
		of   string
		set  []string
		want string
	}{
		{"quayside-winch.yaml", nil, ""},
		{"baling-press.yaml", nil, ""},
		{"transfer-station.yaml", nil, ""},
		{"ramp-carrier.yaml", nil, ""},
		{"handling-machine.yaml", nil, ""},
		{"quayside-winch.yaml", []string{"As found/RV1.crack=195 bar"}, "RV1 set below the compensator of P1"},
		{"quayside-winch.yaml", []string{"As found/P1.wear=3.6"}, "P1 worn"},
		{"handling-machine.yaml", []string{"As found/P1.margin=40 bar"}, "margin of P1 turned up"},
		{"transfer-station.yaml", []string{"As found/P1.wear=3.5"}, "P1 worn"},
		{"baling-press.yaml", []string{"As found/F1.nominal_drop=7 bar"}, "element of F1 full"},
		{"baling-press.yaml", []string{"As found/V1.flow_centre=26 L/min"}, "V1 does not come to its centre"},
		{"counterbalance-lift.yaml", []string{"RV1.vented=50 bar"}, "RV1 is not vented at rest"},
		{"closed-circuit-winch.yaml", []string{"CP1.charge=40 bar"}, "charge relief valve of CP1 turned up"},
	} {
		t.Run(fmt.Sprint(c.of, c.set), func(t *testing.T) {
			v := plan(t, file(t, c.of)).Compare(readOff(t, c.of, c.set, 0.03))
			got := ""
			if v.Fault != nil {
				got = v.Fault.Name
			}
			if got != c.want {
				t.Errorf("named %q, want %q: %s", got, c.want, v.Text)
			}
			if c.want == "" && !strings.Contains(v.Text, "agrees") {
				t.Error(v.Text)
			}
		})
	}
}

// Idle power far above the model with the pump at its relief valve, and nothing else read: the example of a first check.
func TestTwoReadingsAreEnoughForAGuess(t *testing.T) {
	all := readOff(t, "quayside-winch.yaml", []string{"As found/RV1.crack=190 bar"}, 0)
	var few []audit.Reading
	for _, r := range all {
		if r.State == "idling" && (r.Point == "M1.power" || r.Point == "P1.pressure") {
			few = append(few, r)
		}
	}
	v := plan(t, file(t, "quayside-winch.yaml")).Compare(few)
	if v.Fault == nil || v.Fault.Name != "RV1 set below the compensator of P1" || !strings.Contains(v.Text, "guess") {
		t.Errorf("%+v", v)
	}
	if len(few) != 2 || !strings.Contains(v.Readings[0].Words, "times the model") {
		t.Errorf("%+v", v.Readings)
	}
}

// A reversed clamp takes away a third of the reading and more; no fault of the circuit does that alone.
func TestReversedClamp(t *testing.T) {
	all := readOff(t, "quayside-winch.yaml", nil, 0)
	for i, r := range all {
		if r.Point == "M1.power" {
			all[i].SI /= 3
		}
	}
	if v := plan(t, file(t, "quayside-winch.yaml")).Compare(all); v.Fault != nil || !strings.Contains(v.Text, "clamp") {
		t.Errorf("%+v", v)
	}
}

// Gauges reach 1.5 times the highest pressure and are of a customary range: EN 837-1 (from memory).
func TestGaugeRanges(t *testing.T) {
	for _, name := range samples.Names() {
		p := plan(t, file(t, name))
		if len(p.Points) < 4 || len(p.Points) > 10 {
			t.Errorf("%s: %d points", name, len(p.Points))
		}
		for _, pt := range p.Points {
			if pt.Caution == "" || pt.Gauge == "" || pt.Rate == "" || pt.Place == "" {
				t.Errorf("%s: %+v", name, pt)
			}
			if pt.Dim != units.Pressure || !strings.HasPrefix(pt.Gauge, "0 to ") {
				continue
			}
			var top float64
			if _, err := fmt.Sscanf(pt.Gauge, "0 to %g", &top); err != nil {
				t.Fatal(err)
			}
			if high := p.Sound["working."+pt.Name].High / units.Bar; top < 1.5*high || top > 16*math.Max(high, 25) {
				t.Errorf("%s, %s: %s for %g bar", name, pt.Name, pt.Gauge, high)
			}
		}
	}
}

// Typing a reading solves nothing again.
func TestReadingsDoNotSolve(t *testing.T) {
	f := file(t, "quayside-winch.yaml")
	first := plan(t, f)
	if err := f.SetReading("idling", "M1.power", "5 kW"); err != nil {
		t.Fatal(err)
	}
	f.Circuits = f.Circuits[:1]
	if plan(t, f) != first {
		t.Error("the plan was made anew")
	}
}
