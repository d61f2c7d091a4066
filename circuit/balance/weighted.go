package balance

// weighted is the matrix of a step whose rows weigh their bound and G against one another: those
// of the Fischer-Burmeister form, or with a shift. The diagonal comes first, then the entries
// of the slopes, so that plans for it serve as those for the slopes do.
type weighted struct {
	entries
	plans
	to []int32 // of each entry of the slopes, where it counts
}

// border forgets all entries but the diagonal.
func (w *weighted) border(n int) {
	w.val, w.row, w.col, w.to = w.val[:0], w.row[:0], w.col[:0], w.to[:0]
	for range firstEntry {
		w.add(0, 0)
		w.to = append(w.to, noMatter)
	}
	for i := range n {
		w.add(i, i)
	}
	w.plans.forget()
}

func (w *weighted) add(r, c int) {
	w.val, w.row, w.col = append(w.val, 0), append(w.row, int32(r)), append(w.col, int32(c))
}

// lay weighs the slopes j: row i is rim[i] on the diagonal and steep[i] of what the slopes, shifted, have there.
func (w *weighted) lay(j *Slopes, rim, steep []float64, shift float64) {
	for e := len(w.to); e < len(j.val); e++ {
		r, c := int(j.row[e]), int(j.col[e])
		if r == c {
			w.to = append(w.to, int32(firstEntry+r))
			continue
		}
		w.to = append(w.to, int32(len(w.val)))
		w.add(r, c)
	}
	clear(w.val[firstEntry+len(rim):])
	clear(w.key)
	for i, v := range rim {
		w.val[firstEntry+i] = v + steep[i]*shift
		if steep[i] == 0 && v != 0 {
			put(w.key, i)
		}
	}
	for e := firstEntry; e < len(j.val); e++ {
		w.val[w.to[e]] += steep[j.row[e]] * j.val[e]
	}
}

// plannedWeighted is planned for a step whose rows are weighed. The weights change by orders from one
// step to the next: a plan whose pivots have become too small is made anew at once.
func (s *Solver) plannedWeighted(x []float64, a aim) bool {
	s.weigh(x, a)
	w := &s.soft
	w.lay(s.j, s.rim, s.steep, a.delta)
	p := w.get(&w.entries, s.maker)
	for again := range 2 {
		if again > 0 {
			w.remake(&w.entries, s.maker)
		}
		if !p.sparse {
			return false
		}
		if s.factored(&w.plans, w.val, s.load(&w.plans, s.rim)) {
			return s.gone(x)
		}
	}
	return false
}
