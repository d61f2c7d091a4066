package document

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/whole"
)

// Reasons for not saving that a screen answers with a question.
var (
	ErrNoPath  = errors.New("the audit has no file yet; choose a name for it")
	ErrChanged = errors.New("the file was changed by another program since it was opened or saved here; save under another name, or choose the same name to replace it")
	ErrExists  = errors.New("there is a file of that name already; choose it by its full name to replace it")
)

// Save writes the audit to its file: all of it or, on an error, nothing. It refuses
// with ErrNoPath, and with ErrChanged where it would undo what another program wrote.
// An error says what could not be done, where, and where the changes are safe.
func (d *Document) Save() error {
	d.files.Lock()
	now := d.snapshot()
	err := ErrNoPath
	if now.Path != "" {
		err = d.save(now)
	}
	d.files.Unlock()
	if err == nil {
		d.emit(Event{Kind: Saved, Revision: now.revision})
	}
	return err
}

// save is Save with files held.
func (d *Document) save(now state) error {
	d.mu.Lock()
	saved := d.saved
	d.mu.Unlock()
	if disk, err := os.ReadFile(now.Path); err == nil && !bytes.Equal(disk, saved) && !bytes.Equal(disk, now.text) {
		return fmt.Errorf("save %s: %w%s", now.Path, ErrChanged, d.safe(now))
	}
	if err := d.store(now, now.Path); err != nil {
		return err
	}
	d.markSaved(now.text)
	d.settle() // its error is told by the next autosave; the audit is saved
	return nil
}

// SaveAs writes the audit to a file of another name, replacing what is there, and
// goes on with that file. ".yaml" is added to a name without it, but then nothing is
// replaced (ErrExists). Recordings that duties are taken from are copied along; a
// different file in their place is not replaced. On an error, which says the same as
// that of Save, nothing is written and the document keeps its file.
func (d *Document) SaveAs(path string) error { return d.SaveAsWith(context.Background(), path, nil) }

// SaveAsWith is SaveAs for an audit with long recordings: progress is told of copying them and of
// reading the copies, and the end of ctx leaves everything as it was.
func (d *Document) SaveAsWith(ctx context.Context, path string, progress Progress) error {
	path, err := fullName(path)
	if err != nil {
		return err
	}
	d.files.Lock()
	now := d.snapshot()
	revision, ticket, err := d.saveAs(ctx, now, path, progress)
	d.files.Unlock()
	if revision != 0 {
		d.announce(Edited, revision, ticket)
	}
	if err == nil {
		d.addRecent(path)
		d.emit(Event{Kind: Saved, Revision: now.revision})
	}
	return err
}

// fullName makes a path absolute and adds the ending.
func fullName(path string) (string, error) {
	full, err := filepath.Abs(path)
	if err != nil || strings.TrimSpace(path) == "" {
		return "", fmt.Errorf("save: %q is not the name of a file", path)
	}
	if ext := strings.ToLower(filepath.Ext(full)); ext == fileExt || ext == ".yml" {
		return full, nil
	}
	full += fileExt
	if _, err := os.Stat(full); err == nil {
		return "", fmt.Errorf("save %s: %w", full, ErrExists)
	}
	return full, nil
}

// saveAs is SaveAsWith with files held; revision is not 0 when the file reads otherwise
// at its new place.
func (d *Document) saveAs(ctx context.Context, now state, path string, progress Progress) (revision, ticket int, err error) {
	o := origin{Path: path}
	copied, err := d.copyBeside(ctx, now, path, progress)
	var there *audit.File // the recordings are there already, the text is not
	if err == nil {
		there, _ = audit.ParseWith(now.text, o.opener(), path, audit.Importing{Context: ctx, Progress: progress, Known: now.file})
		if ctx.Err() != nil {
			err = fmt.Errorf("save %s: %w; nothing was saved there%s", path, ErrCancelled, d.safe(now))
		}
	}
	if err == nil {
		err = d.store(now, path)
	}
	if err != nil {
		for _, c := range copied {
			err = errors.Join(err, whole.Remove(c))
		}
		return 0, 0, err
	}
	d.markSaved(now.text)
	revision, ticket = d.rebind(o, there)
	old := d.session
	d.session = nil
	d.settle()
	_ = old.drop() // a copy too many is offered at the next start; the audit is saved
	return revision, ticket, nil
}

// rebind takes the present text as that of a file at another place; there is what was saved,
// read there. The recordings there were checked to be the same, but may have changed on disk
// since they were read first.
func (d *Document) rebind(o origin, there *audit.File) (revision, ticket int) {
	d.editing.Lock()
	defer d.editing.Unlock()
	now := d.snapshot()
	f := there
	if f == nil || !bytes.Equal(now.text, f.Bytes()) { // edited meanwhile
		f, _ = audit.ParseWith(now.text, o.opener(), o.Path, audit.Importing{Known: there})
	}
	d.mu.Lock()
	defer d.mu.Unlock()
	d.now.origin = o
	if f == nil { // excluded: the text was read before
		return 0, 0
	}
	if f.Fingerprint() == now.file.Fingerprint() && slices.Equal(f.Findings(), now.file.Findings()) {
		d.now.file = f
		return 0, 0
	}
	return d.install(f, now.text)
}

func (d *Document) markSaved(text []byte) {
	d.mu.Lock()
	defer d.mu.Unlock()
	d.saved, d.past.sealed = text, true
}

// store writes the text to a path, with a copy kept until it is there.
func (d *Document) store(now state, path string) error {
	safe := d.safe(now)
	err := folderFor(path)
	if err == nil {
		if err = guarded(func() error { return now.file.Save(path) }); err == nil {
			return nil
		}
		return fmt.Errorf("%w%s", err, safe)
	}
	return fmt.Errorf("save %s: %w%s", path, err, safe)
}

// safe keeps a copy of unsaved changes and says where, as the end of a message.
func (d *Document) safe(now state) string {
	if !d.Dirty() {
		return "; nothing is lost, the audit stays open here"
	}
	text := "; nothing is lost, the changes are still open here"
	if d.keep(now) == nil {
		text += " and kept in " + d.session.autosave
	}
	return text
}
