package frame

import (
	"io"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/storage/repository"
)

// access is how the toolkit gets at files.
type access interface {
	repository.AppendableRepository
	repository.CopyableRepository
	repository.DeleteAllRepository
	repository.HierarchicalRepository
	repository.ListableRepository
	repository.MovableRepository
}

// keeping is that access, but a file that is to be written is opened only by the first byte:
// the toolkit's dialog for saving opens a writer for what was chosen, which would empty the
// file there long before, and even where nothing is written in the end.
type keeping struct{ access }

// keepFiles has the toolkit get at files so.
func keepFiles() {
	const scheme = "file"
	old, err := repository.ForScheme(scheme)
	if _, done := old.(keeping); err != nil || done {
		return
	}
	if a, ok := old.(access); ok {
		repository.Register(scheme, keeping{a})
	}
}

// Writer opens nothing yet.
func (k keeping) Writer(u fyne.URI) (fyne.URIWriteCloser, error) {
	return &lateWriter{uri: u, open: k.access.Writer}, nil
}

// lateWriter writes to a file that it opens when there is something to write.
type lateWriter struct {
	uri  fyne.URI
	open func(fyne.URI) (fyne.URIWriteCloser, error)
	to   io.WriteCloser
}

// URI is that of the file.
func (l *lateWriter) URI() fyne.URI { return l.uri }

// Write writes, and opens the file first.
func (l *lateWriter) Write(b []byte) (int, error) {
	if l.to == nil {
		to, err := l.open(l.uri)
		if err != nil {
			return 0, err
		}
		l.to = to
	}
	return l.to.Write(b)
}

// Close closes what was opened.
func (l *lateWriter) Close() error {
	if l.to == nil {
		return nil
	}
	return l.to.Close()
}
