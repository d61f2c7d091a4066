package pdf

import (
	"errors"

	"barlitre/audit"
	"barlitre/audit/pen"
)

// Width and height of a page [mm].
const (
	PageWidth  = pageW
	PageHeight = pageH
)

// Pages draws the pages that Write writes, on pens that page makes, one call a page with
// its width and height, 1 user unit = 1 mm. It returns on which page each section begins,
// from 1.
func Pages(s *audit.Solution, opt Options, page func(w, h float64) pen.Pen) (map[Section]int, error) {
	if s == nil || s.File == nil {
		return nil, errors.New("show report: there is no solved audit to show")
	}
	l := newLayout(s, opt)
	l.choose()
	l.print(pens(page))
	return l.starts, nil
}

// pens is paper made by a function.
type pens func(w, h float64) pen.Pen

func (p pens) page() pen.Pen { return p(pageW, pageH) }

func (p pens) lying(on Paper) pen.Pen { return p(on.W, on.H) }

func (pens) mark(string, int, float64) {}
