//go:build cgo && !nogui

package main

import (
	"errors"
	"os"
	"path/filepath"
	"runtime"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/app"
	"github.com/go-gl/glfw/v3.3/glfw"

	"barlitre/app/document"
	"barlitre/app/duty"
	"barlitre/app/energy"
	"barlitre/app/frame"
	"barlitre/app/heat"
	"barlitre/app/payback"
	"barlitre/app/report"
	"barlitre/app/sheet"
	"barlitre/assets"
)

// The window is the only part that needs a display and the graphics library; a
// build without cgo, or with the tag nogui, has the commands alone.
func init() { openWindow = window }

const appID = "org.barlitre.audit"

// window opens the window on a file, or on the first sample for "".
func window(path string) error {
	if os.Getenv("DISPLAY") == "" && os.Getenv("WAYLAND_DISPLAY") == "" && runtime.GOOS == "linux" {
		return errors.New("there is no display to open a window on; the commands check, audit and blocks work without one")
	}
	app.SetMetadata(fyne.AppMetadata{ID: appID, Name: "Barlitre", Version: version, Migrations: map[string]bool{"fyneDo": true}})
	a := app.NewWithID(appID)
	icon := fyne.NewStaticResource("icon.png", assets.Icon)
	a.SetIcon(icon)
	config, err := os.UserConfigDir()
	if err != nil {
		config = os.TempDir()
	}
	f := frame.New(a, document.Options{Config: filepath.Join(config, "barlitre")}, sheet.New, duty.New, energy.New, heat.New, payback.New, report.New)
	f.Window().SetIcon(icon)
	spareDepth()
	a.Lifecycle().SetOnStarted(func() { f.Open(path) })
	f.Show()
	return nil
}

// spareDepth asks for windows without the buffers for depth and stencil, which the toolkit
// clears in every frame and never uses: without a graphics card that takes a sixth of the time
// of painting. Where it has no effect, nothing is lost.
func spareDepth() {
	if glfw.Init() == nil { // the toolkit does so too, and finds it done
		glfw.WindowHint(glfw.DepthBits, 0)
		glfw.WindowHint(glfw.StencilBits, 0)
	}
}
