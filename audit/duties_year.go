package audit

import (
	"cmp"
	"slices"

	"barlitre/circuit/logged"
)

// DutiesByYear returns the duties, by their place in the file, as they are to be shown where
// one must stand for all: the one whose axes work most in the year first, by the size of
// what they do and what drives them; of those alike the one with the most hours; those that
// do not run in the year last. A duty that is at fault works nothing.
func (f *File) DutiesByYear() []int {
	order, work := make([]int, len(f.Duties)), make([]float64, len(f.Duties))
	several := len(f.InYear()) > 1
	for i, d := range f.Duties {
		order[i] = i
		if !several || d.Hours <= 0 || len(d.Time) < 2 || len(d.Check()) > 0 {
			continue // nothing to weigh, or nothing to weigh it by
		}
		for _, axis := range logged.Works(d) {
			work[i] += (axis.Positive - axis.Negative) / d.Cycle() * d.Hours
		}
	}
	slices.SortStableFunc(order, func(a, b int) int {
		return cmp.Or(cmp.Compare(work[b], work[a]), cmp.Compare(f.Duties[b].Hours, f.Duties[a].Hours))
	})
	return order
}
