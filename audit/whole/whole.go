// Package whole puts files in place so that each is there with all it is to hold, or as it was before.
package whole

import (
	"errors"
	"io"
	"io/fs"
	"os"
	"path/filepath"
)

// Write writes a file into one beside it, which then takes its place. An existing file keeps its permissions, and what a link
// points to is replaced, not the link. A panic of write goes on, and leaves nothing behind.
func Write(path string, write func(io.Writer) error) error {
	if target, err := filepath.EvalSymlinks(path); err == nil {
		path = target
	}
	mode := fs.FileMode(0o644)
	if info, err := os.Stat(path); err == nil {
		mode = info.Mode().Perm()
	}
	tmp, err := os.CreateTemp(filepath.Dir(path), ".barlitre-*")
	if err != nil {
		return err
	}
	if err := tmp.Chmod(mode); err != nil {
		return errors.Join(err, tmp.Close(), os.Remove(tmp.Name()))
	}
	return finish(tmp, path, write)
}

// WriteBy is Write by way of a file of that name in the same folder, which nobody else uses and only its owner may read.
func WriteBy(tmp, path string, text []byte) error {
	f, err := os.OpenFile(tmp, os.O_WRONLY|os.O_CREATE|os.O_TRUNC, 0o600)
	if err != nil {
		return err
	}
	return finish(f, path, Bytes(text))
}

// finish writes an open file and moves it to its place; it is gone where that fails.
func finish(tmp *os.File, path string, write func(io.Writer) error) (err error) {
	moved := false
	defer func() {
		if !moved {
			tmp.Close() // a second close after a failed one is harmless
			err = errors.Join(err, Remove(tmp.Name()))
		}
	}()
	if err := errors.Join(write(tmp), tmp.Sync(), tmp.Close()); err != nil {
		return err
	}
	if err := os.Rename(tmp.Name(), path); err != nil {
		return err
	}
	moved = true
	SyncFolder(filepath.Dir(path))
	return nil
}

// SyncFolder makes a rename last through a loss of power, where the system can.
func SyncFolder(dir string) {
	f, err := os.Open(dir)
	if err != nil {
		return
	}
	_ = f.Sync() // some systems do not sync folders; the file itself is safe
	f.Close()
}

// Remove removes a file that may be gone already.
func Remove(path string) error {
	if err := os.Remove(path); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return err
	}
	return nil
}

// Plain takes paths, those of temporary files too, out of an error of the file system: the sentence around it names the place.
func Plain(err error) error {
	var at *fs.PathError
	if errors.As(err, &at) {
		return at.Err
	}
	var link *os.LinkError
	if errors.As(err, &link) {
		return link.Err
	}
	return err
}

// Bytes is what Write is given for a text at hand.
func Bytes(text []byte) func(io.Writer) error {
	return func(w io.Writer) error {
		_, err := w.Write(text)
		return err
	}
}
