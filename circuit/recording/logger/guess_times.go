package logger

import (
	"bytes"
	"fmt"
	"math"
	"regexp"
	"strings"

	"barlitre/machines/units"
)

// times finds the columns of time stamps and how they are written.
func (g *guesser) times() {
	n := newNumbers(g.Recipe)
	var dateCol, clockCol, both = -1, -1, -1
	for i := range g.names {
		d, k, b, all := 0, 0, 0, 0
		for _, cells := range g.rows {
			if i >= len(cells) || len(cells[i]) == 0 {
				continue
			}
			all++
			dd, kk := isStamp(cells[i])
			switch {
			case dd && kk:
				b++
			case dd:
				d++
			case kk:
				k++
			}
		}
		switch {
		case all == 0 || 2*(d+k+b) < all:
		case both < 0 && b > 0 && b+k+d >= all*9/10:
			both = i
		case dateCol < 0 && d > k:
			dateCol = i
		case clockCol < 0 && (k > 0 || dateCol >= 0): // a clock with dots looks like a date
			clockCol = i
		}
	}
	g.counter(n)
	switch {
	case both >= 0:
		g.Time.Form, g.Time.Columns = Dated, []string{g.names[both]}
		g.order(both)
	case dateCol >= 0 && clockCol >= 0:
		g.Time.Form, g.Time.Columns = Dated, []string{g.names[dateCol], g.names[clockCol]}
		g.order(dateCol)
	case clockCol >= 0:
		g.Time.Form, g.Time.Columns = Clock, []string{g.names[clockCol]}
	default:
		g.numeric(n)
	}
	for _, c := range g.Time.Columns {
		g.drop(c)
	}
	g.drop(g.Time.Counter)
	// stamps that are not used are text
	for _, i := range []int{dateCol, clockCol, both} {
		if i >= 0 && !contains(g.Time.Columns, g.names[i]) {
			g.Channels = append(g.Channels, Channel{Column: g.names[i], Text: true})
		}
	}
}

func contains(list []string, s string) bool {
	for _, x := range list {
		if x == s {
			return true
		}
	}
	return false
}

func (g *guesser) drop(column string) {
	for i := range g.Channels {
		if g.Channels[i].Column == column && column != "" {
			g.Channels = append(g.Channels[:i], g.Channels[i+1:]...)
			return
		}
	}
}

// values returns the numbers of a column of the sample, NaN where there is none.
func (g *guesser) values(n *numbers, i int) (v []float64) {
	for _, cells := range g.rows {
		x := math.NaN()
		if i < len(cells) {
			if y, _, _, ok := n.parse(cells[i]); ok {
				x = y
			}
		}
		v = append(v, x)
	}
	return v
}

// rising counts the steps up and down of a column.
func rising(v []float64) (up, down, ones int) {
	last := math.NaN()
	for _, x := range v {
		if x > last {
			up++
		}
		if x < last {
			down++
		}
		if x == last+1 {
			ones++
		}
		if x == x {
			last = x
		}
	}
	return
}

func (g *guesser) counter(n *numbers) {
	for i, name := range g.names {
		if !counterWords.MatchString(strings.TrimSpace(name)) || g.units[i] != "" {
			continue
		}
		if v := g.values(n, i); len(v) > 1 {
			if _, _, ones := rising(v); 10*ones >= 7*(len(v)-1) {
				g.Time.Counter = name
				return
			}
		}
	}
}

// numeric looks for stamps that are numbers: by their name, their unit, and their rising.
func (g *guesser) numeric(n *numbers) {
	best, score := -1, 0
	for i, name := range g.names {
		if name == g.Time.Counter {
			continue
		}
		v := g.values(n, i)
		up, down, _ := rising(v)
		u, known := unitOf(g.units[i])
		s := 0
		if timeWords.MatchString(strings.TrimSpace(name)) {
			s += 3
		}
		if known && u.Dim == units.Time || g.units[i] == "us" || g.units[i] == "µs" {
			s += 3
		}
		if g.Head == 0 && i == 0 {
			s += 2
		}
		if s == 0 && i == 0 && !known && len(v) > 0 && (epochLike(v) || evenly(v) || serialLike(v)) {
			s = 1
		}
		if s == 0 || up < 5*down || up == 0 {
			continue
		}
		if s > score {
			best, score = i, s
		}
	}
	if best < 0 {
		g.spaced()
		return
	}
	g.Time.Columns = []string{g.names[best]}
	first := math.NaN()
	for _, x := range g.values(n, best) {
		if x == x {
			first = x
			break
		}
	}
	u, known := unitOf(g.units[best])
	timed := known && u.Dim == units.Time && u.Factor < units.Day
	switch {
	case first > 5e8 && first < 4e9 && !(timed && u.Symbol != "s"):
		g.Time.Form, g.Time.Unit = Epoch, "s"
	case first > 5e11 && first < 4e12:
		g.Time.Form, g.Time.Unit = Epoch, "ms"
	case first > 5e14 && first < 4e15:
		g.Time.Form, g.Time.Unit = Epoch, "us"
	case first > 5e17 && first < 4e18:
		g.Time.Form, g.Time.Unit = Epoch, "ns"
	case first > 20000 && first < 80000 && !timed && !whole(g.values(n, best)):
		g.Time.Form = Serial
		g.because(true, "%s: numbers such as %.10g are days as spreadsheets count them", g.names[best], first)
	default:
		g.Time.Form, g.Time.Unit = Elapsed, "s"
		if timed {
			g.Time.Unit = u.Symbol
		} else if g.units[best] == "us" || g.units[best] == "µs" {
			g.Time.Unit = "us"
		} else {
			g.because(true, "%s: no unit is given, taken as seconds", g.names[best])
		}
	}
}

// epochLike reports whether a column begins as stamps since 1970 do, in s, ms, us or ns.
func epochLike(v []float64) bool {
	x := v[0]
	return x > 1e9 && x < 4e9 || x > 1e12 && x < 4e12 || x > 1e15 && x < 4e15 || x > 1e18 && x < 4e18
}

// evenly reports whether a column rises by one and the same step all the time.
func evenly(v []float64) bool {
	if len(v) < 4 {
		return false
	}
	h := v[1] - v[0]
	for i := 1; i < len(v); i++ {
		if !(math.Abs(v[i]-v[i-1]-h) <= 1e-3*h) { // stamps are rounded
			return false
		}
	}
	return h > 0
}

// serialLike reports whether a column holds days as spreadsheets count them, of a few months, always rising.
func serialLike(v []float64) bool {
	if first, last := v[0], v[len(v)-1]; !(first > 20000 && last < 80000 && last-first < 400) || whole(v) {
		return false
	}
	for i := 1; i < len(v); i++ {
		if !(v[i] > v[i-1]) {
			return false
		}
	}
	return true
}

func whole(v []float64) bool {
	for _, x := range v {
		if x == x && x != math.Trunc(x) {
			return false
		}
	}
	return true
}

var intervalText = regexp.MustCompile(`(?i)(interval|sampl\w*( (time|period|interval|rate|frequency))?|abtastrate|takt|rate|period)\b[^0-9\n]{0,20}([\d.,]+)\s*(us|µs|ms|s|sec|min|hz|khz)\b`)

// spaced is for rows without stamps: the lines before them may tell the interval.
func (g *guesser) spaced() {
	g.Time.Form = Spaced
	for _, line := range g.lines[:max(0, g.First-1)] {
		m := intervalText.FindSubmatch(line)
		if m == nil {
			continue
		}
		x, _, _, ok := newNumbers(g.Recipe).parse(m[4])
		unit := strings.ToLower(string(m[5]))
		f := map[string]float64{"us": 1e-6, "µs": 1e-6, "ms": 1e-3, "s": 1, "sec": 1, "min": 60}[unit]
		switch {
		case !ok || !(x > 0):
		case unit == "hz":
			g.Time.Interval = 1 / x
		case unit == "khz":
			g.Time.Interval = 1e-3 / x
		default:
			g.Time.Interval = x * f
		}
		if g.Time.Interval > 0 {
			g.because(true, "no column holds time stamps; %q gives the interval", strings.TrimSpace(string(line)))
			return
		}
	}
	g.ask("interval", "no column holds time stamps and no line gives the interval; say it, as in \"0.01 s\"")
}

// order finds the order of a date: a part above 12 is no month; at midnight it is the day
// that goes up by one. Within one day the order does not matter.
func (g *guesser) order(column int) {
	possible := map[string]bool{"ymd": true, "dmy": true, "mdy": true}
	days := map[string][]int64{}
	distinct := map[string]bool{}
	for _, cells := range g.rows {
		if column >= len(cells) {
			continue
		}
		if _, _, ok := compact(cells[column]); ok {
			g.Time.Order = "ymd"
			return
		}
		v, width, named, _, ok := fields(cells[column])
		if !ok {
			continue
		}
		distinct[fmt.Sprint(v)] = true
		if width == 4 || named >= 0 {
			g.Time.Order = "dmy"
			if width == 4 {
				g.Time.Order = "ymd"
			} else if named == 0 {
				g.Time.Order = "mdy"
			}
			return
		}
		if _, at, _, _, _ := fields(cells[column]); at != 4 && v[2] > 31 {
			possible["ymd"] = false
		}
		for o := range possible {
			day, _, ok := date(cells[column], o)
			if !ok {
				possible[o] = false
				continue
			}
			days[o] = append(days[o], day)
		}
	}
	orders := []string{"dmy", "mdy", "ymd"}
	if g.halfDays(column) {
		orders = []string{"mdy", "dmy", "ymd"} // who writes AM and PM writes the month first, as a rule
	}
	var left []string
	for _, o := range orders {
		if possible[o] && !(o == "ymd" && (possible["dmy"] || possible["mdy"]) && !sane(days[o])) {
			left = append(left, o)
		}
	}
	if len(left) > 1 && len(distinct) > 1 {
		var steady []string
		for _, o := range left {
			if sane(days[o]) {
				steady = append(steady, o)
			}
		}
		if len(steady) > 0 {
			left = steady
		}
	}
	if len(left) == 0 {
		g.ask("order", "the dates are in no order that is known; say which part is the day", "dmy", "mdy", "ymd")
		return
	}
	g.Time.Order = left[0]
	if len(left) > 1 && g.sameInTail(column, left) {
		g.because(true, "the date may be read in more than one way, but all rows are of one day")
	} else if len(left) > 1 {
		g.ask("order", fmt.Sprintf("dates such as %q may have the day or the month first; say which", g.rows[0][column]), left...)
	}
}

// halfDays reports whether the sample writes its clock with AM and PM.
func (g *guesser) halfDays(column int) bool {
	for _, cells := range g.rows[:min(len(g.rows), 20)] {
		for _, c := range cells[min(column, len(cells)):min(column+2, len(cells))] {
			if low := bytes.ToLower(c); bytes.HasSuffix(low, []byte("am")) || bytes.HasSuffix(low, []byte("pm")) || bytes.HasSuffix(low, []byte(".m.")) {
				return true
			}
		}
	}
	return false
}

// sane reports whether days never fall and step by one at most.
func sane(days []int64) bool {
	for i := 1; i < len(days); i++ {
		if d := days[i] - days[i-1]; d < 0 || d > 1 {
			return false
		}
	}
	return true
}

// sameInTail reports whether the sample holds the whole file and one date only.
func (g *guesser) sameInTail(column int, _ []string) bool {
	first := ""
	for _, cells := range g.rows {
		if column >= len(cells) {
			continue
		}
		v, _, _, _, ok := fields(cells[column])
		if !ok {
			continue
		}
		if s := fmt.Sprint(v); first == "" {
			first = s
		} else if s != first {
			return false
		}
	}
	return g.whole
}
