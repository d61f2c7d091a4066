package audit_test

import (
	"context"
	"math"
	"regexp"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
)

const (
	bar          = 1e5
	litreMinute  = 1e-3 / 60
	boreArea     = math.Pi / 4 * 0.080 * 0.080 // of the trial cylinder, m²
	rodSideArea  = math.Pi / 4 * (0.080*0.080 - 0.056*0.056)
	trialFlow    = 63.9187 // L/min that the pump of C1 gives at 166.392 bar
	idlePressure = 166.392 // bar, C1 at standstill, independent calculation with scipy
)

var pointRows = regexp.MustCompile(`(?m)^    t: \[.*\n(    ".*\n)+`)

// withPoints gives a trial another duty.
func withPoints(t testing.TB, data string, rows ...string) string {
	t.Helper()
	if len(pointRows.FindAllString(data, -1)) != 1 {
		t.Fatal("the file has not one table of points")
	}
	return pointRows.ReplaceAllString(data, "    "+strings.Join(rows, "\n    ")+"\n")
}

// steadily gives a trial a duty of 2 s at one speed [m/s] under one load [kN], both as text.
func steadily(t testing.TB, data, speed, load string) string {
	t.Helper()
	return withPoints(t, data, "t: [0 s, 2 s]", `"ram.speed [m/s]": [`+speed+`, `+speed+`]`, `"ram.load [kN]": [`+load+`, `+load+`]`)
}

// c1 returns trial circuit C1 as text, with pairs of old and new text replaced.
func c1(t testing.TB, pairs ...string) string {
	t.Helper()
	data := text(t, "trials/c1.yaml")
	for i := 0; i < len(pairs); i += 2 {
		data = changed(t, data, pairs[i], pairs[i+1])
	}
	return data
}

// refusal returns what is said of a circuit that must not be solved.
func refusal(t testing.TB, data string) []circuit.Finding {
	t.Helper()
	f, found := audit.Parse([]byte(data), nil, "test.yaml")
	if f == nil || circuit.AnyStops(found) {
		return found
	}
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	c := s.Circuits[0]
	if c.Duties[0].Balance != nil || !circuit.AnyStops(c.Findings) {
		t.Errorf("solved, though it should have been refused")
	}
	return c.Findings
}

// A pump of 20 cm³/rev cannot give what C1 asks for at 1 s: the valve stands fully open
// and the piston goes as fast as the oil comes. By hand: q = 29.6 − slip = 29.50523 L/min,
// edge P-A 5·(29.505/60)² = 1.209 bar, B-T and filter by the same law, and the force
// balance with 5 kN, 800 N and 1500 N s/m give P = 13.23225 bar.
func TestSupplyExhaustedByFlow(t *testing.T) {
	f := parsed(t, c1(t, "displacement: 45 cm3/rev", "displacement: 20 cm3/rev"))
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	q := 29.50523 * litreMinute
	near(t, "P [bar]", r.at(t, "P1.P.p", 1)/bar, 13.23225, 1e-5, 0)
	near(t, "flow to A [L/min]", r.at(t, "C1.A.q", 1)/litreMinute, 29.50523, 1e-6, 0)
	near(t, "speed [m/s]", r.at(t, "C1.v", 1), q/boreArea, 1e-6, 0)
	near(t, "opening", r.at(t, "V1.u", 1), 1, 1e-9, 0)
	near(t, "over the relief valve [L/min]", r.at(t, "RV1.P.q", 1)/litreMinute, 0, 0, 1e-9)

	d := solved(t, f).Circuits[0].Duties[0]
	sound(t, d)
	if len(d.Shortfalls) != 1 || d.Shortfalls[0].Axis != "ram" || d.Shortfalls[0].LostStroke <= 0 {
		t.Fatalf("shortfalls: %+v", d.Shortfalls)
	}
	near(t, "worst speed ratio", d.Shortfalls[0].WorstRatio, q/boreArea/0.15, 1e-6, 0) // 5 kN and 0.15 m/s ask for most
	says(t, solved(t, f).Circuits[0].Findings, circuit.Warns, "C1", "slower than the duty asks")
}

// At 83.6 kN the pump's 166.392 bar give 83.64 kN at the bore: less than load and dry
// friction together, more than the load without it. The piston sticks, and all oil goes
// over the relief valve as at standstill (independent calculation with scipy, trial
// circuit C1, t = 6 s).
func TestSupplyExhaustedByForce(t *testing.T) {
	f := parsed(t, steadily(t, c1(t), "0.03", "83.6"))
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	near(t, "speed [m/s]", r.at(t, "C1.v", 1), 0, 0, 1e-12)
	near(t, "P [bar]", r.at(t, "P1.P.p", 1)/bar, idlePressure, 1e-5, 0)
	near(t, "pA [bar]", r.at(t, "C1.A.p", 1)/bar, idlePressure, 1e-5, 0)
	near(t, "relief [L/min]", r.at(t, "RV1.P.q", 1)/litreMinute, trialFlow, 1e-5, 0)

	s := solved(t, f)
	d := s.Circuits[0].Duties[0]
	sound(t, d)
	near(t, "work [J]", d.Balance.WorkPositive().Total(), 0, 0, 1e-6)
	if len(d.Shortfalls) != 1 || math.Abs(d.Shortfalls[0].Seconds-2) > 1e-9 || math.Abs(d.Shortfalls[0].LostStroke-0.06) > 1e-9 {
		t.Errorf("shortfalls: %+v, want 2 s and 0.06 m", d.Shortfalls)
	}
	says(t, s.Circuits[0].Findings, circuit.Warns, "C1", "slower than the duty asks")
}

// A load the pressure cannot hold at all drives the piston back through the open valve;
// that is a caution, with the block, and its speed is the one of the force balance, solved
// here by bisection.
func TestLoadDrivesBackwards(t *testing.T) {
	f := parsed(t, steadily(t, c1(t), "0.03", "90"))
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	const D, slip = 45e-6 / (2 * math.Pi), 1.5e-8 / 0.040
	square := func(q, dp float64) float64 { return dp * q * q / (60 * litreMinute * 60 * litreMinute) }
	force := func(v float64) (left, P float64) { // v < 0; all valve edges fully open
		qA, qB := -boreArea*v, -rodSideArea*v
		// pump + oil from A = relief: D·w − slip·D·P + qA = (P − 160 bar)/R
		R := 10 * bar / (100 * litreMinute)
		P = (D*1480*math.Pi/30 + qA + 160*bar/R) / (1/R + slip*D)
		pA := P + square(qA, 5*bar)
		pB := math.Max(-square(qB, 6*bar), -0.9*bar) // from the tank through filter and edge, until it tears
		return 90e3 - 800 + 1500*v - pA*boreArea + pB*rodSideArea, P
	}
	low, high := -1.0, 0.0
	for range 100 {
		mid := (low + high) / 2
		if left, _ := force(mid); left > 0 { // the load is stronger: faster back
			high = mid
		} else {
			low = mid
		}
	}
	_, P := force(low)
	near(t, "speed [m/s]", r.at(t, "C1.v", 1), low, 1e-6, 0)
	near(t, "P [bar]", r.at(t, "P1.P.p", 1)/bar, P/bar, 1e-6, 0)
	says(t, r.watch.Findings(), circuit.Caution, "C1", "backwards")
}

// An orifice into a closed end carries nothing and changes nothing; the pressure behind
// it is that in front.
func TestDeadEnd(t *testing.T) {
	plain := parsed(t, c1(t))
	want := ran(t, plain, plain.Circuits[0].Circuit, plain.Duties[0])
	for _, end := range []string{
		"  - O1.B - J1.1\n",
		"  - O1.B - L1.A\n  - L1.B - J1.2\n",
	} {
		f := parsed(t, c1(t, "P1.P - RV1.P - V1.P\n", "P1.P - RV1.P - V1.P - O1.A\n"+end,
			"    T1: {kind: tank}\n", "    T1: {kind: tank}\n    J1: {kind: junction}\n    O1: {kind: orifice, nominal_flow: 10 L/min}\n"+
				map[bool]string{true: "    L1: {kind: line, length: 2 m, diameter: 12 mm}\n"}[strings.Contains(end, "L1")]))
		got := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
		sameEnergies(t, want, got, nil)
		sameSignals(t, want, got, plain.Circuits[0].Circuit, nil)
		for _, at := range []float64{1, 6, 8} {
			near(t, "flow into the dead end", got.at(t, "O1.A.q", at), 0, 0, 1e-12)
			near(t, "pressure behind the orifice [Pa]", got.at(t, "O1.B.p", at), got.at(t, "O1.A.p", at), 1e-8, 0)
		}
	}
}

// A fixed pump into a dead end without relief valve: all it carries slips back, so that
// Cs·D·p/μ = D·ω and p = μ·ω/Cs = 0.04·154.985/1.5e-8 Pa = 4133 bar. The figure is right
// and the circuit is not; a caution says so, and names the place.
func TestPumpIntoDeadEnd(t *testing.T) {
	data := c1(t, "P1.P - RV1.P - V1.P\n", "P1.P - O1.A\n  - O1.B - J1.1\n  - LP1.P - V1.P - RV1.P\n",
		"    T1: {kind: tank}\n", "    T1: {kind: tank}\n    J1: {kind: junction}\n    LP1: {kind: pressure_source, pressure: 60 bar}\n    O1: {kind: orifice, nominal_flow: 10 L/min}\n")
	f := parsed(t, steadily(t, data, "0.03", "20"))
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	near(t, "P [bar]", r.at(t, "P1.P.p", 1)/bar, 4132.94, 1e-5, 0)
	fs := solved(t, f).Circuits[0].Findings
	says(t, fs, circuit.Caution, "P1.P", "no limit")
	says(t, fs, circuit.Caution, "nothing limits the pressure", "O1")
}

// Pulling load: the bore side empties, since the rod side meters the oil out and the
// piston must not go faster. By hand, with u from the edge B-T and the filter: what edge
// P-A passes at that opening is less than the bore takes, the rest is missing.
const pulling = "-30"

func TestOverrunningLoad(t *testing.T) {
	f := parsed(t, steadily(t, c1(t), "0.15", pulling))
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	lowestPressure(t, r, -0.9)
	near(t, "speed [m/s]", r.at(t, "C1.v", 1), 0.15, 1e-9, 0)
	near(t, "pA [bar]", r.at(t, "C1.A.p", 1)/bar, -0.9, 1e-9, 0)

	qA, qB := boreArea*0.15, rodSideArea*0.15
	qN := 60 * litreMinute
	pR := 1 * bar * (qB / qN) * (qB / qN)
	pB := (-0.9*bar*boreArea + 30e3 - 800 - 1500*0.15) / rodSideArea
	u := qB / qN / math.Sqrt((pB-pR)/(5*bar))
	P := r.at(t, "P1.P.p", 1)
	passes := u * qN * math.Sqrt((P+0.9*bar)/(5*bar))
	near(t, "pB [bar]", r.at(t, "C1.B.p", 1)/bar, pB/bar, 1e-6, 0)
	near(t, "opening", r.at(t, "V1.u", 1), u, 1e-6, 0)
	near(t, "edge P-A [L/min]", r.at(t, "V1.P.q", 1)/litreMinute, passes/litreMinute, 1e-6, 0)
	missing := 0.0
	for _, q := range r.void[r.step(t, 1)] {
		missing += q
	}
	near(t, "missing [L/min]", missing/litreMinute, (qA-passes)/litreMinute, 1e-6, 0)

	s := solved(t, f)
	sound(t, s.Circuits[0].Duties[0])
	says(t, s.Circuits[0].Findings, circuit.Warns, "C1.A", "runs empty")
}

// With a make-up check valve the oil comes from the tank, and no node runs empty.
func TestOverrunningLoadWithMakeUp(t *testing.T) {
	data := c1(t, "  - V1.A - C1.A\n", "  - V1.A - C1.A - CV1.out\n  - T1.T - CV1.in\n",
		"    T1: {kind: tank}\n", "    T1: {kind: tank}\n    CV1: {kind: check, opens: 0.1 bar, nominal_flow: 60 L/min, nominal_drop: 0.2 bar}\n")
	f := parsed(t, steadily(t, data, "0.15", pulling))
	r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
	lowestPressure(t, r, -0.9)
	q := r.at(t, "CV1.in.q", 1)
	if q <= 0 {
		t.Errorf("make-up flow %g", q)
	}
	near(t, "make-up and edge [L/min]", (q+r.at(t, "V1.P.q", 1))/litreMinute, boreArea*0.15/litreMinute, 1e-8, 0)
	x := q / (60 * litreMinute)
	near(t, "pA [bar]", r.at(t, "C1.A.p", 1)/bar, -(0.1 + 0.2*x*x), 1e-4, 0)
	s := solved(t, f)
	sound(t, s.Circuits[0].Duties[0])
	if said(s.Circuits[0].Findings, "", "runs empty") {
		t.Errorf("runs empty in spite of the make-up valve: %v", s.Circuits[0].Findings)
	}
}

// lowestPressure fails when a pressure of the run lies below a limit [bar].
func lowestPressure(t *testing.T, r *run, limit float64) {
	t.Helper()
	for _, s := range r.c.Signals() {
		if low, _, _ := r.extremes(t, s.Name); s.What == "p" && low < limit*bar*(1+1e-9) {
			t.Errorf("%s falls to %g bar", s.Name, low/bar)
		}
	}
}

// Two rows at one time are a step: nothing is booked between them, and both sides keep
// their own powers. 2 s as at t = 1 s and 3 s as at t = 3.5 s of trial circuit C1
// (20585.2 and 21034.0 W electric, 19187.0 and 19600.1 W shaft, independent calculation
// with scipy).
func TestZeroLengthStep(t *testing.T) {
	rows := []string{"t: [0 s, 2 s, 2 s, 5 s]", `"ram.speed [m/s]": [0.15, 0.15, 0.03, 0.03]`, `"ram.load [N]": [5000, 5000, 39310.3448, 39310.3448]`}
	for _, data := range []string{c1(t), without(t, c1(t), plainSamples)} {
		f := parsed(t, withPoints(t, data, rows...))
		d := solved(t, f).Circuits[0].Duties[0]
		sound(t, d)
		near(t, "electric [J]", d.Balance.SupplyIn.Total(), 2*20585.2+3*21034.0, 1e-5, 0)
		near(t, "work [J]", d.Balance.WorkPositive().Total(), 2*0.15*5000+3*0.03*39310.3448, 1e-9, 0)
		near(t, "cycle [s]", d.Balance.Cycle, 5, 0, 1e-12)
		near(t, "peak supply [W]", d.Balance.PeakSupply, 21034.0, 1e-5, 0)
		r := ran(t, f, f.Circuits[0].Circuit, f.Duties[0])
		p, _ := shaftEnergies(t, r)
		near(t, "shaft [kJ]", p, 1e-3*(2*19187.0+3*19600.1), 1e-5, 0)
	}
	rows[0], rows[1], rows[2] = "t: [0 s, 2 s, 2 s, 2 s]", `"ram.speed [m/s]": [0.15, 0.15, 0.03, 0.03]`, `"ram.load [N]": [5, 5, 5, 5]`
	says(t, refusal(t, withPoints(t, c1(t), rows...)), circuit.Stops, "three rows at 2 s")
	rows[0] = "t: [0 s, 2 s, 1 s, 3 s]"
	says(t, refusal(t, withPoints(t, c1(t), rows...)), circuit.Stops, "time runs backwards")
}

// Circuits that cannot be solved are refused before, in words that name the blocks.
func TestRefusals(t *testing.T) {
	tank := "    T1: {kind: tank}\n"
	c4 := text(t, "trials/c4.yaml")
	for _, c := range []struct {
		what, data string
		words      []string
	}{
		{"oil with no way to tank: a closed loop without charge pump",
			changed(t, strings.ReplaceAll(strings.ReplaceAll(without(t, without(t, without(t, c4,
				"  - T1.T - CP1.S"), "  - T1.T - CP1.T"), "  - CP1.P - CV1.in - CV2.in"), " - CV1.out", ""), " - CV2.out", ""),
				"  - M1.shaft - P1.shaft - CP1.shaft", "  - M1.shaft - P1.shaft"),
			[]string{"HM1.A", "P1.P", "no way to a tank"}},
		{"floating node: an orifice and a line apart from all else",
			c1(t, tank, tank+"    O1: {kind: orifice, nominal_flow: 10 L/min}\n    L1: {kind: line, length: 1 m, diameter: 10 mm}\n",
				"  lines:\n", "  lines:\n  - O1.A - L1.A\n  - O1.B - L1.B\n"),
			[]string{"O1", "L1", "no way to a tank"}},
		{"source and tank on one line",
			c1(t, tank, tank+"    LP1: {kind: pressure_source, pressure: 5 bar}\n", "  - T1.T - F1.B\n", "  - T1.T - F1.B - LP1.P\n"),
			[]string{"LP1", "T1", "pressures of their own"}},
		{"two sources on one line",
			c1(t, tank, tank+"    LP1: {kind: pressure_source, pressure: 5 bar}\n    LP2: {kind: pressure_source, pressure: 7 bar}\n",
				"  - T1.T - F1.B\n", "  - LP2.P - F1.B - LP1.P\n"),
			[]string{"LP1", "LP2", "pressures of their own"}},
		{"two pressure-compensated pumps on one line",
			changed(t, changed(t, changed(t, text(t, "trials/c2.yaml"), tank, tank+"    P2: {kind: pump, displacement: 45 cm3/rev, control: pressure, set_pressure: 150 bar}\n"),
				"M1.shaft - P1.shaft", "M1.shaft - P1.shaft - P2.shaft"), "  - P1.P - RV1.P", "  - T1.T - P2.S\n  - P2.P - P1.P - RV1.P"),
			[]string{"P1", "P2", "both hold the pressure"}},
		{"an actuator that must move, its rod side closed by a junction",
			c1(t, tank, tank+"    J1: {kind: junction}\n    J2: {kind: junction}\n", "  - V1.B - C1.B\n", "  - V1.B - J1.1\n  - C1.B - J2.1\n"),
			[]string{"C1", "must move", "port B", "no way out"}},
		{"the same, closed by a check valve",
			c1(t, tank, tank+"    J1: {kind: junction}\n    CV1: {kind: check}\n", "  - V1.B - C1.B\n", "  - V1.B - J1.1\n  - C1.B - CV1.out\n  - T1.T - CV1.in\n"),
			[]string{"C1", "must move", "port B", "no way out"}},
		{"a control without actuator",
			without(t, c1(t, "  - V1.A - C1.A\n  - V1.B - C1.B\n", "  - V1.A - V1.B\n"),
				"    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm, friction: 800 N, viscous: 1500 N s/m}"),
			[]string{"no actuator", "axis ram"}},
		{"two followers",
			c1(t, "case_share: 0}", "case_share: 0, follows: ram}"),
			[]string{"P1", "V1", "follow axis ram", "only one"}},
		{"no pump_at_rest", without(t, c1(t), "  pump_at_rest: keep"), []string{"pump_at_rest", "Trial"}},
	} {
		t.Run(c.what, func(t *testing.T) { says(t, refusal(t, c.data), circuit.Stops, c.words...) })
	}
}
