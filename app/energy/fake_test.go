package energy

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
)

// fake is a frame of one station: it passes changes on to it, as the frame does.
type fake struct {
	*stationtest.Context
	station station.Station
	circuit int
	block   string
}

// opening shows the station with an audit file that is solved; files lie beside it.
func opening(t *testing.T, show func(station.Context) station.Station, text string, files map[string]string) *fake {
	t.Helper()
	f := &fake{Context: stationtest.New(t, "")}
	dir := t.TempDir()
	path := filepath.Join(dir, "audit.yaml")
	write := func(path, data string) {
		if err := os.WriteFile(path, []byte(data), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	write(path, text)
	for name, data := range files {
		write(filepath.Join(dir, name), data)
	}
	if _, err := f.Document.Open(path); err != nil {
		t.Fatal(err)
	}
	f.Wait()
	f.station = show(f)
	f.Show(f.station, 1190, 590)
	return f
}

// settle passes an edit on, and its solution.
func (f *fake) settle() {
	f.station.Changed(station.Model)
	f.Wait()
	f.station.Changed(station.Solution)
}

func (f *fake) text() string { return string(f.Document.File().Bytes()) }

// dump is what scripts see.
func (f *fake) dump() string {
	var b strings.Builder
	f.Win.Canvas().Capture()
	widgets.Dump(&b, f.Win.Canvas())
	return b.String()
}

// look lays out for a size, and writes a picture when asked to.
func (f *fake) look(name string, w, h float32) {
	f.Settle(w, h)
	f.Look(name)
}

func (f *fake) theme(dark bool, scale float32) {
	f.Dark = dark
	fyne.CurrentApp().Settings().SetTheme(widgets.Theme{Dark: dark, Scale: scale})
	f.station.Changed(station.Settings)
}

func (f *fake) SetClock(t float64) { f.Time = t; f.station.Changed(station.Clock) }
func (f *fake) SetDuty(i int)      { f.At = i; f.station.Changed(station.Selection | station.Clock) }

func (f *fake) Select(circuit int, block string) {
	f.circuit, f.block = circuit, block
	f.station.Changed(station.Selection)
}
