package station

import (
	"errors"
	"io"
	"os"
	"path/filepath"
)

// SaveDirVariable names the folder that scripts save into, without a dialog.
const SaveDirVariable = "BARLITRE_SAVE_DIR"

// WriteFile writes a file so that it is there whole, or as it was.
func WriteFile(path string, write func(io.Writer) error) (err error) {
	tmp, err := os.CreateTemp(filepath.Dir(path), ".barlitre-*")
	if err != nil {
		return err
	}
	defer func() {
		if err != nil {
			os.Remove(tmp.Name())
		}
	}()
	err = errors.Join(write(tmp), tmp.Chmod(0o644), tmp.Sync(), tmp.Close())
	if err != nil {
		return err
	}
	return os.Rename(tmp.Name(), path)
}
