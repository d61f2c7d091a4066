package logger

import (
	"context"
	"fmt"
	"math"
	"slices"

	"barlitre/machines/units"
)

// finish makes times of stamps and looks through the channels.
func (im *importer) finish(ctx context.Context) error {
	im.otherLines()
	tl, err := im.timeline()
	if err != nil {
		return err
	}
	im.limits()
	place := map[int]int{} // of rows that carry a mark
	for _, m := range im.marks {
		place[m.row] = -1
	}
	for i := range tl.len() {
		if _, ok := place[tl.row(i)]; ok && len(place) > 0 {
			place[tl.row(i)] = i
		}
	}
	for _, m := range im.marks {
		k := place[m.row]
		if k < 0 {
			k = min(m.row, len(im.Time)-1)
		}
		im.Marks = append(im.Marks, Mark{T: im.Time[k], Line: m.line, Text: m.text})
	}
	buf := make([]float64, len(im.Time))
	kept := im.Series[:0]
	for _, s := range im.Series {
		if err := ctx.Err(); err != nil {
			return err
		}
		s.index, s.time = tl.index, im.Time
		q := inspector{timeline: tl, s: s, v: buf}
		if q.inspect() {
			kept = append(kept, s)
		}
	}
	im.Series = kept
	im.across()
	im.place()
	return nil
}

// limits tells of files that end where a spreadsheet ends.
func (im *importer) limits() {
	for _, n := range []int{65536, 1048576} {
		last := im.parts[len(im.parts)-1] // a file that another one follows was split there
		if im.Lines-last.line == n || im.rows-last.row == n {
			im.Corrections = append(im.Corrections, Correction{Key: "cut", Count: 1, Line: im.Lines, Warns: true,
				Text: fmt.Sprintf("the file has exactly %d rows, the most that some spreadsheets hold; what came after is probably lost", n)})
		}
	}
}

// inspector looks through one channel.
type inspector struct {
	*timeline
	s      *Series
	v      []float64 // SI, NaN where there is no value
	sorted []float64 // a sample
	least  float64   // step, see quantum; 0 = not known yet
	equal  float64   // share of neighbours that are equal
}

func (q *inspector) say(c Correction) {
	c.Key, c.Channel = q.s.Column+": "+c.Key, q.s.Column
	q.Corrections = append(q.Corrections, c)
}

func (q *inspector) pick(key string, choices ...string) string {
	return q.choice(q.s.Column+": "+key, choices...)
}

// inspect finds what is wrong with a channel and decides what is done; false when it holds nothing.
func (q *inspector) inspect() bool {
	s := q.s
	q.loop()
	q.counter()
	s.si(q.v)
	q.fillers()
	q.sampled()
	q.cells()
	if len(q.sorted) == 0 {
		q.say(Correction{Key: "nothing in it", Count: len(q.v), Text: "holds no number", Done: "left out"})
		return false
	}
	q.spikes()
	q.pressure()
	q.clipped()
	q.stuck()
	q.below()
	if s.Kind == Minimum || s.Kind == Maximum {
		q.say(Correction{Key: "extremes", Count: len(q.v), Text: fmt.Sprintf("holds the %s of each interval; a product of such values is no energy", s.Kind)})
	}
	if s.Dim == units.Ratio && s.Quantity == "" && s.Unit != "" {
		q.say(Correction{Key: "unit", Count: len(q.v), Warns: true, Text: fmt.Sprintf("the unit %q is not known, so its scale is not either", s.Unit), Done: "taken as plain numbers"})
	}
	return true
}

// loop finds out whether a channel is a signal of 4 to 20 mA.
func (q *inspector) loop() {
	s := q.s
	if s.Scaling != nil {
		s.loop = s.Scaling.Signal == "mA" && s.Scaling.From == [2]float64{4, 20}
	} else if s.Dim == units.Current && s.Unit == "mA" {
		in, all := 0, 0
		for i := range q.rows {
			if x := s.raw.at(i); x == x {
				if all++; x >= faultLow && x <= faultHigh {
					in++
				}
			}
		}
		s.loop = all > 0 && 10*in >= 9*all
	}
	if s.Scaling == nil && (s.loop || s.Dim == units.Voltage && s.Unit == "V") && s.Kind == "" {
		q.say(Correction{Key: "scaling", Count: q.rows, Warns: true, Text: "is a signal in " + s.Unit + " whose scaling is not known; say what its ends mean"})
	}
}

// sampled sorts a sample of the values.
func (q *inspector) sampled() {
	stride := max(1, len(q.v)/20000)
	for i := 0; i < len(q.v); i += stride {
		if x := q.v[i]; x == x {
			q.sorted = append(q.sorted, x)
		}
	}
	if len(q.sorted) == 0 { // they may all stand between
		for _, x := range q.v {
			if x == x {
				q.sorted = append(q.sorted, x)
				break
			}
		}
	}
	slices.Sort(q.sorted)
	same, all := 0, 0
	for i := 1; i < len(q.v); i++ {
		if x := q.v[i]; x == x && q.v[i-1] == q.v[i-1] {
			if all++; x == q.v[i-1] {
				same++
			}
		}
	}
	q.equal = float64(same) / math.Max(1, float64(all))
}

func (q *inspector) quantile(p float64) float64 {
	return q.sorted[min(len(q.sorted)-1, int(p*float64(len(q.sorted))))]
}

// cells tells of cells without a value and what stands for them.
func (q *inspector) cells() {
	s, n := q.s, q.rows
	choice := q.pick("no value", "interpolate", "hold")
	s.hold = choice == "hold"
	done := map[string]string{"interpolate": "taken as straight lines between the values around", "hold": "the value before holds"}[choice]
	fill := func(key string, x seen, warns bool, text string) {
		if x.count > 0 {
			q.say(Correction{Key: key, Count: x.count, Line: x.first, Text: text, Done: done, Choice: choice, Choices: []string{"interpolate", "hold"}, Warns: warns})
		}
	}
	if s.empty.count > n/5 {
		fill("no value", s.empty, false, fmt.Sprintf("%s of %d are empty: it is logged less often than others", counted(s.empty.count, "cell"), n))
	} else {
		fill("no value", s.empty, false, counted(s.empty.count, "cell")+" empty")
	}
	for _, w := range sortedKeys(s.words) {
		fill("no value", *s.words[w], false, fmt.Sprintf("%s %q instead of a number", counted(s.words[w].count, "cell"), w))
	}
	fill("no number", s.unread, true, fmt.Sprintf("%s no number, such as %q", isAre(s.unread.count), s.unread.example))
	if s.other.count > 0 {
		q.say(Correction{Key: "other unit", Count: s.other.count, Line: s.other.first, Text: fmt.Sprintf("%s another unit than %s, such as %q", have(s.other.count), s.Unit, s.other.example), Done: "converted"})
	}
	for i := range n {
		x := s.raw.at(i)
		if s.fault(x) {
			s.faults.at(q.lineOf(i))
		} else if s.loop && (x < validLow || x > validHigh) {
			s.beyond.at(q.lineOf(i))
		}
	}
	what := "the signal is below 3.6 or above 21\u202fmA, which NE 43 keeps for faults"
	if !s.loop {
		what = "the signal is below −0.5 or above 10.5\u202fV, which no healthy 0 to 10\u202fV signal is"
	}
	fill("signal fault", s.faults, true, fmt.Sprintf("in %s %s", counted(s.faults.count, "row"), what))
	if s.beyond.count > 0 {
		q.say(Correction{Key: "signal limits", Count: s.beyond.count, Line: s.beyond.first, Text: fmt.Sprintf("in %s the signal is outside of 3.8 to 20.5\u202fmA, where NE 43 has it measure nothing", counted(s.beyond.count, "row"))})
	}
}

func isAre(n int) string {
	if n == 1 {
		return "1 cell is"
	}
	return fmt.Sprintf("%d cells are", n)
}

func have(n int) string {
	if n == 1 {
		return "1 cell has"
	}
	return fmt.Sprintf("%d cells have", n)
}

func sortedKeys(m map[string]*seen) []string {
	out := make([]string, 0, len(m))
	for k := range m {
		out = append(out, k)
	}
	slices.Sort(out)
	return out
}

// at adds where row i stands to a correction.
func (q *inspector) where(c Correction, i int) Correction {
	c.Line, c.T = q.lineOf(q.row(i)), q.Time[i]
	return c
}

// counter makes a meter that overflows or is set back go on rising.
func (q *inspector) counter() {
	s := q.s
	if !s.Counter {
		return
	}
	type drop struct {
		row     int
		from, x float64
	}
	var drops []drop
	var ups []float64
	last, most := math.NaN(), 0.0
	for i := range len(q.v) {
		x := s.raw.at(q.row(i))
		if x < last {
			drops = append(drops, drop{i, last, x})
		} else if d := x - last; d > 0 {
			if most = math.Max(most, d); len(ups) < 20000 {
				ups = append(ups, d)
			}
		}
		if x == x {
			last = x
		}
	}
	if len(drops) == 0 || len(drops)*20 > len(q.v) && len(drops) > 1 {
		return
	}
	choice := q.pick("counter", "continue", "leave")
	c := q.where(Correction{Key: "counter", Count: len(drops), Choice: choice, Choices: []string{"continue", "leave"}, Warns: true}, drops[0].row)
	over, set := 0, 0
	for _, d := range drops {
		by := d.from
		if m := modulus(d.from, d.x, most); m > 0 {
			by = m
			over++
		} else {
			set++
		}
		if choice == "continue" {
			s.adds = append(s.adds, jump{d.row, by})
		}
	}
	c.Text = fmt.Sprintf("the counter falls back %s: %d by overflow, %d set back to a new start, the first from %.10g to %.10g", counted(len(drops), "time"), over, set, drops[0].from, drops[0].x)
	if choice == "continue" {
		c.Done = "it goes on from where it was; what a meter counted between its last row and being set back is lost"
	}
	q.say(c)
}

// modulus returns the number at which a counter starts again, 0 when it was set back: from
// a power of ten or two the way over it must be no longer than a few steps.
func modulus(from, x, most float64) float64 {
	try := []float64{1 << 16, 1 << 31, 1 << 32, 655.36, 6553.6, 42949672.96, 429496729.6}
	for k := 1; k <= 12; k++ {
		try = append(try, pow10[k])
	}
	slices.Sort(try)
	for _, m := range try {
		if m > from && x >= 0 && m-from+x <= 3*most+1e-9*m {
			return m
		}
	}
	return 0
}

// below tells of small flows below zero.
func (q *inspector) below() {
	if q.s.Dim != units.Flow {
		return
	}
	top := q.quantile(1)
	n, first := 0, -1
	for i, x := range q.v {
		if x < 0 && x > -0.02*top {
			if n++; first < 0 {
				first = i
			}
		}
	}
	if n > 0 && q.sorted[0] > -0.02*top {
		q.say(q.where(Correction{Key: "flow below zero", Count: n, Text: fmt.Sprintf("%s a flow a little below zero, at most %s: noise of a meter at rest", rowsHave(n), units.Short(-q.sorted[0], units.Preferred(units.Flow, units.Metric), 3))}, first))
	}
}
