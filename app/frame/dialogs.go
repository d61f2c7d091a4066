package frame

import (
	"context"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/storage"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/samples"
)

func (f *Frame) tellFailure(text string) {
	f.ask("This did not work", paragraph(text, 460), answer{verb: "Close"})
}

// leave asks what to do with unsaved changes, then goes on.
func (f *Frame) leave(then func()) {
	if !f.doc.Dirty() {
		then()
		return
	}
	f.ask("Unsaved changes", paragraph(strings.TrimSuffix(f.doc.Title(), "*")+" has changes that are not saved.", 420),
		answer{verb: "Save", do: func() { f.save(then) }},
		answer{verb: "Discard", danger: true, do: then},
		answer{verb: "Cancel"})
}

// quit closes the window once unsaved changes are dealt with.
func (f *Frame) quit() {
	f.leave(func() {
		f.closed = true
		f.status.clear()
		f.player.stop()
		size := f.win.Canvas().Size()
		f.settings.width, f.settings.height = size.Width, size.Height
		f.settings.write(f.app.Preferences())
		f.dumper.stop()
		if f.working != nil {
			f.working.stop() // the document waits for it
		}
		if err := f.doc.Abandon(); err != nil {
			fyne.LogError("close", err)
		}
		f.win.Close()
	})
}

func (f *Frame) open(path string) { f.openThen(path, func() {}) }

// openThen is open; next is called when that is over, whether it worked or not.
func (f *Frame) openThen(path string, next func()) {
	var problems []circuit.Finding
	f.Perform("Opening "+filepath.Base(path), func(ctx context.Context, tell document.Progress) (err error) {
		problems, err = f.doc.OpenWith(ctx, path, tell)
		return err
	}, func(err error) {
		switch n := len(problems); {
		case f.cancelled(err, "The audit that was open stays as it was."):
		case err != nil:
			f.Fail(err)
		case n > 0:
			f.Say(plural(n, "finding", "findings") + " in " + filepath.Base(path) + "; they stand on the Circuit station")
		default:
			f.Say("Opened " + path)
		}
		next()
	})
}

func plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return strconv.Itoa(n) + " " + many
}

func (f *Frame) openSample(name string) {
	if err := f.doc.OpenSample(name); err != nil {
		f.Fail(err)
	}
}

// openEmpty begins an audit with nothing drawn.
func (f *Frame) openEmpty() {
	if err := f.doc.OpenEmpty(); err != nil {
		f.Fail(err)
		return
	}
	f.show(0)
	f.Say("An empty circuit. Press / on the sheet to add a first block, then drag from port to port to connect.")
}

// openStarter opens a starter and says what to do with it.
func (f *Frame) openStarter(s samples.Starter) {
	if err := f.doc.OpenStarter(s.Name); err != nil {
		f.Fail(err)
		return
	}
	f.Say(s.Title + ", invented data. The note in the report says what gives its losses away; click a block to put your own numbers in.")
}

func (f *Frame) askOpen() {
	d := dialog.NewFileOpen(func(r fyne.URIReadCloser, err error) {
		if err != nil {
			f.Fail(err)
		} else if r != nil {
			path := r.URI().Path()
			r.Close()
			f.open(path)
		}
	}, f.win)
	d.SetFilter(storage.NewExtensionFileFilter([]string{".yaml", ".yml"}))
	f.showFiles(d, "Open an audit", "Open")
}

// PickFile asks for a file to read. Scripts may give it instead.
func (f *Frame) PickFile(title, verb string, endings []string, then func(path string)) {
	if path := os.Getenv(openFileVariable); path != "" {
		then(path)
		return
	}
	d := dialog.NewFileOpen(func(r fyne.URIReadCloser, err error) {
		if err != nil {
			f.Fail(err)
		} else if r != nil {
			path := r.URI().Path()
			r.Close()
			f.pickedIn = filepath.Dir(path)
			then(path)
		}
	}, f.win)
	var both []string
	for _, e := range endings {
		both = append(both, e, strings.ToUpper(e))
	}
	d.SetFilter(storage.NewExtensionFileFilter(both))
	f.showFilesIn(d, f.pickFolder(), title, verb)
}

// openFileVariable names the file that scripts pick, without a dialog.
const openFileVariable = "BARLITRE_OPEN_FILE"

// SaveFirst says why the audit needs a place, and asks for one.
func (f *Frame) SaveFirst(why string, then func()) {
	f.ask("Save the audit first", paragraph(why, 420), answer{verb: "Save as…", do: func() { f.saveAs(then) }}, answer{verb: "Cancel"})
}

// recordings is the station that takes recordings in, shown first.
func (f *Frame) recordings(do func(station.Recordings)) {
	for i, s := range f.stations {
		if r, ok := s.(station.Recordings); ok {
			f.show(i)
			do(r)
			return
		}
	}
}

// dropped opens an audit, or takes recordings in, several at once.
func (f *Frame) dropped(paths ...string) {
	if f.asking() || len(paths) == 0 {
		return
	}
	recording := func(path string) bool {
		return slices.Contains(station.RecordingEndings, strings.ToLower(filepath.Ext(path)))
	}
	if recording(paths[0]) {
		f.recordings(func(r station.Recordings) {
			r.TakeIn(slices.DeleteFunc(paths, func(path string) bool { return !recording(path) })...)
		})
		return
	}
	f.leave(func() { f.open(paths[0]) })
}

// auditFolder is where the open file is; for one without a name the folder that was last
// used, else that of the user.
func (f *Frame) auditFolder() string {
	if p := f.doc.Path(); p != "" {
		return filepath.Dir(p)
	}
	if f.pickedIn != "" {
		return f.pickedIn
	}
	dir, _ := os.UserHomeDir()
	return dir
}

// pickFolder is where a file to read is looked for: where the last one was, else beside the audit.
func (f *Frame) pickFolder() string {
	if f.pickedIn != "" {
		return f.pickedIn
	}
	return f.auditFolder()
}

// showFiles opens a file dialog where the open file is.
func (f *Frame) showFiles(d *dialog.FileDialog, title, verb string) {
	f.showFilesIn(d, f.auditFolder(), title, verb)
}

func (f *Frame) showFilesIn(d *dialog.FileDialog, dir, title, verb string) {
	d.SetTitleText(title)
	d.SetConfirmText(verb)
	d.SetView(dialog.ListView)
	if l, err := storage.ListerForURI(storage.NewFileURI(dir)); err == nil {
		d.SetLocation(l)
	}
	k, room := widgets.Scale(), f.win.Canvas().Size()
	d.Resize(fyne.NewSize(min(760*k, room.Width-40), min(520*k, room.Height-40)))
	d.Show()
	f.Keep(d)
}

// save saves, asking for a name where there is none, then goes on.
func (f *Frame) save(then func()) {
	if f.doc.Path() == "" {
		f.saveAs(then)
		return
	}
	f.saved(f.doc.Save(), then)
}

// saveUnder saves under a name, with the recordings.
func (f *Frame) saveUnder(path string, then func()) {
	f.Perform("Saving "+filepath.Base(path), func(ctx context.Context, tell document.Progress) error { return f.doc.SaveAsWith(ctx, path, tell) },
		func(err error) { f.saved(err, then) })
}

func (f *Frame) saved(err error, then func()) {
	if f.cancelled(err, "Nothing was saved there; the audit stays open as it is.") {
		return
	}
	if err != nil {
		f.Fail(err)
		return
	}
	f.Say("Saved " + f.doc.Path())
	f.changed(station.Model)
	if then != nil {
		then()
	}
}

// saveAs asks for a name; in scripts it is always the same.
func (f *Frame) saveAs(then func()) {
	name := f.suggestedName()
	if os.Getenv(saveDirVariable) != "" {
		name = "audit.yaml"
	}
	f.PickPlace("Save the audit as", name, func(path string) { f.saveUnder(path, then) })
}

// suggestedName is the name that a file dialog begins with: that of the open file or sample.
func (f *Frame) suggestedName() string {
	if p := f.doc.Path(); p != "" {
		return filepath.Base(p)
	}
	if name, _, ok := strings.Cut(f.doc.Title(), " (sample)"); ok {
		return name + ".yaml"
	}
	return "audit.yaml"
}

// offerRecovery offers what an earlier run kept before it ended without closing.
func (f *Frame) offerRecovery() {
	list := f.doc.Recoverable()
	if len(list) == 0 {
		return
	}
	r := list[0]
	name := r.Path
	if name == "" {
		name = "an audit without a name"
	}
	f.ask("Recover unsaved work?", paragraph("The program ended without closing. Changes to "+name+" were kept at "+r.When.Format("2006-01-02 15:04:05")+".", 460),
		answer{verb: "Recover", do: func() { f.leave(func() { f.recover(r) }) }},
		answer{verb: "Discard", danger: true, do: func() {
			if err := f.doc.Discard(r); err != nil {
				f.Fail(err)
			}
		}},
		answer{verb: "Later"})
}

func (f *Frame) recover(r document.Recovery) {
	f.Perform("Recovering "+r.Name, func(ctx context.Context, tell document.Progress) error { return f.doc.RecoverWith(ctx, r, tell) }, func(err error) {
		switch {
		case f.cancelled(err, "What was kept is still there, and is offered at the next start."):
		case err != nil:
			f.Fail(err)
		default:
			f.Say("Recovered. Save it to keep it.")
		}
	})
}

// Explain opens the calculation of a figure: formula, numbers, sources.
func (f *Frame) Explain(x audit.Figure) {
	line := func(title, text string) fyne.CanvasObject {
		head := widget.NewLabelWithStyle(title, fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
		return container.NewVBox(head, paragraph(f.Local(text), 520))
	}
	content := container.NewVBox(
		widgets.Name(widget.NewLabelWithStyle(f.Local(x.Text), fyne.TextAlignLeading, fyne.TextStyle{Bold: true}), "explain.value"),
		line("Formula", x.Calculation.Formula), line("Numbers", x.Calculation.Numbers), line("Source", x.Calculation.Source))
	f.ask("Calculation: "+x.Name, content, answer{verb: "Close"})
}

// help shows the short help of the station at hand.
func (f *Frame) help() {
	s := f.stations[f.current]
	k, room := widgets.Scale(), f.win.Canvas().Size()
	width := min(560, (room.Width-80)/k)
	f.ask("Help: "+s.Name(), container.NewVScroll(paragraph(s.Help()+"\n\n"+frameHelp, width)), answer{verb: "Close"}).d.
		Resize(fyne.NewSize((width+50)*k, min(460*k, room.Height-40)))
}

// frameHelp is what holds at every station.
const frameHelp = `Everywhere: the line at the top is the verdict; a click on one of its figures opens how it was calculated. It follows every change by itself; there is nothing to start.

The strip below shows the duty at hand. Drag in it to move the clock, or with the strip in focus press the arrow keys, Page Up and Page Down, Home and End; Space lets the clock run, as fast as chosen beside Play: fitted, or so many times as fast as time.

Ctrl+1 to Ctrl+6 go to the stations. Tab goes to the next field or button, Ctrl+Z takes a change back, Ctrl+Y does it again. Escape brings the old value back into a field.

Values can be typed with any unit, as in 2300 psi or 45 gpm, with a decimal point or comma. View sets units, decimal sign, light or dark, and the size of everything.`

func (f *Frame) about() {
	f.ask("About Barlitre", paragraph("Barlitre balances oil-hydraulic circuits over a duty cycle and audits throttled control against displacement control: energy, heat, cooler, money.\n\n"+
		"1 bar × 1 litre = 100 J: the unit of what a valve burns.\n\n"+
		"Results are estimates from a steady balance. They do not show that a load is held, a pressure limited or a machine safe. "+
		"Work on pressure systems is for qualified persons, and local rules come first.\n\nSymbols are based on ISO 1219-1. Licence: MIT.", 520), answer{verb: "Close"})
}
