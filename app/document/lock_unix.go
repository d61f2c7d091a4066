//go:build darwin || dragonfly || freebsd || linux || netbsd || openbsd

package document

import (
	"errors"
	"os"
	"syscall"
)

// lockFile opens a file that no other program has locked, and locks it until it is
// closed; errBusy when another has.
func lockFile(path string, flag int) (*os.File, error) {
	f, err := os.OpenFile(path, flag, 0o600)
	if err != nil {
		return nil, err
	}
	err = syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB)
	if errors.Is(err, syscall.EWOULDBLOCK) {
		f.Close()
		return nil, errBusy
	}
	return f, nil // a file system without locks: then a second window may offer what the first has open
}
