package station

import (
	"context"
	"fmt"
	"io"

	"barlitre/app/document"
	"barlitre/audit"
	"barlitre/audit/whole"
)

// SaveDirVariable names the folder that scripts save into, without a dialog.
const SaveDirVariable = "BARLITRE_SAVE_DIR"

// WriteSettled writes what is made of the audit as it stands, whole or not at all, with the
// progress of balancing it. Where that fails write gets no solution, and the reason; it may
// return it. The end of ctx leaves a file that is there as it is.
func WriteSettled(ctx context.Context, d *document.Document, path string, tell document.Progress, write func(w io.Writer, s *audit.Solution, unsolved error) error) error {
	tell("", 0, 0)
	s, unsolved := d.Settled(ctx, func(done, total int) { tell("", int64(done), int64(total)) })
	if err := ctx.Err(); err != nil {
		return err
	}
	tell("", 1, 1)
	return WriteWhole(path, func(w io.Writer) error {
		if err := write(w, s, unsolved); err != nil {
			return err
		}
		return ctx.Err()
	})
}

// WriteWhole writes a file so that it is there whole, or as it was.
func WriteWhole(path string, write func(io.Writer) error) error {
	return whole.Write(path, func(w io.Writer) error { return Guarded(func() error { return write(w) }) })
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
