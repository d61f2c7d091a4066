package frame

import (
	"os"
	"path/filepath"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"

	"barlitre/app/station"
)

// PickPlace asks for the name of a file to be saved, and touches nothing: what is written goes
// beside it and then takes its place. A name typed without an ending gets that of the name
// suggested; what is there under it is asked about, as the dialog asks about the name typed.
// Scripts may give a folder instead.
func (f *Frame) PickPlace(title, name string, then func(path string)) {
	if dir := os.Getenv(saveDirVariable); dir != "" {
		then(filepath.Join(dir, name))
		return
	}
	keepFiles()
	d := dialog.NewFileSave(func(w fyne.URIWriteCloser, err error) {
		if err != nil {
			f.Fail(err)
		} else if w != nil {
			w.Close()
			f.place(w.URI().Path(), filepath.Ext(name), then)
		}
	}, f.win)
	d.SetFileName(name)
	f.showFiles(d, title, "Save")
}

// place goes on with a name, once it has an ending.
func (f *Frame) place(path, ending string, then func(path string)) {
	if filepath.Ext(path) != "" {
		then(path)
		return
	}
	path += ending
	if _, err := os.Lstat(path); err != nil { // nothing there; or writing will say what is wrong
		then(path)
		return
	}
	f.ask("Replace the file?", paragraph(filepath.Base(path)+" is there already, in "+filepath.Dir(path)+".", 420),
		answer{verb: "Keep"}, answer{verb: "Replace", danger: true, do: func() { then(path) }})
}

// saveDirVariable names the folder that scripts save into, without a dialog.
const saveDirVariable = station.SaveDirVariable
