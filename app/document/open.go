package document

import (
	"context"
	"fmt"
	"os"
	"path/filepath"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/samples"
)

// fileExt is what audit files end in when the user types no ending.
const fileExt = ".yaml"

// emptyText is the audit that begins with nothing drawn. The working temperature is a
// guess, and is marked so.
const emptyText = `format: barlitre/1
title: New audit
site: {name: ""}
oil: {grade: ISO VG 46, temperature: {value: 50 C, origin: assumed}}
axes: {}
duties: []
circuits: []
`

// Open reads an audit file in place of the present audit, whose unsaved changes and
// autosave are given up: ask first when Dirty. problems are what stops or is likely
// wrong in the file; what is right in it is solved. The error says why it is not an
// audit file or cannot be read; the present audit then stays.
func (d *Document) Open(path string) (problems []circuit.Finding, err error) {
	return d.OpenWith(context.Background(), path, nil)
}

// OpenWith is Open for an audit with long recordings: progress, which may be nil, is told
// how many bytes of which of them are read, and the end of ctx leaves the present audit as it is.
// What the present audit has read of the same recordings is taken over.
// Neither does it replace what was edited meanwhile.
func (d *Document) OpenWith(ctx context.Context, path string, progress Progress) (problems []circuit.Finding, err error) {
	path, err = filepath.Abs(path)
	if err != nil {
		return nil, fmt.Errorf("open %s: %w", path, err)
	}
	var f *audit.File
	var found []circuit.Finding
	since, how := d.Revision(), d.reading(ctx, progress)
	if err := guarded(func() error { f, found = audit.ReadWith(path, how); return nil }); err != nil {
		return nil, fmt.Errorf("open %s: %w", path, err)
	}
	if ctx.Err() != nil {
		return nil, fmt.Errorf("open %s: %w; the audit that was open stays", path, ErrCancelled)
	}
	if f == nil {
		return nil, notRead(path, found)
	}
	checked := checkFile(f) // before it is shown: a long duty takes its time
	if err := d.beginUnless(since, f, origin{Path: path}, checked); err != nil {
		return nil, fmt.Errorf("open %s: %w", path, err)
	}
	d.addRecent(path)
	for _, p := range checked {
		if p.Level == circuit.Stops || p.Level == circuit.Warns {
			problems = append(problems, p)
		}
	}
	return problems, nil
}

func notRead(path string, found []circuit.Finding) error {
	if len(found) == 0 { // excluded: a file that is not read has a finding
		return fmt.Errorf("open %s: it cannot be read", path)
	}
	return fmt.Errorf("open %s: %w; the audit that was open stays", path, found[0])
}

// OpenSample opens a copy of a shipped sample, which has no file yet. The present
// audit goes, as with Open.
func (d *Document) OpenSample(name string) error {
	data, err := samples.Read(name)
	if err != nil {
		return err
	}
	o := origin{Sample: name}
	f, found := audit.Parse(data, o.opener(), "")
	if f == nil {
		return notRead(name, found)
	}
	return d.begin(f, o)
}

// OpenStarter opens a copy of a shipped starter, as OpenSample does a sample.
func (d *Document) OpenStarter(name string) error {
	data, err := samples.ReadStarter(name)
	if err != nil {
		return err
	}
	o := origin{Starter: name}
	f, found := audit.Parse(data, o.opener(), "")
	if f == nil {
		return notRead(name, found)
	}
	return d.begin(f, o)
}

// OpenEmpty begins an audit with nothing drawn. The present audit goes, as with Open.
func (d *Document) OpenEmpty() error {
	f, _ := audit.Parse([]byte(emptyText), nil, "")
	return d.begin(f, origin{})
}

// begin puts another audit into the document, as saved.
func (d *Document) begin(f *audit.File, o origin) error { return d.beginUnless(0, f, o, nil) }

// beginUnless is begin, but for an audit that was edited since a revision, if that is not 0;
// checked is what checkFile has found, nil when not asked yet.
func (d *Document) beginUnless(since int, f *audit.File, o origin, checked []circuit.Finding) error {
	d.files.Lock()
	revision, ticket, err := d.replace(since, f, o, f.Bytes(), history{}, checked)
	if err == nil {
		old := d.session
		d.session = nil
		err = old.drop()
	}
	d.files.Unlock()
	if revision != 0 {
		d.announce(Opened, revision, ticket)
	}
	return err
}

// replace makes f the present audit, to be announced; since and checked are those of beginUnless. files is held.
func (d *Document) replace(since int, f *audit.File, o origin, saved []byte, past history, checked []circuit.Finding) (revision, ticket int, err error) {
	d.editing.Lock()
	defer d.editing.Unlock()
	d.mu.Lock()
	defer d.mu.Unlock()
	if d.closed {
		return 0, 0, errClosed
	}
	if since != 0 && d.now.revision != since {
		return 0, 0, errOvertaken
	}
	d.now.origin, d.saved, d.past = o, saved, past
	d.solution, d.solved = nil, 0
	revision, ticket = d.install(f, f.Bytes())
	d.opened, d.checked = revision, checked
	return revision, ticket, nil
}

// opener returns how the recordings of an audit are read.
func (o origin) opener() audit.Open {
	switch {
	case o.Path != "":
		return audit.Beside(o.Path)
	case o.Sample != "":
		return audit.FromBytes(samples.Read)
	}
	return nil
}

// text returns what an audit that comes from o begins with.
func (o origin) text() ([]byte, error) {
	switch {
	case o.Path != "":
		return os.ReadFile(o.Path)
	case o.Sample != "":
		return samples.Read(o.Sample)
	case o.Starter != "":
		return samples.ReadStarter(o.Starter)
	}
	return []byte(emptyText), nil
}
