package document

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"path/filepath"
	"time"
)

// autosaveHead begins an autosave: a comment in YAML, so that the file can also be
// opened by hand. The audit follows in the next line, byte for byte.
const autosaveHead = "# barlitre-autosave/1 "

// kept is what an autosave says of itself.
type kept struct {
	origin
	When   time.Time `json:"when"`
	SHA256 string    `json:"sha256"` // of the audit
}

func encodeAutosave(o origin, when time.Time, text []byte) ([]byte, error) {
	sum := sha256.Sum256(text)
	head, err := json.Marshal(kept{origin: o, When: when, SHA256: hex.EncodeToString(sum[:])})
	if err != nil {
		return nil, err
	}
	return bytes.Join([][]byte{[]byte(autosaveHead), head, []byte("\n"), text}, nil), nil
}

var errDamaged = errors.New("it is not a whole autosave")

func decodeAutosave(data []byte) (k kept, text []byte, err error) {
	head, text, ok := bytes.Cut(data, []byte("\n"))
	head, known := bytes.CutPrefix(head, []byte(autosaveHead))
	if !ok || !known || json.Unmarshal(head, &k) != nil {
		return k, nil, errDamaged
	}
	if sum := sha256.Sum256(text); k.SHA256 != hex.EncodeToString(sum[:]) {
		return k, nil, errDamaged
	}
	return k, text, nil
}

// autosaveAll writes the autosave some time after the first edit since the last one:
// so what a crash takes is bounded, however fast edits come.
func (d *Document) autosaveAll() {
	defer d.running.Done()
	for {
		select {
		case <-d.quit:
			return
		case <-d.touched:
		}
		select {
		case <-d.quit:
			return
		case <-time.After(d.opt.AutosaveAfter):
		}
		d.autosave()
	}
}

func (d *Document) autosave() {
	d.files.Lock()
	revision, err := d.settle()
	d.files.Unlock()
	switch {
	case err != nil:
		d.emit(Event{Kind: AutosaveFailed, Revision: revision, Err: err})
	case revision != 0:
		d.emit(Event{Kind: Autosaved, Revision: revision})
	}
}

// settle brings the autosave in line with the present revision: written when there
// is something unsaved, else removed. revision is that which it wrote, or 0. files is
// held.
func (d *Document) settle() (revision int, err error) {
	d.mu.Lock()
	now, dirty := d.now, d.dirty()
	d.mu.Unlock()
	switch {
	case !dirty:
		old := d.session
		d.session = nil
		return 0, old.drop()
	case d.opt.Config == "", d.session != nil && d.session.revision == now.revision:
		return 0, nil
	}
	return now.revision, d.keep(now)
}

var errNoFolder = errors.New("there is no folder for autosaves")

// keep writes a revision to the autosave. Where the folder of the audit does not
// take it, it goes to the one of the settings; the former copy is removed only after
// that. files is held.
func (d *Document) keep(now state) error {
	if d.opt.Config == "" {
		return errNoFolder
	}
	text, err := encodeAutosave(now.origin, d.opt.Now(), now.text)
	if err != nil {
		return err
	}
	if d.session != nil {
		if err = d.session.write(text); err == nil {
			d.session.revision = now.revision
			return nil
		}
	}
	folder := d.recoveryFolder()
	var s *session
	if now.Path != "" && d.session == nil {
		s, err = newSession(folder, func(string) (string, error) { return besideName(now.Path) }, text)
	}
	if s == nil {
		var failed error
		s, failed = newSession(folder, func(id string) (string, error) { return filepath.Join(folder, id+autosaveExt), nil }, text)
		if failed != nil {
			return errors.Join(err, failed)
		}
	}
	s.revision = now.revision
	old := d.session
	d.session = s
	return old.drop()
}

func (d *Document) recoveryFolder() string { return filepath.Join(d.opt.Config, "recovery") }
