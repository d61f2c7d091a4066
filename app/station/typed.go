package station

import (
	"strings"

	"barlitre/machines/units"
)

// Typed brings what was typed into a field into the form of an audit file: decimal comma or
// point, any unit of the quantity; a bare number is in unit in. Where keep is a unit, the
// value is written in it: a low and a high without units of their own go by that unit.
func Typed(text string, d units.Dim, in, keep units.Unit) (string, error) {
	si, u, err := units.ParseLoose(text, d, in)
	if err != nil {
		return "", err
	}
	if keep.Factor != 0 {
		u = keep
	}
	return units.FileText(si, u), nil
}

// Shown writes a value of the file for a field: with all its digits in the unit it was
// typed in where that is the user's unit or money, else in the user's unit.
func Shown(ctx Context, si float64, typed units.Unit, d units.Dim) string {
	u := units.Preferred(d, ctx.System())
	money := d == units.Money || d == units.EnergyPrice
	if typed.Factor == 0 || (typed.Symbol != u.Symbol && !money) {
		return TrimZeros(ctx.Text(si, d, 5))
	}
	text := strings.TrimSpace(strings.TrimSuffix(units.FileText(si, typed), typed.Symbol))
	if label := typed.Label(); label != "" {
		text += "\u202f" + label
	}
	return ctx.Local(text)
}

// TrimZeros drops the zeros behind a decimal sign that only fill up the digits: with a
// decimal comma 82,400 could be read as thousands.
func TrimZeros(text string) string {
	end := strings.IndexFunc(text, func(r rune) bool { return !strings.ContainsRune("−-0123456789.,", r) })
	if end < 0 {
		end = len(text)
	}
	number := text[:end]
	if strings.ContainsAny(number, ".,") {
		number = strings.TrimRight(strings.TrimRight(number, "0"), ".,")
	}
	return number + text[end:]
}
