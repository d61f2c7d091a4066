package document

import (
	"crypto/rand"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"barlitre/audit/whole"
)

const (
	autosaveExt = ".barlitre-autosave"
	sessionExt  = ".session"
	tmpExt      = ".tmp"
)

// errBusy means that a running program holds a session.
var errBusy = errors.New("it belongs to a window that is open")

// session is one autosave and its entry in the recovery list. The entry is a file
// that is locked while the program lives: whatever way it ends, the lock goes with it.
type session struct {
	lock     *os.File
	list     string // path of the entry
	autosave string // path
	revision int    // held by the autosave
}

// entryFile is what stands in the recovery list.
type entryFile struct {
	Autosave string `json:"autosave"`
}

// newSession makes the entry, then the autosave with a text. name returns a path for
// the autosave by the id of the session.
func newSession(folder string, name func(id string) (string, error), text []byte) (s *session, err error) {
	if err := os.MkdirAll(folder, 0o700); err != nil {
		return nil, err
	}
	s, id, err := enlist(folder)
	if err != nil {
		return nil, err
	}
	if s.autosave, err = name(id); err == nil {
		var data []byte
		if data, err = json.Marshal(entryFile{s.autosave}); err == nil {
			_, err = s.lock.Write(data)
		}
		err = errors.Join(err, s.lock.Sync())
	}
	if err == nil {
		whole.SyncFolder(folder)
		err = s.write(text)
	}
	if err != nil {
		return nil, errors.Join(err, s.drop())
	}
	return s, nil
}

// enlist makes a locked entry of a name that is new.
func enlist(folder string) (*session, string, error) {
	for range 10 {
		var random [6]byte
		rand.Read(random[:]) // never fails
		id := hex.EncodeToString(random[:])
		path := filepath.Join(folder, id+sessionExt)
		lock, err := lockFile(path, os.O_RDWR|os.O_CREATE|os.O_EXCL)
		if err != nil {
			return nil, "", err
		}
		// between making and locking it, a program that was looking for crashes may
		// have taken it for a leftover
		if sameFile(path, lock) {
			return &session{lock: lock, list: path}, id, nil
		}
		lock.Close()
	}
	return nil, "", fmt.Errorf("%s: no entry of the recovery list can be made", folder)
}

func sameFile(path string, f *os.File) bool {
	a, errA := os.Stat(path)
	b, errB := f.Stat()
	return errA == nil && errB == nil && os.SameFile(a, b)
}

// openSession takes over a session whose program ended; errBusy when it did not.
func openSession(list string) (*session, error) {
	lock, err := lockFile(list, os.O_RDWR)
	if err != nil {
		return nil, err
	}
	s := &session{lock: lock, list: list}
	data, err := os.ReadFile(list)
	var e entryFile
	if err == nil && json.Unmarshal(data, &e) == nil && strings.HasSuffix(e.Autosave, autosaveExt) {
		s.autosave = e.Autosave
	}
	return s, nil
}

// besideName returns a free name for the autosave beside an audit, and makes it ours.
func besideName(path string) (string, error) {
	for n := 1; n < 100; n++ {
		number := ""
		if n > 1 {
			number = fmt.Sprintf("-%d", n)
		}
		name := filepath.Join(filepath.Dir(path), "."+filepath.Base(path)+number+autosaveExt)
		if _, err := os.Lstat(name); err == nil {
			continue // of another window, or of a crash that nobody has seen to yet
		}
		f, err := os.OpenFile(name+tmpExt, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o600)
		if errors.Is(err, fs.ErrExist) {
			continue
		}
		if err != nil {
			return "", err
		}
		return name, f.Close()
	}
	return "", fmt.Errorf("%s: too many autosaves lie beside it", path)
}

func (s *session) write(text []byte) error { return whole.WriteBy(s.autosave+tmpExt, s.autosave, text) }

// drop removes the autosave and its entry. A nil session has neither.
func (s *session) drop() error {
	if s == nil {
		return nil
	}
	var err error
	if s.autosave != "" {
		err = errors.Join(whole.Remove(s.autosave), whole.Remove(s.autosave+tmpExt))
	}
	if err != nil { // it stays listed, so that it can still be found
		s.release()
		return err
	}
	gone := os.Remove(s.list) == nil
	s.release()
	if gone {
		return nil
	}
	return whole.Remove(s.list) // systems that do not remove open files
}

// release ends the hold on a session whose files stay.
func (s *session) release() {
	if s != nil {
		s.lock.Close()
	}
}
