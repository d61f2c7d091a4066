package duty

import (
	"fmt"
	"math"
	"strings"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
	cycle "barlitre/circuit/duty"
	"barlitre/machines/units"
)

// newTable makes the table of points.
func (s *Station) newTable() *widgets.Table {
	t := widgets.NewTable(fyne.NewSize(240, 90), s.ctx.Palette)
	t.Note = s.refusal
	t.Empty = "This duty has no points."
	t.Editable = func(row, col int) bool {
		return s.locked() == "" && col < len(s.tracks) && (row < len(s.tracks[col].values) || row == len(s.shown.Time))
	}
	t.EditText = func(row, col int) string {
		if row >= len(s.tracks[col].values) {
			return ""
		}
		return s.ctx.Local(plain(s.tracks[col], row))
	}
	t.Key = s.rowKey
	t.Commit = s.commit
	t.Paste = s.paste
	t.Hint = s.hint
	return t
}

// plain is a value in full, as a number in the unit of its column.
func plain(k track, row int) string {
	return strings.TrimSpace(strings.TrimSuffix(units.FileText(k.values[row], k.unit), k.unit.Symbol))
}

func (s *Station) fillTable(d *cycle.Duty) {
	if s.of != d.Name {
		s.of = d.Name
		s.table.Forget()
		s.table.Select(-1, -1)
	}
	var cols []widgets.Column
	for _, k := range s.tracks {
		cols = append(cols, widgets.Column{Name: k.name, Head: strings.TrimSpace(k.of + "\n" + k.what), Unit: k.unit.Label()})
	}
	tracks, places := s.tracks, make([]int, len(s.tracks))
	for c, k := range tracks {
		places[c] = decimals(k)
	}
	rows := len(d.Time)
	if s.locked() == "" {
		rows++ // an empty one takes what is added
	}
	s.table.SetData(cols, rows, func(r int) widgets.TableRow {
		row := widgets.TableRow{}
		if r == len(d.Time) {
			return row
		}
		for c, k := range tracks {
			text := "–" // a column too short
			if r < len(k.values) {
				text = s.ctx.Local(rounded(k.unit.FromSI(k.values[r]), places[c]))
			}
			row.Cells = append(row.Cells, text)
		}
		return row
	})
}

// decimals are how many places after the point the values of a column need to be
// told apart as they were typed: at most digits in all. Of very many rows some are
// looked at.
func decimals(k track) int {
	digits := 4
	if k.name == "t" {
		digits = 7 // times grow while their steps do not
	}
	most := 0.0
	for _, v := range k.values {
		most = math.Max(most, math.Abs(k.unit.FromSI(v)))
	}
	limit := max(0, digits-whole(most))
	for n := 0; n < limit; n++ {
		scale, fits := math.Pow(10, float64(n)), true
		for i := 0; i < len(k.values) && fits; i += max(1, len(k.values)/400) {
			for _, v := range k.values[i:min(i+2, len(k.values))] { // with the next one: every so manieth may be a round number
				x := k.unit.FromSI(v)
				fits = fits && math.Abs(math.Round(x*scale)/scale-x) <= 1e-9*most
			}
		}
		if fits {
			return n
		}
	}
	return limit
}

// whole is the number of digits before the point, 0 or less for a number below 1.
func whole(x float64) int {
	if x == 0 || math.IsInf(x, 0) || math.IsNaN(x) {
		return 1
	}
	return int(math.Floor(math.Log10(math.Abs(x)))) + 1
}

// rounded writes a number with so many places after the point.
func rounded(x float64, places int) string {
	scale := math.Pow(10, float64(places))
	x = math.Round(x*scale) / scale
	return units.Number(x, max(1, whole(x)+places))
}

// written brings what was typed into the form that files have: "1,5" in the column
// of a speed becomes "1.5 m/s".
func written(k track, text string) (string, error) {
	if strings.TrimSpace(text) == "" {
		return "", fmt.Errorf("the cell is empty; type a number, 0 for none")
	}
	si, u, err := units.ParseLoose(text, k.unit.Dim, k.unit)
	if err != nil {
		return "", err
	}
	return units.FileText(si, u), nil
}

// hint says what the selected cell takes.
func (s *Station) hint(row, col int) string {
	switch {
	case row < 0 || col < 0 || col >= len(s.tracks):
		return "Select a cell and type. Between rows all is linear; two rows with one time are a step."
	case s.locked() != "":
		return "These points are " + s.locked() + "."
	case s.shown != nil && row == len(s.shown.Time):
		return fmt.Sprintf("Type here to add a row: %s in %s. Without a time of its own it comes as long after the last one as that after the one before.", s.tracks[col].name, unitWord(s.tracks[col].unit))
	}
	k := s.tracks[col]
	return fmt.Sprintf("Row %d, %s in %s. Type a number, or one with another unit; Enter takes it, Escape does not.", row+1, k.name, unitWord(k.unit))
}

func unitWord(u units.Unit) string {
	if u.Label() == "" {
		return "parts of 1"
	}
	return u.Label()
}
