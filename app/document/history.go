package document

import (
	"bytes"
	"context"
	"slices"
	"time"

	"barlitre/audit"
)

// entry is one step of undo: in the text, old stood where new stands now. Only what
// differs is kept, so that undo needs no limit.
type entry struct {
	name, key string
	when      time.Time
	at        int
	old, new  []byte
}

func (e *entry) before(text []byte) []byte { return swap(text, e.at, len(e.new), e.old) }
func (e *entry) after(text []byte) []byte  { return swap(text, e.at, len(e.old), e.new) }

func swap(text []byte, at, n int, by []byte) []byte {
	return slices.Concat(text[:at], by, text[at+n:])
}

// difference makes the entry that turns a text into another.
func difference(from, to []byte) entry {
	short := min(len(from), len(to))
	head := 0
	for head < short && from[head] == to[head] {
		head++
	}
	tail := 0
	for tail < short-head && from[len(from)-1-tail] == to[len(to)-1-tail] {
		tail++
	}
	return entry{at: head, old: bytes.Clone(from[head : len(from)-tail]), new: bytes.Clone(to[head : len(to)-tail])}
}

// history is what can be undone and done again.
type history struct {
	done, undone []entry
	sealed       bool // the next edit begins an entry of its own
}

// add keeps an edit. With a key it becomes one with the entry before it, if that has
// the same key, is at most mergeWithin older, and nothing was saved or undone since.
func (h *history) add(key, name string, when time.Time, from, to []byte) {
	merge := false
	if n := len(h.done); n > 0 && key != "" && !h.sealed {
		last := h.done[n-1]
		if merge = last.key == key && when.Sub(last.when) <= mergeWithin; merge {
			from = last.before(from)
			h.done = h.done[:n-1]
		}
	}
	h.undone, h.sealed = nil, false
	if merge && bytes.Equal(from, to) {
		h.sealed = true // dragged back to where it began: nothing to undo
		return
	}
	e := difference(from, to)
	e.key, e.name, e.when = key, name, when
	h.done = append(h.done, e)
}

// Undo takes the last edit back and returns its name; ok is false when there is none.
func (d *Document) Undo() (name string, ok bool) { return d.UndoWith(context.Background(), nil) }

// UndoWith is Undo where a recording may have to be read again; ok is false when that is cancelled.
func (d *Document) UndoWith(ctx context.Context, progress Progress) (name string, ok bool) {
	return d.travel(d.reading(ctx, progress), func(h *history, text []byte) (entry, []byte, bool) {
		e, ok := last(h.done)
		if ok {
			text = e.before(text)
		}
		return e, text, ok
	}, func(h *history, e entry) {
		h.done, h.undone = h.done[:len(h.done)-1], append(h.undone, e)
	})
}

// Redo does again what Undo took back last.
func (d *Document) Redo() (name string, ok bool) { return d.RedoWith(context.Background(), nil) }

// RedoWith is Redo as UndoWith is Undo.
func (d *Document) RedoWith(ctx context.Context, progress Progress) (name string, ok bool) {
	return d.travel(d.reading(ctx, progress), func(h *history, text []byte) (entry, []byte, bool) {
		e, ok := last(h.undone)
		if ok {
			text = e.after(text)
		}
		return e, text, ok
	}, func(h *history, e entry) {
		h.undone, h.done = h.undone[:len(h.undone)-1], append(h.done, e)
	})
}

// UndoName returns the name of what Undo would take back, or "".
func (d *Document) UndoName() string {
	d.mu.Lock()
	defer d.mu.Unlock()
	e, _ := last(d.past.done)
	return e.name
}

// RedoName returns the name of what Redo would do again, or "".
func (d *Document) RedoName() string {
	d.mu.Lock()
	defer d.mu.Unlock()
	e, _ := last(d.past.undone)
	return e.name
}

func last(list []entry) (entry, bool) {
	if len(list) == 0 {
		return entry{}, false
	}
	return list[len(list)-1], true
}

// travel goes one entry back or forth: find tells the entry and the text it leads
// to, move puts it on the other side.
func (d *Document) travel(how audit.Importing, find func(*history, []byte) (entry, []byte, bool), move func(*history, entry)) (string, bool) {
	d.editing.Lock()
	d.mu.Lock()
	now := d.now
	e, text, ok := find(&d.past, now.text)
	ok = ok && !d.closed
	d.mu.Unlock()
	if !ok {
		d.editing.Unlock()
		return "", false
	}
	f := *now.file
	err := guarded(func() error { f.ReplaceWith(text, how); return nil })
	if err != nil || !bytes.Equal(f.Bytes(), text) { // cancelled; else excluded: the text was read before
		d.editing.Unlock()
		return "", false
	}
	d.mu.Lock()
	move(&d.past, e)
	d.past.sealed = true
	revision, ticket := d.install(&f, text)
	d.mu.Unlock()
	d.editing.Unlock()
	d.announce(Edited, revision, ticket)
	return e.name, true
}
