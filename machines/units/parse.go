package units

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

var (
	strictNumber = regexp.MustCompile(`^[+-]?(?:\d+\.?\d*|\.\d+)(?:[eE][+-]?\d+)?`)
	looseNumber  = regexp.MustCompile(`^[+-]?(?:\d{1,3}(?:[ ']\d{3})+(?:[.,]\d*)?|[.,]?\d[\d.,]*)(?:[eE][+-]?\d+)?`)
	threes       = regexp.MustCompile(`^[+-]?\d{1,3}(?:[.,]\d{3})+$`)
	currency     = regexp.MustCompile(`^[A-Z]{3}$`)

	// spelling brings typographic characters to the ASCII form of the table.
	spelling = strings.NewReplacer("\u2212", "-", "\u207b", "-", "¹", "1", "²", "2", "³", "3",
		"·", " ", "⋅", " ", "*", " ", "\u00a0", " ", "\u202f", " ", "\u2009", " ", "\t", " ", "’", "'")
)

// Parse reads a quantity as files write it: a number with a decimal point and a unit of the
// quantity d, as "160 bar", "45 cm³/rev", "10 bar per 100 L/min". It returns the value in SI and the
// unit as written. A bare number is accepted for Ratio and Count only; zero needs its unit too.
// Errors name the text and the units to use. NaN and infinite values are refused, and so
// are temperatures below absolute zero.
func Parse(text string, d Dim) (si float64, u Unit, err error) {
	s := clean(text)
	num := strictNumber.FindString(s)
	rest := s[len(num):]
	if num != "" && len(rest) > 1 && rest[0] == ',' && isDigit(rest[1]) {
		return 0, Unit{}, fmt.Errorf("%q: use a decimal point, not a comma", text)
	}
	if num == "" {
		return 0, Unit{}, noNumber(text, d)
	}
	rest = strings.TrimSpace(rest)
	if rest == "" && d != Ratio && d != Count {
		return 0, Unit{}, fmt.Errorf("%q has no unit; %s needs one: %s", text, d.Name(), hint(d))
	}
	if u, err = ParseUnit(rest, d); err != nil {
		return 0, Unit{}, err
	}
	si, err = value(num, text, u)
	return si, u, err
}

// ParseLoose reads a quantity as people type it: decimal comma or point, thousands separated by
// spaces or apostrophes, any case of the unit; a bare number takes the fallback unit. With one
// separator it is the decimal sign ("1,234" is 1.234); with both, the last one is.
func ParseLoose(text string, d Dim, fallback Unit) (si float64, u Unit, err error) {
	s := clean(text)
	num := looseNumber.FindString(s)
	if num == "" {
		return 0, Unit{}, noNumber(text, d)
	}
	rest := strings.TrimSpace(s[len(num):])
	switch {
	case rest == "" && fallback.Factor != 0:
		u = fallback
	case rest == "" && d != Ratio && d != Count:
		return 0, Unit{}, fmt.Errorf("%q has no unit; %s needs one: %s", text, d.Name(), hint(d))
	default:
		var ok bool
		if u, ok = Find(rest, d); !ok {
			return 0, Unit{}, unknown(rest, d)
		}
	}
	plain, ok := pointed(num)
	if !ok {
		return 0, Unit{}, fmt.Errorf("%q: points and commas do not form a number; write 1234.5 or 1234,5", text)
	}
	si, err = value(plain, text, u)
	return si, u, err
}

// ParseUnit reads a unit alone, as files write it (the case matters: mW is not MW).
func ParseUnit(text string, d Dim) (Unit, error) {
	if u, ok := lookup(clean(text), d, false); ok {
		return u, nil
	}
	return Unit{}, unknown(strings.TrimSpace(text), d)
}

// Find reads a unit alone, as people and data loggers write it: brackets around it are dropped and
// the case is free where it leaves no doubt. It is for table heads such as "[bar]".
func Find(symbol string, d Dim) (Unit, bool) {
	s := clean(symbol)
	if len(s) > 2 && (s[0] == '[' && s[len(s)-1] == ']' || s[0] == '(' && s[len(s)-1] == ')') {
		s = strings.TrimSpace(s[1 : len(s)-1])
	}
	if u, ok := lookup(s, d, false); ok {
		return u, true
	}
	return lookup(s, d, true)
}

func clean(text string) string {
	return strings.Join(strings.Fields(spelling.Replace(text)), " ")
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// lookup finds a cleaned symbol in the table, then as a currency, then as a quotient.
func lookup(s string, d Dim, anyCase bool) (Unit, bool) {
	if d < 0 || d >= dimCount {
		return Unit{}, false
	}
	if u, ok := inTable(s, d, anyCase); ok {
		return u, true
	}
	if d == Money && currency.MatchString(s) {
		return Unit{Symbol: s, Dim: Money, Factor: 1}, true
	}
	if quantities[d].den == Ratio {
		return Unit{}, false
	}
	return quotient(s, d, anyCase)
}

// inTable compares with symbols and aliases. Without regard to case a symbol counts only if
// all matches mean the same factor.
func inTable(s string, d Dim, anyCase bool) (Unit, bool) {
	var found Unit
	n := 0
	for _, e := range quantities[d].units {
		for _, name := range append([]string{e.symbol}, e.aliases...) {
			name = clean(name)
			if name != s && !(anyCase && strings.EqualFold(name, s)) {
				continue
			}
			if u := e.unit(d); n == 0 || u.Factor != found.Factor {
				found = u
				n++
			}
		}
	}
	return found, n == 1
}

// quotient reads "X per n Y", "X/Y" and "X/(Y)", X and Y units of the two quantities that
// d is made of. A "/" may belong to X or Y themselves, so every one of them is tried.
func quotient(s string, d Dim, anyCase bool) (Unit, bool) {
	if num, den, ok := strings.Cut(s, " per "); ok {
		return divide(num, den, d, " per ", anyCase)
	}
	for i := len(s) - 1; i > 0; i-- {
		if s[i] != '/' {
			continue
		}
		den := strings.TrimSpace(s[i+1:])
		if len(den) > 2 && den[0] == '(' && den[len(den)-1] == ')' {
			den = den[1 : len(den)-1]
		}
		if u, ok := divide(s[:i], den, d, "/", anyCase); ok {
			return u, true
		}
	}
	return Unit{}, false
}

// divide builds the unit num/den; after "per" the denominator may carry a number.
func divide(num, den string, d Dim, link string, anyCase bool) (Unit, bool) {
	q := quantities[d]
	top, ok := lookup(strings.TrimSpace(num), q.num, anyCase)
	if !ok {
		return Unit{}, false
	}
	den = strings.TrimSpace(den)
	count, countText := 1.0, ""
	if link == " per " {
		if n := strictNumber.FindString(den); n != "" && !strings.HasPrefix(den[len(n):], "/") {
			count, _ = strconv.ParseFloat(n, 64)
			countText, den = n+" ", strings.TrimSpace(den[len(n):])
		}
	}
	bottom, ok := lookup(den, q.den, anyCase)
	factor := top.Factor / (count * bottom.Factor)
	if !ok || !(count > 0) || !(factor > 0) || math.IsInf(factor, 0) {
		return Unit{}, false
	}
	below := bottom.Symbol
	if link == "/" && strings.ContainsAny(below, "/ ") {
		below = "(" + below + ")"
	}
	return Unit{Symbol: top.Symbol + link + countText + below, Dim: d, Factor: factor, System: bottom.System}, true
}

// pointed turns a number as typed into one with a decimal point and no grouping. Grouping by
// points or commas counts only in threes ("1.234,5", "1,234,567"); "1.2.3" is no number.
func pointed(num string) (string, bool) {
	num = strings.NewReplacer(" ", "", "'", "").Replace(num)
	last := strings.LastIndexAny(num, ".,")
	if last < 0 {
		return num, true
	}
	mark := num[last : last+1]
	whole, tail := num[:last], "."+num[last+1:]
	if strings.Contains(whole, mark) {
		end := strings.IndexAny(num+"e", "eE")
		whole, tail = num[:end], num[end:]
	}
	if strings.ContainsAny(whole, ".,") {
		both := strings.Contains(whole, ".") && strings.Contains(whole, ",")
		if both || !threes.MatchString(whole) {
			return "", false
		}
	}
	return strings.NewReplacer(".", "", ",", "").Replace(whole) + tail, true
}

func value(num, text string, u Unit) (float64, error) {
	x, err := strconv.ParseFloat(num, 64)
	if err != nil {
		return 0, fmt.Errorf("%q: the number is out of range", text)
	}
	si := u.ToSI(x)
	if math.IsNaN(si) || math.IsInf(si, 0) {
		return 0, fmt.Errorf("%q: the number is out of range", text)
	}
	if u.Dim == Temperature && si < 0 {
		return 0, fmt.Errorf("%q is below absolute zero", text)
	}
	return si, nil
}

func noNumber(text string, d Dim) error {
	example := "160"
	if u := Preferred(d, Metric); u.Symbol != "" {
		example += " " + u.Symbol
	}
	return fmt.Errorf("%q does not start with a number; write %s as in %q", text, d.Name(), example)
}

func unknown(symbol string, d Dim) error {
	if d == Count {
		return fmt.Errorf("%q after the number; a count has no unit", symbol)
	}
	return fmt.Errorf("unit %q is not a unit of %s; use %s", symbol, d.Name(), hint(d))
}

// hint lists up to five units of a quantity for a message.
func hint(d Dim) string {
	if d < 0 || d >= dimCount {
		return "another quantity"
	}
	var names []string
	for _, e := range quantities[d].units {
		if e.symbol != "" && len(names) < 5 {
			names = append(names, e.symbol)
		}
	}
	switch {
	case d == Money:
		return "a currency code of three capital letters, such as EUR"
	case len(names) == 0:
		return "a currency and a unit of " + quantities[quantities[d].den].name + ", such as " + quantities[d].preferred[Metric]
	case len(names) == 1 && d == Ratio:
		return "% or no unit"
	case len(names) == 1:
		return names[0]
	}
	return strings.Join(names[:len(names)-1], ", ") + " or " + names[len(names)-1]
}
