package frame

import (
	"fmt"
	"os"
	"time"

	"barlitre/app/widgets"
)

// framesVariable names a file that gets a line a second with how many frames of sheets
// were drawn in it, for measuring.
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
		last := widgets.Frames.Load()
		for range time.Tick(time.Second) {
			now := widgets.Frames.Load()
			fmt.Fprintln(f, now-last)
			last = now
		}
	}()
}
