package circuit

import (
	"context"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/machines"
	"barlitre/machines/units"
)

// allTerms gives every machine of a circuit all terms of the loss law.
func allTerms(text string) string {
	const terms = "; turbulent_slip: 1.2e-5; compression: 0.6; dead_volume: 0.8; hydrodynamic: 40"
	var out []string
	for _, row := range strings.Split(text, "\n") {
		if f := strings.Fields(row); len(f) > 1 && strings.TrimRight(f[1], ";") != f[1] {
			if k := KindNamed(strings.TrimRight(f[1], ";")); k != nil && k.Param("turbulent_slip") != nil {
				row += terms
			}
		}
		out = append(out, row)
	}
	return strings.Join(out, "\n")
}

// drumDuty turns a drum both ways under a load both ways.
var drumDuty = points("drum", 0.1, []float64{0, 1, 5, 6, 8, 9, 12, 13, 16, 17, 20, 21, 24},
	duty.Track{Of: "drum", What: duty.Speed, Values: []float64{0, 60, 60, 60, 60, 0, 0, -60, -60, -60, -60, 0, 0}},
	duty.Track{Of: "drum", What: duty.Load, Values: []float64{180, 180, 180, -180, -180, 180, 180, 180, 180, -180, -180, 180, 180}})

// A winch that lifts and lowers: its pump and motor work in all four quadrants. Flow, torque and each loss must be those
// of the law in package machines, which is compared with published values there.
func TestMachineLawInTheBalance(t *testing.T) {
	oil := Conditions{Density: 870, Viscosity: 0.040, BulkModulus: 1.5e9, Air: 0.01}
	k, found := Compile(build(t, allTerms(c4)), drumAxis, drumDuty)
	if k == nil {
		t.Fatal(found)
	}
	cols := &columns{c: k, sig: map[string][]float64{}}
	led := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
	steps := &stepClosure{c: k}
	_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(drumDuty), oil, State{}, Receivers{cols, led, steps})
	if err != nil || cert.Unbalanced > 0 || steps.worst > 1e-9 || led.closure() > 1e-9 {
		t.Fatalf("%v, %d unbalanced, closure %g of a step, %g in all", err, cert.Unbalanced, steps.worst, led.closure())
	}
	quadrants := map[[2]bool]bool{}
	for _, m := range []struct {
		id, P, S string
		law      machines.Displacement
	}{
		{"P1", "P", "S", machines.Displacement{D: 71e-6 / (2 * math.Pi)}},
		{"HM1", "A", "B", machines.Displacement{D: 80e-6 / (2 * math.Pi)}},
	} {
		m.law.Cs, m.law.Cf, m.law.Cv, m.law.Tc = 1.5e-8, 0.03, 6.5e4, 1.5
		m.law.Cst, m.law.K, m.law.Kd, m.law.Ch = 1.2e-5, 0.6, 0.8, 40
		for i := range cols.t {
			at := func(s string) float64 { return cols.sig[m.id+"."+s][i] }
			e, w, dp := at("e"), at("w"), at(m.P+".p")-at(m.S+".p")
			share, _ := machines.Compression(dp, oil.BulkModulus, oil.Air)
			bulk := 1.0
			if dp != 0 {
				bulk = dp / share
			}
			if math.Abs(w) < 1 {
				continue
			}
			quadrants[[2]bool{w > 0, dp*e > 0}] = true
			top := m.law.D * 157
			if q := m.law.Flow(e, w, dp, oil.Viscosity, oil.Density, bulk); math.Abs(q+at(m.P+".q")) > 1e-9*top {
				t.Fatalf("%s at %g s: flow %g, by the law %g", m.id, cols.t[i], -at(m.P+".q"), q)
			}
			if T := m.law.Torque(e, w, dp, oil.Viscosity, oil.Density); math.Abs(T-at("T")) > 1e-7*math.Abs(T)+1e-6 {
				t.Fatalf("%s at %g s: torque %g, by the law %g", m.id, cols.t[i], at("T"), T)
			}
		}
	}
	if len(quadrants) != 4 {
		t.Errorf("%d of four quadrants were run through", len(quadrants))
	}
	for _, ch := range k.channels {
		if e := led.energy(Loss, ch.Block, ch.Kind); ch.Role == Loss && (ch.Block == "P1" || ch.Block == "HM1") && ch.Kind != "gearbox" && !(e > 0) {
			t.Errorf("%s %s books %g J", ch.Block, ch.Kind, e)
		}
	}
}

// Random circuits with all terms in every machine balance and close, and no block makes energy, at any time step.
func TestRandomMachinesCloseWithAllTerms(t *testing.T) {
	steps, fallbacks, unsolved := 0, 0, 0
	r := rand.New(rand.NewPCG(5, 11))
	for seed := uint64(0); seed < 120; seed++ {
		text, axes, d, oil := generate(seed, tame)
		if seed%4 == 3 {
			text, d = closedCircuit(r)
			axes = drumAxis
		}
		oil.Air = 0.01 * float64(seed%3)
		k, found := Compile(build(t, allTerms(text)), axes, d)
		if k == nil {
			t.Fatalf("seed %d refused: %v\n%s", seed, found, text)
		}
		worst := &stepClosure{c: k}
		made := &gain{c: k}
		_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), oil, State{}, Receivers{worst, made})
		steps += cert.Steps
		fallbacks += cert.Fallbacks
		unsolved += cert.Unbalanced
		if err != nil || cert.Unbalanced > 0 {
			t.Logf("seed %d: %v, %d of %d steps unbalanced", seed, err, cert.Unbalanced, cert.Steps)
			continue
		}
		if worst.worst > 1e-9 {
			t.Errorf("seed %d: closure %g of a step", seed, worst.worst)
		}
		if made.worst < -1e-9 {
			t.Errorf("seed %d: %s makes energy, %g of what passes", seed, made.where, -made.worst)
		}
	}
	t.Logf("%d steps, %d needed a fall-back, %d unsolved", steps, fallbacks, unsolved)
	if fallbacks*20 > steps { // wrong slopes would show here: Newton's method alone must do
		t.Errorf("%d of %d steps needed more than Newton's method", fallbacks, steps)
	}
	if unsolved*1000 > steps {
		t.Errorf("%d of %d steps unsolved, at most 1 in 1000 may be", unsolved, steps)
	}
}

// gain is the lowest loss of any machine and step, as a share of the supply.
type gain struct {
	c     *Compiled
	worst float64
	where string
}

func (g *gain) Sample(s *Sample) error {
	passed := 1.0
	for i, ch := range g.c.channels {
		if ch.Role != Loss {
			passed += math.Abs(s.Power[i])
		}
	}
	for i, ch := range g.c.channels {
		if ch.Role == Loss && s.Power[i]/passed < g.worst {
			g.worst, g.where = s.Power[i]/passed, ch.Block+" "+ch.Kind
		}
	}
	return nil
}

// A pump whose measured losses no law describes goes into the balance as a map: the winch still closes at every step, no
// loss is negative, and flow and torque are those of the map, in all quadrants.
func TestMapInTheBalance(t *testing.T) {
	law := machines.Displacement{D: 71e-6 / (2 * math.Pi), Cs: 8e-9, Kd: 1.5, Cf: 0.02, Cv: 5e4, Ch: 20, Tc: 2}
	fluid := machines.Fluid{Mu: 0.04, Rho: 870, Bulk: 1.4e9}
	var points []machines.Point
	for _, n := range []float64{700, 1200, 1480, 2200} {
		for _, e := range []float64{0.2, 0.6, 1} {
			for bar := 20.0; bar < 300; bar += 40 {
				w, dp := n*units.RPM, bar*1e5
				more := 1 + 0.4*math.Sin(bar/40)
				points = append(points, machines.Point{W: w, E: e, DP: dp, Q: e*law.D*w - more*law.Slip(e, w, dp, fluid.Mu, fluid.Rho, fluid.Bulk),
					T: e*law.D*dp + more*law.FrictionTorque(e, w, dp, fluid.Mu, fluid.Rho)})
			}
		}
	}
	fit, err := machines.FitPoints(points, machines.FitOptions{D: law.D, Fluid: fluid})
	if err != nil {
		t.Fatal(err)
	}
	c := build(t, c4)
	pump := c.Block("P1")
	pump.Fit, pump.Words["points"], pump.Words["points_as"] = fit, Word{Text: "pump.csv"}, Word{Text: "map"}
	k, found := Compile(c, drumAxis, drumDuty)
	if k == nil {
		t.Fatal(found)
	}
	cols := &columns{c: k, sig: map[string][]float64{}}
	steps, made := &stepClosure{c: k}, &gain{c: k}
	_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(drumDuty), trialOil, State{}, Receivers{cols, steps, made})
	if err != nil || cert.Unbalanced > 0 || steps.worst > 1e-9 || made.worst < -1e-12 {
		t.Fatalf("%v, %d unbalanced, closure %g, %s gains %g", err, cert.Unbalanced, steps.worst, made.where, -made.worst)
	}
	if cert.Fallbacks*20 > cert.Steps {
		t.Errorf("%d of %d steps needed more than Newton's method", cert.Fallbacks, cert.Steps)
	}
	chart := machines.NewMap(fit)
	differs := 0.0
	for i := range cols.t {
		at := func(s string) float64 { return cols.sig["P1."+s][i] }
		e, w, dp := at("e"), at("w"), at("P.p")-at("S.p")
		slip := chart.Slip(e, w, dp).V * fit.Law.Slip(e, w, dp, fluid.Mu, fluid.Rho, fluid.Bulk)
		if q := e*law.D*w - slip; math.Abs(q+at("P.q")) > 1e-9*law.D*157 {
			t.Fatalf("at %g s: flow %g, by the map %g", cols.t[i], -at("P.q"), q)
		}
		T := e*law.D*dp + chart.Friction(e, w, dp).V*fit.Law.FrictionTorque(e, w, dp, fluid.Mu, fluid.Rho)*machines.Sign(w)
		if math.Abs(T-at("T")) > 1e-7*math.Abs(T)+1e-6 {
			t.Fatalf("at %g s: torque %g, by the map %g", cols.t[i], at("T"), T)
		}
		differs = math.Max(differs, math.Abs(chart.Slip(e, w, dp).V-1))
	}
	if differs < 0.1 {
		t.Errorf("the map differs from its law by %g at most", differs)
	}
}

// of returns a parameter of a block as it goes into the balance.
func of(t *testing.T, row, key string) Value {
	t.Helper()
	b := block(t, row)
	v, _, ok := KindNamed(b.Kind).Value(&b, key)
	if !ok {
		t.Fatalf("%s has no %s", row, key)
	}
	return v
}

// Defaults without a family are those of the catalog; with one, or with a best point, the law meets the best point.
func TestBestPoints(t *testing.T) {
	law := func(row string) machines.Displacement {
		g := func(key string) float64 { return of(t, row, key).SI }
		return machines.Displacement{D: g("displacement"), Cs: g("slip"), Cst: g("turbulent_slip"), K: g("compression"), Kd: g("dead_volume"), Cf: g("friction"), Cv: g("viscous"), Ch: g("hydrodynamic"), Tc: g("drag")}
	}
	const plain = "P1 pump; displacement: 45 cm3/rev"
	if m := law(plain); m.Cs != 1.5e-8 || m.Tc != 1.5 {
		t.Errorf("without a family: %+v", m)
	}
	for _, c := range []struct {
		row                         string
		motor                       bool
		dp, rpm, mu, etaV, etaHM, e float64
	}{
		{plain + "; family: external_gear", false, 180e5, 1500, 0.026, 0.93, 0.90, 1},
		{plain + "; family: bent_axis; best_volumetric: 0.98", false, 200e5, 1500, 0.026, 0.98, 0.955, 1},
		{plain + "; best_volumetric: 0.95; best_hydromechanical: 0.93; best_pressure: 250 bar; best_speed: 1800 rpm; best_viscosity: 30 mPa s", false, 250e5, 1800, 0.03, 0.95, 0.93, 1},
		{"HM1 motor; displacement: 80 cm3/rev; best_volumetric: 0.9; best_hydromechanical: 0.88", true, 200e5, 1500, 0.026, 0.9, 0.88, 1},
		{"HM1 motor; displacement: 80 cm3/rev; family: orbital_motor", true, 120e5, 250, 0.026, 0.92, 0.86, 1},
	} {
		dp := c.dp
		if c.motor {
			dp = -dp
		}
		eff, ok := law(c.row).Efficiency(1, c.rpm*units.RPM, dp, c.mu, 870, 1.4e9)
		if !ok {
			t.Fatalf("%s: no efficiency", c.row)
		}
		within(t, c.row+": volumetric", eff.Volumetric, c.etaV, 1e-9)
		within(t, c.row+": hydromechanical", eff.Hydromechanical, c.etaHM, 1e-9)
	}
	if v := of(t, plain+"; family: vane; slip: 2e-8", "slip"); v.SI != 2e-8 {
		t.Errorf("a slip that is typed counts, got %g", v.SI)
	}
	if v := of(t, plain+"; family: vane", "best_pressure"); v.SI != 140e5 || v.Origin != Assumed || v.Note == "" {
		t.Errorf("the best pressure of a vane pump is shown as %+v", v)
	}
	if v := of(t, "HM1 motor; displacement: 80 cm3/rev; family: bent_axis", "starting_torque"); v.SI != 0.9 {
		t.Errorf("starting torque of a bent-axis motor is %g", v.SI)
	}
}

const drainBench = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
RV1 relief; crack: 200 bar; override: 0 bar per 100 L/min
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P
- RV1.T TK.T
- P1.D TK.T
P1 pump; displacement: 45 cm3/rev; case_share: 0.8; turbulent_slip: 1e-5`

// A worn pump loses more by its factor; a measured case drain comes out again at the pressure and temperature it was
// measured at, and at another temperature changes as the viscosity does.
func TestWearAndMeasuredDrain(t *testing.T) {
	law := machines.NewOil(46e-6, 6.8e-6)
	at := func(c float64) Conditions {
		theta := units.ZeroCelsius + c
		return Conditions{Density: law.Density(theta), Viscosity: law.DynamicViscosity(theta), Temperature: theta, Oil: law}
	}
	drain := func(more string, oil Conditions) float64 {
		k, found := Compile(build(t, drainBench+more), nil, still)
		if k == nil {
			t.Fatal(found)
		}
		o := &columns{c: k, sig: map[string][]float64{}}
		if _, _, err := Run(context.Background(), k, k.Defaults(), k.Series(still), oil, State{}, o); err != nil {
			t.Fatal(err)
		}
		return -o.sig["P1.D.q"][0]
	}
	fresh := drain("", at(50))
	within(t, "drain of a pump worn twofold", drain("; wear: 2", at(50)), 2*fresh, 1e-6)
	const q = 4.0 / 60e3
	measured := "; drain_flow: 4 L/min; drain_pressure: 200 bar; drain_temperature: 50 C"
	within(t, "measured drain at its own temperature", drain(measured, at(50)), q, 1e-4)
	// By hand: the laminar part goes with 1/μ, the turbulent one with 1/√ρ; both are scaled alike by q over what the law has.
	D := 45e-6 / (2 * math.Pi)
	part := func(o Conditions) float64 {
		return 0.8 * (1.5e-8*D*200e5/o.Viscosity + 1e-5*math.Pow(D, 2.0/3)*math.Sqrt(2*200e5/o.Density))
	}
	hot, cold := at(70), at(50)
	own := 0.8 * (1.5e-8*D*200e5/cold.Viscosity + 1e-5*math.Pow(D, 2.0/3)*math.Sqrt(2*200e5/hot.Density))
	within(t, "the same at 70 C", drain(measured, hot), q*part(hot)/own, 1e-4)
}

func TestMachineRefusals(t *testing.T) {
	for _, c := range []struct{ more, want string }{
		{"; wear: 2; drain_flow: 4 L/min; drain_pressure: 200 bar", "keep one"},
		{"; drain_flow: 4 L/min", "drain_pressure"},
		{"; drain_pressure: 200 bar", "drain_flow"},
		{"; points_viscosity: 30 mPa s", "measured points"},
		{"; family: screw", "must be one of"},
		{"; points: a.csv; family: vane", "keep one"},
		{"; optimum_viscosity_from: 30 mm2/s; optimum_viscosity_to: 20 mm2/s", "must end (optimum_viscosity_to) above"},
	} {
		_, found := Compile(build(t, drainBench+c.more), nil, still)
		said := ""
		for _, f := range found {
			if f.Level == Stops {
				said += f.Text + "\n"
			}
		}
		if !strings.Contains(said, c.want) {
			t.Errorf("%s: says %q, want %q", c.more, said, c.want)
		}
	}
}
