package circuit

import (
	"fmt"
	"math"
	"regexp"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// Two equal cylinders joined rigidly are one of twice the areas, friction, mass and leakage:
// same pressures, speeds, powers and losses.
func TestEqualPairIsOneOfDoubleArea(t *testing.T) {
	const row = "C%d cylinder; axis: ram; hold: %s; bore: %.17g mm; rod: %.17g mm; friction: %g N; pressure_friction: 0.02; viscous: %g N s/m; mass: %g kg; leakage: %g L/min per 100 bar\n"
	root := math.Sqrt2
	for _, hold := range []string{"valve", "brake"} {
		one := observe(t, ramBench+bothPorts+fmt.Sprintf(row, 1, hold, 60*root, 40*root, 600., 900., 400., 0.2), ramAxis, ramDuty)
		two := observe(t, ramBench+"- V1.A C1.A C2.A\n- V1.B C1.B C2.B\n"+fmt.Sprintf(row, 1, hold, 60., 40., 300., 450., 200., 0.1)+fmt.Sprintf(row, 2, hold, 60., 40., 300., 450., 200., 0.1), ramAxis, ramDuty)
		if len(one.t) != len(two.t) {
			t.Fatalf("%d and %d steps", len(one.t), len(two.t))
		}
		for _, s := range []string{"V1.A.p", "V1.B.p", "V1.A.q", "V1.u", "C1.v", "P1.shaft", "M1.electric"} {
			for i, v := range one.sig[s] {
				if hold == "brake" && one.sig["C1.v"][i] == 0 && strings.HasSuffix(s, ".p") {
					continue // closed in and carried by the brake: nothing determines it
				}
				if d := math.Abs(v - two.sig[s][i]); d > 1e-9*math.Max(math.Abs(v), map[bool]float64{true: 1e5, false: 1e-3}[strings.HasSuffix(s, ".p")]) {
					t.Fatalf("hold: %s: %s at %g s is %g, with a pair %g", hold, s, one.t[i], v, two.sig[s][i])
				}
			}
		}
		for _, kind := range []string{"friction", "leakage"} {
			a := one.ledger.energy(Loss, "C1", kind)
			within(t, kind, two.ledger.energy(Loss, "C1", kind)+two.ledger.energy(Loss, "C2", kind), a, 1e-9)
		}
		within(t, "work", two.ledger.energy(Work, "C1", "")+two.ledger.energy(Work, "C2", ""), one.ledger.energy(Work, "C1", ""), 1e-9)
		for i := range two.t { // each carries half of the load
			if a, b := two.sig["C1.F"][i], two.sig["C2.F"][i]; math.Abs(a-b) > 1e-6*math.Max(1, math.Abs(a)) {
				t.Fatalf("the pair carries %g and %g N at %g s", a, b, two.t[i])
			}
		}
	}
}

// Hand calculation: unequal cylinders with their bores on one node, the second's rod side to
// tank: p·(A1 + A2) − pB·B1 = F, q = (A1 + A2)·v; the parts of the load add up.
func TestUnequalPair(t *testing.T) {
	const text = rail + `
C2 plunger; axis: ram; hold: valve; diameter: 50 mm
V1 valve; follows: ram; nominal_flow: 60 L/min; nominal_drop: 5 bar
- P1.P RV1.P V1.P
- V1.A C1.A C2.A
- V1.B C1.B
- V1.T TK.T
`
	const F, v = 60e3, 0.05
	d := points("given", 0.5, []float64{0, 1}, duty.Track{Of: "ram", What: duty.Load, Values: []float64{F, F}}, duty.Track{Of: "ram", What: duty.Speed, Values: []float64{v, v}})
	r := steady(t, text, ramAxis, d)
	A2 := math.Pi / 4 * 0.05 * 0.05
	near(t, "flow", r.last(t, "V1.A.q"), -(boreArea+A2)*v, 1e-9)
	near(t, "pressure", r.last(t, "C1.A.p"), (F+r.last(t, "C1.B.p")*rodArea)/(boreArea+A2), 1e-9)
	near(t, "its part of the load", r.last(t, "C2.F"), r.last(t, "C2.A.p")*A2, 1e-9)
	near(t, "load", r.last(t, "C1.F")+r.last(t, "C2.F"), F, 1e-9)
}

// The load found for a motion and a command is that of both.
func TestPairGivesTheLoad(t *testing.T) {
	text := replaced(t, strings.Replace(strings.Replace(c1, "C1.A", "C1.A C2.A", 1), "C1.B", "C1.B C2.B", 1), "C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm",
		"C2 cylinder; axis: ram; hold: valve; bore: 40 mm; rod: 25 mm\nC1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm")
	d := *ramDuty
	d.Sampled = true
	base := record(t, text, ramAxis, &d)
	var load, speed []float64
	for _, a := range base.axes {
		load, speed = append(load, a[0].Load), append(speed, a[0].Speed)
	}
	got := record(t, text, ramAxis, &duty.Duty{Name: "driven", Time: base.t, Sampled: true,
		Tracks: []duty.Track{{Of: "ram", What: duty.Speed, Values: speed}, {Of: "ram", What: duty.Command, Values: base.sig["V1.u"]}}})
	moving := 0
	for i := range got.t {
		if base.axes[i][0].Standing {
			continue
		}
		if moving++; math.Abs(got.axes[i][0].Load-load[i]) > 0.01 {
			t.Fatalf("at %g s the load is %g N, was %g N", got.t[i], got.axes[i][0].Load, load[i])
		}
	}
	if moving < 500 {
		t.Errorf("only %d steps compared", moving)
	}
}

func TestPairsThatAreRefused(t *testing.T) {
	pair := ramBench + "- V1.A C1.A C2.A\n- V1.B C1.B C2.B\nC1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm\n"
	for row, want := range map[string]string{
		"C2 cylinder; axis: ram; hold: brake; bore: 80 mm; rod: 56 mm":                                "give both the same hold",
		"C2 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; stroke: 500 mm; start: 100 mm": "their ends of stroke are not followed",
	} {
		_, found := Compile(build(t, pair+row), ramAxis, ramDuty)
		if !finds(found, want) {
			t.Errorf("%s: %v", row, found)
		}
	}
	turn := []duty.Axis{{Name: "ram", Kind: duty.Rotary}}
	_, found := Compile(build(t, replaced(t, pair, "C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm", "C1 motor; axis: ram; hold: valve; displacement: 50 cm3/rev")+"C2 motor; axis: ram; hold: valve; displacement: 50 cm3/rev"), turn, ramDuty)
	if !finds(found, "join the shafts of the others to it by a line") {
		t.Errorf("two motors: %v", found)
	}
}

var secondCylinder = regexp.MustCompile(`(?m)^C1 (cylinder;.*)$`)

func TestPairsInRandomCircuits(t *testing.T) {
	survive(t, func(text string) string {
		if !secondCylinder.MatchString(text) || strings.Contains(text, "start:") {
			return ""
		}
		text = strings.NewReplacer(" C1.A", " C1.A CX.A", " C1.B", " C1.B CX.B").Replace(text)
		return secondCylinder.ReplaceAllString(text, "C1 $1\nCX $1")
	})
}
