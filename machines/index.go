package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// indexReference returns L and H [mm²/s], the viscosities at 40 °C of the reference oils of index 0 and 100 that
// have y [mm²/s], y >= 2, at 100 °C: the printed table with linear interpolation, above 70 the standard's equations
//
//	L = 0.8353·Y² + 14.67·Y − 216,  H = 0.1684·Y² + 11.85·Y − 97        (11a)
func indexReference(y float64) (l, h float64) {
	for _, s := range indexTable {
		last := len(s.rows) - 1
		if x := (y - s.from) / s.step; x <= float64(last) {
			i := min(int(x), last-1)
			part := x - float64(i)
			a, b := s.rows[i], s.rows[i+1]
			return a[0] + part*(b[0]-a[0]), a[1] + part*(b[1]-a[1])
		}
	}
	return (0.8353*y+14.67)*y - 216, (0.1684*y+11.85)*y - 97
}

// indexOf evaluates the definition of the index for u at 40 °C and y at 100 °C [mm²/s],
//
//	u >= H: VI = 100·(L − u)/(L − H);  else VI = 100 + (10^N − 1)/0.00715, N = (lg H − lg u)/lg y        (11)
func indexOf(u, y, l, h float64) float64 {
	if u >= h {
		return 100 * (l - u) / (l - h)
	}
	n := (math.Log10(h) - math.Log10(u)) / math.Log10(y)
	return 100 + (math.Pow(10, n)-1)/0.00715
}

// ViscosityIndex returns the viscosity index of an oil with kinematic viscosities nu40 and nu100 [m²/s].
// The error says which is out of range: the index is defined from 2 mm²/s at 100 °C up.
//
// Source: ASTM D2270.
func ViscosityIndex(nu40, nu100 float64) (float64, error) {
	u, y := nu40/units.SquareMMPerSec, nu100/units.SquareMMPerSec
	if !(y >= 2 && !math.IsInf(y, 1)) {
		return 0, fmt.Errorf("viscosity index: viscosity at 100 C is %s mm2/s, must be 2 or above", units.Number(y, 3))
	}
	if !(u > y && !math.IsInf(u, 1)) {
		return 0, fmt.Errorf("viscosity index: viscosity at 40 C is %s mm2/s, must be above that at 100 C, %s mm2/s",
			units.Number(u, 4), units.Number(y, 4))
	}
	l, h := indexReference(y)
	return indexOf(u, y, l, h), nil
}

// NuAt100 returns the kinematic viscosity at 100 °C [m²/s] of an oil with nu40 [m²/s] at 40 °C and the
// given viscosity index (0 to 400), by bisection of ViscosityIndex: the two agree within 0.1.
// The error says what is out of range.
func NuAt100(nu40, index float64) (float64, error) {
	u := nu40 / units.SquareMMPerSec
	if !(index >= 0 && index <= 400) {
		return 0, fmt.Errorf("viscosity index is %s, must be 0 to 400", units.Number(index, 3))
	}
	if !(u > 0 && u <= 1e4) {
		return 0, fmt.Errorf("viscosity at 40 C is %s mm2/s, must be above 0 and at most 10000", units.Number(u, 3))
	}
	lo, hi := 2.0, u
	if !(hi > lo) || indexAt(u, lo) > index || indexAt(u, hi) < index {
		return 0, fmt.Errorf("an oil of %s mm2/s at 40 C with viscosity index %s would be below 2 mm2/s at 100 C; type that viscosity instead",
			units.Number(u, 3), units.Number(index, 3))
	}
	for range 60 {
		if mid := (lo + hi) / 2; indexAt(u, mid) < index {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2 * units.SquareMMPerSec, nil
}

func indexAt(u, y float64) float64 {
	l, h := indexReference(y)
	return indexOf(u, y, l, h)
}
