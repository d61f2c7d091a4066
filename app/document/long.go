package document

import (
	"context"
	"errors"

	"barlitre/audit"
)

// Progress is told how many bytes of which recording are read; it may be nil, and is
// called from the goroutine that reads.
type Progress = func(file string, done, total int64)

// ErrCancelled is what reading or copying recordings ends with when its context does.
var ErrCancelled = errors.New("it was cancelled")

// errOvertaken refuses to put another audit in place of one that was edited while it was read.
var errOvertaken = errors.New("the audit that is open was changed meanwhile; it stays")

// HasRecordings reports whether a duty of the audit is read from a recording, so that
// reading its text may take long.
func (d *Document) HasRecordings() bool {
	for _, s := range d.File().Sources {
		if s.File != "" {
			return true
		}
	}
	return false
}

// reading is how recordings are read that the present audit may have read before.
func (d *Document) reading(ctx context.Context, progress Progress) audit.Importing {
	return audit.Importing{Context: ctx, Progress: progress, Known: d.File()}
}
