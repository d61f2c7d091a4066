// Package station is what the stations of the job share: the interface the frame
// sees them by, and the context they read and act through. A station shows and
// sends edits; it computes nothing.
package station

import (
	"context"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"

	"barlitre/app/document"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// What says what has changed, as a set.
type What int

// What may have changed.
const (
	Model     What = 1 << iota // the audit file: blocks, values, duties
	Solution                   // a new result, or the last one is out of date
	Clock                      // the clock moved
	Settings                   // theme, units, decimal sign, scale
	Selection                  // another block, circuit or duty is selected
	Advice                     // what is to be put right first, or how far the work on it is
	Reading                    // values at the clock: with every move of it, but while it runs no more often than they can be read
)

// Has reports whether w holds x.
func (w What) Has(x What) bool { return w&x != 0 }

// Everything is what changes when another file is opened.
const Everything = Model | Solution | Clock | Settings | Selection | Advice | Reading

// Station is one page of the job. All methods are called on the UI goroutine.
type Station interface {
	// Name is the word on the job rail.
	Name() string
	// Content is made once.
	Content() fyne.CanvasObject
	// Changed tells a station that is shown what changed; one that is not shown
	// gets all of it at once when it is.
	Changed(w What)
	// Mend reports whether something here needs mending: a dot on the rail.
	Mend() bool
	// Help is the short help of the station, in plain text with paragraphs.
	Help() string
}

// Recordings is a station that takes in what a logger recorded.
type Recordings interface {
	// PickRecording asks for a file. TakeIn begins with files, or adds them to what is being
	// taken in where its loggers are shown.
	PickRecording()
	TakeIn(paths ...string)
}

// RecordingEndings are how names of loggers' files end.
var RecordingEndings = []string{".csv", ".tsv", ".txt", ".dat", ".asc", ".log", ".prn"}

// Paged is a station of several pages.
type Paged interface {
	// ShowPage brings a page to the front by the name on its button.
	ShowPage(name string)
}

// View says how sheets show results: by which signs, and of what time their heat is.
type View struct {
	Cycle bool          // discs show a cycle instead of an instant
	Hide  figures.Signs // signs that are left out
}

// Context is what stations read and act through. The frame implements it.
type Context interface {
	Doc() *document.Document
	Window() fyne.Window

	// Clock is the time into the duty at hand [s].
	Clock() float64
	SetClock(t float64)
	// Duty is the index of the duty at hand.
	Duty() int
	SetDuty(i int)
	// Selected is the block at hand; circuit is an index into the file's circuits, −1 = none.
	Selected() (circuit int, block string)
	Select(circuit int, block string)

	// Beside is the name of the circuit that stands beside the one as found, "" for none;
	// of several the user picks one, and all stations follow.
	Beside() string
	Pick(circuit string)

	// View is what the sheets show of the results, for what prints them as they are seen.
	View() *View

	// Solution is the last finished one, nil before the first; it may be of an
	// older revision (then the frame says "out of date"). It has the circuit as found and
	// the one beside it; that of the document has all.
	Solution() *audit.Solution
	// Report lays this solution out in the user's units, nil before the first solution.
	Report() *audit.Report

	System() units.System
	// Text writes a quantity in the user's unit for its dimension, with the user's decimal sign.
	Text(si float64, d units.Dim, digits int) string
	// Local puts the user's decimal sign into a printed text or number.
	Local(text string) string
	// Words is what Local does now, also for use behind the window; nil if it does nothing.
	Words() func(text string) string
	Palette() figures.Palette

	// PickFile asks for a file to read; endings are like ".csv".
	PickFile(title, verb string, endings []string, then func(path string))
	// PickPlace asks for the name of a file to save, name suggested; its ending is added to one
	// without. What is there is replaced only by writing, which must be whole or not at all.
	PickPlace(title, name string, then func(path string))
	// Perform does what may take long behind the window, with progress and Cancel before it, and
	// then goes on in the window. Progress is told in bytes of a file, or with no name as a share
	// of balancing the circuits. Cancelled, the error that do returns is to be context.Canceled.
	Perform(title string, do func(ctx context.Context, tell document.Progress) error, then func(err error))
	// SaveFirst says why the audit needs a place, lets the user give it one, then goes on.
	SaveFirst(why string, then func())
	// Go shows a station by name, or a page of one that is Paged by "station/page".
	Go(name string)
	// Keep takes a dialog that the station has shown: Escape then closes it, and the menu waits.
	Keep(d dialog.Dialog)
	// Explain opens the calculation of a figure.
	Explain(f audit.Figure)
	// Say shows a short message in the frame; Fail shows what went wrong and what is still safe.
	Say(text string)
	Fail(err error)
}
