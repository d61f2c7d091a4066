package pdf

import "barlitre/audit/pen"

// together is how many rows at least go over to a page.
const together = 4

// breakBefore begins a page when row i does not fit, or when what must stay with
// it does not: a group its first row, the last few rows each other.
func (k *setTable) breakBefore(i int) {
	s := k.s
	h := k.height(i)
	if k.rows[i].group && i+1 < len(k.rows) {
		h += k.height(i + 1)
	}
	if left := len(k.rows) - i; left == 1 || left <= together && i-k.first >= together {
		h = k.noteHeight()
		for n := i; n < len(k.rows); n++ {
			h += k.height(n)
		}
	}
	if s.y+h <= bottom || s.y <= top+k.headHeight()+0.01 {
		return
	}
	if k.height(i) > bottom-top-k.headHeight() && bottom-s.y > 40 {
		return // higher than a page: it begins here and goes on over the page
	}
	k.first = i
	k.again(!k.rows[i].group)
}

// again begins a page with the head of the table and, where rows go on, their group.
func (k *setTable) again(goesOn bool) {
	k.s.newPage()
	k.head()
	if goesOn && k.last != "" {
		st := k.style(row{group: true})
		st.c = k.s.pal.Secondary
		k.span(st.wrap(k.last+", continued", fullW), st)
	}
}

// span writes lines over all columns, with a rule below.
func (k *setTable) span(lines []string, st style) {
	s := k.s
	s.y += k.pad()
	for _, t := range lines {
		s.put(side, s.y+st.base(), t, st, pen.Left)
		s.y += st.line()
	}
	s.y += k.pad()
	s.rule(side, side+fullW, s.y, s.pal.Edge)
}

// row draws row i; what the page has no room for goes on the next.
func (k *setTable) row(i int) {
	s, r := k.s, k.rows[i]
	st := k.style(r)
	if r.group {
		k.last = r.cells[0]
		k.span(k.lines[i][0], st)
		return
	}
	cells, most := k.lines[i], 1
	if s.y <= top+k.headHeight()+0.01 && r.carry != "" && r.cells[0] == "" {
		cells = append([][]string{st.wrap(r.carry, k.w[0])}, cells[1:]...)
	}
	for _, lines := range cells {
		most = max(most, len(lines))
	}
	if r.sum {
		s.rule(side, side+fullW, s.y, s.pal.Secondary)
	}
	for done := 0; ; {
		n := min(most-done, max(1, int((bottom-s.y-2*k.pad())/st.line()+1e-9)))
		k.part(r, cells, done, n, st)
		if done += n; done >= most {
			break
		}
		k.again(true)
	}
	s.rule(side, side+fullW, s.y, s.pal.Edge)
}

// part draws n lines of a row from line done on.
func (k *setTable) part(r row, cells [][]string, done, n int, st style) {
	s := k.s
	h := float64(n)*st.line() + 2*k.pad()
	if r.tint {
		s.fill(side-1, s.y, fullW+2, h, s.pal.Ground)
	}
	y := s.y + k.pad()
	if r.sign != 0 && done == 0 {
		s.put(k.x[0], y+st.base(), string(r.sign), style{st.size, false, s.pal.Color(r.role)}, pen.Left)
	}
	for c, lines := range cells {
		if done >= len(lines) {
			continue
		}
		x := k.x[c]
		if c == 0 && r.sign != 0 {
			k.x[c] += signRoom
		}
		k.draw(c, y, lines[done:min(len(lines), done+n)], st)
		k.x[c] = x
	}
	s.y += h
}
