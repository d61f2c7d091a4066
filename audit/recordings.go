package audit

import (
	"fmt"
	"strings"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
)

// rate keeps and tells whether the rows of a recording tell the energy of its axes.
func (r *reader) rate(s scope, d *duty.Duty, f map[string]entry, i int) {
	at := f["file"]
	if r.from == nil || len(d.Time) < rowsEnough || len(d.Check()) > 0 { // fewer rows are a few points, as if typed
		return
	}
	means := false
	if im := r.file.Imports[i]; im != nil {
		for _, c := range im.Recipe.Channels {
			means = means || c.Kind == logger.Mean
		}
	}
	key := fmt.Sprint(d.Repeats, means, r.file.Axes)
	for _, k := range []string{"columns", "derived", "part"} { // what else tells which rows are which track
		if e, ok := f[k]; ok {
			key += "\x00" + k + flowText(e.value)
		}
	}
	r.file.Rates[i] = r.from.rated(key, func() []logged.Rated { return logged.Rates(d, means) })
	for _, a := range r.file.Rates[i] {
		if a.Warns {
			r.told(s, circuit.Warns, at.value, "axis "+a.Axis+": "+strings.Join(a.Remarks, "; "))
		}
	}
}

// recordingLines says of a duty what its recording is and what was done to it.
func (s *Solution) recordingLines(p printer, i int) (out []string) {
	f, d := s.File, s.File.Duties[i]
	say := func(format string, args ...any) {
		out = append(out, "Duty "+d.Name+": "+fmt.Sprintf(format, args...))
	}
	if im := f.Imports[i]; im != nil {
		say("imported from %s, %d rows, one every %s%s.", im.File, im.Rows, p.seconds(im.Interval), starting(im.Start))
		for _, c := range im.Corrections {
			say("%s.", c)
		}
		for _, t := range im.Derived {
			say("%s is derived: %s.", t.Track, t.Formula)
		}
	}
	if f.Sources[i].File != "" && d.Step == 0 && !d.Sampled {
		say("time steps are the rows of its recording, and the instants at which an axis stops or sets off.")
	}
	for _, a := range f.Rates[i] {
		for _, text := range a.Remarks {
			say("axis %s: %s.", a.Axis, text)
		}
	}
	return out
}

func starting(at string) string {
	if at == "" {
		return ""
	}
	return ", from " + at
}

// RecordingResult is a recording in a result file.
type RecordingResult struct {
	Duty        string             `json:"duty"`
	File        string             `json:"file"`
	SHA256      string             `json:"sha256"`
	Expected    string             `json:"sha256_expected,omitempty"`
	Rows        int                `json:"rows"`
	IntervalS   Number             `json:"interval_s"`
	Corrections []CorrectionResult `json:"corrections"`
	Derived     map[string]string  `json:"derived,omitempty"` // by track, the formula
	Rates       []RateResult       `json:"rates,omitempty"`
}

// CorrectionResult is one thing found in a recording.
type CorrectionResult struct {
	Key    string `json:"key"`
	Count  int    `json:"count"`
	Line   int    `json:"line,omitempty"`
	T      Number `json:"t_s"`
	Text   string `json:"text"`
	Done   string `json:"done"` // "" = left as it was
	Choice string `json:"choice,omitempty"`
	Warns  bool   `json:"warns"`
}

// RateResult is how well the rows tell the energy of an axis.
type RateResult struct {
	Axis  string   `json:"axis"`
	Error Number   `json:"energy_error_estimated"`
	Warns bool     `json:"warns"`
	Text  []string `json:"text"`
}

func (f *File) recordingResults() (out []RecordingResult) {
	for i, d := range f.Duties {
		if f.Sources[i].File == "" {
			continue
		}
		r := RecordingResult{Duty: d.Name, File: f.Sources[i].File, SHA256: f.Sources[i].SHA256, Rows: len(d.Time), Corrections: []CorrectionResult{}}
		if im := f.Imports[i]; im != nil {
			r.Expected, r.IntervalS, r.Derived = im.Expected, Number(im.Interval), map[string]string{}
			for _, c := range im.Corrections {
				r.Corrections = append(r.Corrections, CorrectionResult{c.Key, c.Count, c.Line, Number(c.T), c.Text, c.Done, c.Choice, c.Warns})
			}
			for _, t := range im.Derived {
				r.Derived[t.Track] = t.Formula
			}
		} else if len(d.Time) > 1 {
			r.IntervalS = Number(d.Cycle() / float64(len(d.Time)-1))
		}
		for _, a := range f.Rates[i] {
			r.Rates = append(r.Rates, RateResult{a.Axis, Number(a.Error), a.Warns, a.Remarks})
		}
		out = append(out, r)
	}
	return out
}

// recordingsTable lists the recordings of an audit with what was found and done.
func (s *Solution) recordingsTable(p printer) Table {
	t := Table{Title: "Recordings", Head: []string{"duty", "recording"}}
	for i, d := range s.File.Duties {
		for _, line := range s.recordingLines(p, i) {
			t.add(false, d.Name, strings.TrimPrefix(line, "Duty "+d.Name+": "))
		}
	}
	return t
}
