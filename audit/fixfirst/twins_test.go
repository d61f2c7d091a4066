package fixfirst_test

import (
	"context"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
)

// twin is a sound audit with something wrong put in.
type twin struct {
	of      string
	set     []string    // as -set takes it
	replace [][2]string // in the text, before
	want    []string    // findings by name
}

// twins holds a faulty twin of each sample, and of starters for what no sample has.
var twins = map[string]twin{
	"press, pump worn":             {of: "baling-press", set: []string{"As found/P1.wear=2.5"}, want: []string{"P1: worn pump"}},
	"press, drain measured":        {of: "baling-press", set: []string{"As found/P1.drain_pressure=200 bar", "As found/P1.drain_flow=14 L/min"}, want: []string{"P1: worn pump"}},
	"press, centre blocked":        {of: "baling-press", set: []string{"As found/V1.flow_centre=30 L/min"}, want: []string{"V1: unloading at pressure"}},
	"press, filter full":           {of: "baling-press", set: []string{"As found/F1.nominal_drop=12 bar"}, want: []string{"F1: return or filter loss"}},
	"winch, relief low":            {of: "quayside-winch", set: []string{"As found/RV1.crack=200 bar"}, want: []string{"RV1: relief at or below compensator"}},
	"winch, compensator turned up": {of: "quayside-winch", set: []string{"As found/P1.set_pressure=245 bar"}, want: []string{"RV1: relief at or below compensator"}},
	"winch, two at once":           {of: "quayside-winch", set: []string{"As found/RV1.crack=200 bar", "As found/P1.wear=3"}, want: []string{"RV1: relief at or below compensator", "P1: worn pump"}},
	"handling, margin up":          {of: "handling-machine", set: []string{"As found/P1.margin=45 bar"}, want: []string{"P1: load-sensing margin above need"}},
	"handling, two at once":        {of: "handling-machine", set: []string{"As found/P1.margin=45 bar", "As found/F1.nominal_drop=20 bar"}, want: []string{"P1: load-sensing margin above need", "F1: return or filter loss"}},
	"transfer, relief drifted":     {of: "transfer-station", set: []string{"As found/RV1.crack=140 bar"}, want: []string{"RV1: relief open in normal work"}},
	"transfer, lift too large":     {of: "transfer-station", set: []string{"As found/C1.bore=160 mm", "As found/CB1.setting=40 bar", "As found/P1.displacement=250 cm3/rev", "As found/V1.nominal_flow=250 L/min", "As found/V1.flow_AT=600 L/min", "As found/IC1.nominal_flow=250 L/min", "As found/M1.rated_power=90 kW", "As found/CB1.nominal_flow=300 L/min", "As found/CB1.back_flow=300 L/min", "As found/F1.nominal_flow=700 L/min"}, want: []string{"C1: sized apart from its neighbours"}},
	"press, pump two sizes up":     {of: "baling-press", set: []string{"As found/P1.displacement=140 cm3/rev", "As found/V1.flow_centre=250 L/min", "As found/M1.rated_power=90 kW", "As found/F1.nominal_flow=500 L/min", "As found/L1.diameter=50 mm"}, want: []string{"P1: pump larger than the duty needs"}},
	"carrier, line kinked":         {of: "ramp-carrier", set: []string{"As found/L2.diameter=11 mm"}, want: []string{"L2: line too narrow"}},
	"carrier, oil hot":             {of: "ramp-carrier", set: []string{"oil.temperature=92 C"}, want: []string{"cooler off or dirty"}},
	"press, cooler too small":      {of: "baling-press", set: []string{"heat.cooler_rate=0.03 kW/K"}, want: []string{"cooler off or too small"}},
	"press, no thermostat":         {of: "baling-press", set: []string{"heat.cooler_rate=2 kW/K", "heat.cooler_flow=400 L/min"}, replace: [][2]string{{"  thermostat_opens:", "  # none: "}, {"  fan: by thermostat", "  fan: with the machine"}}, want: []string{"oil overcooled"}},

	"unloader high":       {of: "high-low-pumps", set: []string{"UP1.setting=110 bar"}, want: []string{"UP1: unloading valve set too high"}},
	"unloader sticks":     {of: "accumulator-unloading", set: []string{"UV1.unloaded_drop=60 bar"}, want: []string{"UV1: unloading at pressure"}},
	"pre-charge lost":     {of: "accumulator-unloading", set: []string{"ACC1.precharge=40 bar"}, want: []string{"ACC1: pre-charge lost or out of limits"}},
	"pre-charge too high": {of: "accumulator-unloading", set: []string{"ACC1.precharge=145 bar"}, want: []string{"ACC1: pre-charge lost or out of limits"}},
	"signal not relieved": {of: "load-sensing-one", replace: [][2]string{{"  - V1.LS - P1.LS\n", ""}, {"- PC1.C - C1.A - RV2.P", "- PC1.C - C1.A - RV2.P - P1.LS"}}, want: []string{"P1: stand-by pressure too high"}},
	"second stage stuck":  {of: "pressure-compensated-pump", set: []string{"As found/pump_at_rest=unload", "P1.unloaded_pressure=70 bar"}, want: []string{"P1: stand-by pressure too high"}},
	"setting above need":  {of: "pressure-compensated-pump", set: []string{"P1.set_pressure=230 bar", "RV1.set=275 bar", "RV2.set=280 bar", "RV3.set=280 bar"}, want: []string{"P1: pressure setting above need"}},
	"charge high":         {of: "closed-circuit-winch", set: []string{"CP1.charge=45 bar"}, want: []string{"CP1: charge pressure or flow too high"}},
	"charge pump large":   {of: "closed-circuit-winch", set: []string{"CP1.displacement=18 cm3/rev"}, want: []string{"CP1: charge pressure or flow too high"}},
	"flushing high": {of: "closed-circuit-winch", set: []string{"CP1.displacement=28 cm3/rev", "CP1.charge=25 bar", "P1.displacement=100 cm3/rev"}, replace: [][2]string{
		{"    F1: {kind: filter", "    FV1: {kind: flushing, opens: 6 bar, nominal_flow: 40 L/min}\n    T9: {kind: tank}\n    F1: {kind: filter"},
		{"- P1.P - HM1.A", "- FV1.T - T9.T\n  - P1.P - FV1.A - HM1.A"}, {"- P1.S - HM1.B", "- P1.S - FV1.B - HM1.B"}}, want: []string{"FV1: flushing flow too high"}},
	"vent line blocked": {of: "counterbalance-lift", set: []string{"RV1.vented=45 bar"}, want: []string{"RV1: unloading at pressure"}},
	"oil too thick":     {of: "pressure-compensated-pump", set: []string{"oil.grade=ISO VG 150", "oil.temperature=40 C"}, want: []string{"oil too thick"}},
	"oil too thin":      {of: "pressure-compensated-pump", set: []string{"oil.grade=ISO VG 22", "oil.temperature=65 C"}, want: []string{"oil too thin"}},
	"oil overcooled":    {of: "pressure-compensated-pump", set: []string{"oil.temperature=22 C"}, want: []string{"oil overcooled"}},
}

func (w twin) file(t *testing.T, all map[string][]byte) *audit.File {
	t.Helper()
	text := string(all[w.of])
	for _, r := range w.replace {
		if !strings.Contains(text, r[0]) {
			t.Fatalf("%s has no %q", w.of, r[0])
		}
		text = strings.Replace(text, r[0], r[1], 1)
	}
	f := parse(t, []byte(text))
	for _, s := range w.set {
		target, quantity, _ := strings.Cut(s, "=")
		if err := f.Set(target, quantity); err != nil {
			t.Fatal(err)
		}
	}
	return f
}

// Every fault put into a sound audit is found at its block, has evidence and advice, and is priced; nothing else is found.
func TestTwins(t *testing.T) {
	all := sources(t)
	for name, w := range twins {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			s := solve(t, asFound(w.file(t, all)))
			ladders, err := fixfirst.All(context.Background(), s, fixfirst.Options{})
			if err != nil {
				t.Fatal(err)
			}
			got := map[string]*fixfirst.Step{}
			for _, x := range ladders[0].Steps {
				if !x.Habit {
					got[x.Name()] = x
				}
			}
			for _, want := range w.want {
				x := got[want]
				delete(got, want)
				if x == nil {
					t.Errorf("%s was not found", want)
					continue
				}
				if len(x.Evidence) == 0 || x.Do == "" || x.Basis == "" || x.Caution == "" {
					t.Errorf("%s lacks evidence, advice, basis or caution: %+v", want, x.Finding)
				}
				if x.Unpriced != "" || x.Alone.Energy != x.Alone.Energy {
					t.Errorf("%s has no price: %s", want, x.Unpriced)
				}
				t.Logf("%s: alone %.0f kWh, in order %.0f kWh of %.0f: %s", want, x.Alone.Energy/3.6e6, x.InOrder.Energy/3.6e6, ladders[0].AsFound.Drawn/3.6e6, x.Cure)
			}
			for other, x := range got {
				t.Errorf("found besides: %s %s %v", other, x.Text, x.Evidence)
			}
		})
	}
}
