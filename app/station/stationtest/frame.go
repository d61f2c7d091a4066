package stationtest

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/app/station"
	"barlitre/app/widgets"
)

// Frame is a frame of one station: it passes changes on to it, as the frame does.
type Frame struct {
	*Context
	Station station.Station
	Circuit int    // the last that was selected
	Block   string // of that circuit
}

// Open shows the station with an audit file that is solved; files lie beside it.
func Open(t *testing.T, show func(station.Context) station.Station, text string, files map[string]string) *Frame {
	t.Helper()
	f := &Frame{Context: New(t, "")}
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
	f.Station = show(f)
	f.Show(f.Station, 1190, 590)
	return f
}

// Edited passes an edit on, and its solution.
func (f *Frame) Edited() {
	f.Station.Changed(station.Model)
	f.Wait()
	f.Station.Changed(station.Solution)
}

// FileText is the audit file as it stands.
func (f *Frame) FileText() string { return string(f.Document.File().Bytes()) }

// Dump is what scripts see.
func (f *Frame) Dump() string {
	var b strings.Builder
	f.Win.Canvas().Capture()
	widgets.Dump(&b, f.Win.Canvas())
	return b.String()
}

// Picture lays out for a size, and writes a picture when asked to.
func (f *Frame) Picture(name string, w, h float32) {
	f.Settle(w, h)
	f.Look(name)
}

// Theme changes the theme and tells the station.
func (f *Frame) Theme(dark bool, scale float32) {
	f.SetTheme(dark, scale)
	f.Station.Changed(station.Settings)
}

// SetClock, SetDuty and Select tell the station.
func (f *Frame) SetClock(t float64) { f.Time = t; f.Station.Changed(station.Clock | station.Reading) }
func (f *Frame) SetDuty(i int) {
	f.At = i
	f.Station.Changed(station.Selection | station.Clock | station.Reading)
}

// Pick tells the station as the frame does.
func (f *Frame) Pick(circuit string) {
	f.Picked = circuit
	f.Station.Changed(station.Solution | station.Selection)
}

func (f *Frame) Select(circuit int, block string) {
	f.Circuit, f.Block = circuit, block
	f.Station.Changed(station.Selection)
}
