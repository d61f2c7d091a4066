package circuit

import (
	"context"
	"fmt"
	"math"
	"regexp"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// closing is a receiver that keeps the worst closure of a single time step: power
// in against work, stored and losses, over the sum of all of them.
type closing struct {
	c        *Compiled
	worst    float64
	at       float64
	negative string // a loss that makes energy
	skip     int    // steps that were not solved
}

func (r *closing) Sample(s *Sample) error {
	if s.Unbalanced {
		r.skip++
		return nil
	}
	sum, size := 0.0, 1.0
	for i, ch := range r.c.channels {
		size += math.Abs(s.Power[i])
		if ch.Role == Supply {
			sum += s.Power[i]
		} else {
			sum -= s.Power[i]
		}
		if ch.Role == Loss && s.Power[i] < -1e-3 {
			r.negative = fmt.Sprintf("%s %s %g W at %g s", ch.Block, ch.Kind, s.Power[i], s.T)
		}
	}
	if c := math.Abs(sum) / size; c > r.worst {
		r.worst, r.at = c, s.T
	}
	return nil
}

// steady runs a circuit, checks that every step is balanced and closes, and
// returns its signals.
func steady(t *testing.T, text string, axes []duty.Axis, d *duty.Duty) *columns {
	t.Helper()
	k, found := Compile(build(t, text), axes, d)
	if k == nil {
		t.Fatalf("refused: %v", found)
	}
	r, c := &columns{c: k, sig: map[string][]float64{}}, &closing{c: k}
	_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), trialOil, State{}, Receivers{r, c})
	if err != nil || cert.Unbalanced > 0 {
		t.Fatalf("%v, %+v", err, cert)
	}
	if c.worst > 1e-9 || c.negative != "" {
		t.Errorf("closure %g at %g s; %s", c.worst, c.at, c.negative)
	}
	return r
}

// last returns a signal at the end of a run.
func (r *columns) last(t *testing.T, name string) float64 {
	t.Helper()
	v := r.sig[name]
	if len(v) == 0 {
		t.Fatalf("no signal %s", name)
	}
	return v[len(v)-1]
}

func near(t *testing.T, what string, got, want, share float64) {
	t.Helper()
	if math.IsNaN(got) || math.Abs(got-want) > share*math.Abs(want)+1e-12 {
		t.Errorf("%s is %g, want %g", what, got, want)
	}
}

// pushing is a duty in which a command is held against a load.
func pushing(load, command float64) *duty.Duty {
	return points("pushing", 0.5, []float64{0, 1},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{load, load}},
		duty.Track{Of: "ram", What: duty.Command, Values: []float64{command, command}})
}

// A supply at 160 bar: a pump without losses under a relief valve without override,
// 45 cm³ × 1480 rpm = 66.6 L/min, and a cylinder of 80/56 mm.
const rail = `
TK tank
M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm
P1 pump; displacement: 45 cm3/rev; case_share: 0; slip: 0; friction: 0; viscous: 0; drag: 0 N m
RV1 relief; crack: 160 bar; override: 0 bar per 100 L/min
C1 cylinder; axis: ram; hold: valve; bore: 80 mm; rod: 56 mm
- M1.shaft P1.shaft
- P1.S TK.T
- RV1.T TK.T
`

var (
	boreArea = math.Pi / 4 * 0.08 * 0.08
	rodArea  = math.Pi / 4 * (0.08*0.08 - 0.056*0.056)
)

const lpm = 1e-3 / 60

// zero finds where a rising function passes zero, by bisection.
func zero(lo, hi float64, f func(float64) float64) float64 {
	for i := 0; i < 200; i++ {
		if m := (lo + hi) / 2; f(m) > 0 {
			hi = m
		} else {
			lo = m
		}
	}
	return (lo + hi) / 2
}

// survive puts a kind of block into random circuits. change returns "" where a
// circuit does not suit it.
func survive(t *testing.T, change func(text string) string) {
	t.Helper()
	steps, unsolved, ran := 0, 0, 0
	for seed := uint64(0); seed < 60; seed++ {
		text, axes, d, oil := generate(seed, tame)
		if text = change(text); text == "" {
			continue
		}
		k, found := Compile(build(t, text), axes, d)
		if k == nil {
			t.Fatalf("seed %d refused: %v\n%s", seed, found, text)
		}
		c := &closing{c: k}
		_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), oil, State{}, c)
		if err != nil {
			t.Errorf("seed %d: %v\n%s", seed, err, text)
			continue
		}
		ran++
		steps += cert.Steps
		unsolved += cert.Unbalanced
		if cert.Unbalanced > 0 {
			t.Logf("seed %d: %d of %d unsolved: %+v", seed, cert.Unbalanced, cert.Steps, cert.Unsolved)
		}
		if c.worst > 1e-9 || c.negative != "" {
			t.Errorf("seed %d: closure %g at %g s; %s\n%s", seed, c.worst, c.at, c.negative, text)
		}
	}
	t.Logf("%d circuits, %d steps, %d unsolved", ran, steps, unsolved)
	if ran < 8 || unsolved > 0 {
		t.Errorf("%d circuits ran, %d of %d steps unsolved", ran, unsolved, steps)
	}
}

var boreLine = regexp.MustCompile(`- (\S+) C1\.A MA1\.out`)

// between puts a block K1 into the line to the bore side of the first actuator.
func toBore(row, in, out string) func(string) string {
	return func(text string) string {
		return boreLine.ReplaceAllString(text, "- $1 K1."+in+"\n- K1."+out+" C1.A MA1.out") + "K1 " + row + "\n"
	}
}

// onRail puts a block K1 into the supply line of all valves of a fixed pump.
func onRail(row, in, out string) func(string) string {
	return func(text string) string {
		if strings.Contains(text, "control:") {
			return ""
		}
		return strings.Replace(text, "- P1.P RV1.P", "- P1.P RV1.P K1."+in+"\n- K1."+out, 1) + "K1 " + row + "\n"
	}
}

// replaced changes a text that must be there.
func replaced(t *testing.T, text, old, now string) string {
	t.Helper()
	if !strings.Contains(text, old) {
		t.Fatalf("no %q in the circuit", old)
	}
	return strings.Replace(text, old, now, 1)
}
