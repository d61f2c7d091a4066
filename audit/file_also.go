package audit

import (
	"fmt"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/circuit/recording/align"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Also is a recording of another logger whose channels are set beside those of the first.
type Also struct {
	Files    []string // one, or those that it was split into
	SHA256   string
	Expected string  // that the audit has; "" = none
	Offset   float64 // s, added to its times, besides what its dates say
	How      string  // where that comes from, in words
	Unclear  bool    // found, but it does not stand out
}

// defaultWithin is how far clocks are looked for to be off where an audit does not say [s].
const defaultWithin = 3600

// alongside sets the channels of further recordings beside those of the first, once for
// every text of the audit; nil when one is faulty.
func (r *reader) alongside(s scope, first *logger.Recording, also entry) (*logger.Recording, []Also) {
	if also.at == nil {
		return first, nil
	}
	if also.value == nil || also.value.Kind != yaml.SequenceNode {
		r.bad(s, also.at, "also", "needs a list of recordings, each with file and import")
		return nil, nil
	}
	from, key := r.from, flowText(also.value)
	from.Lock()
	t := from.beside[key]
	from.Unlock()
	if t == nil {
		t = keptRecording(first)
		for i, n := range also.value.Content {
			if !r.oneMore(s.in(fmt.Sprintf("also %d", i+1)), t, n) {
				return nil, nil
			}
		}
		from.Lock()
		from.beside = map[string]*recorded{key: t} // of one text only: an edit makes another
		from.Unlock()
	}
	for _, a := range t.also {
		if a.Expected != "" && a.Expected != a.SHA256 {
			r.told(s, circuit.Warns, also.value, fmt.Sprintf("%s is not the file that this duty was made from: its SHA-256 is %s, the audit has %s", a.Files[0], a.SHA256, a.Expected))
		}
		if a.Unclear {
			r.told(s, circuit.Warns, also.value, a.Files[0]+": "+a.How)
		}
	}
	r.from = t
	return t.rec, t.also
}

// oneMore reads one further recording and sets its channels beside those that are there.
func (r *reader) oneMore(s scope, t *recorded, n *yaml.Node) bool {
	f := r.fields(s, n, "", "file", "sha256", "import", "offset", "align")
	file, recipe := f["file"], f["import"]
	if file.at == nil || recipe.at == nil {
		r.bad(s, n, "also", "needs file and import")
		return false
	}
	var rp logger.Recipe
	a := Also{Files: r.besideNames(s, file.value, "file"), Expected: strings.ToLower(r.text(s, f, "sha256"))}
	if len(a.Files) == 0 || !r.recipe(s, recipe.value, &rp) {
		return false
	}
	other := r.recording(s, file.value, a.Files, recipe.value, rp)
	if other == nil {
		return false
	}
	a.SHA256 = other.SHA256
	base, dated := t.rec.After(other)
	if !r.offset(s, f, t.rec, other, base, &a) {
		return false
	}
	how := a.How
	if dated {
		how += fmt.Sprintf("; by its dates it begins %.6g s after the first", base+other.Time[0]-t.rec.Time[0])
	}
	out, err := t.rec.Attach(other, base+a.Offset, how)
	if err != nil {
		r.bad(s, file.value, "file", "%v", err)
		return false
	}
	t.rec, t.also = out, append(t.also, a)
	return true
}

// offset finds what is added to the times of another recording, given or found.
func (r *reader) offset(s scope, f map[string]entry, rec, other *logger.Recording, base float64, a *Also) bool {
	at, found := f["align"]
	given, isGiven := f["offset"]
	switch {
	case found && isGiven:
		r.bad(s, at.at, "align", "and offset are both given; keep one")
		return false
	case isGiven:
		x, ok := r.value(s, given.value, "offset", units.Time)
		a.Offset, a.How = x.SI, fmt.Sprintf("%.6g s, as given, are added to its times", x.SI)
		return ok
	case !found:
		a.How = "its times are taken as they are"
		return true
	}
	in := s.in("align")
	of := r.fields(in, at.value, "", "channel", "with", "within")
	first, second := rec.Find(r.text(in, of, "channel")), other.Find(r.text(in, of, "with"))
	if first == nil || second == nil {
		r.bad(in, at.value, "align", "names no channel of each: channel is one of %s, with is one of %s", rec.Name, other.Name)
		return false
	}
	within := float64(defaultWithin)
	if x, ok := r.optional(in, of, "within", units.Time); ok {
		within = x.SI
	}
	t2 := make([]float64, len(other.Time))
	for i, x := range other.Time {
		t2[i] = x + base
	}
	shift, err := align.Offset(rec.Time, first.Values(), t2, second.Values(), within)
	if err != nil {
		r.bad(in, at.value, "align", "%s with %s: %v", first.Column, second.Column, err)
		return false
	}
	a.Offset, a.Unclear = shift.Offset, !shift.Sure()
	a.How = fmt.Sprintf("aligned by %s with %s, %s", first.Column, second.Column, shift)
	return true
}
