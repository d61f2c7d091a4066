package station

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
)

// WriteWhole writes a file so that it is there whole, or as it was.
func WriteWhole(path string, write func(io.Writer) error) (err error) {
	tmp, err := os.CreateTemp(filepath.Dir(path), ".barlitre-*")
	if err != nil {
		return err
	}
	defer func() {
		if err != nil {
			os.Remove(tmp.Name())
		}
	}()
	err = errors.Join(Guarded(func() error { return write(tmp) }), tmp.Chmod(0o644), tmp.Sync(), tmp.Close())
	if err != nil {
		return err
	}
	return os.Rename(tmp.Name(), path)
}

// Guarded turns an error of the program itself into one that is said.
func Guarded(do func() error) (err error) {
	defer func() {
		if v := recover(); v != nil {
			err = fmt.Errorf("the program met an error of its own (%v); please report it with this file", v)
		}
	}()
	return do()
}
