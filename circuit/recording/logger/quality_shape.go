package logger

import (
	"fmt"
	"math"
	"slices"

	"barlitre/machines/units"
)

// Shares and factors below are our choice: wide enough that a sound recording is left in
// peace, stated with each correction that they lead to.
const (
	senseless   = 20.0 // times the usual span beyond the middle: no quantity does that for a few rows
	spikeShare  = 0.3  // of the span, for one row: a spike
	restShare   = 0.1  // of all rows, at least, at rest
	restBar     = 0.05 * units.Bar
	noisyBelow  = 0.2 // share of equal neighbours of a channel that is alive
	stuckShare  = 0.02
	stuckRows   = 50
	clippedRows = 3
)

// fillers are numbers that loggers write where they have no value; common practice, no source.
var fillers = []float64{999, 999.9, 999.99, 9999, 9999.9, 9999.99, 99999, 999999, 32767, 32768, 65535}

// fillers looks for such a number that is more than three times as large as all other values.
func (q *inspector) fillers() {
	s := q.s
	var rows []int
	at, rest := 0.0, 0.0
	for i := range q.v {
		switch x := s.raw.at(q.row(i)); {
		case at == 0 && slices.Contains(fillers, math.Abs(x)):
			at, rows = x, append(rows, i)
		case at != 0 && x == at:
			rows = append(rows, i)
		case x == x:
			rest = math.Max(rest, math.Abs(x))
		}
	}
	if len(rows) == 0 || 2*len(rows) > len(q.v) || rest == 0 || 3*rest > math.Abs(at) || s.Counter || s.Scaling != nil {
		return
	}
	choice := q.pick("filler", "remove", "leave")
	c := q.where(Correction{Key: "filler", Count: len(rows), Warns: true, Choice: choice, Choices: []string{"remove", "leave"},
		Text: fmt.Sprintf("%s %g, which loggers write for no value; all others are below %.4g", rowsHave(len(rows)), at, rest)}, rows[0])
	if choice == "remove" {
		c.Done = "taken as straight lines between the values around"
		s.removed = append(s.removed, rows...)
		for _, i := range rows {
			q.v[i] = math.NaN()
		}
	}
	q.say(c)
}

// spikes looks for rows that stand alone, far from those around.
func (q *inspector) spikes() {
	if len(q.v) < 20 {
		return
	}
	low, high := q.quantile(0.005), q.quantile(0.995)
	middle, span := (low+high)/2, high-low
	if !(span > 0) {
		return
	}
	var far, alone []int
	run := 0
	for i, x := range q.v {
		if math.Abs(x-middle) > senseless*span {
			run++
			far = append(far, i)
			continue
		}
		if run > 3 {
			far = far[:len(far)-run] // it lasts: a change of state
		}
		run = 0
		if i > 0 && i+1 < len(q.v) {
			a, b := x-q.v[i-1], x-q.v[i+1]
			if least := math.Max(spikeShare*span, 5*math.Abs(a-b)); a*b > 0 && math.Min(math.Abs(a), math.Abs(b)) > least {
				alone = append(alone, i)
			}
		}
	}
	q.spike("values of no sense", far, fmt.Sprintf("more than %g times the usual span away from the rest for up to three rows", senseless), "remove", "leave")
	if len(alone)*50 < len(q.v) {
		q.spike("spikes", alone, "alone far above or below both neighbours", "leave", "remove")
	}
}

func (q *inspector) spike(key string, rows []int, text string, choices ...string) {
	if len(rows) == 0 || len(rows)*50 > len(q.v) {
		return
	}
	choice := q.pick(key, choices...)
	worst := rows[0]
	for _, i := range rows {
		if math.Abs(q.v[i]) > math.Abs(q.v[worst]) {
			worst = i
		}
	}
	c := q.where(Correction{Key: key, Count: len(rows), Warns: true, Choice: choice, Choices: choices,
		Text: fmt.Sprintf("%s %s, the largest %s at %s", isRows(len(rows)), text, q.shown(q.v[worst]), units.Seconds(q.Time[worst], 6))}, rows[0])
	if choice == "remove" {
		c.Done = "taken as straight lines between the values around"
		q.s.removed = append(q.s.removed, rows...)
		slices.Sort(q.s.removed)
		for _, i := range rows {
			q.v[i] = math.NaN()
		}
		q.sorted = nil
		q.sampled()
	}
	q.say(c)
}

func isRows(n int) string {
	if n == 1 {
		return "1 row is"
	}
	return fmt.Sprintf("%d rows are", n)
}

func (q *inspector) shown(si float64) string {
	return units.Join(fmt.Sprintf("%.5g", q.s.unit.FromSI(si)), q.s.Unit)
}

// pressure looks at where a pressure rests: against vacuum it rests at that of the air, and
// below that of the air it hardly rests at all.
func (q *inspector) pressure() {
	s := q.s
	if s.Dim != units.Pressure {
		return
	}
	low, top := q.quantile(0), q.quantile(1)
	width := q.quantile(restShare) - low
	rest := q.rest(low + 2*width)
	gauge := q.pick("absolute pressure", "gauge", "leave")
	if !s.Absolute {
		gauge = q.pick("absolute pressure", "leave", "gauge")
	}
	switch {
	case s.Absolute || low > 0.9*units.Bar && low < 1.1*units.Bar && width < 0.1*units.Bar && top > 5*units.Bar:
		c := Correction{Key: "absolute pressure", Count: len(q.v), Choice: gauge, Choices: []string{"gauge", "leave"}, Text: "is a pressure against vacuum"}
		if !s.Absolute {
			c.Text, c.Warns = fmt.Sprintf("rests at %s, as a pressure against vacuum does; say which it is", q.shown(rest)), gauge == "leave"
		}
		if gauge == "gauge" {
			air := q.Recipe.Air
			c.Done = "the standard atmosphere of 1.01325\u202fbar is taken off"
			if air == 0 {
				air = units.AtmosphericPressure
			} else {
				c.Done = fmt.Sprintf("the pressure of the air, stated as %s, is taken off", units.Join(fmt.Sprintf("%.6g", air/units.Bar), "bar"))
			}
			s.shift -= air
		}
		q.say(c)
	case rest < -restBar && rest > -3*units.Bar && width < math.Max(0.3*-rest, restBar) && top-rest > 5*units.Bar:
		choice := q.pick("zero offset", "subtract", "leave")
		first := slices.IndexFunc(q.v, func(x float64) bool { return x < rest+width })
		c := q.where(Correction{Key: "zero offset", Count: len(q.v), Warns: true, Choice: choice, Choices: []string{"subtract", "leave"},
			Text: fmt.Sprintf("rests at %s, below the pressure of the air", q.shown(rest))}, max(first, 0))
		if choice == "subtract" {
			s.shift -= rest
			c.Done = fmt.Sprintf("%s is added to all values", q.shown(-rest))
		}
		q.say(c)
	}
}

// rest returns the middle of the values up to a limit.
func (q *inspector) rest(limit float64) float64 {
	n, _ := slices.BinarySearch(q.sorted, limit)
	return q.sorted[min(len(q.sorted)-1, n/2)]
}

// clipped looks for peaks cut off at one value, of a channel that is alive elsewhere.
func (q *inspector) clipped() {
	if len(q.v) < 20 {
		return
	}
	for _, end := range []struct {
		name string
		sign float64
	}{{"highest", 1}, {"lowest", -1}} {
		limit := math.Inf(-1)
		for _, x := range q.v {
			if x == x {
				limit = math.Max(limit, end.sign*x)
			}
		}
		rows, runs, run, first := 0, 0, 0, -1
		for i := 0; i <= len(q.v); i++ {
			if i < len(q.v) && end.sign*q.v[i] == limit {
				run++
				continue
			}
			if run >= clippedRows && q.steep(i-run, i, end.sign) {
				if rows, runs = rows+run, runs+1; first < 0 {
					first = i - run
				}
			}
			run = 0
		}
		pairs := float64(len(q.v) - 1)
		held := float64(rows - runs)                // equal pairs that are those of the stretches themselves
		long := runs == 1 && rows >= q.stuckLeast() // told by stuck
		if long || rows == 0 || end.sign*limit == 0 || q.equal*pairs-held > noisyBelow*(pairs-held) {
			continue
		}
		stroke := q.s.Dim == units.Length || q.s.Dim == units.Angle
		why := "the peaks are cut off there"
		if stroke {
			why = "an end of the stroke, or of what the sensor can tell"
		}
		q.say(q.where(Correction{Key: "clipped " + end.name, Count: rows, Warns: !stroke,
			Text: fmt.Sprintf("%s (%s of %d) in %s at its %s value %s: %s", isRows(rows), units.Join(fmt.Sprintf("%.2g", 100*float64(rows)/float64(len(q.v))), "%"), len(q.v), counted(runs, "place"), end.name, q.shown(end.sign*limit), why)}, first))
	}
}

func (q *inspector) stuckLeast() int {
	return max(stuckRows, int(stuckShare*float64(len(q.v))))
}

// again tells of both ends of a channel whether it comes to a stand there more than once, as where peaks are cut off.
func (q *inspector) again() map[float64]bool {
	low, high := math.Inf(1), math.Inf(-1)
	for _, x := range q.v {
		if x == x {
			low, high = math.Min(low, x), math.Max(high, x)
		}
	}
	stands := map[float64]int{}
	for i, x := range q.v {
		if (x == low || x == high) && i >= clippedRows-1 && q.v[i-1] == x && q.v[i-2] == x && (i == clippedRows-1 || q.v[i-clippedRows] != x) {
			stands[x]++
		}
	}
	return map[float64]bool{low: stands[low] > 1, high: stands[high] > 1}
}

// steep reports whether a channel comes to the stand of rows a to b, or leaves it, by more
// than a few of its smallest steps: a peak that was not cut off is round.
func (q *inspector) steep(a, b int, sign float64) bool {
	most := 0.0
	if a > 0 {
		most = sign * (q.v[a] - q.v[a-1])
	}
	if b < len(q.v) {
		most = math.Max(most, sign*(q.v[a]-q.v[b]))
	}
	return most > 3.5*q.quantum()
}

// quantum is the smallest step of the channel.
func (q *inspector) quantum() float64 {
	if q.least == 0 {
		q.least = math.Inf(1)
		for i := 1; i < len(q.v); i++ {
			if d := math.Abs(q.v[i] - q.v[i-1]); d > 1e-9*math.Abs(q.v[i]) && d < q.least {
				q.least = d
			}
		}
	}
	return q.least
}

// restsLeast is how many stands of much the same length are those of a machine that rests in
// every cycle, wherever drift or leakage leaves it (our choice).
const restsLeast = 3

// rests reports whether stands are so many, and none much longer than most.
func rests(lengths []int) bool {
	if len(lengths) < restsLeast {
		return false
	}
	sorted := slices.Sorted(slices.Values(lengths))
	return sorted[len(sorted)-1] <= 2*sorted[len(sorted)/2]
}

// stuck looks for long stretches of one value, of a channel that is alive elsewhere.
func (q *inspector) stuck() {
	least := q.stuckLeast()
	longest, at, rows, stretches := 0, 0, 0, 0
	var lengths []int
	again := q.again()
	for i := 0; i < len(q.v); {
		k := i + 1
		for k < len(q.v) && q.v[k] == q.v[i] {
			k++
		}
		if n := k - i; n >= least && q.v[i] != 0 && !again[q.v[i]] {
			rows, stretches, lengths = rows+n, stretches+1, append(lengths, n)
			if n > longest {
				longest, at = n, i
			}
		}
		i = k
	}
	if rows == 0 || rests(lengths) {
		return
	}
	rest := (q.equal*float64(len(q.v)-1) - float64(rows-stretches)) / math.Max(1, float64(len(q.v)-rows))
	if rest > noisyBelow {
		return
	}
	q.say(q.where(Correction{Key: "stuck", Count: rows, Warns: true,
		Text: fmt.Sprintf("stands still at %s for %s (%d rows) while it is never still elsewhere", q.shown(q.v[at]), units.Seconds(q.Time[at+longest-1]-q.Time[at], 4), longest)}, at))
}
