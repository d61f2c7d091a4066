package audit

import (
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/channels"
)

// worked is what was worked out of a recording, kept by what the audit file says of it, for an
// edit reads the file again. The lock of the recording holds for it: copies of a file share it.
type worked struct {
	derived map[string]keptTrack
	rates   map[string][]logged.Rated
	turn    int // counts the duties that were read from the recording
}

type keptTrack struct {
	channels.Track
	turn int // that it was last asked for
}

// turnsKept is for how many turns a track is kept that no duty asks for: an undone edit finds it
// again, but an edit after the other does not fill the memory.
const turnsKept = 8

// nextTurn begins a duty and forgets what has not been asked for.
func (t *recorded) nextTurn() {
	t.Lock()
	defer t.Unlock()
	t.worked.turn++
	for key, x := range t.worked.derived {
		if t.worked.turn-x.turn > turnsKept {
			delete(t.worked.derived, key)
		}
	}
}

func (t *recorded) derivedTrack(key string) (channels.Track, bool) {
	t.Lock()
	defer t.Unlock()
	x, ok := t.worked.derived[key]
	return x.Track, ok
}

func (t *recorded) keepTrack(key string, tr channels.Track) {
	t.Lock()
	defer t.Unlock()
	if t.worked.derived == nil {
		t.worked.derived = map[string]keptTrack{}
	}
	t.worked.derived[key] = keptTrack{tr, t.worked.turn}
}

// rated returns what the rate of a recording means, checked once for a key.
func (t *recorded) rated(key string, check func() []logged.Rated) []logged.Rated {
	t.Lock()
	defer t.Unlock()
	out, done := t.worked.rates[key]
	if !done {
		if out = check(); t.worked.rates == nil {
			t.worked.rates = map[string][]logged.Rated{}
		}
		t.worked.rates[key] = out
	}
	return out
}
