package widgets

import "sync/atomic"

// Frames counts the frames of sheets that were drawn.
var Frames atomic.Int64
