package audit

import (
	"maps"
	"slices"
)

// Clone returns the same file, to be edited while this one is read elsewhere. Recordings are not read again.
func (f *File) Clone() *File {
	tables := make(map[string]*recorded, len(f.tables))
	for name, t := range f.tables {
		tables[name] = &recorded{t.Table, maps.Clone(t.si)}
	}
	g, _ := parse(slices.Clone(f.data), f.open, f.Path, tables)
	return g
}
