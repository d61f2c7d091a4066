package station

import (
	"os"
	"path/filepath"

	"fyne.io/fyne/v2"
)

// SaveDirVariable names the folder that scripts save into, without a dialog.
const SaveDirVariable = "BARLITRE_SAVE_DIR"

// Chosen returns the path of a file that a dialog for saving made, with an ending where it was typed without one. The empty file
// of the dialog is taken away: what is saved is written beside and put in place, so that a crash loses nothing.
func Chosen(w fyne.URIWriteCloser, ending string) string {
	path := w.URI().Path()
	w.Close()
	if info, err := os.Stat(path); err == nil && info.Size() == 0 {
		os.Remove(path)
	}
	if filepath.Ext(path) == "" {
		path += ending
	}
	return path
}
