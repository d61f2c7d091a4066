package audit

import (
	"errors"
	"fmt"
	"io/fs"
	"path/filepath"
	"strings"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
	"barlitre/machines/units"
)

// recorded reads the rows from a file beside the audit file.
func (r *reader) recorded(s scope, d *duty.Duty, n *yaml.Node) Source {
	name, ok := r.scalar(s, n, "file", "the name of a CSV file")
	if !ok {
		return Source{}
	}
	if strings.Contains(name, `\`) || !filepath.IsLocal(filepath.FromSlash(name)) {
		r.bad(s, n, "file", "%q must lie beside the audit file or in a folder below it; write folder/name.csv", name)
		return Source{}
	}
	table := r.table(s, n, name)
	if table == nil {
		return Source{}
	}
	if table.Column("t") == nil {
		r.bad(s, n, "file", "%s has no column t; name the time stamps %q in its head", name, "t [s]")
	}
	in := s
	in.where = fmt.Sprintf("%s, %s", s.where, name)
	for _, c := range table.Columns {
		dim, ok := r.column(in, d, n, c.Name)
		if !ok {
			continue
		}
		u, ok := units.Find(c.Unit, dim)
		if !ok {
			_, err := units.ParseUnit(c.Unit, dim)
			r.bad(in, n, c.Name, "%v, between brackets in the head", err)
			continue
		}
		r.keep(d, c.Name, table.in(c, u))
	}
	return Source{File: name, SHA256: table.SHA256}
}

// recorded is a recording with its columns as a duty has them: an edit reads the audit
// file again, but neither the recording nor its units.
type recorded struct {
	*recording.Table
	si map[columnIn][]float64
}

type columnIn struct {
	column string
	unit   units.Unit
}

// in returns a column in SI; one that is in SI is not copied.
func (t *recorded) in(c recording.Column, u units.Unit) []float64 {
	if u.Factor == 1 && u.Offset == 0 {
		return c.Values
	}
	of := columnIn{c.Name, u}
	if t.si[of] == nil {
		si := make([]float64, len(c.Values))
		for i, x := range c.Values {
			si[i] = u.ToSI(x)
		}
		t.si[of] = si
	}
	return t.si[of]
}

// table reads a recording, once.
func (r *reader) table(s scope, n *yaml.Node, name string) *recorded {
	f := r.file
	if t := f.tables[name]; t != nil {
		return t
	}
	if f.open == nil {
		r.bad(s, n, "file", "%s cannot be read: the audit has no folder yet; save it first", name)
		return nil
	}
	data, err := f.open(name)
	if err != nil {
		if pe := (*fs.PathError)(nil); errors.As(err, &pe) {
			err = pe.Err // its path is that of this computer
		}
		r.bad(s, n, "file", "%s cannot be read: %v; put the recording beside the audit file", name, err)
		return nil
	}
	t, faults := recording.ReadTable(name, data)
	for _, fault := range faults {
		r.bad(s, n, "file", "%v", fault)
	}
	if t == nil {
		return nil
	}
	f.tables[name] = &recorded{t, map[columnIn][]float64{}}
	return f.tables[name]
}
