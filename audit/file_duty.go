package audit

import (
	"fmt"
	"math"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
	"barlitre/machines/units"
)

const noDuty = "there is no duty; say what the axes must do over time"

func (r *reader) duties(n, root *yaml.Node) {
	items := r.items(scope{}, n, "duties", "duties: [{name: day shift, ...}]")
	if len(items) == 0 && r.isAbsent(n) {
		r.bad(scope{}, root, "duties", noDuty)
	}
	line := map[string]int{}
	for i, item := range items {
		name, at := nameOf(item)
		if name == "" {
			name = fmt.Sprintf("duty %d", i+1)
		} else if first, twice := line[name]; twice {
			r.bad(scope{duty: name}, at, "", "duty %q stands here twice, %s; rename one", name, lines(first, at.Line))
		} else {
			line[name] = at.Line
		}
		r.from = nil
		r.file.Imports, r.file.Rates = append(r.file.Imports, nil), append(r.file.Rates, nil)
		d, src := r.duty(name, item)
		r.file.Duties = append(r.file.Duties, d)
		r.file.Sources = append(r.file.Sources, src)
	}
}

// stops counts the findings that stop.
func stops(found []circuit.Finding) (n int) {
	for _, f := range found {
		if f.Level == circuit.Stops {
			n++
		}
	}
	return n
}

// isAbsent reports whether a list is missing, and not just under a misspelt key,
// which is said already.
func (r *reader) isAbsent(n *yaml.Node) bool {
	return (isNull(n) || n.Kind == yaml.SequenceNode) && !r.misspelt
}

// nameOf returns the name in a list item and its node, "" when it has none.
func nameOf(item *yaml.Node) (string, *yaml.Node) {
	if v := child(item, "name"); v != nil && v.Kind == yaml.ScalarNode && !isNull(v) {
		return oneLine(v.Value), v
	}
	return "", item
}

func (r *reader) duty(name string, n *yaml.Node) (*duty.Duty, Source) {
	s := scope{duty: name, where: fmt.Sprintf("duty %q", name)}.titled("duty")
	f := r.fields(s, n, "", "name", "note", "hours", "repeats", "step", "instants", "standstill", "points", "file", "columns", "sha256", "import", "also", "derived", "part", "phases")
	d := &duty.Duty{Name: name}
	if _, ok := f["name"]; !ok {
		r.bad(s, n, "name", "is missing")
	}
	r.text(s, f, "name")
	r.text(s, f, "note")
	if v, ok := r.optional(s, f, "hours", units.Time); ok {
		if d.Hours = v.SI; v.SI < 0 || v.SI > 366*units.Day {
			r.bad(s, f["hours"].value, "hours", "is %s; a year has 0 h to 8784 h", v.Text)
		}
	}
	d.Repeats = r.flag(s, f, "repeats", true)
	d.Sampled = !r.flag(s, f, "instants", true)
	d.Standstill = r.standstill(s, f["standstill"].value)
	before := stops(r.found)
	src, at := Source{}, map[string]*yaml.Node(nil)
	if list := f["phases"].value; list != nil && list.Kind == yaml.SequenceNode {
		at = r.stages(s, d, f)
	} else {
		src, at = r.points(s, d, f, n)
		r.part(s, d, f)
		r.file.Stages = append(r.file.Stages, nil)
	}
	if step, ok := r.optional(s, f, "step", units.Time); !ok {
		d.Step = stepOf(d, src.File != "")
	} else if d.Step = step.SI; step.SI < 0 {
		r.bad(s, f["step"].value, "step", "is %s, must not be below 0; 0 s means the rows only", step.Text)
	}
	for _, e := range r.phaseNames(s, f["phases"].value) {
		if v, ok := r.value(s.in("phases"), e.value, e.key, units.Time); ok {
			d.Phases = append(d.Phases, duty.Phase{Name: e.key, From: v.SI})
		}
	}
	if stops(r.found) == before { // else it would be about numbers that could not be read
		for _, p := range d.Check() {
			r.book(s, at[p.Track], p.Track, p.Error())
		}
		r.rate(s, d, f, len(r.file.Imports)-1)
	}
	return d, src
}

// rowsEnough is how many rows a recording must have for them alone to be the time steps.
// A table with fewer is a few points as if typed, with straight lines of power between them
// that a load and a speed, both rising, do not have.
const rowsEnough = 100

// stepOf returns the step of a duty that gives none [s]: none between the rows of a
// recording, which knows nothing of what was between them.
func stepOf(d *duty.Duty, recorded bool) float64 {
	if recorded && len(d.Time) >= rowsEnough {
		return 0
	}
	return defaultStep(d.Cycle())
}

// defaultStep returns a thousandth of the cycle [s], rounded to 1, 2 or 5 (by
// ratio), at most 10 ms; 0 for a cycle of no length.
func defaultStep(cycle float64) float64 {
	x := cycle / 1000
	if !(x > 0) || math.IsInf(x, 0) {
		return 0
	}
	exp := math.Floor(math.Log10(x))
	m := x / math.Pow(10, exp) // 1..10
	round := 10.0
	switch {
	case m < math.Sqrt(2):
		round = 1
	case m < math.Sqrt(10):
		round = 2
	case m < math.Sqrt(50):
		round = 5
	}
	return math.Min(0.01, round*math.Pow(10, exp))
}

// standstill reads the speeds up to which axes count as standing.
func (r *reader) standstill(s scope, n *yaml.Node) map[string]float64 {
	out := map[string]float64{}
	in := s.in("standstill")
	for _, e := range r.entries(s, n, "standstill") {
		k, known := r.axisKind(e.key)
		if !known {
			if !r.axes[e.key] { // else its kind was faulty, said already
				r.bad(in, e.at, e.key, "there is no axis %q%s", e.key, guess(e.key, r.axisNamesKnown()))
			}
			continue
		}
		v, ok := r.quantity(in, e.value, e.key, duty.Speed.Dim(k))
		if ok && v.SI < 0 {
			r.bad(in, e.value, e.key, "is %s, must not be below 0", v.Text)
		}
		out[e.key] = v.SI
	}
	return out
}

// axisKind returns the kind of an axis by its name.
func (r *reader) axisKind(name string) (duty.AxisKind, bool) {
	for _, a := range r.file.Axes {
		if a.Name == name {
			return a.Kind, true
		}
	}
	return 0, false
}

// points reads the rows, typed or from a recording. It returns where each track
// stands, by its name; "" is for the duty as a whole.
func (r *reader) points(s scope, d *duty.Duty, f map[string]entry, n *yaml.Node) (Source, map[string]*yaml.Node) {
	pts, typed := f["points"]
	file, recorded := f["file"]
	switch {
	case typed && recorded:
		r.bad(s, file.at, "file", "points and file are both given; keep one")
	case typed:
		if c, ok := f["columns"]; ok {
			r.bad(s, c.at, "columns", "are of a file; points name their tracks themselves")
		}
		return Source{}, r.typed(s, d, pts)
	case recorded && f["import"].at != nil:
		return r.imported(s, d, f), map[string]*yaml.Node{"": file.value}
	case recorded:
		for _, key := range []string{"sha256", "derived", "part", "also"} {
			if e, ok := f[key]; ok {
				r.bad(s, e.at, key, "goes with import, which says how a recording is read")
			}
		}
		return r.recorded(s, d, file.value, f["columns"]), map[string]*yaml.Node{"": file.value}
	default:
		r.bad(s, n, "points", "are missing; write points: {t: [0 s, ...], ...} or file: name.csv")
	}
	return Source{}, nil
}

func (r *reader) typed(s scope, d *duty.Duty, pts entry) map[string]*yaml.Node {
	at := map[string]*yaml.Node{"": pts.at}
	in := s.in("points")
	hasTime := false
	for _, e := range r.entries(s, pts.value, "points") {
		name, unit, ok := recording.SplitHead(e.key)
		if !ok {
			r.bad(in, e.at, e.key, "write the name and its unit between brackets, as in %q", "ram.speed [m/s]")
			continue
		}
		if _, twice := at[name]; twice {
			r.bad(in, e.at, e.key, "%s stands here twice; keep one", name)
			continue
		}
		at[name] = e.value
		hasTime = hasTime || name == "t"
		dim, ok := r.column(in, d, e.at, name)
		if !ok {
			continue
		}
		r.keep(d, name, r.list(in, e, unit, dim))
	}
	if !hasTime {
		r.bad(in, pts.at, "t", "is missing; give the time stamps, as in t: [0 s, 2 s]")
	}
	return at
}

// list reads the values of one key of points, in SI.
func (r *reader) list(s scope, e entry, unit string, d units.Dim) []float64 {
	out := []float64{}
	u, err := headUnit(unit, d)
	if err != nil {
		r.bad(s, e.at, e.key, "%v", err)
		return out
	}
	for i, item := range r.items(s, e.value, e.key, "[0 s, 2 s]") {
		key := fmt.Sprintf("%s, value %d", e.key, i+1)
		t, ok := r.scalar(s, item, key, article(d.Name()))
		if !ok {
			out = append(out, 0)
			continue
		}
		x, err := pointIn(t, unit, u, d)
		if err != nil {
			r.bad(s, item, key, "%v", err)
		}
		out = append(out, x)
	}
	return out
}

// pointIn reads one value of a track, whose key may name the unit of bare numbers.
func pointIn(text, unit string, u units.Unit, d units.Dim) (float64, error) {
	if unit != "" {
		return boundIn(text, u, d)
	}
	x, _, err := units.Parse(text, d)
	return x, err
}

// headUnit reads the unit in the head of a track, which may have none.
func headUnit(unit string, d units.Dim) (units.Unit, error) {
	if u, ok := units.Find(unit, d); ok || unit == "" {
		return u, nil
	}
	return units.ParseUnit(unit, d)
}

// keep puts a column where it belongs; SI.
func (r *reader) keep(d *duty.Duty, name string, values []float64) {
	if name == "t" {
		d.Time = values
		return
	}
	of, what, _ := strings.Cut(name, ".")
	w, _ := duty.WhatNamed(what)
	d.Tracks = append(d.Tracks, duty.Track{Of: of, What: w, Values: values})
}

var trackWords = []string{duty.Speed.String(), duty.Position.String(), duty.Load.String(), duty.Command.String()}

// column finds the quantity that a column of a duty holds.
func (r *reader) column(s scope, d *duty.Duty, n *yaml.Node, name string) (units.Dim, bool) {
	if name == "t" {
		return units.Time, true
	}
	of, what, dotted := strings.Cut(name, ".")
	w, known := duty.WhatNamed(what)
	if !dotted || !known {
		r.bad(s, n, name, "is not a track; write t, or an axis and one of %s, as in %q", strings.Join(trackWords, ", "), "ram.speed")
		return 0, false
	}
	if k, ok := r.axisKind(of); ok {
		if !w.OfAxis() {
			use := "a pump with p/Q control (control: pq)"
			if w.Measured() {
				use = "a measuring point"
			}
			r.bad(s, n, name, "%s is an axis; %s is for %s", of, said(what), use)
			return 0, false
		}
		return w.Dim(k), true
	}
	switch {
	case r.axes[of]: // its kind was faulty, said already
	case r.blocks[of] && w.OfBlock():
		return w.Dim(duty.Linear), true
	case r.blocks[of]:
		r.bad(s, n, name, "%s is a block; a block has a command, a set pressure (set_pressure) or a set flow (set_flow), a measuring point a pressure or a flow, an electric motor a power; %s is for an axis", of, said(what))
	default:
		r.bad(s, n, name, "there is no axis or block %q%s", of, guess(of, r.axisNamesKnown()))
	}
	return 0, false
}

// said names what a track gives, with its word where that is not the same.
func said(what string) string { return circuit.WithWord(strings.ReplaceAll(what, "_", " "), what) }

func (r *reader) axisNamesKnown() []string {
	var out []string
	for _, a := range r.file.Axes {
		out = append(out, a.Name)
	}
	return out
}
