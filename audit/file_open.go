package audit

import (
	"bytes"
	"context"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"slices"

	"barlitre/circuit"
)

// Open reads a file that an audit file names, by its path relative to the audit
// file, with forward slashes. It is read as it comes, for it may be long.
type Open func(name string) (io.ReadCloser, error)

// FromBytes makes an Open of what hands over whole files.
func FromBytes(read func(name string) ([]byte, error)) Open {
	return func(name string) (io.ReadCloser, error) {
		data, err := read(name)
		if err != nil {
			return nil, err
		}
		return inMemory{bytes.NewReader(data)}, nil
	}
}

type inMemory struct{ *bytes.Reader }

func (inMemory) Close() error { return nil }

// Beside opens the files in the folder of an audit file.
func Beside(path string) Open {
	dir := filepath.Dir(path)
	return func(name string) (io.ReadCloser, error) { return os.Open(filepath.Join(dir, filepath.FromSlash(name))) }
}

// maxSize bounds what is read as an audit file; one with a hundred circuits
// stays well below a megabyte.
const maxSize = 16 << 20

// Read reads an audit file and the recordings beside it. All faults are found at
// once, each with its line. The File is nil only when the text is not YAML or not
// of this format; else it holds all that could be read.
func Read(path string) (*File, []circuit.Finding) { return ReadWith(path, Importing{}) }

// Importing says how recordings beside an audit file are read.
type Importing struct {
	Context  context.Context                      // its end is that of reading, and a finding that stops; nil = none
	Progress func(file string, done, total int64) // bytes, some times a second; may be nil
	Known    *File                                // recordings that it has read are taken over where their SHA-256 is still the same; may be nil
}

// ReadWith is Read for recordings that take long.
func ReadWith(path string, how Importing) (*File, []circuit.Finding) {
	info, err := os.Stat(path)
	if err == nil && info.Size() > maxSize {
		err = fmt.Errorf("%s: is %d MB long; an audit file has at most %d MB", path, info.Size()>>20, maxSize>>20)
	}
	var data []byte
	if err == nil {
		data, err = os.ReadFile(path)
	}
	if err != nil {
		return nil, []circuit.Finding{{Level: circuit.Stops, Text: err.Error()}}
	}
	return ParseWith(data, Beside(path), path, how)
}

// Parse reads an audit file from memory, as Read does; open reads the recordings
// that it names and may be nil when there are none. path is kept for Save.
func Parse(data []byte, open Open, path string) (*File, []circuit.Finding) {
	return ParseWith(data, open, path, Importing{})
}

// ParseWith is Parse for recordings that take long.
func ParseWith(data []byte, open Open, path string, how Importing) (*File, []circuit.Finding) {
	data = slices.Clone(data)
	root, faults := load(data)
	if len(faults) > 0 {
		return nil, faults
	}
	return (&File{Path: path, open: open}).parseTree(root, data, how)
}
