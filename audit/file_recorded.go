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
	table, name := r.beside(s, n, "file")
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
		si := make([]float64, len(c.Values))
		for i, x := range c.Values {
			si[i] = u.ToSI(x)
		}
		r.keep(d, c.Name, si)
	}
	return Source{File: name, SHA256: table.SHA256}
}

// beside reads the table that a key names, beside the audit file.
func (r *reader) beside(s scope, n *yaml.Node, key string) (table *recording.Table, name string) {
	name, ok := r.scalar(s, n, key, "the name of a CSV file")
	if !ok {
		return nil, name
	}
	if strings.Contains(name, `\`) || !filepath.IsLocal(filepath.FromSlash(name)) {
		r.bad(s, n, key, "%q must lie beside the audit file or in a folder below it; write folder/name.csv", name)
		return nil, name
	}
	return r.table(s, n, key, name), name
}

// table reads a recording, once.
func (r *reader) table(s scope, n *yaml.Node, key, name string) *recording.Table {
	f := r.file
	if t := f.tables[name]; t != nil {
		return t
	}
	if f.open == nil {
		r.bad(s, n, key, "%s cannot be read: the audit has no folder yet; save it first", name)
		return nil
	}
	data, err := f.open(name)
	if err != nil {
		if pe := (*fs.PathError)(nil); errors.As(err, &pe) {
			err = pe.Err // its path is that of this computer
		}
		r.bad(s, n, key, "%s cannot be read: %v; put it beside the audit file", name, err)
		return nil
	}
	t, faults := recording.ReadTable(name, data)
	for _, fault := range faults {
		r.bad(s, n, key, "%v", fault)
	}
	if t != nil {
		f.tables[name] = t
	}
	return t
}
