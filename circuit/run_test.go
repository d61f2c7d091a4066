package circuit

import (
	"context"
	"errors"
	"math"
	"strings"
	"sync"
	"testing"

	"barlitre/circuit/duty"
)

// column records one signal over a run.
type columns struct {
	c    *Compiled
	t    []float64
	sig  map[string][]float64
	axes [][]AxisNow
	stop []bool
}

func (r *columns) Sample(s *Sample) error {
	r.t = append(r.t, s.T)
	for i, g := range r.c.signals {
		r.sig[g.Name] = append(r.sig[g.Name], s.Signals[i])
	}
	r.axes = append(r.axes, append([]AxisNow(nil), s.Axes...))
	r.stop = append(r.stop, s.Stopped)
	return nil
}

func record(t *testing.T, text string, axes []duty.Axis, d *duty.Duty) *columns {
	t.Helper()
	k, found := Compile(build(t, text), axes, d)
	if k == nil {
		t.Fatalf("refused: %v", found)
	}
	r := &columns{c: k, sig: map[string][]float64{}}
	_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), trialOil, State{}, r)
	if err != nil || cert.Unbalanced > 0 {
		t.Fatalf("%v, %+v", err, cert)
	}
	return r
}

// Any two of motion, load and command give the third: the opening found for a
// motion, given back as a command, must give the same motion, and with the
// motion the same load. The calculation checks itself from three sides.
func TestTwoGiveTheThird(t *testing.T) {
	d := *ramDuty
	d.Sampled = true
	base := record(t, c1, ramAxis, &d)
	load := make([]float64, len(base.t))
	speed := make([]float64, len(base.t))
	for i, a := range base.axes {
		load[i], speed[i] = a[0].Load, a[0].Speed
	}
	command := duty.Track{Of: "ram", What: duty.Command, Values: base.sig["V1.u"]}

	lc := &duty.Duty{Name: "command", Time: base.t, Sampled: true, Tracks: []duty.Track{{Of: "ram", What: duty.Load, Values: load}, command}}
	got := record(t, c1, ramAxis, lc)
	for i := range got.t {
		if math.Abs(got.sig["C1.v"][i]-speed[i]) > 1e-7 {
			t.Fatalf("load and command: at %g s the speed is %g, was %g", got.t[i], got.sig["C1.v"][i], speed[i])
		}
	}
	mc := &duty.Duty{Name: "driven", Time: base.t, Sampled: true, Tracks: []duty.Track{{Of: "ram", What: duty.Speed, Values: speed}, command}}
	got = record(t, c1, ramAxis, mc)
	moving := 0
	for i := range got.t {
		if base.axes[i][0].Standing {
			continue
		}
		moving++
		if math.Abs(got.sig["C1.F"][i]-load[i]) > 0.01 {
			t.Fatalf("motion and command: at %g s the load is %g N, was %g N", got.t[i], got.sig["C1.F"][i], load[i])
		}
	}
	if moving < 500 {
		t.Errorf("only %d steps compared", moving)
	}
}

// A changed number needs no new compile: the vector is the circuit.
func TestParametersAreTheCircuit(t *testing.T) {
	k, _ := Compile(build(t, c1), ramAxis, ramDuty)
	i, ok := k.Index("RV1", "crack")
	if !ok {
		t.Fatal("no RV1.crack")
	}
	p := k.Defaults()
	p[i] = 120e5
	a := &columns{c: k, sig: map[string][]float64{}}
	if _, _, err := Run(context.Background(), k, p, k.Series(ramDuty), trialOil, State{}, a); err != nil {
		t.Fatal(err)
	}
	b := record(t, strings.Replace(c1, "crack: 160 bar", "crack: 120 bar", 1), ramAxis, ramDuty)
	for n, v := range a.sig["P1.P.p"] {
		if v != b.sig["P1.P.p"][n] {
			t.Fatalf("step %d: %g Pa against %g Pa", n, v, b.sig["P1.P.p"][n])
		}
	}
	if a.sig["P1.P.p"][0] > 130e5 {
		t.Errorf("the relief setting did not follow: %g Pa", a.sig["P1.P.p"][0])
	}
}

// A duty handed over in pieces gives what it gives in one.
func TestPieces(t *testing.T) {
	k, _ := Compile(build(t, c5), ramAxis, ramDuty)
	s := k.Series(ramDuty)
	whole := &columns{c: k, sig: map[string][]float64{}}
	end, _, err := Run(context.Background(), k, k.Defaults(), s, trialOil, State{}, whole)
	if err != nil {
		t.Fatal(err)
	}
	parts := &columns{c: k, sig: map[string][]float64{}}
	st := State{}
	for from := 0; from < len(s.T); from += 100 {
		to := min(from+100, len(s.T))
		if st, _, err = Run(context.Background(), k, k.Defaults(), s.Part(from, to), trialOil, st, parts); err != nil {
			t.Fatal(err)
		}
	}
	for _, name := range []string{"C1.v", "P1.w", "C1.A.p"} {
		for i := range whole.t {
			if d := math.Abs(whole.sig[name][i] - parts.sig[name][i]); d > 1e-6*(1+math.Abs(whole.sig[name][i])) {
				t.Fatalf("%s at %g s: %g whole, %g in pieces", name, whole.t[i], whole.sig[name][i], parts.sig[name][i])
			}
		}
	}
	if math.Abs(end.Travel(0)-st.Travel(0)) > 1e-9 {
		t.Errorf("travel %g whole, %g in pieces", end.Travel(0), st.Travel(0))
	}
}

// One compiled circuit serves many goroutines (run with -race).
func TestParallelRuns(t *testing.T) {
	k, _ := Compile(build(t, c3), []duty.Axis{ramAxis[0], {Name: "turn", Kind: duty.Rotary}}, ramDuty)
	if k == nil {
		t.Fatal("refused")
	}
	s := k.Series(ramDuty)
	var wg sync.WaitGroup
	ends := make([]float64, 8)
	for g := range ends {
		wg.Add(1)
		go func() {
			defer wg.Done()
			r := &columns{c: k, sig: map[string][]float64{}}
			if _, _, err := Run(context.Background(), k, k.Defaults(), s, trialOil, State{}, r); err == nil {
				ends[g] = r.sig["P1.P.p"][len(r.t)/2]
			}
		}()
	}
	wg.Wait()
	for _, v := range ends[1:] {
		if v != ends[0] || v == 0 {
			t.Fatalf("runs differ: %v", ends)
		}
	}
}

func TestRunRefusesWhatDoesNotFit(t *testing.T) {
	k, _ := Compile(build(t, c1), ramAxis, ramDuty)
	s := k.Series(ramDuty)
	p := k.Defaults()
	if _, _, err := Run(context.Background(), k, p[1:], s, trialOil, State{}, Receivers{}); !errors.Is(err, ErrParameters) {
		t.Errorf("short vector: %v", err)
	}
	p[0] = math.NaN()
	if _, _, err := Run(context.Background(), k, p, s, trialOil, State{}, Receivers{}); !errors.Is(err, ErrParameters) {
		t.Errorf("NaN: %v", err)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, _, err := Run(ctx, k, k.Defaults(), s, trialOil, State{}, Receivers{}); !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled: %v", err)
	}
}

// What the pumps do at rest, at 10 s of C1, where everything stands.
func TestAtRest(t *testing.T) {
	vented := strings.Replace(c1, "crack: 160 bar", "crack: 160 bar; vented: 5 bar", 1)
	for _, c := range []struct {
		rest, text         string
		pLow, pHigh, power float64 // bar; W at most
	}{
		{"keep", vented, 166, 167, 1e9},
		{"unload", vented, 11, 12, 3500}, // 5 bar and the override of 64 L/min
		{"stop", vented, -0.01, 0.01, 1e-6},
	} {
		r := record(t, c.text+"\nat rest: "+c.rest, ramAxis, ramDuty)
		for i, at := range r.t {
			if at < 9.5 {
				continue
			}
			if p := r.sig["P1.P.p"][i] / 1e5; p < c.pLow || p > c.pHigh || r.sig["M1.electric"][i] > c.power {
				t.Fatalf("%s: %g bar and %g W at %g s", c.rest, p, r.sig["M1.electric"][i], at)
			}
		}
	}
}

// A hydraulic transformer: a motor drives a pump, nothing else does. Without
// losses the flows stand as the displacements and the power is the same.
func TestFreeShaft(t *testing.T) {
	const text = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93
P1 pump; displacement: 40 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
RV1 relief; crack: 150 bar; override: 0 bar per 100 L/min
HM1 motor; displacement: 20 cm3/rev; slip: 0; friction: 0; viscous: 0; drag: 0 N m
P2 pump; displacement: 10 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
V1 valve; follows: ram; nominal_flow: 60 L/min
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm
RV2 relief; crack: 250 bar; override: 0 bar per 100 L/min
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P HM1.A
- HM1.B TK.T
- HM1.shaft P2.shaft
- P2.S TK.T
- P2.P V1.P RV2.P
- RV1.T TK.T
- RV2.T TK.T
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`
	r := record(t, text, ramAxis, ramDuty)
	for i := range r.t {
		if w := r.sig["HM1.w"][i]; w <= 0 {
			t.Fatalf("shaft stands at %g s", r.t[i])
		}
		in := r.sig["HM1.A.q"][i] * r.sig["HM1.A.p"][i]
		out := -r.sig["P2.P.q"][i] * r.sig["P2.P.p"][i]
		if math.Abs(in-out) > 1e-6*in {
			t.Fatalf("%g W in, %g W out at %g s", in, out, r.t[i])
		}
		if math.Abs(r.sig["HM1.A.q"][i]+2*r.sig["P2.P.q"][i]) > 1e-12 {
			t.Fatalf("flows %g and %g at %g s", r.sig["HM1.A.q"][i], r.sig["P2.P.q"][i], r.t[i])
		}
		// 250 bar × 10 cm³ wait for 125 bar × 20 cm³ while the second relief is open
		if p2, p1 := r.sig["P2.P.p"][i], r.sig["HM1.A.p"][i]; math.Abs(p2-2*p1) > 1 {
			t.Fatalf("%g Pa and %g Pa at %g s", p1, p2, r.t[i])
		}
	}
}

// Lowering over a counterbalance valve takes pump pressure on the other side:
// pB = (ps + (1 + r)·pV − F/A)/(r + B/A), the force balance of piston and valve at
// its opening point (common practice, from the balance of both; pV is the
// back-pressure of the valve behind it).
func TestCounterbalance(t *testing.T) {
	const text = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93
P1 pump; displacement: 45 cm3/rev; case_share: 0
RV1 relief; crack: 200 bar; override: 1 bar per 100 L/min
V1 valve; follows: ram; nominal_flow: 600 L/min; flow_AT: 6000 L/min; flow_BT: 6000 L/min
CB1 counterbalance; setting: 130 bar; pilot_ratio: 3; range: 0.01 bar; back_flow: 600 L/min
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P
- RV1.T TK.T
- V1.A CB1.V
- CB1.C C1.A
- V1.B C1.B CB1.X
- V1.T TK.T
`
	d := points("lower", 0.1, []float64{0, 0.5, 2, 2.5, 3},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, -0.05, -0.05, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{40e3, 40e3, 40e3, 40e3, 40e3}})
	r := record(t, text, ramAxis, d)
	A, B := math.Pi/4*0.08*0.08, math.Pi/4*(0.08*0.08-0.056*0.056)
	for i, at := range r.t {
		if at < 1 || at > 2 {
			continue
		}
		want := (130e5 + 4*r.sig["CB1.V.p"][i] - 40e3/A) / (3 + B/A)
		if got := r.sig["C1.B.p"][i]; math.Abs(got-want) > 0.002*want {
			t.Fatalf("%g bar on the rod side at %g s, want %g bar", got/1e5, at, want/1e5)
		}
	}
}

// A pump that follows an axis through a valve that only chooses the direction
// moves it both ways, without throttling beyond the open edges; so does a motor of
// variable speed.
func TestDirectingValve(t *testing.T) {
	resisted := points("resisted", 0.01, []float64{0, 0.2, 1, 1.2, 1.5, 1.7, 2.5, 2.7, 3},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .1, .1, 0, 0, -.1, -.1, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{20e3, 20e3, 40e3, 40e3, -8e3, -8e3, -4e3, -4e3, -4e3}})
	for name, drive := range map[string]string{
		"variable pump": `
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93
P1 pump; displacement: 45 cm3/rev; follows: ram`,
		"variable speed": `
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; follows: ram; max_speed: 2500 rpm
P1 pump; displacement: 45 cm3/rev`,
	} {
		r := record(t, drive+`
TK tank
RV1 relief; crack: 200 bar
V1 valve; directs: ram; nominal_flow: 100 L/min
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; friction: 800 N
CV1 check
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P
- RV1.T TK.T
- V1.A C1.A CV1.out
- V1.B C1.B
- V1.T TK.T
- CV1.in TK.T
`, ramAxis, resisted)
		for i, a := range r.axes {
			if d := math.Abs(a[0].Speed - a[0].Demand); d > 1e-6 && !a[0].Standing {
				t.Fatalf("%s: at %g s the speed is %g, asked %g", name, r.t[i], a[0].Speed, a[0].Demand)
			}
			if u := math.Abs(r.sig["V1.u"][i]); !a[0].Standing && u != 1 {
				t.Fatalf("%s: the directing valve is open %g at %g s", name, u, r.t[i])
			}
			if q := r.sig["RV1.P.q"][i]; q > 1e-9 {
				t.Fatalf("%s: %g m³/s over the relief valve at %g s", name, q, r.t[i])
			}
		}
	}
}
