package units

import (
	"math"
	"strconv"
	"strings"
)

const (
	minus     = "\u2212"
	narrowGap = "\u202f" // narrow no-break space
)

var labels = strings.NewReplacer("mm2", "mm²", "cm2", "cm²", "in2", "in²", "ft2", "ft²", "m2", "m²", "s2", "s²",
	"mm3", "mm³", "cm3", "cm³", "in3", "in³", "ft3", "ft³", "m3", "m³", "um", "µm")

// Label returns the unit as screens and reports show it: "cm³/rev", "N·m", "°C".
func (u Unit) Label() string {
	switch {
	case u.Dim == Temperature && u.Symbol != "K", u.Dim == TemperatureDifference && u.Symbol != "K":
		return "°" + u.Symbol
	case u.Dim == Angle && u.Symbol == "deg":
		return "°"
	case strings.Contains(u.Symbol, " per "):
		return labels.Replace(u.Symbol)
	}
	return strings.ReplaceAll(labels.Replace(u.Symbol), " ", "·")
}

// Format returns an SI value in unit u with its label, for the screen: see Number.
func Format(si float64, u Unit, digits int) string {
	return Join(Number(u.FromSI(si), digits), u.Label())
}

// Short is Format without the zeros that only fill up the decimals, for running text: "2 s" where Format writes "2.000 s".
func Short(si float64, u Unit, digits int) string {
	number := Number(u.FromSI(si), digits)
	if whole, decimals, has := strings.Cut(number, "."); has && !strings.Contains(decimals, "e") {
		number = strings.TrimSuffix(whole+"."+strings.TrimRight(decimals, "0"), ".")
	}
	return Join(number, u.Label())
}

// Seconds is Short for a time [s], in seconds.
func Seconds(t float64, digits int) string { return Short(t, second, digits) }

var second = Preferred(Time, Metric)

// Join sets a written number and its unit such that no line breaks between them; the number alone where it has no unit.
func Join(number, unit string) string {
	if unit == "" {
		return number
	}
	return number + narrowGap + unit
}

// Number returns x with the given number of significant digits (at least 1, at most 17), a real minus
// sign, and narrow no-break spaces between thousands from 10 000 on. From 1e-3 to 1e9
// there is no exponent. NaN and infinite values give "n/a".
func Number(x float64, digits int) string {
	if math.IsNaN(x) || math.IsInf(x, 0) {
		return "n/a"
	}
	digits = min(max(digits, 1), 17)
	text := strconv.FormatFloat(math.Abs(x), 'e', digits-1, 64)
	mantissa, expText, _ := strings.Cut(text, "e")
	exp, _ := strconv.Atoi(expText)
	switch {
	case x == 0:
		return "0"
	case exp < -3 || exp >= 9:
		text = mantissa + "e" + strings.Replace(strconv.Itoa(exp), "-", minus, 1)
	case digits-1 >= exp:
		text = strconv.FormatFloat(math.Abs(x), 'f', digits-1-exp, 64)
	default: // more places before the point than digits asked for: zeros fill them
		text = strings.Replace(mantissa, ".", "", 1) + strings.Repeat("0", exp-digits+1)
	}
	text = grouped(text)
	if x < 0 {
		text = minus + text
	}
	return text
}

// grouped sets thousands apart when there are five or more digits before the point.
func grouped(text string) string {
	whole, frac, hasFrac := strings.Cut(text, ".")
	if len(whole) < 5 || strings.Contains(text, "e") {
		return text
	}
	var b strings.Builder
	for i, c := range whole {
		if i > 0 && (len(whole)-i)%3 == 0 {
			b.WriteString(narrowGap)
		}
		b.WriteRune(c)
	}
	if hasFrac {
		b.WriteString("." + frac)
	}
	return b.String()
}

// FileText returns an SI value in unit u as files write it: ASCII, and the shortest decimal
// that Parse reads back as the same value, as far as one exists (otherwise within one unit
// in the last place of x). si must be finite.
func FileText(si float64, u Unit) string {
	x := shortest(si, u)
	abs := math.Abs(x)
	format := byte('f')
	if abs != 0 && (abs < 1e-4 || abs >= 1e15) {
		format = 'e'
	}
	text := strconv.FormatFloat(x, format, -1, 64)
	if u.Symbol != "" {
		text += " " + u.Symbol
	}
	return text
}

// shortest finds the number with the fewest digits that converts to exactly si. Rounding in
// FromSI may miss it by a unit in the last place, so the neighbours are tried as well.
func shortest(si float64, u Unit) float64 {
	x := u.FromSI(si)
	for digits := 0; digits < 17; digits++ {
		r, err := strconv.ParseFloat(strconv.FormatFloat(x, 'e', digits, 64), 64)
		if err == nil && u.ToSI(r) == si {
			return r
		}
	}
	for _, r := range []float64{math.Nextafter(x, math.Inf(1)), math.Nextafter(x, math.Inf(-1))} {
		if u.ToSI(r) == si {
			return r
		}
	}
	return x
}

// Range writes two written numbers as "3.8 to 6.2", and as one where they round to the same.
func Range(low, high string) string {
	if low == high {
		return low
	}
	return low + " to " + high
}

// Around writes a written number with its range, "4.7 years (3.8 to 6.2)"; the number alone where all round to the same.
// The unit may be "", where the numbers have their own.
func Around(likely, unit, low, high string) string {
	if low == likely && high == likely {
		return likely + unit
	}
	return likely + unit + " (" + Range(low, high) + ")"
}
