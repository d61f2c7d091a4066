package stationtest

import (
	"image/png"
	"os"
	"path/filepath"
	"testing"

	"fyne.io/fyne/v2"
)

// folder is where pictures go; without it none is written.
func folder() string { return os.Getenv("BARLITRE_PICTURES") }

// Looking reports whether pictures are asked for.
func Looking() bool { return folder() != "" }

// Picture draws a window, and writes it into the folder that the environment variable
// BARLITRE_PICTURES names, if there is one.
func Picture(t testing.TB, win fyne.Window, name string) {
	t.Helper()
	img := win.Canvas().Capture()
	if !Looking() {
		return
	}
	f, err := os.Create(filepath.Join(folder(), name+".png"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	if err := png.Encode(f, img); err != nil {
		t.Fatal(err)
	}
}
