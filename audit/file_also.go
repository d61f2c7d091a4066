package audit

import (
	"errors"
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
	Expected string // that the audit has; "" = none
	Recipe   logger.Recipe
	Clock    Clock   // as the audit says
	Offset   float64 // s, added to its times, besides what its dates say
	How      string  // where that comes from, in words
	Unclear  bool    // found, but it does not stand out
	key      string  // of what is kept
}

// Clock says how the times of another logger are brought to those of the first. The zero
// Clock takes them as they are.
type Clock struct {
	Offset  string  // a time that is added, such as "-3.2 s"; "" = not given
	Channel string  // of the first, that is compared with a channel of the other; "" = none is
	With    string  // that channel
	Within  float64 // s to either side, that is looked in; 0 = an hour
}

// fields writes what an audit file has of it.
func (c Clock) fields() map[string]any {
	switch {
	case c.Channel != "":
		of := map[string]string{"channel": c.Channel, "with": c.With}
		if c.Within > 0 {
			of["within"] = units.FileText(c.Within, units.Preferred(units.Time, units.SI))
		}
		return map[string]any{"align": of}
	case c.Offset != "":
		return map[string]any{"offset": c.Offset}
	}
	return nil
}

// defaultWithin is how far clocks are looked for to be off where an audit does not say [s].
const defaultWithin = 3600

// errClock is a fault in how a clock is set.
type errClock struct{ error }

// Attach sets the channels of another recording beside those of rec, by Clock, and fills in what it found.
func (a *Also) Attach(rec, other *logger.Recording) (*logger.Recording, error) {
	a.SHA256 = other.SHA256
	base, dated := rec.After(other)
	if err := a.find(rec, other, base); err != nil {
		return nil, errClock{err}
	}
	how := a.How
	if dated {
		how += fmt.Sprintf("; by its dates it begins %.6g s after the first", base+other.Time[0]-rec.Time[0])
	}
	return rec.Attach(other, base+a.Offset, how)
}

// find finds what is added to the times of another recording, given or to be found.
func (a *Also) find(rec, other *logger.Recording, base float64) error {
	a.Offset, a.Unclear = 0, false
	switch c := a.Clock; {
	case c.Channel == "" && c.With == "" && c.Offset == "":
		a.How = "its times are taken as they are"
		return nil
	case c.Offset != "":
		x, _, err := units.ParseLoose(c.Offset, units.Time, units.Preferred(units.Time, units.SI))
		a.Offset, a.How = x, fmt.Sprintf("%.6g s, as given, are added to its times", x)
		return err
	}
	first, second := rec.Find(a.Clock.Channel), other.Find(a.Clock.With)
	if first == nil || second == nil {
		return fmt.Errorf("names no channel of each: channel is one of %s, with is one of %s", rec.Name, other.Name)
	}
	within := a.Clock.Within
	if !(within > 0) {
		within = defaultWithin
	}
	t2 := make([]float64, len(other.Time))
	for i, x := range other.Time {
		t2[i] = x + base
	}
	shift, err := align.Offset(rec.Time, first.Values(), t2, second.Values(), within)
	if err != nil {
		return fmt.Errorf("%s with %s: %w", first.Column, second.Column, err)
	}
	a.Offset, a.Unclear = shift.Offset, !shift.Sure()
	a.How = fmt.Sprintf("aligned by %s with %s, %s", first.Column, second.Column, shift)
	return nil
}

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
		r.file.used[a.key] = true
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
	a := Also{Files: r.besideNames(s, file.value, "file"), Expected: strings.ToLower(r.text(s, f, "sha256"))}
	if len(a.Files) == 0 || !r.recipe(s, recipe.value, &a.Recipe) || !r.clock(s, f, &a.Clock) {
		return false
	}
	first := r.from
	other := r.recording(s, file.value, a.Files, recipe.value, a.Recipe)
	if other == nil {
		return false
	}
	r.from = first
	a.key, _ = importKey(strings.Join(a.Files, "\n"), recipe.value) // it was read by it
	out, err := a.Attach(t.rec, other)
	switch at := f["align"]; {
	case errors.As(err, &errClock{}) && at.at != nil:
		r.bad(s, at.value, "align", "%v", err)
		return false
	case err != nil:
		r.bad(s, file.value, "file", "%v", err)
		return false
	}
	t.rec, t.also = out, append(t.also, a)
	return true
}

// clock reads how a clock is set.
func (r *reader) clock(s scope, f map[string]entry, to *Clock) bool {
	at, found := f["align"]
	given, isGiven := f["offset"]
	switch {
	case found && isGiven:
		r.bad(s, at.at, "align", "and offset are both given; keep one")
		return false
	case isGiven:
		x, ok := r.value(s, given.value, "offset", units.Time)
		to.Offset = x.Text
		return ok
	case !found:
		return true
	}
	in := s.in("align")
	of := r.fields(in, at.value, "", "channel", "with", "within")
	to.Channel, to.With = r.text(in, of, "channel"), r.text(in, of, "with")
	if to.Channel == "" || to.With == "" {
		r.bad(in, at.value, "align", "names no channel of each; it needs channel and with")
		return false
	}
	if x, ok := r.optional(in, of, "within", units.Time); ok {
		to.Within = x.SI
	}
	return true
}
