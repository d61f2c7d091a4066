package logger

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"barlitre/machines/units"
)

// timeline makes rising times of stamps as they stand in the file, and the order of rows.
type timeline struct {
	*importer
	t     []float64 // s, by row of the file
	index []int32   // rows in their order; nil = as in the file
	dt    float64   // s, median step
	late  []int32   // rows that came too late

	dropped []int // rows that the part before has already; their times are NaN

	midnights, summer, resets []jump
}

// jump is a place at which the clock was set.
type jump struct {
	row int
	by  float64 // s, what was added to all stamps from there on
}

const (
	lookAhead = 64 // rows that may overtake another
	hour      = 3600.0
	day       = 86400.0
)

// timeline finds the times of rows.
func (im *importer) timeline() (*timeline, error) {
	tl := &timeline{importer: im, t: make([]float64, im.rows)}
	for i := range tl.t {
		tl.t[i] = im.raw.at(i)
	}
	im.raw = column{}
	tl.dt = medianStep(tl.t, nil)
	if !(tl.dt > 0) {
		return nil, fmt.Errorf("the time stamps never rise; say which column holds them")
	}
	if err := tl.joints(); err != nil {
		return nil, err
	}
	tl.walk()
	if c := tl.choice("clock reset", "append", "refuse"); len(tl.resets) > 0 && c == "refuse" {
		return nil, fmt.Errorf("line %d: the clock falls back, and the recipe refuses that", im.lineOf(tl.resets[0].row))
	}
	if p := tl.Recipe.Time.Pauses; len(p) > len(tl.resets) {
		return nil, fmt.Errorf("the recipe tells of %s of a clock that begins anew, the file has %d; take out what is too much", counted(len(p), "pause"), len(tl.resets))
	}
	tl.sayJumps()
	tl.sort()
	if err := tl.groups(); err != nil {
		return nil, err
	}
	return tl, tl.gaps()
}

// choice returns what the recipe says for a correction, or the first of what may be said.
func (im *importer) choice(key string, choices ...string) string {
	if c := im.Recipe.Choices[key]; slices.Contains(choices, c) {
		return c
	}
	return choices[0]
}

// medianStep returns the median of the steps up, of up to 20,000 of them.
func medianStep(t []float64, index []int32) float64 {
	n := len(t)
	if index != nil {
		n = len(index)
	}
	at := func(i int) float64 {
		if index != nil {
			return t[index[i]]
		}
		return t[i]
	}
	stride := max(1, n/20000)
	var steps []float64
	for i := 1; i < n; i += stride {
		if d := at(i) - at(i-1); d > 0 {
			steps = append(steps, d)
		}
	}
	if len(steps) == 0 {
		return 0
	}
	slices.Sort(steps)
	return steps[len(steps)/2]
}

// walk goes through the stamps and evens out what the clock did.
func (tl *timeline) walk() {
	t, off, prev := tl.t, 0.0, tl.t[0]
	wallClock := tl.Recipe.Time.Form == Clock || tl.Recipe.Time.Form == Dated && !tl.stamps.zoned
	wraps := tl.Recipe.Time.Form == Clock || tl.stamps.undated > 0
	for i := 1; i < len(t); i++ {
		if t[i] != t[i] {
			continue
		}
		x := t[i] + off
		if wraps && x-prev < -day/2 {
			off, x = off+day, x+day
			tl.midnights = append(tl.midnights, jump{i, day})
		}
		switch d := x - prev; {
		case wallClock && tl.hourOff(d, -hour, prev) && tl.stays(i, off, prev):
			off, x = off+hour, x+hour
			tl.summer = append(tl.summer, jump{i, hour})
		case wallClock && tl.hourOff(d, hour, prev) && tl.Recipe.Time.Form == Dated:
			off, x = off-hour, x-hour
			tl.summer = append(tl.summer, jump{i, -hour})
		case d < 0 && tl.overtaken(i, off, prev, x):
			tl.late = append(tl.late, int32(i))
			t[i] = x
			continue
		case d < 0 || d > 30*day && d > 100*(prev-t[0]):
			by := prev + tl.pause(len(tl.resets)) - x
			off, x = off+by, x+by
			tl.resets = append(tl.resets, jump{i, by})
		}
		t[i], prev = x, x
	}
}

// pause is the time from the last row before the clock began anew to the first after.
func (tl *timeline) pause(k int) float64 {
	if p := tl.Recipe.Time.Pauses; k < len(p) {
		return p[k]
	}
	return tl.dt
}

// hourOff reports whether a step is one row and an hour more or less, at a full hour of
// the night, as where summer time begins or ends.
func (tl *timeline) hourOff(d, by, prev float64) bool {
	tol := math.Max(2*tl.dt, 1)
	if tl.choice("summer time", "even out", "leave") == "leave" || tl.dt > 600 || math.Abs(d-by-tl.dt) > tol {
		return false
	}
	ofDay := math.Mod(float64(tl.ns0%dayNS)/1e9+prev-tl.t[0], day)
	into := math.Mod(ofDay+tl.dt+tol, hour)
	return into <= 2*tol && ofDay < 5*hour
}

// stays reports whether the rows after i stay behind prev: a single one would be late only.
func (tl *timeline) stays(i int, off, prev float64) bool {
	for k := i + 1; k < min(i+4, len(tl.t)); k++ {
		if tl.t[k]+off > prev {
			return false
		}
	}
	return true
}

// overtaken reports whether row i at x belongs before rows that came earlier: rows soon
// go on after prev, and its time is one that is missing, or it is one of a few only.
func (tl *timeline) overtaken(i int, off, prev, x float64) bool {
	behind := 0
	for k := i; k < len(tl.t) && tl.t[k]+off <= prev; k++ {
		if behind++; behind > lookAhead {
			return false
		}
	}
	if i+behind == len(tl.t) && behind > 3 || i+behind < len(tl.t) && tl.t[i+behind]+off > prev+float64(lookAhead)*tl.dt {
		return false
	}
	if behind <= 3 {
		return x >= tl.t[0]-float64(lookAhead)*tl.dt
	}
	for k := i - 1; k >= max(0, i-4*lookAhead); k-- {
		if math.Abs(tl.t[k]-x) < 0.4*tl.dt {
			return false
		}
	}
	return true
}

func (tl *timeline) sayJumps() {
	add := func(key string, js []jump, warns bool, text, done, choice string, choices ...string) {
		if len(js) > 0 {
			tl.Corrections = append(tl.Corrections, Correction{Key: key, Count: len(js), Line: tl.lineOf(js[0].row), T: tl.t[js[0].row], Text: text, Done: done, Choice: choice, Choices: choices, Warns: warns})
		}
	}
	times := func(n int) string {
		if n == 1 {
			return "once"
		}
		return fmt.Sprintf("%d times", n)
	}
	add("midnight", tl.midnights, false, fmt.Sprintf("the clock passes midnight %s", times(len(tl.midnights))), "a day is added", "")
	if len(tl.summer) > 0 {
		how := "an hour is missing"
		if tl.summer[0].by > 0 {
			how = "an hour stands twice"
		}
		add("summer time", tl.summer, false, how+", as where summer time begins or ends", "evened out", "even out", "even out", "leave")
	}
	if len(tl.resets) > 0 {
		r, p := tl.resets[0], tl.Recipe.Time.Pauses
		done := "what follows is put one step after what was before; how long the pause was is not known"
		if len(p) > 0 {
			done = fmt.Sprintf("what follows is put after the pauses that the recipe tells, %s", units.Join(strings.Trim(fmt.Sprint(p[:min(len(p), len(tl.resets))]), "[]"), "s"))
		}
		add("clock reset", tl.resets, len(p) < len(tl.resets), fmt.Sprintf("the clock jumps %s, the first time by %s", times(len(tl.resets)), units.Seconds(-(r.by)+tl.pause(0), 6)),
			done, "append", "append", "refuse")
	}
}

// sort puts late rows where they belong, or drops them.
func (tl *timeline) sort() {
	if len(tl.late)+len(tl.dropped) == 0 {
		return
	}
	c := Correction{Key: "out of order", Count: len(tl.late), Text: counted(len(tl.late), "row") + " out of order",
		Choices: []string{"sort", "drop"}, Choice: tl.choice("out of order", "sort", "drop"), Done: "sorted by time"}
	if len(tl.late) > 0 {
		c.Line, c.T = tl.lineOf(int(tl.late[0])), tl.t[tl.late[0]]
	}
	tl.index = make([]int32, 0, len(tl.t))
	k := 0
	for i := range tl.t {
		if k < len(tl.late) && tl.late[k] == int32(i) {
			k++
			if c.Choice == "drop" {
				continue
			}
		}
		if tl.t[i] != tl.t[i] {
			continue
		}
		tl.index = append(tl.index, int32(i))
		for j := len(tl.index) - 1; j > 0 && tl.t[tl.index[j-1]] > tl.t[tl.index[j]]; j-- {
			tl.index[j-1], tl.index[j] = tl.index[j], tl.index[j-1]
		}
	}
	if c.Choice == "drop" {
		c.Done = "left out"
	}
	if c.Count > 0 {
		tl.Corrections = append(tl.Corrections, c)
	}
}

func (tl *timeline) len() int {
	if tl.index != nil {
		return len(tl.index)
	}
	return len(tl.t)
}

func (tl *timeline) row(i int) int {
	if tl.index != nil {
		return int(tl.index[i])
	}
	return i
}

func (tl *timeline) at(i int) float64 { return tl.t[tl.row(i)] }

// gaps tells of missing rows and of uneven steps, and keeps the times.
func (tl *timeline) gaps() error {
	n := tl.len()
	if n < 2 {
		return fmt.Errorf("one row is left; a recording has at least two")
	}
	times := tl.t
	if tl.index != nil {
		times = make([]float64, n)
		for i := range times {
			times[i] = tl.at(i)
		}
	}
	tl.Time, tl.Interval = times, medianStep(times, nil)
	tl.dt = tl.Interval
	regular := tl.regular()
	gaps, missing, longest, at, first := 0, 0, 0.0, 0, 0
	least, most := math.Inf(1), 0.0
	for i := 1; i < n; i++ {
		d := times[i] - times[i-1]
		least, most = math.Min(least, d), math.Max(most, d)
		limit := 1.5
		if !regular {
			limit = 10
		}
		if d > limit*tl.Interval {
			if gaps++; gaps == 1 {
				first = i
			}
			missing += int(math.Round(d/tl.Interval)) - 1
			if d > longest {
				longest, at = d, i
			}
		}
	}
	if !regular {
		tl.Corrections = append(tl.Corrections, Correction{Key: "uneven steps", Text: fmt.Sprintf("rows follow each other unevenly, by %s to %s, half of them within %s", units.Seconds(least, 4), units.Seconds(most, 4), units.Seconds(tl.Interval, 4))})
	}
	if gaps > 0 {
		if tl.choice("missing rows", "interpolate", "refuse") == "refuse" {
			return fmt.Errorf("line %d: rows are missing, and the recipe refuses that", tl.lineOf(tl.row(first)))
		}
		tl.Corrections = append(tl.Corrections, Correction{Key: "missing rows", Count: missing, Line: tl.lineOf(tl.row(first)), T: times[first], Warns: longest > 10*tl.Interval,
			Text: fmt.Sprintf("about %s missing in %s, the longest of %s at %s", counted(missing, "row"), counted(gaps, "gap"), units.Seconds(longest, 4), units.Seconds(times[at], 6)),
			Done: "taken as straight lines between the rows around", Choice: "interpolate", Choices: []string{"interpolate", "refuse"}})
	}
	tl.counted()
	return nil
}

// counted compares with the counter of records.
func (tl *timeline) counted() {
	if tl.counterAt < 0 {
		return
	}
	missing, first := 0, -1
	last := math.NaN()
	for i := range tl.len() {
		c := tl.count.at(tl.row(i))
		if d := c - last; d > 1 && d < 1e9 {
			if missing += int(d) - 1; first < 0 {
				first = i
			}
		}
		if c == c {
			last = c
		}
	}
	done := ""
	if tl.Recipe.Time.Form == Spaced {
		done = "rows stand at the times that it gives them"
	}
	if first >= 0 {
		tl.Corrections = append(tl.Corrections, Correction{Key: "record counter", Count: missing, Line: tl.lineOf(tl.row(first)), T: tl.Time[first], Warns: true,
			Text: fmt.Sprintf("by the record counter %q, %s missing", tl.Recipe.Time.Counter, counted(missing, "row")), Done: done})
	}
}
