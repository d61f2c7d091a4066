package audit

import (
	"context"
	"io"
	"io/fs"
	"reflect"
	"strings"

	"barlitre/circuit/recording/logger"
)

// context is the one that reading has; one without an end where none is given.
func (how Importing) context() context.Context {
	if how.Context == nil {
		return context.Background()
	}
	return how.Context
}

// ended reports whether reading was cancelled.
func (how Importing) ended() bool { return how.context().Err() != nil }

// importFiles reads a recording by a recipe, or takes over what is known of it.
func (f *File) importFiles(names []string, rp logger.Recipe) (*logger.Recording, error) {
	sizes := make([]int64, len(names))
	for k, name := range names {
		in, err := f.open(name)
		if err != nil {
			return nil, cannotRead(name, err)
		}
		sizes[k] = sizeOf(in)
		in.Close()
	}
	ctx, progress := f.how.context(), (func(done, total int64))(nil)
	if f.how.Progress != nil {
		progress = func(done, total int64) { f.how.Progress(names[0], done, total) }
	}
	open := func(k int) (io.ReadCloser, error) { return f.open(names[k]) }
	if rec := f.how.known(names, rp); rec != nil {
		if sum, err := logger.Sum(ctx, sizes, open, progress); err != nil || sum == rec.SHA256 {
			return rec, err
		}
	}
	file, err := logger.OpenSources(names, sizes, open)
	if err != nil {
		return nil, err
	}
	return file.Import(ctx, rp, progress)
}

// known finds a recording that another file has read by the same recipe.
func (how Importing) known(names []string, rp logger.Recipe) *logger.Recording {
	if how.Known == nil {
		return nil
	}
	for key, t := range how.Known.tables {
		if t.rec != nil && strings.HasPrefix(key, strings.Join(names, "\n")+"\x00") && reflect.DeepEqual(t.rec.Recipe, rp) {
			return t.rec
		}
	}
	return nil
}

// sizeOf tells how many bytes something that was opened holds, 0 where it does not say.
func sizeOf(in io.Reader) int64 {
	switch x := in.(type) {
	case interface{ Stat() (fs.FileInfo, error) }:
		if info, err := x.Stat(); err == nil {
			return info.Size()
		}
	case interface{ Size() int64 }:
		return x.Size()
	}
	return 0
}

// watch tells how far a table is read, and ends reading when it is cancelled.
func (how Importing) watch(name string, in io.Reader) io.Reader {
	return &watched{Reader: in, how: how, name: name, size: sizeOf(in)}
}

type watched struct {
	io.Reader
	how              Importing
	name             string
	done, told, size int64
}

// tellBytes is how much is read between two tellings.
const tellBytes = 4 << 20

func (w *watched) Read(b []byte) (int, error) {
	if err := w.how.context().Err(); err != nil {
		return 0, err
	}
	n, err := w.Reader.Read(b)
	if w.done += int64(n); w.how.Progress != nil && (w.done-w.told >= tellBytes || err == io.EOF) {
		w.told = w.done
		w.how.Progress(w.name, w.done, max(w.done, w.size))
	}
	return n, err
}

// Len lets the reader of tables make room at once.
func (w *watched) Len() int { return int(w.size) }
