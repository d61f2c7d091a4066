package audit

import (
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"strings"
	"sync"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
	"barlitre/circuit/recording/logger"
	"barlitre/machines"
	"barlitre/machines/units"
)

// recorded reads the rows from a file beside the audit file. columns says which of its
// columns are tracks; without it all are, under the names of tracks.
func (r *reader) recorded(s scope, d *duty.Duty, n *yaml.Node, columns entry) Source {
	table, name := r.beside(s, n, "file")
	if table == nil {
		return Source{}
	}
	r.from = table
	in := s
	in.where = fmt.Sprintf("%s, %s", s.where, name)
	var tracks []recordedTrack
	if columns.at == nil {
		for i := range table.Columns {
			c := &table.Columns[i]
			tracks = append(tracks, recordedTrack{c.Name, c, table, c.Unit, n})
		}
	} else {
		tracks = r.columns(s, table, name, columns.value)
	}
	timed := false
	for _, tr := range tracks {
		timed = timed || tr.name == "t"
		r.track(in, d, tr)
	}
	switch {
	case timed:
	case columns.at != nil:
		r.bad(s, columns.at, "columns", "do not say which one holds the time stamps; write t: \"time [s]\"")
	default:
		r.bad(s, n, "file", "%s has no column t; name the time stamps %q in its head, or say with columns what its columns are", name, "t [s]")
	}
	return Source{File: name, SHA256: table.SHA256}
}

// beside reads the table that a key names, beside the audit file.
func (r *reader) beside(s scope, n *yaml.Node, key string) (table *recorded, name string) {
	name, ok := r.besideName(s, n, key)
	if !ok {
		return nil, name
	}
	return r.table(s, n, key, name), name
}

// besideName reads the name of a file beside the audit file.
func (r *reader) besideName(s scope, n *yaml.Node, key string) (name string, ok bool) {
	if name, ok = r.scalar(s, n, key, "the name of a CSV file"); !ok {
		return name, false
	}
	if strings.Contains(name, `\`) || !filepath.IsLocal(filepath.FromSlash(name)) {
		r.bad(s, n, key, "%q must lie beside the audit file or in a folder below it; write folder/name.csv", name)
		return name, false
	}
	return name, true
}

// cannotRead says that a file cannot be read, without its path on this computer.
func cannotRead(name string, err error) error {
	if pe := (*fs.PathError)(nil); errors.As(err, &pe) {
		return fmt.Errorf("%s cannot be read: %w; put it beside the audit file", name, pe.Err)
	}
	return err
}

// recordedTrack is a column of a recording as a track.
type recordedTrack struct {
	name string
	*recording.Column
	table *recorded
	unit  string
	at    *yaml.Node
}

// columns reads which column is which track, as in ram.load: "F1 [kN]". The unit may
// stand here or in the head of the recording.
func (r *reader) columns(s scope, table *recorded, file string, n *yaml.Node) (out []recordedTrack) {
	in := s.in("columns")
	var heads []string
	for _, c := range table.Columns {
		heads = append(heads, c.Name)
	}
	for _, e := range r.entries(s, n, "columns") {
		text, ok := r.scalar(in, e.value, e.key, "the name of a column")
		if !ok {
			continue
		}
		name, unit, ok := recording.SplitHead(text)
		c := table.Column(name)
		switch {
		case !ok:
			r.bad(in, e.value, e.key, "write the name of the column and its unit between brackets, as in %q", "F1 [kN]")
		case c == nil:
			r.bad(in, e.value, e.key, "%s has no column %q%s", file, name, guess(name, heads))
		case unit != "" && c.Unit != "" && unit != c.Unit:
			r.bad(in, e.value, e.key, "is in %s here and in %s in the head of %s; keep one", unit, c.Unit, file)
		default:
			if unit == "" {
				unit = c.Unit
			}
			out = append(out, recordedTrack{e.key, c, table, unit, e.value})
		}
	}
	return out
}

// track keeps a column of a recording, in SI.
func (r *reader) track(s scope, d *duty.Duty, tr recordedTrack) {
	dim, ok := r.column(s, d, tr.at, tr.name)
	if !ok {
		return
	}
	u, ok := units.Find(tr.unit, dim)
	if !ok {
		_, err := units.ParseUnit(tr.unit, dim)
		r.bad(s, tr.at, tr.name, "%v, between brackets in the head", err)
		return
	}
	r.keep(d, tr.name, tr.table.values(*tr.Column, u))
}

// recorded is a recording with its columns as a duty has them: an edit reads the audit
// file again, but neither the recording nor its units. A column is converted where it
// stands, for a day at 100 Hz is not to be kept twice; copies of a file share it.
type recorded struct {
	sync.Mutex       // of what is converted
	*recording.Table // nil where it was imported by a recipe
	rec              *logger.Recording
	channels         map[string][]float64 // of rec, by column, SI
	worked           worked
	also             []Also                // whose channels rec has too
	beside           map[string]*recorded  // rec with further recordings, by what the audit says of them
	in               map[string]units.Unit // by column: the unit that its values were in before they were converted
	si               map[columnIn][]float64
}

type columnIn struct {
	column string
	unit   units.Unit
}

// values returns a column in SI; u is the unit that it is in in the file.
func (t *recorded) values(c recording.Column, u units.Unit) []float64 {
	t.Lock()
	defer t.Unlock()
	was, converted := t.in[c.Name]
	if !converted {
		for i, x := range c.Values {
			c.Values[i] = u.ToSI(x)
		}
		t.in[c.Name], was = u, u
	}
	if was == u {
		return c.Values
	}
	of := columnIn{c.Name, u} // the same column in another unit
	if t.si[of] == nil {
		si := make([]float64, len(c.Values))
		for i, x := range c.Values {
			si[i] = u.ToSI(was.FromSI(x))
		}
		t.si[of] = si
	}
	return t.si[of]
}

// asWritten returns the columns in the units of the file.
func (t *recorded) asWritten() []machines.Column {
	t.Lock()
	defer t.Unlock()
	out := pointColumns(t.Table)
	for i, c := range out {
		if u, converted := t.in[c.Name]; converted && (u.Factor != 1 || u.Offset != 0) {
			out[i].Values = make([]float64, len(c.Values))
			for k, x := range c.Values {
				out[i].Values[k] = u.FromSI(x)
			}
		}
	}
	return out
}

// table reads a recording, once.
func (r *reader) table(s scope, n *yaml.Node, key, name string) *recorded {
	f := r.file
	f.used[name] = true
	if t := f.tables[name]; t != nil {
		return t
	}
	if f.open == nil {
		r.bad(s, n, key, "%s cannot be read: the audit has no folder yet; save it first", name)
		return nil
	}
	in, err := f.open(name)
	if err != nil {
		if pe := (*fs.PathError)(nil); !errors.As(err, &pe) {
			err = fmt.Errorf("%s cannot be read: %w; put it beside the audit file", name, err)
		}
		r.bad(s, n, key, "%v", cannotRead(name, err))
		return nil
	}
	defer in.Close()
	t, faults := recording.ReadTable(name, f.how.watch(name, in))
	if f.how.ended() {
		r.bad(s, n, key, "reading %s was cancelled", name)
		return nil
	}
	for _, fault := range faults {
		r.bad(s, n, key, "%v", fault)
	}
	if t == nil {
		return nil
	}
	f.tables[name] = &recorded{Table: t, in: map[string]units.Unit{}, si: map[columnIn][]float64{}}
	return f.tables[name]
}
