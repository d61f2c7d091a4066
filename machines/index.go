package machines

import (
	"fmt"
	"math"

	"barlitre/machines/units"
)

// indexRow gives the reference oils of the viscosity index from the viscosity Y at 100 °C,
// L = la·Y² + lb·Y + lc and H = ha·Y² + hb·Y + hc, all in mm²/s, from Y = from up to the next row.
type indexRow struct{ from, la, lb, lc, ha, hb, hc float64 }

// indexRows are the equations of ISO 2909, which stand in for the table of ASTM D2270; they are from
// memory. Against 12 printed rows of that table they are within 0.1 %, and in the index within 0.3 in its examples.
var indexRows = []indexRow{
	{2.0, 1.14673, 1.7576, -0.109, 0.84155, 1.5521, -0.077},
	{3.8, 3.38095, -15.4952, 33.196, 0.78571, 1.7929, -0.183},
	{4.4, 2.5, -7.2143, 13.812, 0.82143, 1.5679, 0.119},
	{5.0, 0.101, 16.635, -45.469, 0.04985, 9.1613, -18.557},
	{6.4, 3.35714, -23.5643, 78.466, 0.22619, 7.7369, -16.656},
	{7.0, 0.01191, 21.475, -72.870, 0.79762, -0.7321, 14.61},
	{7.7, 0.41858, 16.1558, -56.040, 0.05794, 10.5156, -28.240},
	{9.0, 0.88779, 7.5527, -16.600, 0.26665, 6.7015, -10.810},
	{12, 0.7672, 10.7972, -38.180, 0.20073, 8.4658, -22.490},
	{15, 0.97305, 5.3135, -2.200, 0.28889, 5.9741, -4.930},
	{18, 0.97256, 5.25, -0.980, 0.24504, 7.4160, -16.730},
	{22, 0.91413, 7.4759, -21.820, 0.20323, 9.1267, -34.230},
	{28, 0.87031, 9.7157, -50.770, 0.18411, 10.1015, -46.750},
	{40, 0.84703, 12.6752, -133.310, 0.17029, 11.4866, -80.620},
	{55, 0.85921, 11.1009, -83.190, 0.17130, 11.3680, -76.940},
	{70, 0.8353, 14.67, -216, 0.1684, 11.85, -97}, // ASTM D2270, as printed
}

// indexReference returns L and H [mm²/s] for y = viscosity at 100 °C [mm²/s], y >= 2.
func indexReference(y float64) (l, h float64) {
	r := indexRows[0]
	for _, next := range indexRows[1:] {
		if y < next.from {
			break
		}
		r = next
	}
	return (r.la*y+r.lb)*y + r.lc, (r.ha*y+r.hb)*y + r.hc
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
// Source: ASTM D2270; reference values by the equations of ISO 2909.
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
