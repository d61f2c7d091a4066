package document

import (
	"bufio"
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"

	"barlitre/audit"
	"barlitre/audit/whole"
)

// copyBeside puts the recordings and tables that an audit names beside a path, and returns
// the files it made.
func (d *Document) copyBeside(ctx context.Context, now state, path string, progress Progress) (made []string, err error) {
	from, to := filepath.Dir(now.Path), filepath.Dir(path)
	open := now.opener()
	if now.Path != "" && from == to || open == nil {
		return nil, nil
	}
	for _, name := range now.file.Beside() {
		target := filepath.Join(to, filepath.FromSlash(name))
		c := copying{ctx, open, name, target, progress}
		new, err := c.do()
		if new {
			made = append(made, target)
		}
		switch {
		case ctx.Err() != nil:
			return made, fmt.Errorf("save %s: %w; nothing was saved there%s", path, ErrCancelled, d.safe(now))
		case errors.Is(err, errDiffers):
			return made, fmt.Errorf("save %s: %s, which the audit names, would replace a different file, %s; choose another folder%s", path, name, target, d.safe(now))
		case err != nil:
			return made, fmt.Errorf("save %s: %s, which the audit names, cannot be copied to %s: %w%s", path, filepath.Join(from, name), target, whole.Plain(err), d.safe(now))
		}
	}
	return made, nil
}

var errDiffers = errors.New("another file is there")

// copying is one file on its way.
type copying struct {
	ctx          context.Context
	open         audit.Open
	name, target string
	progress     Progress
}

// do copies it, unless the same is there already; it never replaces another file.
func (c copying) do() (made bool, err error) {
	in, err := c.open(c.name)
	if err != nil {
		return false, fmt.Errorf("it cannot be read to be copied along: %w", whole.Plain(err))
	}
	defer in.Close()
	size := int64(0)
	if s, ok := in.(interface{ Stat() (fs.FileInfo, error) }); ok {
		if info, err := s.Stat(); err == nil {
			size = info.Size()
		}
	}
	src := whole.Watch(c.ctx, in, func(done int64) {
		if c.progress != nil {
			c.progress(c.name, done, max(done, size))
		}
	})
	there, err := os.Open(c.target)
	if err == nil {
		defer there.Close()
		same, err := equal(src, there)
		if err == nil && !same {
			err = errDiffers
		}
		return false, err
	}
	err = copyTo(c.target, src)
	return err == nil, err
}

// copyTo writes a file at once or not at all, with the folder it needs.
func copyTo(path string, from io.Reader) error {
	if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
		return err
	}
	return whole.Write(path, func(w io.Writer) error {
		_, err := io.Copy(w, from)
		return err
	})
}

// equal reports whether two readers hold the same.
func equal(a, b io.Reader) (bool, error) {
	const size = 1 << 18
	ra, rb := bufio.NewReaderSize(a, size), bufio.NewReaderSize(b, size)
	for {
		x, errA := ra.Peek(size)
		y, errB := rb.Peek(size)
		switch {
		case errA != nil && errA != io.EOF:
			return false, errA
		case errB != nil && errB != io.EOF:
			return false, errB
		case !bytes.Equal(x, y):
			return false, nil
		case len(x) < size:
			return true, nil
		}
		ra.Discard(size)
		rb.Discard(size)
	}
}
