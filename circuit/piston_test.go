package circuit

import (
	"context"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// observed is everything that a run of a test circuit gives.
type observed struct {
	*columns
	ledger *ledger
	watch  *Watch
	end    State
}

func observe(t *testing.T, text string, axes []duty.Axis, d *duty.Duty) *observed {
	t.Helper()
	k, found := Compile(build(t, text), axes, d)
	if k == nil {
		t.Fatalf("refused: %v", found)
	}
	o := &observed{columns: &columns{c: k, sig: map[string][]float64{}},
		ledger: &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}}
	s := k.Series(d)
	o.watch = k.NewWatch(k.Defaults(), s)
	var cert Certificate
	var err error
	steps := &stepClosure{c: k}
	o.end, cert, err = Run(context.Background(), k, k.Defaults(), s, trialOil, State{}, Receivers{o.columns, o.ledger, o.watch, steps})
	if err != nil || cert.Unbalanced > 0 {
		t.Fatalf("%v, %+v", err, cert)
	}
	if steps.worst > 1e-9 {
		t.Errorf("closure %g of a step at %g s, want 1e-9", steps.worst, steps.at)
	}
	return o
}

// stepClosure is the worst closure of any step: what supply leaves over of work,
// store and losses, as a share of all that passes.
type stepClosure struct {
	c         *Compiled
	worst, at float64
}

func (s *stepClosure) Sample(x *Sample) error {
	left, passed := 0.0, 1.0 // W
	for i, ch := range s.c.channels {
		if p := x.Power[i]; ch.Role == Supply {
			left += p
			passed += math.Abs(p)
		} else {
			left -= p
			passed += math.Abs(p)
		}
	}
	if c := math.Abs(left) / passed; c > s.worst {
		s.worst, s.at = c, x.T
	}
	return nil
}

// at is a signal at the last step not after a time.
func (o *observed) sigAt(t *testing.T, name string, at float64) float64 {
	t.Helper()
	col, ok := o.sig[name]
	if !ok {
		t.Fatalf("no signal %s", name)
	}
	v := math.NaN()
	for i, s := range o.t {
		if s <= at+1e-9 {
			v = col[i]
		}
	}
	return v
}

func within(t *testing.T, name string, got, want, share float64) {
	t.Helper()
	if !(math.Abs(got-want) <= share*math.Abs(want)) {
		t.Errorf("%s is %.8g, want %.8g", name, got, want)
	}
}

const ramBench = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93
P1 pump; displacement: 45 cm3/rev; case_share: 0
RV1 relief; crack: 160 bar
V1 valve; follows: ram; nominal_flow: 60 L/min
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P
- RV1.T TK.T
- V1.T TK.T
`

const bothPorts = "- V1.A C1.A\n- V1.B C1.B\n"

// Double rod 80/40 mm at 0.1 m/s against 20 kN, and back at 0.1 m/s against 10 kN.
// By hand: A = B = π/4·(0.08² − 0.04²) = 37.699 cm², 22.619 L/min both ways;
// pA − pB = ±F/A = 53.052 bar and −26.526 bar.
func TestDoubleRodCylinder(t *testing.T) {
	d := points("both ways", 0.02, []float64{0, 0.1, 1, 1.1, 2, 2.1, 3, 3.1, 4},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .1, .1, 0, 0, -.1, -.1, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{20e3, 20e3, 20e3, 20e3, -10e3, -10e3, -10e3, -10e3, 20e3}})
	o := observe(t, ramBench+bothPorts+"C1 double_rod; axis: ram; hold: brake; bore: 80 mm; rod: 40 mm", ramAxis, d)
	const A, q = 37.699e-4, 22.619e-3 / 60
	for _, c := range []struct{ at, dir, dp float64 }{{0.5, 1, 20e3 / A}, {2.5, -1, -10e3 / A}} {
		within(t, "flow into A", o.sigAt(t, "C1.A.q", c.at), c.dir*q, 1e-4)
		within(t, "flow into B", o.sigAt(t, "C1.B.q", c.at), -c.dir*q, 1e-4)
		within(t, "pA − pB", o.sigAt(t, "C1.A.p", c.at)-o.sigAt(t, "C1.B.p", c.at), c.dp, 1e-4)
	}
	if s := o.watch.Shortfalls(1); len(s) > 0 {
		t.Errorf("slower than asked: %+v", s)
	}
}

// Two rod diameters: without a back rod it is the differential cylinder, with the
// rods exchanged it is that cylinder turned round.
func TestDoubleRodOfTwoDiameters(t *testing.T) {
	text := ramBench + bothPorts
	const more = "; friction: 800 N; viscous: 1500 N s/m; leakage: 0.1 L/min per 100 bar; pressure_friction: 0.02; mass: 200 kg"
	a := observe(t, text+"C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm"+more, ramAxis, ramDuty)
	b := observe(t, text+"C1 double_rod; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; back_rod: 0 mm"+more, ramAxis, ramDuty)
	for name, col := range a.sig {
		for i, v := range col {
			if d := math.Abs(v - b.sig[name][i]); d > 1e-9*(1+math.Abs(v)) {
				t.Fatalf("%s at %g s: %g as a differential cylinder, %g without a back rod", name, a.t[i], v, b.sig[name][i])
			}
		}
	}
	// By hand: A = π/4·(0.08² − 0.05²) = 30.631 cm², B = π/4·(0.08² − 0.03²) = 43.197 cm².
	o := observe(t, text+"C1 double_rod; axis: ram; hold: valve; bore: 80 mm; rod: 30 mm; back_rod: 50 mm", ramAxis, ramDuty)
	within(t, "flow into A", o.sigAt(t, "C1.A.q", 1), 30.631e-4*0.15, 1e-4)
	within(t, "flow into B", o.sigAt(t, "C1.B.q", 1), -43.197e-4*0.15, 1e-4)
	within(t, "force", 30.631e-4*o.sigAt(t, "C1.A.p", 1)-43.197e-4*o.sigAt(t, "C1.B.p", 1), 5e3, 2e-3)
}

const plungerBench = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93
P1 pump; displacement: 45 cm3/rev; case_share: 0
RV1 relief; crack: 160 bar
V1 valve; follows: ram; nominal_flow: 60 L/min
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P RV1.P V1.P
- RV1.T TK.T
- V1.A C1.A
- V1.B V1.T TK.T
`

// 80,000 lb at 1600 psi take a diameter of 7.979 in (20.266 cm, 355.8 kN, 11.03 MPa):
// Sullivan, Fluid Power, 4th ed., ex. 8.1 p. 172. It returns by the load.
func TestPlunger(t *testing.T) {
	const load = 80000 * 4.4482216152605
	d := points("lift", 0.02, []float64{0, 0.1, 1, 1.1, 2, 2.1, 3, 3.1, 4},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .02, .02, 0, 0, -.02, -.02, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{load, load, load, load, load, load, load, load, load}})
	o := observe(t, plungerBench+"C1 plunger; axis: ram; hold: valve; diameter: 202.6666 mm", ramAxis, d)
	for _, at := range []float64{0.5, 1.5, 2.5} {
		within(t, "pressure", o.sigAt(t, "C1.A.p", at), 1600*6894.757, 5e-4)
	}
	within(t, "flow back", o.sigAt(t, "C1.A.q", 2.5), -math.Pi/4*0.2026666*0.2026666*0.02, 1e-6)
	if s := o.watch.Shortfalls(1); len(s) > 0 {
		t.Errorf("slower than asked: %+v", s)
	}
	// With dry friction above the load it stays up: asked to come down, it does not.
	light := *d
	light.Tracks = []duty.Track{d.Tracks[0], {Of: "ram", What: duty.Load, Values: []float64{1e3, 1e3, 1e3, 1e3, 1e3, 1e3, 1e3, 1e3, 1e3}}}
	o = observe(t, plungerBench+"C1 plunger; axis: ram; hold: valve; diameter: 202.6666 mm; friction: 2 kN", ramAxis, &light)
	if v := o.sigAt(t, "C1.v", 2.5); math.Abs(v) > 1e-6 {
		t.Errorf("it comes down at %g m/s against its friction", v)
	}
	if s := o.watch.Shortfalls(1); len(s) != 1 || math.Abs(s[0].Seconds-1.1) > 0.03 {
		t.Errorf("shortfall %+v, want 1.1 s", s)
	}
	// Pressure-dependent friction 5 % of pA·A: going up pA·A·0.95 = F.
	o = observe(t, plungerBench+"C1 plunger; axis: ram; hold: valve; diameter: 202.6666 mm; pressure_friction: 0.05", ramAxis, d)
	within(t, "pressure with seal friction", o.sigAt(t, "C1.A.p", 0.5), 1600*6894.757/0.95, 5e-4)
}

// strokes goes out by 0.3 m at 0.15 m/s and back, with ramps of 0.1 s.
func strokes(load float64) *duty.Duty {
	f := make([]float64, 9)
	for i := range f {
		f[i] = load
	}
	return points("stroke", 0.01, []float64{0, 0.1, 2, 2.1, 3, 3.1, 5, 5.1, 6},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .15, .15, 0, 0, -.15, -.15, 0, 0}},
		duty.Track{Of: "ram", What: duty.Load, Values: f})
}

// The whole stroke, from end to end, is used without a stop.
func TestWholeStroke(t *testing.T) {
	for _, hold := range []string{"valve", "brake"} {
		o := observe(t, ramBench+bothPorts+"C1 cylinder; axis: ram; hold: "+hold+"; bore: 80 mm; rod: 56 mm; friction: 800 N; stroke: 0.3 m; start: 0 m", ramAxis, strokes(20e3))
		if s := o.watch.Shortfalls(1); len(s) > 0 {
			t.Errorf("held by %s: slower than asked: %+v", hold, s)
		}
		for _, f := range o.watch.Findings() {
			if f.Parameter == "stroke" {
				t.Errorf("held by %s: %s", hold, f.Text)
			}
		}
	}
}

// A piston that stands 0.1 m from its end when asked for 0.3 m stops there, at the
// end, with the supply at its relief valve; then it comes back the 0.2 m it has.
func TestStrokeEnds(t *testing.T) {
	for _, load := range []float64{20e3, -20e3} { // resisting, pulling
		o := observe(t, ramBench+bothPorts+"C1 cylinder; axis: ram; hold: brake; bore: 80 mm; rod: 56 mm; friction: 800 N; stroke: 0.3 m; start: 0.2 m", ramAxis, strokes(load))
		x, top, low := 0.2, 0.2, 0.2
		v := o.sig["C1.v"]
		for i := 1; i < len(v); i++ {
			x += (o.t[i] - o.t[i-1]) * (v[i] + v[i-1]) / 2
			top, low = math.Max(top, x), math.Min(low, x)
		}
		if math.Abs(top-0.3) > 1e-5 || low < -1e-5 {
			t.Errorf("load %g N: it went from %g to %g m, ends at 0 and 0.3 m", load, low, top)
		}
		// 0.1 m are gone after 0.1/2 s + (0.1 − 0.0075)/0.15 s = 0.71667 s.
		if got := o.sigAt(t, "C1.v", 0.70); math.Abs(got-0.15) > 1e-6 {
			t.Errorf("load %g N: %g m/s before the end", load, got)
		}
		if got := o.sigAt(t, "C1.v", 0.74); math.Abs(got) > 1e-6 {
			t.Errorf("load %g N: %g m/s at the end", load, got)
		}
		if p := o.sigAt(t, "P1.P.p", 1.5); load > 0 && p < 160e5 {
			t.Errorf("%g Pa at the pump while the piston stands on its end", p)
		}
		// 0.3 m asked, 0.1 m gone.
		s := o.watch.Shortfalls(1)
		if len(s) != 1 || math.Abs(s[0].LostStroke-0.2) > 2e-4 {
			t.Errorf("load %g N: shortfall %+v, want 0.2 m lost", load, s)
		}
		found := ""
		for _, f := range o.watch.Findings() {
			if f.Block == "C1" && f.Parameter == "stroke" {
				found = f.Text
			}
		}
		if !strings.Contains(found, "runs against its end (drawn out)") {
			t.Errorf("load %g N: finding %q", load, found)
		}
		within(t, "way", o.end.Travel(0), -0.2, 1e-3) // back from 0.3 m to 0
	}
}

// Coming to rest on an end costs at most what the supply can press it with over the
// way of one step, and never gives energy.
func TestEndTakesEnergy(t *testing.T) {
	o := observe(t, ramBench+bothPorts+"C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; stroke: 0.3 m; start: 0.2005 m", ramAxis, strokes(20e3))
	E := o.ledger.energy(Loss, "C1", "end of stroke")
	if most := (170e5*50.27e-4 - 20e3) * 0.15 * 0.01; E <= 0 || E > most {
		t.Errorf("the end takes %g J, must lie between 0 and %g J", E, most)
	}
}

// A valve left open by a recorded command drives the piston to both ends.
func TestCommandDrivesToTheEnds(t *testing.T) {
	d := points("open", 0.01, []float64{0, 4, 4, 10},
		duty.Track{Of: "ram", What: duty.Command, Values: []float64{0.5, 0.5, -0.5, -0.5}},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{5e3, 5e3, 5e3, 5e3}})
	o := observe(t, ramBench+bothPorts+"C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; friction: 800 N; stroke: 0.4 m; start: 0.1 m", ramAxis, d)
	x, v := 0.1, o.sig["C1.v"]
	for i := 1; i < len(v); i++ {
		x += (o.t[i] - o.t[i-1]) * (v[i] + v[i-1]) / 2
		if at := o.t[i]; at > 3 && at < 4 && math.Abs(x-0.4) > 1e-5 {
			t.Fatalf("at %g m after %g s, must stand at its end of 0.4 m", x, at)
		}
	}
	if math.Abs(x) > 1e-5 {
		t.Errorf("at %g m at last, must stand drawn in", x)
	}
}

// Held by the pump, a piston may stand on its end; in pieces it stops where it does in one.
func TestEndHeldByPump(t *testing.T) {
	text := strings.NewReplacer("rod: 56 mm;", "rod: 56 mm; stroke: 0.3 m; start: 0.15 m;", "- P1.P", "- RV1.P P1.P", "- LP1.P", "- RV1.T LP1.P").Replace(c5) + "RV1 relief; crack: 250 bar\n"
	o := observe(t, text, ramAxis, strokes(10e3))
	if s := o.watch.Shortfalls(1); len(s) != 1 || math.Abs(s[0].LostStroke-0.15) > 2e-4 {
		t.Errorf("shortfall %+v, want 0.15 m lost", s)
	}
	k, st := o.c, State{}
	s := k.Series(strokes(10e3))
	parts := &columns{c: k, sig: map[string][]float64{}}
	for from := 0; from < len(s.T); from += 37 {
		var err error
		if st, _, err = Run(context.Background(), k, k.Defaults(), s.Part(from, min(from+37, len(s.T))), trialOil, st, parts); err != nil {
			t.Fatal(err)
		}
	}
	if math.Abs(st.Travel(0)-o.end.Travel(0)) > 1e-9 {
		t.Errorf("way %g m in pieces, %g m in one", st.Travel(0), o.end.Travel(0))
	}
}

// Starts and strokes that do not fit are refused in words.
func TestStrokeIsChecked(t *testing.T) {
	for more, want := range map[string]string{
		"; start: 0.1 m":                  "give the stroke too",
		"; stroke: 0.1 m; start: 200 mm":  "beyond its stroke",
		"; stroke: 0.3 m; start: -0.01 m": "must be at least",
	} {
		_, found := Compile(build(t, ramBench+bothPorts+"C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm"+more), ramAxis, ramDuty)
		text := ""
		for _, f := range found {
			if f.Level == Stops {
				text += f.Text
			}
		}
		if !strings.Contains(text, want) {
			t.Errorf("%s: %q, want %q", more, text, want)
		}
	}
}

// A circuit that remembers is run for many cycles until it repeats itself; each begins
// where the piston stands at the start, though the duty loses 10 mm in every one.
func TestEndsOfPeriodicRuns(t *testing.T) {
	k, found := Compile(build(t, strings.Replace(c6, "rod: 56 mm;", "rod: 56 mm; stroke: 0.5 m; start: 0.02 m;", 1)), ramAxis, ramDuty)
	if k == nil {
		t.Fatalf("refused: %v", found)
	}
	s := k.Series(ramDuty)
	w := k.NewWatch(k.Defaults(), s)
	cycles, _, cert, err := RunPeriodic(context.Background(), k, k.Defaults(), s, trialOil, Receivers{}, w)
	if err != nil || cert.Unbalanced > 0 || cycles != 2 {
		t.Fatalf("%d cycles, %v, %+v", cycles, err, cert)
	}
	if w.axes[0].end != 0 || len(w.Shortfalls(cycles)) > 0 {
		t.Errorf("stopped at its end: %+v, %+v", w.axes[0], w.Shortfalls(cycles))
	}
	if way := w.axes[0].hi - w.axes[0].lo; math.Abs(way-0.4) > 1e-4 { // 0.39 m out, 0.4 m back
		t.Errorf("its way over %d cycles is %g m, want that of one, 0.4 m", cycles, way)
	}
}

// A motion that is given as measured is not stopped: that it leaves the stroke is said.
func TestMeasuredMotionBeyondTheStroke(t *testing.T) {
	text := ramBench + bothPorts + "C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm; stroke: 0.3 m; start: "
	d := points("recorded", 0.02, []float64{0, 0.1, 1, 1.1, 2},
		duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .1, .1, 0, 0}},
		duty.Track{Of: "ram", What: duty.Command, Values: []float64{0, .2, .2, 0, 0}})
	for start, want := range map[string]bool{"0.25 m": true, "0.1 m": false} {
		o := observe(t, text+start, ramAxis, d)
		said := false
		for _, f := range o.watch.Findings() {
			said = said || strings.Contains(f.Text, "beyond its stroke")
		}
		if said != want {
			t.Errorf("from %s: said %v, want %v", start, said, want)
		}
	}
}
