package whole

import (
	"fmt"
	"io"
	"os"
	"path/filepath"
	"sync"
)

// Folder collects files in a folder of their own beside those of another, and puts them there when all
// are whole. Create may be called by several goroutines at once.
type Folder struct {
	in, beside string
	fresh      bool // in may have to be made
	mu         sync.Mutex
	names      []string
}

// NewFolder collects files for the folder in, which with fresh set is made for the first one, if it is not
// there. Close gives up what was not put in place.
func NewFolder(in string, fresh bool) *Folder { return &Folder{in: in, fresh: fresh} }

// Create opens a file of that name.
func (f *Folder) Create(name string) (io.WriteCloser, error) {
	f.mu.Lock()
	defer f.mu.Unlock()
	if f.beside == "" {
		if f.fresh {
			if err := os.MkdirAll(f.in, 0o755); err != nil {
				return nil, err
			}
		}
		beside, err := os.MkdirTemp(f.in, ".barlitre-*")
		if err != nil {
			return nil, err
		}
		f.beside = beside
	}
	f.names = append(f.names, name)
	return os.Create(filepath.Join(f.beside, name))
}

// Len is how many files there are.
func (f *Folder) Len() int { return len(f.names) }

// Place puts each file in its place, its name after base. Where one cannot be put there, those before
// it are there already, and PartError says so.
func (f *Folder) Place(base string) error {
	for i, name := range f.names {
		err := os.Rename(filepath.Join(f.beside, name), filepath.Join(f.in, base+name))
		switch {
		case err != nil && i > 0:
			return &PartError{fmt.Errorf("%d of %d files are in place, %s is not: %w", i, len(f.names), base+name, Plain(err))}
		case err != nil:
			return err
		}
	}
	SyncFolder(f.in)
	return nil
}

// Close removes what was not put in place.
func (f *Folder) Close() error {
	if f.beside == "" {
		return nil
	}
	return os.RemoveAll(f.beside)
}

// PartError is of an action of which a part was done.
type PartError struct{ error }
