// Package stationtest is a station.Context for tests of stations: a real document, and
// a window of the toolkit's test driver.
package stationtest

import (
	"context"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/test"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// Context remembers what a station said and did.
type Context struct {
	T          *testing.T
	Document   *document.Document
	Win        fyne.Window
	Units      units.System
	Comma      bool
	Dark       bool
	Time       float64
	At         int // index of the duty
	Picked     string
	Seen       station.View
	Explained  []audit.Figure
	Said       []string
	Failed     []error
	Went       []string
	Kept       []dialog.Dialog
	PickedFile string // the file that the user picks, "" = none
	SaveTo     string // where the user saves
	Cancelling bool   // the user cancels what takes long
	// Held is read instead of the document's solution, so that it stays the same while a station is told of it; nil = the document's.
	Held *audit.Solution
}

// New opens a sample, "" for the empty audit, and waits until it is solved.
func New(t *testing.T, sample string) *Context {
	t.Helper()
	app := test.NewTempApp(t)
	c := &Context{T: t, Document: document.New(document.Options{})}
	t.Cleanup(func() { c.Document.Abandon() })
	app.Settings().SetTheme(widgets.Theme{})
	c.Win = test.NewTempWindow(t, nil)
	c.Win.SetPadded(false)
	if sample != "" {
		if err := c.Document.OpenSample(sample); err != nil {
			t.Fatal(err)
		}
		c.Wait()
	}
	return c
}

// Wait waits until the present revision is solved, with its oil temperatures.
func (c *Context) Wait() {
	c.T.Helper()
	for end := time.Now().Add(30 * time.Second); !c.Document.Current() || c.Document.Warming(); time.Sleep(2 * time.Millisecond) {
		if err := c.Document.Failure(); err != nil {
			c.T.Fatal(err)
		}
		if time.Now().After(end) {
			c.T.Fatal("not solved in 30 s")
		}
	}
}

// Show puts a station into the window and tells it everything.
func (c *Context) Show(s station.Station, w, h float32) {
	c.Win.SetContent(s.Content())
	c.Win.Resize(fyne.NewSize(w, h))
	s.Changed(station.Everything)
	c.Settle(w, h)
}

// Settle lays out until the sizes of wrapped texts hold, as the window's frames do.
func (c *Context) Settle(w, h float32) {
	for i := range 4 {
		c.Win.Resize(fyne.NewSize(w, h-1+float32(i%2)))
		refresh(c.Win.Content())
	}
	c.Win.Resize(fyne.NewSize(w, h))
	c.Win.Canvas().Capture()
}

func refresh(o fyne.CanvasObject) {
	for _, o := range test.LaidOutObjects(o) {
		if box, ok := o.(*fyne.Container); ok && box.Layout != nil {
			box.Layout.Layout(box.Objects, box.Size())
		}
	}
}

// LastError is the last error the station showed.
func (c *Context) LastError() error {
	if n := len(c.Failed); n > 0 {
		return c.Failed[n-1]
	}
	return nil
}

// Look writes a picture of the window when asked to.
func (c *Context) Look(name string) { Picture(c.T, c.Win, name) }

// SetTheme changes the theme; scale 0 is 1.
func (c *Context) SetTheme(dark bool, scale float32) {
	c.Dark = dark
	fyne.CurrentApp().Settings().SetTheme(widgets.Theme{Dark: dark, Scale: scale})
}

// Doc and the others implement station.Context.
func (c *Context) Doc() *document.Document  { return c.Document }
func (c *Context) Window() fyne.Window      { return c.Win }
func (c *Context) Clock() float64           { return c.Time }
func (c *Context) SetClock(t float64)       { c.Time = t }
func (c *Context) Duty() int                { return c.At }
func (c *Context) SetDuty(i int)            { c.At = i }
func (c *Context) Selected() (int, string)  { return -1, "" }
func (c *Context) Select(int, string)       {}
func (c *Context) System() units.System     { return c.Units }
func (c *Context) Go(name string)           { c.Went = append(c.Went, name) }
func (c *Context) Explain(f audit.Figure)   { c.Explained = append(c.Explained, f) }
func (c *Context) Keep(d dialog.Dialog)     { c.Kept = append(c.Kept, d) }
func (c *Context) Say(text string)          { c.Said = append(c.Said, text) }
func (c *Context) Fail(err error)           { c.Failed = append(c.Failed, err) }
func (c *Context) Palette() figures.Palette { return widgets.Theme{Dark: c.Dark}.Palette() }

// PickFile picks PickedFile.
func (c *Context) PickFile(_, _ string, _ []string, then func(path string)) {
	if c.PickedFile != "" {
		then(c.PickedFile)
	}
}

// PickPlace takes the name suggested, in the folder for scripts.
func (c *Context) PickPlace(_, name string, then func(path string)) {
	if dir := os.Getenv(station.SaveDirVariable); dir != "" {
		then(filepath.Join(dir, name))
	}
}

// Perform does it at once; with Cancelling it is cancelled before it begins.
func (c *Context) Perform(_ string, do func(context.Context, document.Progress) error, then func(error)) {
	ctx, stop := context.WithCancel(context.Background())
	defer stop()
	if c.Cancelling {
		stop()
	}
	then(do(ctx, func(string, int64, int64) {}))
}

// SaveFirst saves to SaveTo.
func (c *Context) SaveFirst(why string, then func()) {
	c.Said = append(c.Said, why)
	if c.SaveTo == "" {
		return
	}
	if err := c.Document.SaveAs(c.SaveTo); err != nil {
		c.Fail(err)
		return
	}
	then()
}

// Beside is the circuit picked, else the first there is.
func (c *Context) Beside() string {
	names := c.Document.File().Besides()
	if len(names) > 0 && !slices.Contains(names, c.Picked) {
		return names[0]
	}
	return c.Picked
}

// View is what the sheets show.
func (c *Context) View() *station.View { return &c.Seen }

// Pick takes another.
func (c *Context) Pick(circuit string) { c.Picked = circuit }

// Solution is the one held or that of the document, of two circuits.
func (c *Context) Solution() *audit.Solution {
	s := c.Held
	if s == nil {
		s, _ = c.Document.Solution()
	}
	return s.Beside(c.Beside())
}

// Report lays it out.
func (c *Context) Report() *audit.Report {
	if s := c.Solution(); s != nil {
		return s.Report(c.Units)
	}
	return nil
}

// Text writes a quantity in the user's unit.
func (c *Context) Text(si float64, d units.Dim, digits int) string {
	return c.Local(units.Format(si, units.Preferred(d, c.Units), digits))
}

// Local puts the decimal sign in.
func (c *Context) Local(text string) string {
	if w := c.Words(); w != nil {
		return w(text)
	}
	return text
}

// Words is Local as it is now.
func (c *Context) Words() func(string) string {
	if !c.Comma {
		return nil
	}
	return func(text string) string { return strings.ReplaceAll(text, ".", ",") }
}
