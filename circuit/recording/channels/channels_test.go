package channels

import (
	"math"
	"math/rand"
	"testing"
)

// A parabola is met exactly, by calculus, on even and uneven rows and at both ends.
func TestSlopeOfParabola(t *testing.T) {
	r := rand.New(rand.NewSource(1))
	for _, uneven := range []float64{0, 0.4} {
		var ts, x []float64
		for i := range 200 {
			s := 0.01 * (float64(i) + uneven*r.Float64())
			ts, x = append(ts, s), append(x, 1000+3*s-4*s*s)
		}
		v, a := Slope(ts, x, 0.1)
		for i := range v {
			if math.Abs(v[i]-(3-8*ts[i])) > 1e-6 || math.Abs(a[i]+8) > 1e-4 {
				t.Fatalf("uneven %g, row %d: %g, %g", uneven, i, v[i], a[i])
			}
		}
	}
}

// Noise of a position, 0.1 mm at 100 Hz: its speed by plain differences scatters by
// √2·0.1 mm/20 ms = 7 mm/s; a parabola over n rows by σ·√(12/n³)/h (least squares, any
// textbook), 1.1 mm/s for 21 rows.
func TestSlopeOfNoise(t *testing.T) {
	r := rand.New(rand.NewSource(2))
	var ts, x []float64
	for i := range 20000 {
		ts, x = append(ts, 0.01*float64(i)), append(x, 1e-4*r.NormFloat64())
	}
	v, _ := Slope(ts, x, 0.2)
	sum := 0.0
	for _, y := range v[100 : len(v)-100] {
		sum += y * y
	}
	got, want := math.Sqrt(sum/float64(len(v)-200)), 1e-4*math.Sqrt(12/math.Pow(21, 3))/0.01
	if math.Abs(got/want-1) > 0.05 {
		t.Errorf("scatter %g, want %g", got, want)
	}
}

// A rod of known mass, friction and damping is moved under a known load: the pressures that
// this takes, by Newton's law, give the load back.
func TestLoadOfPressures(t *testing.T) {
	c := Cylinder{A: 5.03e-3, B: 2.56e-3, Friction: 800, Damping: 1500, Mass: 900}
	var ts, v, pA, pB, want []float64
	for i := range 2000 {
		s := 0.005 * float64(i)
		speed, acc := 0.2*math.Sin(1.3*s), 0.26*math.Cos(1.3*s)
		load := 20e3 + 9e3*math.Cos(0.7*s)
		b := 8e5
		f := 0.0
		if math.Abs(speed) > 0.2e-3 {
			f = math.Copysign(c.Friction, speed)
		}
		ts, v, want = append(ts, s), append(v, speed), append(want, load)
		pB = append(pB, b)
		pA = append(pA, (load+f+c.Damping*speed+c.Mass*acc+b*c.B)/c.A)
	}
	got, err := c.Load(ts, pA, pB, v, 0.05)
	if err != nil {
		t.Fatal(err)
	}
	for i := range want {
		if math.Abs(got.Values[i]-want[i]) > 1 && math.Abs(v[i]) > 0.3e-3 {
			t.Fatalf("row %d: %g N, want %g; %s", i, got.Values[i], want[i], got.Formula)
		}
	}
	if got.Formula != "F = p_A·0.00503\u202fm² − p_B·0.00256\u202fm² − 800\u202fN·sgn v − 1500\u202fN·s/m·v − 900\u202fkg·dv/dt (over 0.05\u202fs)" {
		t.Error(got.Formula)
	}
	if _, err := c.Load(ts, pA, pB, nil, 0.05); err == nil {
		t.Error("friction without a speed")
	}
}

// By hand: 80 cm³/rev, 120 bar, gear 5, 90 %: T = 5·80e-6/2π·120e5 = 763.94 N m ideal.
func TestLoadOfMotor(t *testing.T) {
	m := Motor{Displacement: 80e-6 / (2 * math.Pi), Gear: 5, Efficiency: 0.9}
	got, err := m.Load([]float64{0, 1, 2, 3, 4}, []float64{120e5, 120e5, 120e5, 120e5, 120e5}, make([]float64, 5), []float64{5, 5, 0, -5, -5}, 0.1)
	if err != nil {
		t.Fatal(err)
	}
	for i, want := range []float64{687.549, 687.549, 763.944, 848.826, 848.826} {
		if math.Abs(got.Values[i]-want) > 1e-3 {
			t.Errorf("row %d: %g, want %g", i, got.Values[i], want)
		}
	}
	if v := SpeedOfFlow([]float64{1e-3}, 5e-3, 0.95); math.Abs(v.Values[0]-0.19) > 1e-15 {
		t.Error(v)
	}
}
