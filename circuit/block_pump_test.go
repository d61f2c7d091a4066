package circuit

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// limited is the lossless supply with a variable pump of 66.6 L/min and 7.5 kW.
func limitedPump(control string) string {
	return strings.Replace(rail, "P1 pump;", "P1 pump; "+control+"; power_limit: 7.5 kW;", 1) + `
V1 valve; directs: ram; nominal_flow: 100000 L/min
- P1.P RV1.P V1.P
- V1.A C1.A
- V1.B C1.B
- V1.T TK.T
`
}

// Hand calculation: q = min(what the control wants, 7.5 kW/p) of a pump without losses.
func TestPowerLimit(t *testing.T) {
	full, P := 66.6*lpm, 7.5e3
	for _, c := range []struct {
		control string
		load    float64 // Pa
		flow    float64
	}{
		{"control: power", 40e5, full},
		{"control: power", 100e5, P / 100e5},
		{"control: pressure; set_pressure: 150 bar", 40e5, full},
		{"control: pressure; set_pressure: 150 bar", 120e5, P / 120e5},
		{"control: commanded; setting: 0.5", 100e5, full / 2},
		{"control: commanded; setting: 0.5", 150e5, P / 150e5},
		{"control: pq; set_pressure: 150 bar; set_flow: 40 L/min", 100e5, 40 * lpm},
		{"control: pq; set_pressure: 150 bar; set_flow: 40 L/min", 140e5, P / 140e5},
	} {
		t.Run(fmt.Sprintf("%s at %g bar", c.control, c.load/1e5), func(t *testing.T) {
			r := steady(t, limitedPump(c.control), ramAxis, pushing(c.load*boreArea, 1))
			near(t, "flow", -r.last(t, "P1.P.q"), c.flow, 1e-4)
			if got := r.last(t, "P1.shaft"); got > P*(1+1e-9) {
				t.Errorf("%g W at the shaft", got)
			}
		})
	}
	// Against a load beyond its set pressure the control wants less than the limit allows.
	r := steady(t, limitedPump("control: pressure; set_pressure: 150 bar"), ramAxis, pushing(155e5*boreArea, 1))
	if e := r.last(t, "P1.e"); math.Abs(e) > 1e-6 {
		t.Errorf("setting %g, want none", e)
	}
}

// With friction the torque at the shaft is what is limited: e·D·Δp + Cf·D·Δp + Cv·D·μ·ω + Tc = PL/ω.
func TestPowerLimitCountsFriction(t *testing.T) {
	text := replaced(t, limitedPump("control: power"), "slip: 0; friction: 0; viscous: 0; drag: 0 N m", "slip: 0; friction: 0.03; viscous: 65000; drag: 1.5 N m")
	r := steady(t, text, ramAxis, pushing(100e5*boreArea, 1))
	D, w, dp := 45e-6/2/math.Pi, 1480*2*math.Pi/60, r.last(t, "P1.P.p")
	e := (7.5e3/w - 0.03*D*dp - 65000*D*0.04*w - 1.5) / (D * dp)
	near(t, "setting", r.last(t, "P1.e"), e, 1e-9)
	near(t, "torque", r.last(t, "P1.T"), 7.5e3/w, 1e-9)
	// The limit is a torque: at 1000 rpm under a limit stated at 1480 rpm the power is less.
	text = replaced(t, replaced(t, text, "speed: 1480 rpm", "speed: 1000 rpm"), "power_limit: 7.5 kW", "power_limit: 7.5 kW; reference_speed: 1480 rpm")
	r = steady(t, text, ramAxis, pushing(150e5*boreArea, 1))
	near(t, "torque at 1000 rpm", r.last(t, "P1.T"), 7.5e3/w, 1e-9)
}

// A pump that follows an axis moves it slower where the limit holds it, both ways over
// centre; the drum turns at PL·η/T. Without losses η = 1.
func TestPowerLimitOfFollower(t *testing.T) {
	text := replaced(t, fmt.Sprintf(winchOn, "M1 electric_motor; rated_power: 22 kW; efficiency: 0.93; speed: 1480 rpm"), "both_directions: yes", "both_directions: yes; power_limit: 6 kW")
	d := points("drum", 0.1, []float64{0, 0, 1, 1, 2, 2, 3},
		duty.Track{Of: "drum", What: duty.Speed, Values: []float64{0, 60, 60, 20, 20, -60, -60}},
		duty.Track{Of: "drum", What: duty.Load, Values: []float64{150, 150, 150, 150, 150, -150, -150}})
	r := steady(t, text, drumAxis, d)
	for i, at := range r.t {
		want := 0.0
		switch {
		case at > 0 && at < 1:
			want = 40 // 6 kW/150 N m
		case at > 1 && at < 2:
			want = 20
		case at > 2:
			want = -40
		default:
			continue
		}
		near(t, fmt.Sprintf("speed at %g s", at), r.axes[i][0].Speed, want, 1e-6)
	}
}

// pq: the set flow until the set pressure, from tracks and from numbers, into an orifice of
// 30 L/min at 100 bar: p = 100 bar·(q/30 L/min)².
func TestPressureFlowPump(t *testing.T) {
	text := replaced(t, rail, "P1 pump;", "P1 pump; control: pq;") + `
V1 valve; directs: ram; nominal_flow: 100 L/min
OR1 orifice; nominal_flow: 30 L/min; nominal_drop: 100 bar
- P1.P RV1.P V1.P OR1.A
- V1.A C1.A
- V1.B C1.B
- V1.T OR1.B TK.T
`
	d := points("pq", 0.1, []float64{0, 1, 1, 2},
		duty.Track{Of: "ram", What: duty.Load, Values: []float64{0, 0, 0, 0}},
		duty.Track{Of: "ram", What: duty.Command, Values: []float64{0, 0, 0, 0}},
		duty.Track{Of: "P1", What: duty.SetFlow, Values: []float64{10 * lpm, 20 * lpm, 60 * lpm, 60 * lpm}},
		duty.Track{Of: "P1", What: duty.SetPressure, Values: []float64{150e5, 150e5, 50e5, 120e5}})
	r := steady(t, text, ramAxis, d)
	for i, at := range r.t {
		q, p := -r.sig["P1.P.q"][i], r.sig["P1.P.p"][i]
		switch {
		case at < 1:
			near(t, fmt.Sprintf("flow at %g s", at), q, (10+10*at)*lpm, 1e-6)
			near(t, "pressure", p, 100e5*math.Pow((10+10*at)/30, 2), 1e-4)
		case at > 1:
			near(t, fmt.Sprintf("pressure at %g s", at), p, (50+70*(at-1))*1e5, 1e-9)
			near(t, "flow", q, 30*lpm*math.Sqrt((50+70*(at-1))/100), 1e-4)
		}
	}
	r = steady(t, replaced(t, text, "control: pq;", "control: pq; set_flow: 21 L/min; set_pressure: 140 bar;"), ramAxis, pushing(0, 0))
	near(t, "flow", -r.last(t, "P1.P.q"), 21*lpm, 1e-6)
	r = steady(t, replaced(t, text, "control: pq;", "control: pq; set_flow: 60 L/min; set_pressure: 140 bar;"), ramAxis, pushing(0, 0))
	near(t, "pressure", r.last(t, "P1.P.p"), 140e5, 1e-9)
	// A series in parts carries the tracks too.
	k, _ := Compile(build(t, text), ramAxis, d)
	s := k.Series(d)
	p := s.Part(3, 7)
	for c, v := range s.Commands {
		if got := p.Commands[c]; len(got) != 4 || got[0] != v[3] {
			t.Errorf("%v: part has %v of %v", c, got, v)
		}
	}
	if len(s.Commands) != 2 {
		t.Errorf("%d tracks of blocks, want 2", len(s.Commands))
	}
}

func TestPumpControlsRefused(t *testing.T) {
	setFlow := duty.Track{Of: "P1", What: duty.SetFlow, Values: []float64{1e-4, 1e-4}}
	low := duty.Track{Of: "P1", What: duty.SetPressure, Values: []float64{-1, 1}}
	fine := duty.Track{Of: "P1", What: duty.SetPressure, Values: []float64{1e5, 1e5}}
	ofValve := duty.Track{Of: "V1", What: duty.SetPressure, Values: []float64{1e5, 1e5}}
	plain := rail + "V1 valve; directs: ram; nominal_flow: 100 L/min\n- P1.P RV1.P V1.P\n- V1.A C1.A\n- V1.B C1.B\n- V1.T TK.T\n"
	with := func(s string) string { return strings.Replace(plain, "P1 pump;", "P1 pump; "+s+";", 1) }
	for _, c := range []struct {
		text   string
		tracks []duty.Track
		want   string
	}{
		{with("power_limit: 5 kW"), nil, "a fixed pump has no displacement to cut back"},
		{with("control: power"), nil, "needs its power limit (power_limit)"},
		{with("control: pq; set_flow: 10 L/min"), nil, "a pump with p/Q control needs its set pressure (set_pressure)"},
		{with("control: pq; set_pressure: 100 bar"), []duty.Track{fine}, "needs its set flow (set_flow)"},
		{with("control: pq; set_flow: 10 L/min"), []duty.Track{low}, "below 0"},
		{with("control: commanded"), []duty.Track{setFlow}, "P1.set_flow, but only a pump with p/Q control takes one (control: pq)"},
		{plain, []duty.Track{ofValve}, "V1.set_pressure, but only a pump with p/Q control takes one (control: pq)"},
		{with("control: pq; set_pressure: 100 bar; follows: ram"), nil, "keep one of the two (follows, control)"},
	} {
		d := pushing(1e3, 1)
		d.Tracks = append(d.Tracks, c.tracks...)
		k, found := Compile(build(t, c.text), ramAxis, d)
		if s := fmt.Sprint(found); k != nil || !strings.Contains(s, c.want) {
			t.Errorf("want %q, got %s", c.want, s)
		}
	}
	// A shaft that no prime mover sits on has no speed of its own.
	text := strings.Replace(with("control: power; power_limit: 5 kW"), "- M1.shaft P1.shaft", "HM9 motor; displacement: 10 cm3/rev\nP9 pump; displacement: 10 cm3/rev\n- M1.shaft P9.shaft\n- P9.P HM9.A\n- P9.S HM9.B TK.T\n- HM9.shaft P1.shaft", 1)
	if k, found := Compile(build(t, text), ramAxis, pushing(1e3, 1)); k != nil || !strings.Contains(fmt.Sprint(found), "reference_speed") {
		t.Errorf("no reference speed: %v", found)
	}
}

func TestPowerLimitInRandomCircuits(t *testing.T) {
	survive(t, func(text string) string {
		if !strings.Contains(text, "control:") {
			text = strings.Replace(text, "P1 pump;", "P1 pump; control: power;", 1)
		}
		return strings.Replace(text, "P1 pump;", "P1 pump; power_limit: 5 kW;", 1)
	})
}

func TestPressureFlowInRandomCircuits(t *testing.T) {
	survive(t, func(text string) string {
		if strings.Contains(text, "control:") {
			return ""
		}
		return strings.Replace(text, "P1 pump;", "P1 pump; control: pq; set_pressure: 90 bar; set_flow: 30 L/min;", 1)
	})
}
