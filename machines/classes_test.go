package machines

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"
)

// rememberedTable is the table of IEC 60034-30-1 at 50 Hz, % at the standard ratings, from memory: it was
// remembered independently of the printed coefficients of the interpolation formula.
var rememberedTable = map[string]map[int]string{
	"IE1": {
		2: "72.1 75.0 77.2 79.7 81.5 83.1 84.7 86.0 87.6 88.7 89.3 89.9 90.7 91.2 91.7 92.1 92.7 93.0 93.3 93.5 93.8 94.0",
		4: "72.1 75.0 77.2 79.7 81.5 83.1 84.7 86.0 87.6 88.7 89.3 89.9 90.7 91.2 91.7 92.1 92.7 93.0 93.3 93.5 93.8 94.0",
		6: "70.0 72.9 75.2 77.7 79.7 81.4 83.1 84.7 86.4 87.7 88.6 89.2 90.2 90.8 91.4 91.9 92.6 92.9 93.3 93.5 93.8 94.0"},
	"IE2": {
		2: "77.4 79.6 81.3 83.2 84.6 85.8 87.0 88.1 89.4 90.3 90.9 91.3 92.0 92.5 92.9 93.2 93.8 94.1 94.3 94.6 94.8 95.0",
		4: "79.6 81.4 82.8 84.3 85.5 86.6 87.7 88.7 89.8 90.6 91.2 91.6 92.3 92.7 93.1 93.5 94.0 94.2 94.5 94.7 94.9 95.1",
		6: "75.9 78.1 79.8 81.8 83.3 84.6 86.0 87.2 88.7 89.7 90.4 90.9 91.7 92.2 92.7 93.1 93.7 94.0 94.3 94.6 94.8 95.0"},
	"IE3": {
		2: "80.7 82.7 84.2 85.9 87.1 88.1 89.2 90.1 91.2 91.9 92.4 92.7 93.3 93.7 94.0 94.3 94.7 95.0 95.2 95.4 95.6 95.8",
		4: "82.5 84.1 85.3 86.7 87.7 88.6 89.6 90.4 91.4 92.1 92.6 93.0 93.6 93.9 94.2 94.6 95.0 95.2 95.4 95.6 95.8 96.0",
		6: "78.9 81.0 82.5 84.3 85.6 86.8 88.0 89.1 90.3 91.2 91.7 92.2 92.9 93.3 93.7 94.1 94.6 94.9 95.1 95.4 95.6 95.8"},
	"IE4": {
		2: "83.5 85.2 86.5 88.0 89.1 90.0 90.9 91.7 92.6 93.3 93.7 94.0 94.5 94.8 95.0 95.3 95.6 95.8 96.0 96.2 96.3 96.5",
		4: "85.7 87.2 88.2 89.5 90.4 91.1 91.9 92.6 93.3 93.9 94.2 94.5 94.9 95.2 95.4 95.7 96.0 96.1 96.3 96.4 96.6 96.7",
		6: "82.7 84.5 85.9 87.4 88.6 89.5 90.5 91.3 92.3 92.9 93.4 93.7 94.2 94.5 94.8 95.1 95.4 95.6 95.8 96.0 96.2 96.3"},
}

// All 264 values of the remembered table against what the program gives, which comes from
// print and the printed formula (IE1: formula from memory): exact to the digit printed.
func TestClassTable(t *testing.T) {
	n := 0
	for class, columns := range rememberedTable {
		for poles, row := range columns {
			for i, text := range strings.Fields(row) {
				want, _ := strconv.ParseFloat(text, 64)
				eta, _, err := EfficiencyClass(class, standardRatings[i], poles)
				if err != nil {
					t.Fatal(err)
				}
				expectAbs(t, fmt.Sprintf("%s %d poles %v kW", class, poles, standardRatings[i]), 100*eta, want, 1e-9)
				n++
			}
		}
	}
	if n != 4*3*22 {
		t.Errorf("%d values", n)
	}
}

// Rows that were read in print, exact, and the formula beside each: half a digit.
func TestPrintedClassesAgainstFormula(t *testing.T) {
	for class, columns := range motorClasses {
		for poles, c := range columns {
			for _, kW := range standardRatings {
				if v, ok := c.printed(kW); ok {
					expectAbs(t, fmt.Sprintf("%s %d poles %v kW", class, poles, kW), classFormula(c.formula, kW), v, 0.0501)
				}
			}
		}
	}
}

func TestEfficiencyClass(t *testing.T) {
	for _, c := range []struct {
		class  string
		kW     float64
		poles  int
		eta    float64
		origin string
	}{
		{"IE1", 7.5, 4, 86.0, "published value"}, {"IE1", 11, 4, 87.6, "published value"}, {"IE2", 15, 4, 90.6, "published value"},
		{"IE3", 7.5, 4, 90.4, "published value"}, {"IE4", 11, 4, 93.3, "published value"}, {"IE3", 5.5, 2, 89.2, "published value"},
		{"ie3", 22, 4, 93.0, "published coefficients"}, {"IE4", 75, 6, 95.4, "published coefficients"}, {"IE1", 30, 4, 90.7, "from memory"},
		{"IE3", 25, 4, 93.2, "between the standard ratings"},
	} {
		eta, origin, err := EfficiencyClass(c.class, c.kW, c.poles)
		if err != nil || !strings.Contains(origin, c.origin) {
			t.Errorf("%s %v kW: origin %q, %v", c.class, c.kW, origin, err)
		}
		expectAbs(t, fmt.Sprintf("%s %v kW", c.class, c.kW), 100*eta, c.eta, 1e-9)
	}
	for _, c := range []struct {
		class string
		kW    float64
		poles int
	}{{"IE5", 11, 4}, {"", 11, 4}, {"IE3", 11, 8}, {"IE3", 0.5, 4}, {"IE3", 250, 4}, {"IE3", math.NaN(), 4}} {
		if _, _, err := EfficiencyClass(c.class, c.kW, c.poles); err == nil || !strings.Contains(err.Error(), "name-plate") {
			t.Errorf("%+v: error %v must ask for the name-plate efficiency", c, err)
		}
	}
}

// Speeds of the rotating field: 3000, 1500 and 1000 rpm at 50 Hz, 1800 rpm with 4 poles at 60 Hz (textbook).
func TestSynchronousSpeed(t *testing.T) {
	for _, c := range []struct {
		f     float64
		poles int
		rpm   float64
	}{{50, 2, 3000}, {50, 4, 1500}, {50, 6, 1000}, {60, 4, 1800}} {
		expectAbs(t, "synchronous speed", SynchronousSpeed(c.f, c.poles)*30/math.Pi, c.rpm, 1e-9)
	}
}

// Starts an hour against the table of NEMA MG 10 (4 poles: 30 at 1 hp, 16.3 at 5 hp, 12.5 at 10 hp, 8.8 at 25 hp, 6.8 at
// 50 hp, 5.2 at 100 hp; with 2 poles 6.2, with 6 poles 14.2 at 10 hp), from memory.
func TestStartsPerHour(t *testing.T) {
	for _, c := range []struct {
		hp    float64
		poles int
		n     float64
	}{{1, 4, 30}, {5, 4, 16.3}, {10, 4, 12.5}, {25, 4, 8.8}, {50, 4, 6.8}, {100, 4, 5.2}, {10, 2, 6.2}, {10, 6, 14.2}} {
		if n := StartsPerHour(c.hp*745.7, c.poles); math.Abs(n-c.n) > 0.05*c.n {
			t.Errorf("%v hp, %d poles: %.2f starts an hour, want %v", c.hp, c.poles, n, c.n)
		}
	}
}

// Power factor 0.86 at rated load: at half load and 93 % efficiency Q = 0.7·QN + 0.3·QN/4. By hand
// with QN = P/η·tan(acos 0.86).
func TestReactivePower(t *testing.T) {
	m := InductionMotor{RatedPower: 22e3, RatedSpeed: 155, Efficiency: 0.93, FixedShare: 0.35}
	TN := m.RatedPower / m.RatedSpeed
	qN := 22e3 / 0.93 * 0.593353 // tan(acos 0.86)
	expectAbs(t, "rated", m.ReactivePower(TN, 0.86), qN, 1e-4*qN)
	expectAbs(t, "half load", m.ReactivePower(TN/2, 0.86), qN*(0.7+0.3/4), 1e-4*qN)
	expectAbs(t, "generating", m.ReactivePower(-TN/2, 0.86), qN*(0.7+0.3/4), 1e-4*qN)
}

// By hand: 10 N m at 1.25 N m/A are 8 A, 3·0.5 Ω·64 A² = 96 W, at standstill too; 40 W at
// rated speed become 20 W at half of it, either way round.
func TestPermanentMagnetMotor(t *testing.T) {
	m := PermanentMagnetMotor{RatedPower: 3e3, RatedSpeed: 300, TorqueConstant: 1.25, Resistance: 0.5, SpeedLoss: 40}
	if err := m.Check(); err != nil {
		t.Fatal(err)
	}
	expectAbs(t, "current", m.Current(-10), 8, 1e-12)
	expectAbs(t, "holding", m.LossTorqueSpeed(10, 0), 96, 1e-12)
	expectAbs(t, "turning back", m.LossTorqueSpeed(-10, -150), 116, 1e-12)
	m.TorqueConstant = 0
	if err := m.Check(); err == nil || !strings.Contains(err.Error(), "torque constant") {
		t.Errorf("no torque constant: %v", err)
	}
}
