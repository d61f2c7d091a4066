package widgets

import "sync/atomic"

// Frames counts the frames of sheets that were drawn, PlotFrames those of plots over time.
var Frames, PlotFrames atomic.Int64
