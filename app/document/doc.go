// Package document is the open audit: its text and how it is edited, undone, saved
// and kept against a crash, and the solution that follows every edit in the
// background. It has no window and calculates nothing itself.
//
// # Revisions
//
// Each change of the text (an edit, an undo, another file opened) makes a new
// revision; revisions only grow. The newest one is solved at once and one at a time:
// an edit ends the solving of the revision before it. Solution returns the last one
// that finished, with its revision; Current says whether that is the present one.
//
// # Threads
//
// All methods may be called from any goroutine, while solving runs. None waits for
// the solver but Close and Abandon; Open, Save, SaveAs and Recover wait for the disk.
// A File or a Solution that was handed out is never changed again, and must not be
// changed by who has it. Events are sent without a lock held, from the goroutine
// that caused them or from the solver's; a receiver may call every method but Close
// and Abandon.
//
// # What is kept against a crash
//
// Unsaved changes are written to a hidden file beside the audit a few seconds after
// they were made, or in the folder of the program's settings where that cannot be
// done or the audit has no file yet. The file goes when the audit is saved or closed;
// after a crash Recoverable lists it.
//
//	d := document.New(document.Options{Config: folder, Notify: redraw})
//	problems, err := d.Open("press.yaml")
//	err = d.Set("RV1.crack", "170 bar") // solved in the background; redraw is told
//	s, revision := d.Solution()
//	name, ok := d.Undo()
//	err = d.Save()
package document
