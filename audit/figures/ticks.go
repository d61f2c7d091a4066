package figures

import (
	"math"
	"strconv"
	"strings"
)

// ticks returns the multiples of a step of 1, 2 or 5 times a power of ten that
// lie in lo…hi, spaced so that at most n steps fit, and the decimals their labels
// need. None if the range is empty or not finite.
func ticks(lo, hi float64, n int) (at []float64, decimals int) {
	span := hi - lo
	if !(span > 0) || math.IsInf(span, 0) || n < 1 {
		return nil, 0
	}
	raw := span / float64(n)
	exp := math.Floor(math.Log10(raw))
	unit := math.Pow(10, exp)
	step := 10 * unit
	for _, m := range []float64{1, 2, 5} {
		if m*unit >= raw*(1-1e-9) {
			step = m * unit
			break
		}
	}
	if !(step > 0) || math.IsInf(step, 0) {
		return nil, 0
	}
	first := math.Ceil(lo/step - 1e-9)
	for i := 0; i <= n+1; i++ {
		v := (first + float64(i)) * step
		if v > hi+1e-9*span {
			break
		}
		at = append(at, v)
	}
	return at, max(0, int(-math.Floor(math.Log10(step)+1e-9)))
}

// number writes v with the given decimals, a real minus sign and thin spaces
// between groups of three digits.
func number(v float64, decimals int) string {
	s := strconv.FormatFloat(math.Abs(v), 'f', decimals, 64)
	whole, frac, _ := strings.Cut(s, ".")
	var b strings.Builder
	if v < 0 && strings.Trim(s, "0.") != "" {
		b.WriteString("−")
	}
	for i, d := range whole {
		if i > 0 && (len(whole)-i)%3 == 0 {
			b.WriteString("\u202f")
		}
		b.WriteRune(d)
	}
	if frac != "" {
		b.WriteString("." + frac)
	}
	return b.String()
}

// thousands returns the power of ten, a multiple of three, to take out of the
// labels of an axis whose largest magnitude is most: 0 from 0.01 up to 100 000.
func thousands(most float64) int {
	if most == 0 || most >= 0.01 && most < 1e5 {
		return 0
	}
	return 3 * int(math.Floor(math.Log10(most)/3))
}

// power returns "10⁶" for 6.
func power(exp int) string {
	return "10" + strings.Map(func(r rune) rune {
		if r == '-' {
			return '⁻'
		}
		return []rune("⁰¹²³⁴⁵⁶⁷⁸⁹")[r-'0']
	}, strconv.Itoa(exp))
}

// scaledUnit returns the unit of numbers that have had 10 to the exp taken out.
func scaledUnit(exp int, unit string) string {
	if exp == 0 {
		return unit
	}
	return power(exp) + " " + unit
}

// largest and smallest bound the magnitudes that figures draw: beyond them scales
// and powers of ten overflow.
const largest, smallest = 1e100, 1e-100

// finite reports whether v can be drawn.
func finite(v float64) bool { return math.Abs(v) <= largest }

func pow10(exp int) float64 { return math.Pow(10, float64(exp)) }
