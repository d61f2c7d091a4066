package machines

import (
	"errors"
	"math"
	"strings"
	"testing"

	"barlitre/machines/units"
)

// Heads as people write them, all for one point by hand: 1500 rpm, 200 bar, 80 L/min, 200 N m, 57 cm³.
func TestReadPointsOfAnySpelling(t *testing.T) {
	want := Point{W: 1500 * units.RPM, E: 1, DP: 200e5, Q: 80 * lpm, T: 200, Line: 2}
	for _, c := range [][]Column{
		{{"rpm", "", []float64{1500}}, {"dp_MPa", "", []float64{20}}, {"Qout_Lmin", "", []float64{80}}, {"torque_Nm", "", []float64{200}}, {"disp_cm3", "", []float64{57}}, {"eta_t", "", []float64{90}}, {"rpm_nominal", "", []float64{1500}}},
		{{"n", "1/min", []float64{1500}}, {"dp", "bar", []float64{200}}, {"q", "L/min", []float64{80}}, {"T", "N m", []float64{200}}, {"V", "cm3/rev", []float64{57}}},
		{{"Speed (rpm)", "", []float64{1500}}, {"p2 (bar)", "", []float64{202}}, {"p1 (bar)", "", []float64{2}}, {"flow (l/min)", "", []float64{80}}, {"shaft power (kW)", "", []float64{200 * 1500 * units.RPM / 1e3}}, {"setting (%)", "", []float64{100}}},
		{{"n in rpm", "", []float64{1500}}, {"dp in psi", "", []float64{200e5 / units.PSI}}, {"q_L_min", "", []float64{80}}, {"drain_L_min", "", []float64{2}}, {"M / Nm", "", []float64{200}}},
	} {
		m, d, err := ReadPoints(c, []int32{2}, 57*cm3)
		if err != nil {
			t.Errorf("%v: %v", c, err)
			continue
		}
		p := m.Points[0]
		expect(t, "displacement", d, 57*cm3, 1e-12)
		for _, v := range [][2]float64{{p.W, want.W}, {p.E, want.E}, {p.DP, want.DP}, {p.Q, want.Q}, {p.T, want.T}} {
			expect(t, c[0].Name, v[0], v[1], 1e-9)
		}
		if m.Motor || p.Line != 2 {
			t.Errorf("%s: taken for a motor, or line %d", c[0].Name, p.Line)
		}
	}
}

func TestReadPointsOfAMotor(t *testing.T) {
	law := NewDisplacement(80 * cm3)
	var n, dp, q, T []float64
	var lines []int32
	for _, w := range []float64{50, 100, 200} {
		for _, p := range []float64{5e6, 1e7, 2e7} {
			n, dp = append(n, w), append(dp, p)
			q, T = append(q, law.Flow(1, w, -p, oilMu, oilRho, oilBulk)), append(T, -law.Torque(1, w, -p, oilMu, oilRho))
			lines = append(lines, int32(len(lines)+2))
		}
	}
	m, _, err := ReadPoints([]Column{{"n", "rad/s", n}, {"dp", "Pa", dp}, {"q", "m3/s", q}, {"T", "N m", T}}, lines, 80*cm3)
	if err != nil || !m.Motor {
		t.Fatalf("%v, motor %v", err, m.Motor)
	}
	f, err := FitPoints(m.Points, FitOptions{D: 80 * cm3, Fluid: Fluid{Mu: oilMu, Rho: oilRho, Bulk: oilBulk}})
	if err != nil {
		t.Fatal(err)
	}
	expect(t, "slip of the motor", f.Law.Cs, law.Cs, 1e-6)
	expect(t, "friction of the motor", f.Law.Cf, law.Cf, 1e-6)
	expectAbs(t, "residual", f.RMS, 0, 1e-9)
}

func TestReadPointsRefusals(t *testing.T) {
	col := func(names ...string) (out []Column) {
		for _, n := range names {
			out = append(out, Column{Name: n, Values: []float64{10}})
		}
		return out
	}
	for _, c := range []struct {
		cols []Column
		full float64
		want string
	}{
		{col("dp_bar", "q_Lmin", "T_Nm"), 1, "speed"}, {col("rpm", "q_Lmin", "T_Nm"), 1, "pressure difference"}, {col("rpm", "dp_bar", "T_Nm"), 1, "flow"},
		{col("rpm", "dp_bar", "q_Lmin"), 1, "torque"}, {col("rpm", "dp_bar", "q_Lmin", "T_Nm"), 0, "displacement"},
		{col("rpm", "dp_bar", "q_Lmin", "T_Nm", "n_rpm"), 1, "two columns"}, {col("rpm", "dp_bar", "q_Lmin", "T_Nm", "V_cm3"), 5 * cm3, "110 %"},
		{[]Column{{"rpm", "", []float64{0}}, {"dp_bar", "", []float64{1}}, {"q_Lmin", "", []float64{1}}, {"T_Nm", "", []float64{1}}}, 1, "line 2"},
	} {
		if _, _, err := ReadPoints(c.cols, []int32{2}, c.full); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%v: %v, want %q", c.cols, err, c.want)
		}
	}
	if _, err := FitPoints(nil, FitOptions{D: 1e-5}); err == nil {
		t.Error("a fit of no points is accepted")
	}
	dead := make([]Point, 12)
	for i := range dead {
		dead[i] = Point{W: 100, E: 1, DP: 1e7, Q: 1, T: 1} // more comes out than goes in
	}
	if _, err := FitPoints(dead, FitOptions{D: 1e-5, Fluid: oilOf57}); !errors.Is(err, ErrNoPower) {
		t.Errorf("points that make energy: %v", err)
	}
	if !math.IsNaN(rms(nil)) {
		t.Error("rms of nothing is a number")
	}
}
