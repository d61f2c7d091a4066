//go:build !(darwin || dragonfly || freebsd || linux || netbsd || openbsd || windows)

package document

import "os"

// lockFile opens a file. There are no locks on this system: a second window may
// offer to recover what the first has open.
func lockFile(path string, flag int) (*os.File, error) { return os.OpenFile(path, flag, 0o600) }
