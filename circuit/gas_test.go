package circuit

import (
	"context"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// A pump without losses that is told its flow, 1 L/s at full command, on an accumulator
// of 10 L, 100 bar at 20 °C, which begins at 150 bar with its gas at the 40 °C of its wall.
const gasBench = `
TK tank
M1 electric_motor; rated_power: 30 kW; efficiency: 1; speed: 1500 rpm
P1 pump; displacement: 40 cm3/rev; control: commanded; both_directions: yes; slip: 0; friction: 0; viscous: 0; drag: 0 N m
AC1 accumulator; volume: 10 L; precharge: 100 bar; gas_temperature: 40 C; start_pressure: 150 bar; %s
- M1.shaft P1.shaft
- P1.S TK.T
- P1.P AC1.P
`

const (
	gasWall  = 313.15
	gasFull  = 1e-3 // m³/s at full command
	gasAtm   = 101325.0
	gasFirst = 150e5 + gasAtm
)

// gasMR is m·R of the bench [J/K] by pV = mRθ, and its first volume [m³].
var (
	gasMR = (100e5 + gasAtm) * 10e-3 / 293.15
	gasV1 = gasMR * gasWall / gasFirst
)

// told is a duty that tells the pump its flow by time.
func told(step, end float64, command func(t float64) float64) *duty.Duty {
	d := &duty.Duty{Name: "told", Repeats: true}
	v := []float64{}
	for k := 0; k <= int(math.Round(end/step)); k++ {
		t := float64(k) * step
		d.Time, v = append(d.Time, t), append(v, command(t))
	}
	d.Tracks = []duty.Track{{Of: "P1", What: duty.Command, Values: v}}
	return d
}

func constantly(c float64) func(float64) float64 { return func(float64) float64 { return c } }

// Without time for heat the gas follows p·V^1.4 = const, with all time p·V = const: the
// limits of the energy equation of an ideal gas.
func TestGasLimits(t *testing.T) {
	for _, c := range []struct {
		tau string
		n   float64
	}{{"1e6 s", 1.4}, {"1e-4 s", 1}} {
		for _, flow := range []float64{0.2, -0.2} {
			r := record(t, fmt.Sprintf(gasBench, "thermal_time_constant: "+c.tau), nil, told(0.01, 5, constantly(flow)))
			for k, at := range r.t {
				v := gasV1 - flow*gasFull*at
				p := gasFirst*math.Pow(gasV1/v, c.n) - gasAtm
				if math.Abs(r.sig["AC1.P.p"][k]-p) > 1e-4*p || math.Abs(r.sig["AC1.V"][k]-v) > 1e-9*v {
					t.Fatalf("τ = %s: %g Pa at %g s, want %g", c.tau, r.sig["AC1.P.p"][k], at, p)
				}
			}
		}
	}
}

// Closed form at a volume that stands: θ − θw falls with exp(−t/τ), and p with it.
func TestGasRelaxes(t *testing.T) {
	const tau, filled = 8.0, 1.0
	d := told(0.01, 31, constantly(0))
	d.Time = append([]float64{0, filled}, d.Time[int(filled/0.01):]...)
	v := make([]float64, len(d.Time))
	v[0], v[1] = 1, 1
	d.Tracks[0].Values = v
	r := record(t, fmt.Sprintf(gasBench, "thermal_time_constant: 8 s"), nil, d)
	from := r.sig["AC1.theta"][2] // after the step, at 1 s
	if from < gasWall+15 {
		t.Fatalf("the gas is at %g K, hardly warmed", from)
	}
	for k := 2; k < len(r.t); k++ {
		theta := gasWall + (from-gasWall)*math.Exp(-(r.t[k]-filled)/tau)
		if got := r.sig["AC1.theta"][k]; math.Abs(got-theta) > 1e-9*theta {
			t.Fatalf("%g K at %g s, want %g", got, r.t[k], theta)
		}
		if p := gasMR*theta/r.sig["AC1.V"][k] - gasAtm; math.Abs(r.sig["AC1.P.p"][k]-p) > 1e-8*p {
			t.Fatalf("%g Pa at %g s, want %g", r.sig["AC1.P.p"][k], r.t[k], p)
		}
	}
}

// gasCycle integrates the two equations by Runge and Kutta's method of fourth order until
// they repeat, for a flow q(t) = q0·sin ωt, and returns what the wall keeps a cycle [J].
func gasCycle(omega, q0, tau float64) float64 {
	const gamma = 1.4
	cv := gasMR / (gamma - 1)
	// V, θ, heat given to the wall
	rate := func(t float64, y [3]float64) [3]float64 {
		dV := -q0 * math.Sin(omega*t)
		return [3]float64{dV, (gasWall-y[1])/tau - (gamma-1)*y[1]/y[0]*dV, cv * (y[1] - gasWall) / tau}
	}
	add := func(y, d [3]float64, h float64) [3]float64 {
		for i := range y {
			y[i] += h * d[i]
		}
		return y
	}
	y := [3]float64{gasV1, gasWall, 0}
	const n = 4000
	h, kept := 2*math.Pi/omega/n, 0.0
	for cycle := 0; cycle < 60; cycle++ {
		before := y[2]
		for k := 0; k < n; k++ {
			t := float64(k) * h
			a := rate(t, y)
			b := rate(t+h/2, add(y, a, h/2))
			c := rate(t+h/2, add(y, b, h/2))
			d := rate(t+h, add(y, c, h))
			for i := range y {
				y[i] += h / 6 * (a[i] + 2*b[i] + 2*c[i] + d[i])
			}
		}
		kept = y[2] - before
	}
	return kept
}

// gasPeriod is the loss, what stays stored and what was put in and taken out over a cycle
// of the bench, once it repeats [J].
func gasPeriod(t *testing.T, omega, q0, tau float64, steps int) (lost, stored, moved float64) {
	t.Helper()
	end := 2 * math.Pi / omega
	d := told(end/float64(steps), end, func(at float64) float64 { return q0 / gasFull * math.Sin(omega*at) })
	k, found := Compile(build(t, fmt.Sprintf(gasBench, fmt.Sprintf("thermal_time_constant: %g s", tau))), nil, d)
	if k == nil {
		t.Fatal(found)
	}
	l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
	c := &closing{c: k}
	n, _, cert, err := RunPeriodic(context.Background(), k, k.Defaults(), k.Series(d), trialOil, Receivers{}, Receivers{l, c})
	if err != nil || n != 1 || cert.Unbalanced > 0 {
		t.Fatalf("%d cycles, %d unbalanced, %v", n, cert.Unbalanced, err)
	}
	if c.negative != "" || l.closure() > 1e-9 {
		t.Errorf("closure %g, %s", l.closure(), c.negative)
	}
	return l.energy(Loss, "AC1", "gas heat"), l.energy(Stored, "AC1", ""), l.in
}

// The heat that the wall keeps over a cycle against an independent integration: it is largest
// near ω·τ = 1, since a gas without heat and one without temperature lose nothing. Over
// the cycle the loss booked, which is never below 0, is that heat, and nothing stays.
func TestGasHeatOfACycle(t *testing.T) {
	const omega, q0 = 2 * math.Pi / 10, 0.9e-3
	largest, at := 0.0, 0.0
	for _, wt := range []float64{0.05, 0.2, 0.7, 1, 1.4, 5, 20} {
		want := gasCycle(omega, q0, wt/omega)
		lost, stored, moved := gasPeriod(t, omega, q0, wt/omega, 4000)
		t.Logf("ωτ = %g: %.1f J, want %.1f J; %.2f J of %.0f J stay", wt, lost, want, stored, moved)
		if math.Abs(lost-want) > 2e-3*want {
			t.Errorf("ωτ = %g: the loss is %g J, want %g J", wt, lost, want)
		}
		if math.Abs(stored) > 1e-3*moved { // the gas volume is stepped backwards, of first order
			t.Errorf("ωτ = %g: %g J stay of %g J that went in", wt, stored, moved)
		}
		if lost > largest {
			largest, at = lost, wt
		}
	}
	if at < 0.7 || at > 1.4 {
		t.Errorf("the loss is largest at ωτ = %g", at)
	}
	// What stays falls with the time step: it is an error of the integration.
	_, coarse, _ := gasPeriod(t, omega, q0, 1/omega, 250)
	_, fine, _ := gasPeriod(t, omega, q0, 1/omega, 1000)
	if r := coarse / fine; r < 3 || r > 20 {
		t.Errorf("%g J stay with 250 steps, %g J with 1000", coarse, fine)
	}
}

// Without a time constant all is as it was: no loss and no temperature.
func TestGasExponentHasNoHeat(t *testing.T) {
	r := record(t, fmt.Sprintf(gasBench, "exponent: 1.3"), nil, told(0.01, 2, constantly(0.2)))
	for _, c := range r.c.Channels() {
		if c.Block == "AC1" && c.Role == Loss {
			t.Errorf("it books %s", c.Kind)
		}
	}
	if _, ok := r.sig["AC1.theta"]; ok {
		t.Error("it has a temperature")
	}
}

func TestGasHasOneLaw(t *testing.T) {
	_, found := Compile(build(t, fmt.Sprintf(gasBench, "exponent: 1.3; thermal_time_constant: 8 s")), nil, told(0.1, 1, constantly(0)))
	if !finds(found, "two laws of one gas") {
		t.Errorf("got %v", found)
	}
}

// Limits of the pre-charge, common practice, at the temperature of the gas: p0 = 108.0 bar
// absolute at 40 °C, so 1.1·p0 is 117.8 bar gauge and 4·p0 is 431.1 bar.
func TestPrechargeLimits(t *testing.T) {
	for _, c := range []struct{ start, flow, want string }{
		{"119 bar", "0.01", ""}, {"117 bar", "0.01", "less than 1.1 times the pre-charge 107"},
		{"420 bar", "0.3", "more than 4 times the pre-charge 107"}, {"150 bar", "0.3", ""}, {"110 bar", "-0.5", "it runs empty"},
	} {
		var flow float64
		fmt.Sscan(c.flow, &flow)
		text := strings.Replace(fmt.Sprintf(gasBench, "exponent: 1.3"), "150 bar", c.start, 1)
		d := told(0.01, 1, constantly(flow))
		k, found := Compile(build(t, text), nil, d)
		if k == nil {
			t.Fatal(found)
		}
		s := k.Series(d)
		w := k.NewWatch(k.Defaults(), s)
		if _, _, err := Run(context.Background(), k, k.Defaults(), s, trialOil, State{}, w); err != nil {
			t.Fatal(err)
		}
		said := ""
		for _, f := range w.Findings() {
			if f.Block == "AC1" {
				said += f.Text
			}
		}
		if (c.want == "") != (said == "") || !strings.Contains(said, c.want) {
			t.Errorf("from %s at %s: %q, want %q", c.start, c.flow, said, c.want)
		}
	}
}

// A circuit that switches by itself comes to repeat with a gas that warms up, too.
func TestGasInACircuitThatSwitches(t *testing.T) {
	k, found := Compile(build(t, replaced(t, c6, "exponent: 1.3", "thermal_time_constant: 20 s")), ramAxis, ramDuty)
	if k == nil {
		t.Fatal(found)
	}
	l := &ledger{c: k, pow: make([]float64, len(k.channels)), E: make([]float64, len(k.channels)), at: map[string][]float64{}}
	n, _, cert, err := RunPeriodic(context.Background(), k, k.Defaults(), k.Series(ramDuty), trialOil, Receivers{}, Receivers{l})
	if err != nil || cert.Unbalanced > 0 || l.closure() > 1e-9 {
		t.Errorf("%d cycles, %v, %d unbalanced, closure %g", n, err, cert.Unbalanced, l.closure())
	}
	if st, lost := l.energy(Stored, "AC1", ""), l.energy(Loss, "AC1", "gas heat"); math.Abs(st) > 2e-3*l.in || lost <= 0 || lost > 0.05*l.in {
		t.Errorf("%g J stay in the gas, %g J are lost as its heat, of %g J drawn", st, lost, l.in)
	}
}
