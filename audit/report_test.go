package audit

import (
	"bytes"
	"encoding/json"
	"math"
	"reflect"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// keysOf lists the keys of a JSON object.
func keysOf(t *testing.T, v any) map[string]any {
	t.Helper()
	m, ok := v.(map[string]any)
	if !ok {
		t.Fatalf("%T is not an object", v)
	}
	return m
}

func wantKeys(t *testing.T, where string, v any, keys ...string) map[string]any {
	t.Helper()
	m := keysOf(t, v)
	for _, k := range keys {
		if x, ok := m[k]; !ok || x == nil {
			t.Errorf("%s: key %q is missing or null", where, k)
		}
	}
	return m
}

func TestResultKeys(t *testing.T) {
	s := solved(t, "trial_press.yaml", Options{})
	var buf bytes.Buffer
	if err := s.Result().Write(&buf); err != nil {
		t.Fatal(err)
	}
	var v any
	if err := json.Unmarshal(buf.Bytes(), &v); err != nil {
		t.Fatal(err)
	}
	top := wantKeys(t, "top", v, "format", "title", "circuits", "comparisons")
	if top["format"] != "barlitre-result/1" {
		t.Errorf("format %v", top["format"])
	}
	for _, c := range top["circuits"].([]any) {
		cm := wantKeys(t, "circuit", c, "name", "duties", "year", "findings")
		for _, d := range cm["duties"].([]any) {
			dm := wantKeys(t, "duty", d, "name", "hours_per_year", "cycles_averaged", "cycle_s", "time_steps", "energy_J",
				"closure_relative", "peak", "shortfall", "certificate")
			e := wantKeys(t, "energy", dm["energy_J"], "supply_in", "returned", "work_positive", "work_negative", "stored", "heat_to_oil", "losses")
			losses := 0.0
			for _, l := range e["losses"].([]any) {
				losses += wantKeys(t, "loss", l, "block", "kind", "sink", "J")["J"].(float64)
			}
			n := func(k string) float64 { return e[k].(float64) }
			wants(t, "balance of the result file", (n("supply_in")-n("returned")-n("work_positive")-n("work_negative")-n("stored")-losses)/n("supply_in"), 0, 1e-9)
			wantKeys(t, "peak", dm["peak"], "pressure_Pa", "at", "t_s", "upper_estimate", "shaft_W", "supply_W")
			wantKeys(t, "certificate", dm["certificate"], "unbalanced_steps", "worst_flow_m3_s", "worst_force_N", "fallback_steps")
		}
		wantKeys(t, "year", cm["year"], "kWh_drawn", "kWh_returned", "losses", "states", "mean_heat_to_oil_W", "cooler_W_per_K", "energy_cost", "co2_kg")
	}
	wantKeys(t, "comparison", top["comparisons"].([]any)[0], "base", "proposal", "same_duty", "kWh_saved", "saved_share", "payback_years", "published")
}

// What is written is read back the same, with nothing in place of numbers that are not known.
func TestResultReadsBack(t *testing.T) {
	f := readTest(t, "trial_press.yaml")
	f.HasPrice, f.HasCO2, f.HasAir = false, false, false
	for i := range f.Duties {
		f.Duties[i].Hours = 0
	}
	s := &Solution{}
	for _, s = range []*Solution{solved(t, "trial_press.yaml", Options{}), solveFile(t, f)} {
		var a, b bytes.Buffer
		if err := s.Result().Write(&a); err != nil {
			t.Fatal(err)
		}
		var r Result
		d := json.NewDecoder(bytes.NewReader(a.Bytes()))
		d.DisallowUnknownFields()
		if err := d.Decode(&r); err != nil {
			t.Fatal(err)
		}
		if err := r.Write(&b); err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(a.Bytes(), b.Bytes()) {
			t.Error("written again it differs")
		}
	}
	r := s.Result()
	if !math.IsNaN(float64(r.Circuits[0].Year.EnergyCost)) || !math.IsNaN(float64(r.Comparisons[0].Saved)) {
		t.Error("money without a price, or a saving without hours")
	}
}

func TestNumber(t *testing.T) {
	for in, want := range map[float64]string{1.5: "1.5", math.Inf(1): "null", math.Inf(-1): "null"} {
		if b, err := json.Marshal(Number(in)); err != nil || string(b) != want {
			t.Errorf("%g: %s, %v", in, b, err)
		}
	}
	var n Number
	if err := json.Unmarshal([]byte("null"), &n); err != nil || !math.IsNaN(float64(n)) {
		t.Errorf("null: %v, %v", n, err)
	}
}

// Every text of a report says something, in three families of units and without a price.
func TestReportHasNoHoles(t *testing.T) {
	bare := readTest(t, "trial_press.yaml")
	bare.HasPrice, bare.HasCO2, bare.HasAir = false, false, false
	faulty := readTest(t, "trial_press.yaml")
	delete(faulty.Circuits[1].Block("P1").Values, "displacement")
	for _, s := range []*Solution{solved(t, "trial_press.yaml", Options{}), solveFile(t, bare), solveFile(t, faulty)} {
		for _, sys := range []units.System{units.Metric, units.US, units.SI} {
			walk(t, "report", reflect.ValueOf(s.Report(sys)))
		}
	}
}

func walk(t *testing.T, where string, v reflect.Value) {
	switch v.Kind() {
	case reflect.Pointer:
		walk(t, where, v.Elem())
	case reflect.Struct:
		if v.Type() == reflect.TypeOf(Figure{}) && v.FieldByName("Name").String() != "" {
			f := v.Interface().(Figure)
			if f.Text == "" || (f.Text != "n/a" && f.Calculation.Formula == "") {
				t.Errorf("%s: figure without text or formula: %+v", where, f)
			}
		}
		for i := 0; i < v.NumField(); i++ {
			walk(t, where+"."+v.Type().Field(i).Name, v.Field(i))
		}
	case reflect.Slice:
		for i := 0; i < v.Len(); i++ {
			walk(t, where, v.Index(i))
		}
	case reflect.String:
		for _, bad := range []string{"NaN", "Inf", "%!", "\ufffd"} {
			if strings.Contains(v.String(), bad) {
				t.Errorf("%s: %q", where, v.String())
			}
		}
	}
}

func solveFile(t *testing.T, f *File) *Solution {
	t.Helper()
	s, err := Solve(t.Context(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

func TestReportEqualsResult(t *testing.T) {
	s := solved(t, "trial_press.yaml", Options{})
	r, p := s.Result(), s.Report(units.Metric)
	saved := figureNamed(p.Decisions[0].Outcome, "saved a year")
	wants(t, "saved", saved.Value/units.KilowattHour, float64(r.Comparisons[0].Saved), 1e-12)
	wants(t, "cost", figureNamed(p.Circuits[0].Year, "cost of energy a year").Value, float64(r.Circuits[0].Year.EnergyCost), 1e-12)
	wants(t, "heat", figureNamed(p.Circuits[1].Heat, "mean heat to the oil, all running hours").Value, float64(r.Circuits[1].Year.MeanHeat), 1e-12)
	// where the saving comes from adds up to the saving
	sum := 0.0
	for _, g := range s.Comparisons[0].Groups {
		sum += g.Before - g.After
	}
	wants(t, "groups", sum, saved.Value, 1e-8)
}

func TestDefaultsAreNamed(t *testing.T) {
	s := solved(t, "trial_press.yaml", Options{})
	found := map[string]ParameterRow{}
	for _, r := range s.Report(units.Metric).Circuits[0].Parameters {
		found[r.Block+"."+r.Symbol] = r
	}
	if r := found["P1.Cs"]; !r.Default || !strings.HasPrefix(r.Origin, "default: assumed") || r.Note == "" {
		t.Errorf("a default: %+v", r)
	}
	if r := found["RV1.pc"]; r.Default || r.Value != "160 bar" || r.Origin != "not stated" {
		t.Errorf("a typed value: %+v", r)
	}
}

func TestPublishedRange(t *testing.T) {
	s := solved(t, "trial_press.yaml", Options{})
	c := *s.Comparisons[0]
	if !c.Published.Known || !c.Published.Outside || !strings.Contains(c.Published.Explanation, "16") {
		t.Errorf("95 %%: %+v", c.Published)
	}
	for share, outside := range map[float64]bool{0.62: false, 0.3: false, 0.13: true, -0.2: true, 0.7: true} {
		c.SavedShare = share
		if got := published(&c); got.Outside != outside || outside == (got.Explanation == "") {
			t.Errorf("%g: %+v", share, got)
		}
	}
	c.Proposal = c.Base
	if published(&c).Known {
		t.Error("throttled to throttled has no published range")
	}
}

func TestCautionsFollowTheCircuit(t *testing.T) {
	s := solved(t, "trial_press.yaml", Options{})
	topics := func(c *CircuitRun) string {
		var all []string
		for _, x := range c.cautions() {
			all = append(all, x.Topic)
		}
		return strings.Join(all, "; ")
	}
	throttled, pump := topics(s.Circuits[0]), topics(s.Circuits[1])
	for _, c := range []struct {
		list, topic string
		want        bool
	}{{throttled, "Suspended load", true}, {throttled, "Relief valves", true}, {throttled, "Low-pressure source", false},
		{throttled, "Frequency converter", false}, {pump, "Low-pressure source", true}, {pump, "Load-holding valves", true}, {pump, "Pressure raised by area", true}} {
		if strings.Contains(c.list, c.topic) != c.want {
			t.Errorf("%q in %q: want %v", c.topic, c.list, c.want)
		}
	}
	f := readTest(t, "trial_press.yaml")
	f.Circuits[0].PumpAtRest = circuit.Stop
	f.Circuits[0].Blocks = append(f.Circuits[0].Blocks, circuit.Block{ID: "FC1", Kind: "converter"})
	run := &CircuitRun{Circuit: f.Circuits[0].Circuit}
	if got := topics(run); !strings.Contains(got, "Frequency converter") || !strings.Contains(got, "Motor that starts by itself") || strings.Contains(got, "Suspended load") {
		t.Errorf("converter, motor stopped, nothing run: %q", got)
	}
	// rod side shut in: (80/56 mm) pressure rises 1.96 times; published with the same areas
	for _, x := range s.Circuits[0].cautions() {
		if x.Topic == "Pressure raised by area" && !strings.Contains(x.Text, "1.96 ") {
			t.Errorf("area ratio: %q", x.Text)
		}
	}
}
