package logger

import (
	"fmt"
	"math"
	"slices"

	"barlitre/machines/units"
)

// group returns the end of the run of rows with the stamp of row i.
func (tl *timeline) group(i int) int {
	x := tl.at(i)
	for i++; i < tl.len() && tl.at(i) == x; i++ {
	}
	return i
}

// groups deals with rows that share a stamp.
func (tl *timeline) groups() error {
	shared, n := 0, tl.len()
	for i := 0; i < n; {
		end := tl.group(i)
		if end-i > 1 {
			shared += end - i
		}
		i = end
	}
	switch {
	case shared == 0:
		return nil
	case 2*shared > n && tl.choice("one stamp", "spread", "keep first") == "spread":
		tl.spread()
		return nil
	}
	return tl.doubled()
}

// alike reports whether two rows have the same values.
func (tl *timeline) alike(a, b int) bool {
	same := func(c *column) bool {
		x, y := c.at(a), c.at(b)
		return x == y || x != x && y != y
	}
	if tl.counterAt >= 0 && !same(&tl.count) {
		return false
	}
	for _, s := range tl.Series {
		if !same(&s.raw) {
			return false
		}
	}
	return true
}

// doubled drops rows that stand twice; of rows with one stamp and other values the first is kept, or the last as well, as a step.
func (tl *timeline) doubled() error {
	var twice, other []int
	stepped := "keep first"
	if tl.Recipe.Time.Form == Elapsed && len(tl.t) < 5000 && !tl.regular() {
		stepped = "step" // a table of points, where two rows at one time are a step
	}
	alternatives := []string{"keep first", "step"}
	if stepped == "step" {
		alternatives = []string{"step", "keep first"}
	}
	choice := tl.choice("one stamp", alternatives...)
	index := make([]int32, 0, tl.len())
	for i := 0; i < tl.len(); {
		end := tl.group(i)
		index = append(index, int32(tl.row(i)))
		last := -1
		for k := i + 1; k < end; k++ {
			if tl.alike(tl.row(k), tl.row(k-1)) || tl.alike(tl.row(k), tl.row(i)) {
				twice = append(twice, tl.row(k))
			} else {
				other = append(other, tl.row(k))
				last = tl.row(k)
			}
		}
		if last >= 0 && choice == "step" {
			index = append(index, int32(last))
		}
		i = end
	}
	tl.index = index
	if len(twice) > 0 {
		if tl.choice("doubled rows", "drop", "refuse") == "refuse" {
			return fmt.Errorf("line %d: the row stands twice, and the recipe refuses that", tl.lineOf(twice[0]))
		}
		tl.Corrections = append(tl.Corrections, Correction{Key: "doubled rows", Count: len(twice), Line: tl.lineOf(twice[0]), T: tl.t[twice[0]],
			Text: counted(len(twice), "row") + " with the stamp and the values of another", Done: "left out", Choice: "drop", Choices: []string{"drop", "refuse"}})
	}
	if len(other) > 0 {
		done := map[string]string{"keep first": "the first of each stamp is kept", "step": "the first and the last of each stamp are kept, as a step"}[choice]
		tl.Corrections = append(tl.Corrections, Correction{Key: "one stamp", Count: len(other), Line: tl.lineOf(other[0]), T: tl.t[other[0]], Warns: choice == "keep first",
			Text: counted(len(other), "row") + " with the stamp of another row and other values", Done: done, Choice: choice, Choices: alternatives})
	}
	return nil
}

// regular reports whether most steps are near the median one.
func (tl *timeline) regular() bool {
	near, all := 0, 0
	for i := 1; i < tl.len(); i++ {
		if d := tl.at(i) - tl.at(i-1); d > 0 {
			all++
			if math.Abs(d-tl.dt) <= 0.2*tl.dt {
				near++
			}
		}
	}
	return 10*near >= 8*all
}

// spread sets rows that share a stamp evenly into its interval: the clock of the file is
// coarser than its rows.
func (tl *timeline) spread() {
	var starts []int
	for i := 0; i < tl.len(); i = tl.group(i) {
		starts = append(starts, i)
	}
	starts = append(starts, tl.len())
	sizes := make([]int, 0, len(starts))
	for k := 0; k+1 < len(starts); k++ {
		sizes = append(sizes, starts[k+1]-starts[k])
	}
	sorted := slices.Clone(sizes)
	slices.Sort(sorted)
	typical := sorted[len(sorted)/2]
	res := tl.dt // stamps rise by this
	h := res / float64(typical)
	stamp := make([]float64, len(sizes))
	for k := range sizes {
		stamp[k] = tl.at(starts[k])
	}
	for k, m := range sizes {
		from, step := stamp[k], h
		if k+1 < len(sizes) {
			if d := stamp[k+1] - stamp[k]; d < 1.5*res && (k > 0 || m >= typical) {
				step = d / float64(m)
			} else if k == 0 && m < typical {
				from = stamp[1] - float64(m)*h
			}
		}
		if float64(m)*step > res*1.5 {
			step = res / float64(m)
		}
		for j := range m {
			tl.t[tl.row(starts[k]+j)] = from + float64(j)*step
		}
	}
	tl.dt = h
	tl.Corrections = append(tl.Corrections, Correction{Key: "one stamp", Count: tl.len() - len(sizes), Line: tl.lineOf(tl.row(0)), T: tl.at(0), Choice: "spread", Choices: []string{"spread", "keep first"},
		Text: fmt.Sprintf("stamps come every %s only, about %d rows share one", units.Seconds(res, 6), typical), Done: "rows are spread evenly over their interval"})
}
