package document

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
)

// writeWhole writes a file so that it is there with all its text, or as it was. tmp
// is a path in the same folder that nobody else uses.
func writeWhole(path, tmp string, text []byte) error {
	f, err := os.OpenFile(tmp, os.O_WRONLY|os.O_CREATE|os.O_TRUNC, 0o600)
	if err != nil {
		return err
	}
	_, err = f.Write(text)
	err = errors.Join(err, f.Sync(), f.Close())
	if err == nil {
		err = os.Rename(tmp, path)
	}
	if err != nil {
		return errors.Join(err, removeFile(tmp))
	}
	syncFolder(filepath.Dir(path))
	return nil
}

// syncFolder makes a rename last through a loss of power, where the system can.
func syncFolder(dir string) {
	f, err := os.Open(dir)
	if err != nil {
		return
	}
	_ = f.Sync() // some systems do not sync folders; the file itself is safe
	f.Close()
}

// removeFile removes a file that may be gone already.
func removeFile(path string) error {
	if err := os.Remove(path); err != nil && !errors.Is(err, fs.ErrNotExist) {
		return err
	}
	return nil
}

// plain takes the path out of an error of the file system, where the sentence around
// it names it already.
func plain(err error) error {
	if e := (*fs.PathError)(nil); errors.As(err, &e) {
		return e.Err
	}
	return err
}

// folderFor checks that a file can be put at a path, as far as that can be told
// before it is tried.
func folderFor(path string) error {
	dir := filepath.Dir(path)
	switch info, err := os.Stat(dir); {
	case errors.Is(err, fs.ErrNotExist):
		return fmt.Errorf("the folder %s is not there", dir)
	case err != nil:
		return fmt.Errorf("the folder %s cannot be reached: %w", dir, plain(err))
	case !info.IsDir():
		return fmt.Errorf("%s is not a folder", dir)
	}
	info, err := os.Stat(path)
	switch {
	case err != nil: // most often not there yet; else writing will say why
		return nil
	case info.IsDir():
		return errors.New("there is a folder of that name")
	case info.Mode().Perm()&0o200 == 0:
		return errors.New("the file is write-protected")
	}
	return nil
}
