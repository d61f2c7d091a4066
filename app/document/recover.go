package document

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"time"

	"barlitre/audit"
	"barlitre/audit/whole"
)

// Recovery is an audit whose unsaved changes outlived a crash.
type Recovery struct {
	Path     string // of the audit; "" when it had no file
	Name     string // "press.yaml", "baling-press (sample)", "untitled"
	Autosave string // path of what is kept
	When     time.Time

	list string
}

// Recoverable lists what can be recovered, the newest first. What another window has
// open is not in it, nor what is on disk already.
func (d *Document) Recoverable() []Recovery {
	if d.opt.Config == "" {
		return nil
	}
	entries, _ := os.ReadDir(d.recoveryFolder()) // not there before the first autosave
	d.files.Lock()
	defer d.files.Unlock()
	var out []Recovery
	for _, e := range entries {
		path := filepath.Join(d.recoveryFolder(), e.Name())
		if filepath.Ext(path) != sessionExt || d.session != nil && d.session.list == path {
			continue
		}
		s, err := openSession(path)
		if err != nil {
			continue // in use, or gone meanwhile
		}
		r, useless := s.inspect()
		switch {
		case useless:
			_ = s.drop() // it is looked at again at the next start
			continue
		case r.Autosave != "":
			out = append(out, r)
		}
		s.release()
	}
	slices.SortFunc(out, func(a, b Recovery) int { return b.When.Compare(a.When) })
	return out
}

// inspect tells what can be recovered from a session. It is useless when there is
// nothing; what cannot be read now, or is damaged, is neither, and is left alone.
func (s *session) inspect() (r Recovery, useless bool) {
	if s.autosave == "" {
		return r, true // ended before it had an autosave
	}
	data, err := os.ReadFile(s.autosave)
	if err != nil {
		_, folder := os.Stat(filepath.Dir(s.autosave)) // a drive may be away
		return r, errors.Is(err, fs.ErrNotExist) && folder == nil
	}
	k, text, err := decodeAutosave(data)
	if err != nil {
		return r, false
	}
	if disk, err := k.text(); err == nil && bytes.Equal(disk, text) {
		return r, true
	}
	return Recovery{Path: k.Path, Name: k.name(), Autosave: s.autosave, When: k.When, list: s.list}, false
}

// Recover opens an audit with its unsaved changes, in place of the present audit,
// which goes as with Open. Undo leads to what is on disk. On an error the present
// audit and what is kept stay as they are.
func (d *Document) Recover(r Recovery) error {
	return d.RecoverWith(context.Background(), r, nil)
}

// RecoverWith is Recover for an audit with long recordings, as OpenWith is Open.
func (d *Document) RecoverWith(ctx context.Context, r Recovery, progress Progress) error {
	fault := func(err error) error {
		return fmt.Errorf("recover %s from %s: %w; it is left as it is", r.Name, r.Autosave, err)
	}
	s, err := openSession(r.list)
	if err != nil {
		return fault(err)
	}
	since, how := d.Revision(), d.reading(ctx, progress)
	k, f, err := s.load(how)
	var saved []byte
	var past history
	if err == nil {
		how.Known = f
		saved, past = k.base(f.Bytes(), d.opt.Now(), how)
	}
	if ctx.Err() != nil {
		err = ErrCancelled
	}
	if err != nil {
		s.release()
		return fault(err)
	}
	d.files.Lock()
	revision, ticket, err := d.replace(since, f, k.origin, saved, past, nil)
	if err != nil {
		d.files.Unlock()
		s.release()
		return fault(err)
	}
	old := d.session
	d.session, s.revision = s, revision // what is kept goes on as the autosave
	err = old.drop()
	d.files.Unlock()
	if k.Path != "" {
		d.addRecent(k.Path)
	}
	d.announce(Opened, revision, ticket)
	return err
}

func (s *session) load(how audit.Importing) (k kept, f *audit.File, err error) {
	data, err := os.ReadFile(s.autosave)
	if err != nil {
		return k, nil, whole.Plain(err)
	}
	k, text, err := decodeAutosave(data)
	if err != nil {
		return k, nil, err
	}
	err = guarded(func() error {
		var found []error
		f, found = parseKept(text, k.origin, how)
		if f == nil {
			return errors.Join(found...)
		}
		return nil
	})
	return k, f, err
}

func parseKept(text []byte, o origin, how audit.Importing) (*audit.File, []error) {
	f, found := audit.ParseWith(text, o.opener(), o.Path, how)
	var errs []error
	for _, n := range found {
		errs = append(errs, n)
	}
	return f, errs
}

// base returns what the unsaved changes began with, nil when that is gone, and the
// one step of undo that leads to it.
func (k kept) base(text []byte, when time.Time, how audit.Importing) (saved []byte, past history) {
	saved, err := k.text()
	if err != nil {
		return nil, history{}
	}
	if f, _ := parseKept(saved, k.origin, how); f != nil {
		past.add("", "Recover unsaved changes", when, saved, text)
	}
	return saved, past
}

// Discard removes what is kept of an audit, for good.
func (d *Document) Discard(r Recovery) error {
	s, err := openSession(r.list)
	if err == nil {
		err = s.drop()
	}
	if err != nil {
		return fmt.Errorf("discard %s: %w", r.Autosave, whole.Plain(err))
	}
	return nil
}
