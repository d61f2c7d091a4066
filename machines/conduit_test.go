package machines

import (
	"fmt"
	"math"
	"math/rand"
	"testing"

	"barlitre/machines/units"
)

const (
	inch, foot, psi, gpm = units.Inch, units.Foot, units.PSI, units.GallonPerMin
	water                = 1000.0 // kg/m³, to which specific gravities refer here
)

// Esposito 4.1, 4.2 (Reynolds), 4.3, 4.4 (laminar loss).
func TestLaminar(t *testing.T) {
	rho := 0.9 * water
	expectAbs(t, "Esposito 4.1 Reynolds", Reynolds(10*foot, inch, rho, 100*mm2*rho), 774.2, 0.05)
	expect(t, "Esposito 4.2 Reynolds", Reynolds(5, 0.050, rho, 0.001*rho), 250, 1e-3)
	q := 10 * foot * math.Pi / 4 * inch * inch
	dp, _ := PipeDrop(q, inch, 100*foot, 0, 0, rho, 100*mm2*rho)
	expect(t, "Esposito 4.3 psi", dp/psi, 60.15, 3e-3)
	rho = 8800 / 9.80665
	q = 5 * math.Pi / 4 * 0.05 * 0.05
	dp, _ = PipeDrop(q, 0.05, 50, 0, 0, rho, 0.001*rho)
	expect(t, "Esposito 4.4 bar", dp/units.Bar, 28.73, 3e-3)
	expect(t, "Esposito 4.4 head", dp/8800, 326, 3e-3)
	expect(t, "Hagen-Poiseuille", dp, 128*0.001*rho*50*q/(math.Pi*math.Pow(0.05, 4)), 1e-12)
	expect(t, "64/128", FrictionFactor(128, 0), 0.5, 1e-12)
}

// Colebrook as evaluated by the tests of an open process-engineering library; tolerance 1e-5.
// Other formulas give 0.018452424 (Swamee-Jain) and 0.018462625 (Churchill) there, 0.3 % lower.
func TestColebrook(t *testing.T) {
	expect(t, "Re 1e5, 1e-4", FrictionFactor(1e5, 1e-4), 0.018513866, 1e-5)
	// Against the equation itself.
	for _, re := range []float64{4000, 1e4, 3e5, 1e8} {
		for _, rel := range []float64{0, 1e-6, 1e-3, 0.05} {
			x := 1 / math.Sqrt(FrictionFactor(re, rel))
			expect(t, fmt.Sprintf("Colebrook at %g, %g", re, rel), -2*math.Log10(rel/3.7+2.51*x/re), x, 1e-12)
		}
	}
	// Blasius 0.03164 at 1e4 is for smooth pipe within 3 %.
	expect(t, "Blasius", FrictionFactor(1e4, 0), 0.03164, 0.03)
}

// Crane TP-410 example 7.13: 2 in schedule 40, 100 ft, 2 US gal/s, SG 0.815, 2.7 cSt: 66,500 Pa by its chart,
// 65,759 Pa with Colebrook and 0.0018 in.
func TestTurbulentOilLine(t *testing.T) {
	rho := 0.815 * 998.9 // the example takes water at 60 F, 62.364 lb/ft³ = 998.98 kg/m³
	dp, _ := PipeDrop(2*units.Gallon, 0.05248, 100*foot, 0.0018*inch, 0, rho, 2.7*mm2*rho)
	expect(t, "Crane 7.13, Colebrook", dp, 65759, 1e-3)
	expect(t, "Crane 7.13, chart", dp, 66500, 1.5e-2)
	re := Reynolds(MeanVelocity(2*units.Gallon, 0.05248), 0.05248, rho, 2.7*mm2*rho)
	expect(t, "Reynolds", re, 68000, 2e-3)
	expect(t, "friction factor", FrictionFactor(re, 0.0018*inch/0.05248), 0.022702, 1e-3)
	// Esposito 10.2: 0.002 m³/s at 6.1 m/s needs 20.4 mm.
	expect(t, "Esposito 10.2 mm", DiameterFor(0.002, 6.1)*1e3, 20.43, 5e-3)
}

// Esposito 9.5, strict SI: 154.04 L/min, 50 ft of 1.040 in, K = 2·0.75 + 4, 125 cSt, SG 0.9: Re 990, friction 4.226 bar.
func TestPumpToMotorLine(t *testing.T) {
	rho, d := 0.9*water, 1.040*inch
	q := 154.04 * lpm
	expect(t, "Reynolds", Reynolds(MeanVelocity(q, d), d, rho, 125*mm2*rho), 990, 5e-3)
	dp, _ := PipeDrop(q, d, 50*foot, 0, 2*0.75+4, rho, 125*mm2*rho)
	expect(t, "friction bar", dp/units.Bar, 4.226, 5e-3)
}

func TestPipeDropProperties(t *testing.T) {
	rnd := rand.New(rand.NewSource(5))
	for range 3000 {
		d, l := 0.005+0.05*rnd.Float64(), 50*rnd.Float64()
		rough, zeta := d*0.05*rnd.Float64(), 10*rnd.Float64()
		rho, mu := 800+100*rnd.Float64(), math.Pow(10, -3+3*rnd.Float64())
		drop := func(q float64) float64 { p, _ := PipeDrop(q, d, l, rough, zeta, rho, mu); return p }
		q := math.Pow(10, -5+3*rnd.Float64())
		dp, slope := PipeDrop(q, d, l, rough, zeta, rho, mu)
		if back := drop(-q); back != -dp {
			t.Fatalf("not odd: %g and %g", dp, back)
		}
		if !(dp > 0 && slope > 0) || drop(1.001*q) <= dp {
			t.Fatalf("not growing at q %g: dp %g, slope %g", q, dp, slope)
		}
		expectSlope(t, "pipe", drop, slope, q, 1e-6*q, 1e-4)
	}
}

// Through the passage from laminar to turbulent value and slope are continuous, and the drop grows for any roughness.
func TestPassageBetweenRegimes(t *testing.T) {
	for _, rel := range []float64{0, 1e-4, 0.01, 0.05} {
		last, lastSlope := frictionHead(1990, rel)
		for re := 1991.0; re < 4010; re++ {
			h, s := frictionHead(re, rel)
			if !(h > last && s > 0) {
				t.Fatalf("rel %v: not growing at Re %v", rel, re)
			}
			if math.Abs(s-lastSlope) > 2 || math.Abs(h-last-s) > 2 {
				t.Fatalf("rel %v: jump at Re %v: %v to %v", rel, re, lastSlope, s)
			}
			last, lastSlope = h, s
		}
	}
	dp, slope := PipeDrop(1e-3, 0.02, 0, 1e-5, 0, oilRho, oilMu)
	if dp != 0 || slope != 0 {
		t.Errorf("no length, no fittings: %g, %g", dp, slope)
	}
	dp, slope = PipeDrop(0, 0.02, 3, 1e-5, 2, oilRho, oilMu)
	if dp != 0 {
		t.Errorf("no flow, drop %g", dp)
	}
	expect(t, "slope at rest", slope, 128*oilMu*3/(math.Pi*math.Pow(0.02, 4)), 1e-12)
}

// Esposito 8.4, 8.5; Sullivan 5.4.
func TestOrifice(t *testing.T) {
	q := OrificeFlow(100*psi, 0.80, math.Pi/4*inch*inch, 0.9*water)
	expect(t, "Esposito 8.4 gpm, strict SI", q/gpm, 251.5, 1e-3)
	expect(t, "the other way", OrificeFlow(-100*psi, 0.80, math.Pi/4*inch*inch, 0.9*water), -q, 0)
	expect(t, "Esposito 8.4 gpm, book with the rounded 38.1", q/gpm, 252, 4e-3)
	// Esposito 8.5: flow coefficient of 25 gpm at 100 psi, SG 0.9, is 2.37 gpm/√psi of water.
	q, _ = NominalFlow(1*psi, 25*gpm*math.Sqrt(0.9), 100*psi, 0)
	expect(t, "Esposito 8.5", q/gpm, 2.3717, 1e-3)
	q, _ = NominalFlow(1e3, 94.8*lpm*math.Sqrt(0.9), 687e3, 0)
	expect(t, "Esposito 8.5 SI", q/lpm, 3.4312, 1e-3)
	// Sullivan 5.4: 1000 gpm through 3.14 in² at 120 psi, SG 0.85: Cd 0.70; recomputed 0.704.
	q = OrificeFlow(120*psi, 1, 3.14*inch*inch, 0.85*water)
	expect(t, "Sullivan 5.4 Cd", 1000*gpm/q, 0.704, 5e-3)
	// Sullivan 10.1: 30 gpm at 300 psi, SG 0.85, needs a coefficient of 1.597; 5.41 takes 26.14 psi.
	q, _ = NominalFlow(1*psi, 30*gpm*math.Sqrt(0.85), 300*psi, 0)
	expect(t, "Sullivan 10.1", q/gpm, 1.597, 1e-3)
	dp, _ := NominalDrop(30*gpm*math.Sqrt(0.85), 5.41*gpm, 1*psi, 0)
	expect(t, "Sullivan 10.1 psi", dp/psi, 26.14, 1e-3)
	// Independent calculation with scipy, trial circuit C1: filter, 60 L/min at 1 bar, and an edge at opening 0.146595.
	dp, _ = NominalDrop(23.0719*lpm, 60*lpm, 1e5, 0)
	expect(t, "C1 filter", dp/1e5, 0.147864, 1e-5)
	dp, _ = NominalDrop(45.2389*lpm, 0.146595*60*lpm, 5e5, 0)
	expect(t, "C1 edge P-A", dp/1e5, 161.875-29.6073, 1e-4)
}

func TestOrificeProperties(t *testing.T) {
	rnd := rand.New(rand.NewSource(6))
	for range 3000 {
		qN, dpN := (1+100*rnd.Float64())*lpm, (1+20*rnd.Float64())*1e5
		ql := qN * 0.05 * rnd.Float64()
		q := qN * 2 * rnd.NormFloat64()
		dp, slope := NominalDrop(q, qN, dpN, ql)
		if dp*q < 0 || slope < 0 {
			t.Fatalf("drop %g of flow %g, slope %g", dp, q, slope)
		}
		back, inverse := NominalFlow(dp, qN, dpN, ql)
		expect(t, "inverse", back, q, 1e-10)
		expect(t, "inverse slope", inverse*slope, 1, 1e-9)
		f := func(x float64) float64 { p, _ := NominalDrop(x, qN, dpN, ql); return p }
		expectSlope(t, "orifice", f, slope, q, 1e-6*math.Abs(q), 1e-5)
	}
	dp, slope := NominalDrop(0, 1e-3, 5e5, 2e-5)
	expect(t, "slope at rest", slope, 5e5*2e-5/1e-6, 1e-12)
	if q, inverse := NominalFlow(0, 1e-3, 5e5, 2e-5); dp != 0 || q != 0 || math.Abs(inverse*slope-1) > 1e-12 {
		t.Errorf("at rest: %g, %g, %g", dp, q, inverse)
	}
}
