package circuit

import (
	"context"
	"fmt"
	"testing"

	"barlitre/circuit/duty"
)

// looseOf runs a circuit and says what leakage alone sets, as pockets.
func looseOf(t *testing.T, text string, axes []duty.Axis, d *duty.Duty) string {
	t.Helper()
	c := build(t, text)
	k, found := Compile(c, axes, d)
	if k == nil {
		t.Fatal(found)
	}
	_, cert, err := Run(context.Background(), k, k.Defaults(), k.Series(d), trialOil, State{}, Receivers{})
	if err != nil || cert.Unbalanced > 0 {
		t.Fatal(err, cert.Unbalanced)
	}
	return fmt.Sprint(c.Pockets(cert.Loose))
}

// Which pressures hang on leaks alone was found apart from this for the trial circuits: node impedances beyond 1e4 bar per
// L/min at the chambers behind closed valves, none where the pump holds the load and the low side is fed. The rest by
// what is drawn: oil between two check valves that open away from or towards each other has no other way.
func TestPressuresThatLeakageSets(t *testing.T) {
	for _, c := range []struct {
		name, text string
		axes       []duty.Axis
		d          *duty.Duty
		want       string
	}{
		{"C1", c1, ramAxis, ramDuty, "[{[C1.A C1.B] [V1]}]"},
		{"C4, held by its pump", c4, drumAxis, drumDuty, "[]"},
		{"C5, held by its pump", c5, ramAxis, ramDuty, "[]"},
		{"a hose between valve and cylinder", replaced(t, c1, "- V1.A C1.A", "L1 line; length: 2 m; diameter: 20 mm\n- V1.A L1.A\n- L1.B C1.A"), ramAxis, ramDuty, "[{[C1.A L1.A C1.B] [V1]}]"},
		{"a throttle to tank", replaced(t, c1, "- V1.A C1.A", "OR1 orifice; nominal_flow: 0.1 L/min; nominal_drop: 100 bar\n- OR1.B TK.T\n- V1.A C1.A OR1.A"), ramAxis, ramDuty, "[]"},
		{"a float centre", replaced(t, c1, "V1 valve;", "V1 valve; centre: float;"), ramAxis, ramDuty, "[]"},
		{"between check valves", replaced(t, c1, "- P1.P RV1.P V1.P", "CK1 check\nCK2 check\n- P1.P RV1.P V1.P CK1.out\n- CK1.in CK2.in\n- CK2.out TK.T"), ramAxis, ramDuty, "[{[C1.A C1.B] [V1]} {[CK1.in] [CK1 CK2]}]"},
	} {
		if got := looseOf(t, c.text, c.axes, c.d); got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
}

// A set of standing axes is looked at once, however often it comes again.
func TestStandstillIsLookedAtOnce(t *testing.T) {
	k, _ := Compile(build(t, c1), ramAxis, ramDuty)
	r := newRun(k, k.Defaults(), trialOil, k.Series(ramDuty))
	for range 2 {
		if _, _, err := r.all(context.Background(), State{}, 0, len(r.series.T), Receivers{}); err != nil {
			t.Fatal(err)
		}
	}
	if n := len(r.loose.looked); n != 1 {
		t.Errorf("looked %d times", n)
	}
}
