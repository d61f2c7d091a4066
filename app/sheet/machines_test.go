package sheet

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// drives is an invented audit with every kind of machine and drive, and a pump with measured points.
const drives = `format: barlitre/1
title: Machines and drives, invented
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear, hoist: rotary}
energy: {price: 0.18 EUR/kWh, fuel_price: 1.6 EUR/L}
duties:
- name: day
  hours: 1000 h
  points:
    t: [0 s, 0.1 s, 2 s, 2.1 s, 4 s]
    ram.speed: [0 m/s, 0.1 m/s, 0.1 m/s, 0 m/s, 0 m/s]
    ram.load: [5 kN, 5 kN, 50 kN, 5 kN, 5 kN]
    hoist.speed: [0 rad/s, 5 rad/s, 5 rad/s, 0 rad/s, 0 rad/s]
    hoist.load: [100 N m, 100 N m, 100 N m, 100 N m, 100 N m]
circuits:
- name: As found
  pump_at_rest: keep
  blocks:
    T1: {kind: tank, at: [24, 60]}
    M1: {kind: electric_motor, rated_power: 22 kW, efficiency_class: IE3, speed: 1480 rpm, slip: yes, at: [8, 48]}
    P1: {kind: pump, displacement: {value: 45 cm3/rev, origin: name plate}, points: pump.csv, points_viscosity: 26 mPa s, rating: 280 bar, max_speed: 2500 rpm, at: [24, 48]}
    RV1: {kind: relief, crack: 160 bar, at: [44, 48]}
    V1: {kind: valve, follows: ram, centre: closed, nominal_flow: 60 L/min, nominal_drop: 5 bar, at: [30, 26]}
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm, at: [30, 10]}
    E1: {kind: engine, rated_power: 30 kW, speed: 1800 rpm, at: [56, 48]}
    P2: {kind: pump, displacement: 28 cm3/rev, follows: hoist, both_directions: yes, family: axial_piston, at: [70, 48]}
    CP1: {kind: charge_pump, displacement: 6 cm3/rev, charge: 20 bar, at: [80, 60]}
    CK1: {kind: check, nominal_flow: 20 L/min, at: [66, 60]}
    CK2: {kind: check, nominal_flow: 20 L/min, at: [74, 60]}
    T2: {kind: tank, at: [84, 68]}
    H1: {kind: motor, displacement: 250 cm3/rev, axis: hoist, hold: brake, family: radial_piston, at: [70, 20]}
  lines: [M1.shaft - P1.shaft, P1.S - T1.T, P1.P - RV1.P - V1.P, RV1.T - V1.T - T1.T, V1.A - C1.A, V1.B - C1.B,
    E1.shaft - P2.shaft - CP1.shaft, P2.P - H1.A - CK1.out, P2.S - H1.B - CK2.out, CP1.P - CK1.in - CK2.in, CP1.S - CP1.T - T2.T]
- name: Speed-controlled
  role: proposal
  retrofit_cost: 20000 EUR
  pump_at_rest: stop
  blocks:
    T1: {kind: tank, at: [24, 60]}
    FC1: {kind: converter, rated_power: 22 kW, at: [2, 60]}
    M1: {kind: electric_motor, type: permanent_magnet, rated_power: 15 kW, efficiency: 0.94, speed: 2000 rpm, follows: ram, both_directions: yes, at: [8, 48]}
    P1: {kind: pump, displacement: 45 cm3/rev, family: external_gear, rating: 280 bar, max_speed: 2500 rpm, at: [24, 48]}
    C1: {kind: double_rod, axis: ram, hold: brake, bore: 80 mm, rod: 56 mm, at: [30, 10]}
    E1: {kind: engine, rated_power: 30 kW, speed: 1800 rpm, at: [56, 48]}
    P2: {kind: pump, displacement: 28 cm3/rev, follows: hoist, both_directions: yes, family: axial_piston, at: [70, 48]}
    CP1: {kind: charge_pump, displacement: 6 cm3/rev, charge: 20 bar, at: [80, 60]}
    CK1: {kind: check, nominal_flow: 20 L/min, at: [66, 60]}
    CK2: {kind: check, nominal_flow: 20 L/min, at: [74, 60]}
    T2: {kind: tank, at: [84, 68]}
    H1: {kind: motor, displacement: 250 cm3/rev, axis: hoist, hold: brake, family: radial_piston, at: [70, 20]}
  lines: [FC1.M - M1.E, M1.shaft - P1.shaft, P1.S - C1.B - T1.T, P1.P - C1.A,
    E1.shaft - P2.shaft - CP1.shaft, P2.P - H1.A - CK1.out, P2.S - H1.B - CK2.out, CP1.P - CK1.in - CK2.in, CP1.S - CP1.T - T2.T]
`

// points is a table of measured points of an invented pump.
func points() string {
	law := machines.Displacement{D: 45 * units.CubicCentimetrePerRev, Cs: 9e-9, Kd: 1.2, Cf: 0.02, Cv: 5e4, Tc: 2}
	var b strings.Builder
	b.WriteString("n [1/min], dp [bar], q [L/min], T [N m]\n")
	for _, n := range []float64{700, 1200, 1800, 2400} {
		for i, bar := range []float64{20, 60, 120, 200, 260} {
			w, dp := n*units.RPM, bar*units.Bar
			q, T := law.Flow(1, w, dp, 0.026, 870, 1.4e9), law.Torque(1, w, dp, 0.026, 870)
			scatter := 1 + 0.004*math.Sin(float64(i)*7+n)
			fmt.Fprintf(&b, "%g, %g, %.6g, %.6g\n", n, bar, q/units.LitrePerMinute, T*scatter)
		}
	}
	return b.String()
}

// openDrives shows the audit with its table beside it.
func openDrives(t testing.TB, size fyne.Size) (b *bench, dir string) {
	t.Helper()
	dir = t.TempDir()
	for name, text := range map[string]string{"drives.yaml": drives, "pump.csv": points()} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	b = newBench(t, "", size)
	if found, err := b.doc.Open(filepath.Join(dir, "drives.yaml")); err != nil || circuit.AnyStops(found) {
		t.Fatal(err, found)
	}
	b.solved()
	return b, dir
}

// drawn waits until the picture in the panel is drawn.
func (b *bench) drawn() {
	b.t.Helper()
	g := b.s.panel.gallery
	for end := time.Now().Add(20 * time.Second); len(g.list) > 0 && !g.picture.Ready(); time.Sleep(5 * time.Millisecond) {
		b.win.Canvas().Capture()
		if time.Now().After(end) {
			b.t.Fatal("the picture is not drawn")
		}
	}
}

// tall shows the whole panel of a block, to be looked at.
func (b *bench) tall(circuit int, block, name string) {
	b.Select(circuit, block)
	if !stationtest.Looking() {
		return
	}
	for range 3 {
		b.win.Resize(fyne.NewSize(1201*widgets.Scale(), b.s.panel.list.MinSize().Height/panelShare+400*widgets.Scale()))
		b.win.Resize(fyne.NewSize(1200*widgets.Scale(), b.s.panel.list.MinSize().Height/panelShare+400*widgets.Scale()))
	}
	b.drawn()
	b.picture(name)
}

func TestMachinePanels(t *testing.T) {
	b, _ := openDrives(t, fyne.NewSize(1200, 590))
	for _, c := range b.Solution().Circuits {
		for _, f := range c.Findings {
			if f.Level == circuit.Stops {
				t.Fatalf("%s: %s", c.Circuit.Name, f.Text)
			}
		}
	}
	for _, x := range []struct {
		at    int
		block string
	}{{0, "P1"}, {0, "M1"}, {0, "E1"}, {0, "P2"}, {0, "H1"}, {1, "FC1"}, {1, "M1"}, {1, "P1"}} {
		b.tall(x.at, x.block, fmt.Sprintf("panel-%d-%s", x.at, x.block))
	}
	for _, s := range circuit.Sections {
		b.s.panel.expanded[s] = true
	}
	b.theme(true, 1.5)
	b.tall(0, "P1", "panel-all-dark-150")
	b.tall(0, "M1", "panel-all-M1-dark-150")
	b.s.panel.gallery.choose(b.s.panel.gallery.choice.Options[0])
	b.tall(0, "P2", "panel-all-P2-dark-150")
}
