package audit

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// stageWords are what a phase says of an axis.
var stageWords = []string{"stroke", "speed", "load", "load_end"}

// StageWords lists what a phase may say of an axis, as in ram.stroke.
func StageWords() []string { return slices.Clone(stageWords) }

// StageDim is the quantity of such a word for a kind of axis.
func StageDim(word string, k duty.AxisKind) units.Dim {
	switch word {
	case "stroke":
		return duty.Position.Dim(k)
	case "speed":
		return duty.Speed.Dim(k)
	}
	return duty.Load.Dim(k)
}

// phaseNames are the names of stretches; a list of phases brings its own.
func (r *reader) phaseNames(s scope, n *yaml.Node) []entry {
	if n != nil && n.Kind == yaml.SequenceNode {
		return nil
	}
	return r.entries(s, n, "phases")
}

// stages reads a list of phases and computes the table of the duty from it. It returns
// where faults of the table stand.
func (r *reader) stages(s scope, d *duty.Duty, f map[string]entry) map[string]*yaml.Node {
	list := f["phases"]
	for _, key := range []string{"points", "file", "columns"} {
		if e, ok := f[key]; ok {
			r.bad(s, e.at, key, "and a list of phases are both given; keep one")
		}
	}
	before := len(r.found)
	stages, axes := []duty.Stage{}, []string{}
	for i, n := range list.value.Content {
		st := r.stage(s.in(fmt.Sprintf("phase %d", i+1)), n)
		stages = append(stages, st)
		for _, m := range st.Moves {
			if !slices.Contains(axes, m.Axis) {
				axes = append(axes, m.Axis)
			}
		}
	}
	r.file.Stages = append(r.file.Stages, stages)
	if len(r.found) > before {
		return nil
	}
	if len(stages) == 0 {
		r.bad(s, list.at, "phases", "are none; write - {name: approach, lasts: 2 s, ram.stroke: 300 mm, ram.load: 5 kN}")
		return nil
	}
	built, err := duty.Build(stages, axes, d.Repeats)
	if err != nil {
		r.bad(s, list.at, "", "%v", err)
		return nil
	}
	d.Time, d.Tracks, d.Phases = built.Time, built.Tracks, built.Phases
	return map[string]*yaml.Node{"": list.at}
}

func (r *reader) stage(s scope, n *yaml.Node) duty.Stage {
	known := []string{"name", "lasts", "ramp"}
	for _, a := range r.file.Axes {
		for _, w := range stageWords {
			known = append(known, a.Name+"."+w)
		}
	}
	f := r.fields(s, n, "", known...)
	st := duty.Stage{Name: oneLine(r.text(s, f, "name"))}
	if st.Name == "" {
		r.bad(s, n, "name", "is missing")
	}
	if v, ok := r.positive(s, f, "lasts", units.Time); ok {
		st.Lasts = v.SI
	} else if _, given := f["lasts"]; !given {
		r.bad(s, n, "lasts", "is missing; write how long the phase lasts, such as 2 s")
	}
	st.Ramp = duty.DefaultRamp(st.Lasts)
	if v, ok := r.optional(s, f, "ramp", units.Time); ok {
		if st.Ramp = v.SI; v.SI < 0 || v.SI > st.Lasts/2*(1+1e-9) {
			r.bad(s, f["ramp"].value, "ramp", "is %s; it lies between 0 s and half of the phase", v.Text)
		}
	}
	for _, a := range r.file.Axes {
		if m, any := r.stageMove(s, f, a); any {
			st.Moves = append(st.Moves, m)
		}
	}
	return st
}

// stageMove reads what a phase says of an axis.
func (r *reader) stageMove(s scope, f map[string]entry, a duty.Axis) (m duty.Move, any bool) {
	m = duty.Move{Axis: a.Name, Stroke: math.NaN(), Speed: math.NaN(), Load: math.NaN(), End: math.NaN()}
	for i, to := range []*float64{&m.Stroke, &m.Speed, &m.Load, &m.End} {
		key := a.Name + "." + stageWords[i]
		if _, given := f[key]; given {
			any = true
			if v, ok := r.optional(s, f, key, StageDim(stageWords[i], a.Kind)); ok {
				*to = v.SI
			}
		}
	}
	if e, both := f[a.Name+".speed"]; both && !math.IsNaN(m.Stroke) {
		r.bad(s, e.at, a.Name+".speed", "and %s.stroke are both given; keep one, the other follows from it", a.Name)
	}
	return m, any
}

// stagedDuty finds a duty that is computed from phases, with its list.
func (f *File) stagedDuty(name string) (int, *draft, *yaml.Node, error) {
	i, err := f.dutyNamed(name)
	if err != nil {
		return i, nil, nil, err
	}
	if f.Stages[i] == nil {
		return i, nil, nil, fmt.Errorf("duty %q has points, and no list of phases", name)
	}
	d := f.draft()
	return i, d, child(d.duty(i), "phases"), nil
}

// AddStagedDuty adds a duty that is computed from phases; each is a list of keys and
// values, such as name, approach, lasts, 2 s.
func (f *File) AddStagedDuty(name string, phases [][]string) error {
	name = oneLine(name)
	if err := f.mayBeDuty(name); err != nil {
		return err
	}
	d, n := f.draft(), len(f.Duties)
	var items []string
	for _, p := range phases {
		items = append(items, stageText(p))
	}
	err := d.addItem("duties", []string{"name: " + encode(name, true), "phases: []"})
	if err == nil {
		err = d.add(d.duty(n), "phases", true, items...)
	}
	if err != nil {
		return fmt.Errorf("duty %q: %w", name, err)
	}
	return f.take(name, d, func(g *File) bool { return g.dutyIndex(name) == n && len(g.Stages[n]) == len(phases) })
}

func stageText(pairs []string) string {
	var parts []string
	for i := 0; i+1 < len(pairs); i += 2 {
		parts = append(parts, encode(pairs[i], true)+": "+encode(pairs[i+1], pairs[i] == "name"))
	}
	return "{" + strings.Join(parts, ", ") + "}"
}

// SetStage changes what a phase says: name, lasts, ramp, ram.stroke and so on; "" takes
// it out. phase counts from 0. A speed takes the place of a stroke, and the other way round.
func (f *File) SetStage(dutyName string, phase int, key, value string) error {
	i, d, list, err := f.stagedDuty(dutyName)
	if err != nil {
		return err
	}
	m := item(list, phase)
	if m == nil {
		return fmt.Errorf("duty %q: there is no phase %d; it has %d", dutyName, phase+1, len(f.Stages[i]))
	}
	value = strings.TrimSpace(value)
	if value == "" {
		if child(m, key) == nil {
			return nil
		}
		return f.dutyEdit(d, i, d.cutKey(m, key), func(g *File) bool { return len(g.Stages[i]) == len(f.Stages[i]) })
	}
	axis, word, _ := strings.Cut(key, ".")
	other := axis + "." + map[string]string{"stroke": "speed", "speed": "stroke"}[word]
	if child(m, other) != nil {
		if err := d.cutKey(m, other); err != nil {
			return fmt.Errorf("duty %q: %w", dutyName, err)
		}
		m = item(child(d.duty(i), "phases"), phase)
	}
	err = d.one(d.src.put(m, key, encode(value, key == "name")))
	return f.dutyEdit(d, i, err, func(g *File) bool {
		return written(child(item(child(g.dutyNode(i), "phases"), phase), key)) == value
	})
}

// StageTexts returns what stands written in a phase, by key.
func (f *File) StageTexts(dutyName string, phase int) map[string]string {
	out := map[string]string{}
	_, _, list, err := f.stagedDuty(dutyName)
	if err != nil {
		return out
	}
	m := item(list, phase)
	for k, key := range mappingKeys(m) {
		out[key.Value] = written(child(m.Content[2*k+1], "value"), m.Content[2*k+1])
	}
	return out
}

// AddStage puts a phase of one second before another, at the end with their number.
func (f *File) AddStage(dutyName string, phase int, name string) error {
	i, d, list, err := f.stagedDuty(dutyName)
	if err != nil {
		return err
	}
	text := stageText([]string{"name", oneLine(name), "lasts", "1 s"})
	if n := len(f.Stages[i]); phase < 0 || phase > n {
		return fmt.Errorf("duty %q: there is no phase %d; it has %d", dutyName, phase+1, n)
	}
	sp, err := d.src.insertItem(list, phase, text)
	return f.dutyEdit(d, i, d.one(sp, err), func(g *File) bool { return len(g.Stages[i]) == len(f.Stages[i])+1 })
}

// RemoveStage takes a phase out; one stays.
func (f *File) RemoveStage(dutyName string, phase int) error {
	i, d, _, err := f.stagedDuty(dutyName)
	if err != nil {
		return err
	}
	if n := len(f.Stages[i]); phase < 0 || phase >= n || n < 2 {
		return fmt.Errorf("duty %q: phase %d cannot be taken out; it has %d and needs one", dutyName, phase+1, n)
	}
	err = d.cut(d.duty(i), "phases", true, func(k int) bool { return k == phase })
	return f.dutyEdit(d, i, err, func(g *File) bool { return len(g.Stages[i]) == len(f.Stages[i])-1 })
}

// StagesToPoints writes the table that the phases of a duty give in their place; the
// names of its stretches stay.
func (f *File) StagesToPoints(dutyName string) error {
	i, d, _, err := f.stagedDuty(dutyName)
	if err != nil {
		return err
	}
	was := f.Duties[i]
	column := func(head string, u units.Unit, values []float64) string {
		var words []string
		for _, v := range values {
			words = append(words, strings.TrimSpace(strings.TrimSuffix(units.FileText(tidy(u, v), u), u.Symbol)))
		}
		return encode(head+" ["+u.Symbol+"]", true) + ": [" + strings.Join(words, ", ") + "]"
	}
	columns := []string{column("t", units.Preferred(units.Time, units.Metric), was.Time)}
	for _, t := range was.Tracks {
		dim, _ := f.trackQuantity(t.Of + "." + t.What.String())
		columns = append(columns, column(t.Of+"."+t.What.String(), units.Preferred(dim, units.Metric), t.Values))
	}
	var names []string
	second, seen := units.Preferred(units.Time, units.Metric), map[string]int{}
	for _, p := range was.Phases {
		name := p.Name
		if seen[p.Name]++; seen[p.Name] > 1 {
			name = fmt.Sprintf("%s %d", p.Name, seen[p.Name])
		}
		names = append(names, encode(name, true)+": "+units.FileText(tidy(second, p.From), second))
	}
	err = d.cutKey(d.duty(i), "phases")
	if err == nil {
		err = d.add(d.duty(i), "points", false, columns...)
	}
	if err == nil {
		err = d.addInline(d.duty(i), "phases", false, names...)
	}
	return f.dutyEdit(d, i, err, func(g *File) bool {
		return g.Stages[i] == nil && len(g.Duties[i].Time) == len(was.Time) && len(g.Duties[i].Tracks) == len(was.Tracks)
	})
}

// tidy drops the digits of a value [SI] beyond the tenth in a unit, which only rounding has made.
func tidy(u units.Unit, v float64) float64 {
	x := u.FromSI(v)
	if x == 0 {
		return v
	}
	scale := math.Pow(10, 10-math.Ceil(math.Log10(math.Abs(x))))
	return u.ToSI(math.Round(x*scale) / scale)
}
