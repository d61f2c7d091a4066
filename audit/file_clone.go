package audit

import "slices"

// Clone returns the same file, to be edited while this one is read elsewhere. Recordings are not read again.
func (f *File) Clone() *File {
	g, _ := f.parse(slices.Clone(f.data), Importing{})
	return g
}
