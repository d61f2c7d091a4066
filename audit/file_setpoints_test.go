package audit

import (
	"bytes"
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

const pressPQ = `format: barlitre/1
title: pump of set pressure and set flow
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
energy: {price: 0.18 EUR/kWh}
axes: {ram: linear}
duties:
- name: day
  hours: 2000 h
  points:
    "t [s]": [0, 1, 2, 3]
    "ram.command": [0.5, 0.5, 0.5, 0.5]
    "ram.load [kN]": [20, 20, 40, 40]
    "P1.set_pressure [bar]": [120, 120, 160, 160]  # bar
    "P1.set_flow [L/min]": [30, 30, 20, 20]
circuits:
- name: As found
  pump_at_rest: keep
  blocks:
    TK: {kind: tank}
    M1: {kind: electric_motor, rated_power: 15 kW, efficiency: 0.92}
    P1: {kind: pump, displacement: 45 cm3/rev, control: pq}
    RV1: {kind: relief, crack: 200 bar}
    V1: {kind: valve, directs: ram, nominal_flow: 200 L/min}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm}
  lines:
  - M1.shaft - P1.shaft
  - P1.S - RV1.T - V1.T - TK.T
  - P1.P - RV1.P - V1.P
  - V1.A - C1.A
  - V1.B - C1.B
`

func TestSetPressureAndSetFlow(t *testing.T) {
	f, found := Parse([]byte(pressPQ), nil, "")
	if len(found) > 0 {
		t.Fatal(found)
	}
	d := f.Duties[0]
	for w, want := range map[duty.What]float64{duty.SetPressure: 160e5, duty.SetFlow: 20e-3 / 60} {
		if tr := d.Track("P1", w); tr == nil || math.Abs(tr.Values[2]-want) > 1e-9*want {
			t.Errorf("%s: %+v, want %g", w, tr, want)
		}
	}
	if !bytes.Equal(f.Bytes(), []byte(pressPQ)) {
		t.Error("the text changed by being read")
	}
	for _, c := range f.Circuits {
		for _, n := range circuit.Check(c.Circuit, f.Axes, f.Duties) {
			if n.Level == circuit.Stops {
				t.Error(n)
			}
		}
	}
	for _, c := range []struct{ track, quantity, old, now string }{
		{"P1.set_pressure", "140 bar", "[120, 120, 160, 160]  # bar", "[120, 120, 140, 160]  # bar"},
		{"P1.set_pressure", "15 MPa", "[120, 120, 160, 160]  # bar", "[120, 120, 150, 160]  # bar"},
		{"P1.set_flow", "12.5", "[30, 30, 20, 20]", "[30, 30, 12.5, 20]"},
	} {
		f, _ := Parse([]byte(pressPQ), nil, "")
		if err := f.SetPoint("day", c.track, 2, c.quantity); err != nil {
			t.Error(err)
		} else if want := strings.Replace(pressPQ, c.old, c.now, 1); string(f.Bytes()) != want {
			t.Errorf("%s: got\n%s", c.track, f.Bytes())
		}
	}
	for _, c := range []struct{ track, quantity, want string }{
		{"P1.set_flow", "12 bar", "not a unit of flow"},
		{"P1.set_pressure", "-3", "below 0"},
		{"P1.command", "0.5", "no such track"},
	} {
		if err := f.SetPoint("day", c.track, 2, c.quantity); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%+v: got %v", c, err)
		}
	}
}

// Wrong use is refused by name, while reading or by the check of the circuit.
func TestSetPointTracksRefused(t *testing.T) {
	for _, c := range []struct{ old, now, want string }{
		{`"P1.set_flow [L/min]": [30`, `"ram.set_flow [L/min]": [30`, "ram is an axis; set flow (set_flow) is for a pump with p/Q control (control: pq)"},
		{`"P1.set_flow [L/min]": [30`, `"P1.set_flow [bar]": [30`, "not a unit of flow"},
		{`"P1.set_flow [L/min]": [30`, `"P1.set_flow [L/min]": [-30`, "P1.set_flow: value 1 is below 0"},
		{`"P1.set_flow [L/min]": [30`, `"P9.set_flow [L/min]": [30`, `there is no axis or block "P9"`},
		{`"P1.set_flow [L/min]": [30`, `"V1.set_flow [L/min]": [30`, "V1.set_flow, but only a pump with p/Q control takes one (control: pq)"},
		{"control: pq", "control: pressure, set_pressure: 100 bar", "P1.set_pressure, but only a pump with p/Q control takes one (control: pq)"},
		{"    \"P1.set_flow [L/min]\": [30, 30, 20, 20]\n", "", "a pump with p/Q control needs its set flow (set_flow)"},
	} {
		text := strings.Replace(pressPQ, c.old, c.now, 1)
		if text == pressPQ {
			t.Fatalf("no %q", c.old)
		}
		f, found := Parse([]byte(text), nil, "")
		for _, e := range f.Circuits {
			found = append(found, circuit.Check(e.Circuit, f.Axes, f.Duties)...)
		}
		if s := fmt.Sprint(found); !strings.Contains(s, c.want) {
			t.Errorf("want %q, got %s", c.want, s)
		}
	}
}
