package report

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/storage"

	"barlitre/audit"
	"barlitre/audit/whole"
)

// saveCSV asks for a folder and writes the tables of time steps into it.
func (s *saver) saveCSV() {
	base := s.base() + "-"
	do := func(folder string) {
		s.work("the tables", folder, func(ctx context.Context, progress func(int, int)) error {
			return writeTables(ctx, s.ctx.Doc().File(), folder, base, progress)
		})
	}
	if dir := os.Getenv(saveDirVariable); dir != "" {
		do(dir)
		return
	}
	d := dialog.NewFolderOpen(func(u fyne.ListableURI, err error) {
		switch {
		case err != nil:
			s.ctx.Fail(fmt.Errorf("save the tables: %w; nothing was written, and the audit is still open here", err))
		case u != nil:
			s.askReplace(u.Path(), base, func() { do(u.Path()) })
		}
	}, s.ctx.Window())
	if path := s.ctx.Doc().Path(); path != "" {
		if at, err := folderURI(filepath.Dir(path)); err == nil {
			d.SetLocation(at)
		}
	}
	d.Resize(fyne.NewSize(760, 520))
	d.Show()
	s.ctx.Keep(d)
}

// askReplace asks before tables that are there already are replaced.
func (s *saver) askReplace(folder, base string, then func()) {
	there := existing(s.ctx.Doc().File(), folder, base)
	if len(there) == 0 {
		then()
		return
	}
	text := fmt.Sprintf("%s has %s of that name, such as\n%s", folder, plural(len(there), "table"), there[0])
	d := dialog.NewConfirm("Replace the tables?", text, func(yes bool) {
		if yes {
			then()
		}
	}, s.ctx.Window())
	d.SetConfirmText("Replace")
	d.SetDismissText("Keep")
	d.Show()
	s.ctx.Keep(d)
}

// existing lists the tables of an audit that are in a folder.
func existing(f *audit.File, folder, base string) []string {
	var out []string
	for i, c := range f.Circuits {
		for j, d := range f.Duties {
			name := base + audit.TableName(i+1, c.Name, j+1, d.Name)
			if _, err := os.Lstat(filepath.Join(folder, name)); err == nil {
				out = append(out, name)
			}
		}
	}
	return out
}

// writeTables solves the audit once more and writes every time step. The tables are
// written into a folder of their own first and moved when all are whole.
func writeTables(ctx context.Context, f *audit.File, folder, base string, progress func(int, int)) (err error) {
	tables := whole.NewFolder(folder, false)
	defer func() { err = errors.Join(err, tables.Close()) }()
	_, err = audit.Solve(ctx, f, audit.Options{Progress: progress, CSV: tables.Create})
	switch {
	case err != nil:
		return err
	case tables.Len() == 0:
		return errors.New("no circuit could be solved, so there are no time steps to write; see the findings under Circuit")
	}
	return tables.Place(base)
}

func folderURI(dir string) (fyne.ListableURI, error) {
	return storage.ListerForURI(storage.NewFileURI(dir))
}
