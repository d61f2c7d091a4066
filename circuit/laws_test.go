package circuit

import (
	"context"
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// Laws that hold for every sound circuit, on seeded random ones: the balance of
// every step, closure of energy, no block that makes energy, and how results
// scale with pressure, with size, and when a valve is plumbed the other way.

type random struct {
	*rand.Rand
	text strings.Builder
	axes []duty.Axis
	duty *duty.Duty
}

// decade draws a number log-uniformly over a decade around x.
func (r *random) decade(x float64) float64 { return x * math.Pow(10, r.Float64()-0.5) }

func (r *random) row(format string, args ...any) { fmt.Fprintf(&r.text, format+"\n", args...) }

// generate draws a circuit of a supply and one or two actuators. p scales
// pressures and forces, s sizes and flows; the draw does not depend on them.
func generate(seed uint64, p, s float64, crossed bool) (text string, axes []duty.Axis, d *duty.Duty, oil Conditions) {
	r := &random{Rand: rand.New(rand.NewPCG(seed, 7))}
	n := 1 + r.IntN(2)
	supply := r.IntN(3) // fixed, pressure, load sensing
	r.row("TK tank")
	r.row("M1 electric_motor; rated_power: %g kW; efficiency: 0.93", r.decade(22)*p*s)
	pump := fmt.Sprintf("P1 pump; displacement: %g cm3/rev; drag: %g N m; case_share: %g", r.decade(45)*s, 1.5*p*s, float64(r.IntN(3))/2)
	set := 100 + 150*r.Float64()
	switch supply {
	case 1:
		pump += fmt.Sprintf("; control: pressure; set_pressure: %g bar", set*0.85*p)
	case 2:
		pump += fmt.Sprintf("; control: load_sensing; margin: %g bar", 20*p)
	}
	r.row("%s", pump)
	r.row("RV1 relief; crack: %g bar; override: %g bar per 100 L/min", set*p, r.decade(10)*p/s)
	r.row("F1 filter; nominal_flow: %g L/min; nominal_drop: %g bar", r.decade(60)*s, p)
	r.row("- M1.shaft P1.shaft")
	r.row("- P1.S TK.T")
	r.row("- RV1.T TK.T")
	r.row("- F1.B TK.T")
	rail, ret := "- P1.P RV1.P", "- F1.A"
	times := []float64{0, 0.1, 1, 1.1, 2, 2.1, 3, 3.1, 4}
	d = points("random", 0.05, times)
	var signals []string
	for i := 1; i <= n; i++ {
		axis := fmt.Sprintf("a%d", i)
		v, c := fmt.Sprintf("V%d", i), fmt.Sprintf("C%d", i)
		centre := []string{"closed", "float", "closed"}[r.IntN(3)]
		rotary := r.IntN(3) == 0
		hold := "valve"
		if rotary || centre == "float" {
			hold = "brake"
		}
		r.row("%s valve; follows: %s; nominal_flow: %g L/min; nominal_drop: %g bar; centre: %s", v, axis, r.decade(60)*s, 5*p, centre)
		top, load := 0.0, 0.0
		if rotary {
			disp := r.decade(80)
			r.row("%s motor; axis: %s; hold: %s; displacement: %g cm3/rev; drag: %g N m; case_share: 0", c, axis, hold, disp*s, 1.5*p*s)
			top, load = r.decade(30), r.decade(0.5*disp)*p*s
			d.Tracks = append(d.Tracks, duty.Track{Of: axis, What: duty.Speed}, duty.Track{Of: axis, What: duty.Load})
			axes = append(axes, duty.Axis{Name: axis, Kind: duty.Rotary})
		} else {
			bore := r.decade(80)
			rod := bore * (0.2 + 0.6*r.Float64())
			k := math.Sqrt(s)
			r.row("%s cylinder; axis: %s; hold: %s; bore: %g mm; rod: %g mm; friction: %g N; viscous: %g N s/m; pressure_friction: %g", c, axis, hold, bore*k, rod*k, 800*p*s, 1500*p*s, 0.02*float64(r.IntN(2)))
			top, load = r.decade(0.1), r.decade(0.4*bore*bore*8)*p*s
			d.Tracks = append(d.Tracks, duty.Track{Of: axis, What: duty.Speed}, duty.Track{Of: axis, What: duty.Load})
			axes = append(axes, duty.Axis{Name: axis, Kind: duty.Linear})
		}
		v1, v2 := top*(0.3+r.Float64()), -top*(0.3+r.Float64())
		f1, f2 := load*(r.Float64()), load*(r.Float64()-0.15)
		if r.IntN(2) == 0 {
			v1, v2 = v2, v1
		}
		k := len(d.Tracks)
		d.Tracks[k-2].Values = []float64{0, v1, v1, 0, 0, v2, v2, 0, 0}
		d.Tracks[k-1].Values = []float64{f1, f1, f2, f2, f2, f1, f1, f2, f2}
		if r.IntN(2) == 0 && supply == 2 { // a pre-compensated section
			r.row("PC%d compensator; drop: %g bar; nominal_flow: %g L/min; nominal_drop: %g bar", i, 8*p, 60*s, p)
			rail += fmt.Sprintf(" PC%d.P", i)
			r.row("- PC%d.A %s.P", i, v)
			signals = append(signals, fmt.Sprintf("%s.LS PC%d.LS", v, i))
		} else {
			rail += " " + v + ".P"
			signals = append(signals, v+".LS")
		}
		ret += " " + v + ".T"
		portA, portB := v+".A", v+".B"
		if crossed {
			portA, portB = portB, portA
		}
		if r.IntN(2) == 0 {
			r.row("L%d line; length: %g m; diameter: %g mm", i, 0.0, 20*math.Sqrt(s))
			r.row("- %s L%d.A", portA, i)
			portA = fmt.Sprintf("L%d.B", i)
		}
		// make-up from tank on both sides, so that no side runs empty
		r.row("- %s %s.A MA%d.out", portA, c, i)
		r.row("- %s %s.B MB%d.out", portB, c, i)
		r.row("MA%d check; opens: 0 bar; nominal_flow: %g L/min; nominal_drop: %g bar", i, 100*s, 0.05*p)
		r.row("MB%d check; opens: 0 bar; nominal_flow: %g L/min; nominal_drop: %g bar", i, 100*s, 0.05*p)
		r.row("- MA%d.in MB%d.in TK.T", i, i)
	}
	if supply == 2 {
		if n == 2 {
			r.row("SH shuttle")
			r.row("- %s SH.X", signals[0])
			r.row("- %s SH.Y", signals[1])
			r.row("- SH.A P1.LS")
		} else {
			r.row("- %s P1.LS", signals[0])
		}
	} else {
		for _, sig := range signals {
			if strings.Contains(sig, "PC") {
				r.row("- %s", sig)
			}
		}
	}
	r.row("%s", rail)
	r.row("%s", ret)
	return r.text.String(), axes, d, Conditions{Density: 870 * p, Viscosity: 0.04 * p}
}

const laws = 300

func lawLedger(t *testing.T, seed uint64, p, s float64, crossed bool) (*ledger, Certificate, *Watch) {
	t.Helper()
	text, axes, d, oil := generate(seed, p, s, crossed)
	c := build(t, text)
	k, found := Compile(c, axes, d)
	if k == nil {
		t.Fatalf("seed %d refused: %v\n%s", seed, found, text)
	}
	l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
	series := k.Series(d)
	w := k.NewWatch(k.Defaults(), series)
	_, cert, err := Run(context.Background(), k, k.Defaults(), series, oil, State{}, Receivers{l, w})
	if err != nil {
		t.Fatalf("seed %d: %v\n%s", seed, err, text)
	}
	return l, cert, w
}

func TestRandomCircuitsBalanceAndClose(t *testing.T) {
	steps, fallbacks, unsolved := 0, 0, 0
	for seed := uint64(0); seed < laws; seed++ {
		l, cert, _ := lawLedger(t, seed, 1, 1, false)
		steps += cert.Steps
		fallbacks += cert.Fallbacks
		unsolved += cert.Unbalanced
		if cert.Unbalanced > 0 {
			t.Logf("seed %d: %d of %d steps unbalanced: %+v", seed, cert.Unbalanced, cert.Steps, cert.Unsolved)
			continue
		}
		if c := l.closure(); c > 1e-6 {
			t.Errorf("seed %d: closure %g", seed, c)
		}
		for i, ch := range l.c.channels {
			if ch.Role == Loss && l.E[i] < -1e-6*l.in {
				t.Errorf("seed %d: %s %s makes energy: %g J", seed, ch.Block, ch.Kind, l.E[i])
			}
		}
	}
	t.Logf("%d steps, %d needed a fall-back, %d unsolved", steps, fallbacks, unsolved)
	// One in 10,000 may be left, marked as such: load-sensing pumps at full stroke
	// with a stalled actuator are the cases known to withstand every rung.
	if unsolved*10000 > steps {
		t.Errorf("%d of %d steps unsolved, at most 1 in 10000 may be", unsolved, steps)
	}
}

// same compares two energy balances, the second divided by k.
func same(t *testing.T, name string, seed uint64, a, b *ledger, k float64) {
	t.Helper()
	for i := range a.E {
		if d := math.Abs(a.E[i] - b.E[i]/k); d > 1e-7*a.in {
			t.Errorf("%s, seed %d: %s %s %g J against %g J", name, seed, a.c.channels[i].Block, a.c.channels[i].Kind, a.E[i], b.E[i]/k)
			return
		}
	}
}

func dry(w *Watch) bool {
	for _, v := range w.voids {
		if v.worst > 0 {
			return false
		}
	}
	return true
}

func TestScalingLaws(t *testing.T) {
	compared := 0
	for seed := uint64(0); seed < laws/3; seed++ {
		a, _, w := lawLedger(t, seed, 1, 1, false)
		big, _, _ := lawLedger(t, seed, 1, 8, false)
		same(t, "eight times the size", seed, a, big, 8)
		if !dry(w) {
			continue // the floor of a node is a pressure of nature and does not scale
		}
		high, _, w2 := lawLedger(t, seed, 2, 1, false)
		if dry(w2) {
			same(t, "twice the pressure", seed, a, high, 2)
			compared++
		}
	}
	if compared < laws/10 {
		t.Errorf("only %d circuits could be compared at twice the pressure", compared)
	}
}

// Plumbing A and B of every valve the other way must change nothing but which
// edges work: the program finds out which way a valve moves its axis.
func TestCrossedValves(t *testing.T) {
	for seed := uint64(0); seed < laws/3; seed++ {
		a, _, _ := lawLedger(t, seed, 1, 1, false)
		b, _, _ := lawLedger(t, seed, 1, 1, true)
		if d := math.Abs(a.in - b.in); d > 1e-7*a.in {
			t.Errorf("seed %d: supply %g J against %g J crossed", seed, a.in, b.in)
		}
		swap := map[string]string{"metering P-A": "metering P-B", "metering P-B": "metering P-A", "metering A-T": "metering B-T", "metering B-T": "metering A-T"}
		for i, ch := range a.c.channels {
			if k, ok := swap[ch.Kind]; ok && math.Abs(a.E[i]-b.energy(Loss, ch.Block, k)) > 1e-7*a.in {
				t.Errorf("seed %d: %s %s %g J, crossed %s %g J", seed, ch.Block, ch.Kind, a.E[i], k, b.energy(Loss, ch.Block, k))
			}
		}
	}
}
