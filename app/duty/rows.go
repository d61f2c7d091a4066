package duty

import (
	"errors"
	"fmt"
	"math"
	"slices"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/circuit/recording"
	"barlitre/machines/units"
)

// commit sends one cell to the file; one of the empty row at the end adds a row.
func (s *Station) commit(row, col int, text string) error {
	quantity, err := written(s.tracks[col], text)
	if err != nil {
		return err
	}
	name, k := s.shown.Name, s.tracks[col]
	if row < len(s.shown.Time) {
		err = s.ctx.Doc().SetPoint(name, k.name, row, quantity)
	} else {
		values := map[string]string{k.name: quantity}
		if k.name != "t" {
			values["t"] = s.text("t", s.after())
		}
		err = s.ctx.Doc().AddRow(name, row, values)
	}
	if err == nil {
		s.reload()
	}
	return err
}

// after is the time of a row that is added at the end without one.
func (s *Station) after() float64 {
	t := s.shown.Time
	last := t[len(t)-1]
	if n := len(t); n > 1 && t[n-1] > t[n-2] {
		return last + t[n-1] - t[n-2]
	}
	return last + math.Max(1, s.shown.Cycle()/10)
}

// text writes a value of a track as files have it, with no more digits than it needs.
func (s *Station) text(track string, si float64) string {
	for _, k := range s.tracks {
		if k.name == track {
			x := k.unit.FromSI(si)
			if x != 0 {
				scale := math.Pow(10, 6-math.Ceil(math.Log10(math.Abs(x))))
				x = math.Round(x*scale) / scale
			}
			return units.FileText(k.unit.ToSI(x), k.unit)
		}
	}
	return ""
}

// rowKey takes the keys that the table has no use for.
func (s *Station) rowKey(k fyne.KeyName) bool {
	switch k {
	case fyne.KeyInsert:
		s.insertRow()
	case fyne.KeyDelete:
		s.deleteRow()
	default:
		return false
	}
	return true
}

// insertRow puts a row below the selected one, half way to the next.
func (s *Station) insertRow() {
	row, col := s.table.Selection()
	n := len(s.shown.Time)
	if row < 0 || row >= n {
		row = n - 1
	}
	values := map[string]string{}
	for _, k := range s.tracks {
		switch {
		case row < n-1 && row+1 < len(k.values):
			values[k.name] = s.text(k.name, (k.values[row]+k.values[row+1])/2)
		case k.name == "t":
			values["t"] = s.text("t", s.after())
		}
	}
	if s.refused(s.ctx.Doc().AddRow(s.shown.Name, row+1, values)) {
		return
	}
	s.reload()
	s.table.Select(row+1, max(0, col))
}

func (s *Station) deleteRow() {
	row, col := s.table.Selection()
	if row < 0 || row >= len(s.shown.Time) {
		return
	}
	if s.refused(s.ctx.Doc().RemoveRow(s.shown.Name, row)) {
		return
	}
	s.table.Forget()
	s.reload()
	s.table.Select(min(row, len(s.shown.Time)-1), col)
}

// refused says in the frame what did not work.
func (s *Station) refused(err error) bool {
	if why := s.locked(); why != "" {
		err = errors.New("the points are " + why + ". Nothing was changed")
	}
	if err != nil {
		s.ctx.Fail(err)
	}
	return err != nil
}

// paste sends a block to the file, as one step of undo: all of it or nothing. Where it
// is longer than the table it adds rows.
func (s *Station) paste(row, col int, block [][]string) {
	if why := s.locked(); why != "" {
		s.ctx.Fail(fmt.Errorf("paste: the duty is %s. Nothing was changed", why))
		return
	}
	name, tracks, rows := s.shown.Name, s.tracks, len(s.shown.Time)
	err := s.ctx.Doc().Edit("Paste into "+name, func(f *audit.File) error {
		texts, err := s.pasted(row, col, block)
		if err != nil {
			return err
		}
		if row+len(block) > rows || len(block)*len(block[0]) > fewCells {
			return s.pasteWhole(f, row, col, texts)
		}
		for r, cells := range texts {
			for c, text := range cells {
				if err := f.SetPoint(name, tracks[col+c].name, row+r, text); err != nil {
					return fmt.Errorf("row %d, %s: %w", row+r+1, tracks[col+c].name, err)
				}
			}
		}
		return nil
	})
	if err != nil {
		s.ctx.Fail(fmt.Errorf("paste: %w. Nothing was changed", err))
		return
	}
	s.table.Forget()
	s.reload()
}

// fewCells are set one by one, which keeps how the others are written; many at once.
const fewCells = 40

// pasted brings a block into the form that files have.
func (s *Station) pasted(row, col int, block [][]string) ([][]string, error) {
	out := make([][]string, len(block))
	for r, cells := range block {
		for c, text := range cells {
			if col+c >= len(s.tracks) {
				return nil, fmt.Errorf("the block has %d columns and does not fit from %s on", len(cells), s.tracks[col].name)
			}
			quantity, err := written(s.tracks[col+c], text)
			if err != nil {
				return nil, fmt.Errorf("row %d, %s: %w", row+r+1, s.tracks[col+c].name, err)
			}
			out[r] = append(out[r], quantity)
		}
	}
	return out, nil
}

// pasteWhole writes the table anew with a block in it. Rows that it adds need a time;
// what it does not give of them is that of the row before.
func (s *Station) pasteWhole(f *audit.File, row, col int, texts [][]string) error {
	heads, columns, err := f.Table(s.shown.Name)
	if err != nil {
		return err
	}
	if row+len(texts) > len(s.shown.Time) && col > 0 {
		return errors.New("rows that are added need a time; paste the block into the first column, with the times in it")
	}
	for i, head := range heads {
		k := s.indexOf(head)
		for r := range texts {
			text, at := "", row+r
			switch {
			case k >= col && k-col < len(texts[r]):
				text = texts[r][k-col]
			case at < len(columns[i]):
				continue
			default:
				text = columns[i][at-1]
			}
			if at < len(columns[i]) {
				columns[i][at] = text
			} else {
				columns[i] = append(columns[i], text)
			}
		}
	}
	return f.SetTable(s.shown.Name, heads, columns)
}

// indexOf finds the track of a head, -1 if there is none.
func (s *Station) indexOf(head string) int {
	name, _, _ := recording.SplitHead(head)
	return slices.IndexFunc(s.tracks, func(k track) bool { return k.name == name })
}
