package document

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"barlitre/audit/whole"
)

// folderFor checks that a file can be put at a path, as far as that can be told
// before it is tried.
func folderFor(path string) error {
	dir := filepath.Dir(path)
	switch info, err := os.Stat(dir); {
	case errors.Is(err, fs.ErrNotExist):
		return fmt.Errorf("the folder %s is not there", dir)
	case err != nil:
		return fmt.Errorf("the folder %s cannot be reached: %w", dir, whole.Plain(err))
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
