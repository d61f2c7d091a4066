package frame

import (
	"fmt"
	"os"
	"time"

	"barlitre/app/widgets"
)

// framesVariable names a file that gets a line a second with how many frames of sheets and
// of plots over time were drawn in it, for measuring.
const framesVariable = "BARLITRE_FRAMES"

// countFrames writes the lines until the program ends.
func countFrames() {
	path := os.Getenv(framesVariable)
	if path == "" {
		return
	}
	f, err := os.Create(path)
	if err != nil {
		fmt.Fprintf(os.Stderr, "%s: %v\n", framesVariable, err)
		return
	}
	go func() {
		for range time.Tick(time.Second) {
			fmt.Fprintln(f, widgets.Frames.Swap(0), widgets.PlotFrames.Swap(0))
		}
	}()
}
