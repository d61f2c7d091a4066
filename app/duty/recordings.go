package duty

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/duty/intake"
	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
)

// recordings is the page on which a recording becomes a duty, over the station.
type recordings struct {
	s    *Station
	page *intake.Page
	open bool
}

func newRecordings(s *Station) *recordings {
	r := &recordings{s: s, page: intake.New(s.ctx)}
	r.page.Leave = func() { r.show(false) }
	r.page.Content().Hide()
	return r
}

// show puts the page over the station, or takes it away.
func (r *recordings) show(on bool) {
	r.open = on
	show(r.page.Content(), on)
	show(r.s.station, !on)
	if !on {
		r.s.reload()
	}
}

// button begins with a recording.
func (r *recordings) button(name string) fyne.CanvasObject {
	return widgets.Name(widgets.NewTipButton("From a recording…", "makes a duty of what a data logger wrote", r.s.PickRecording), name)
}

// PickRecording asks for the file of a logger.
func (s *Station) PickRecording() {
	s.ctx.PickFile("A data logger's recording", "Open", station.RecordingEndings, func(path string) { s.begin(path) })
}

// TakeIn opens the page with the files of loggers, or adds them where it shows its loggers.
func (s *Station) TakeIn(paths ...string) {
	if r := s.recordings; r.open && r.page.AtLoggers() {
		if err := r.page.Add(paths...); err != nil {
			s.ctx.Fail(err)
		}
		return
	}
	s.begin(paths...)
}

// begin opens the page with the files of loggers.
func (s *Station) begin(paths ...string) {
	if err := s.recordings.page.Open(paths...); err != nil {
		s.ctx.Fail(err)
		return
	}
	s.recordings.show(true)
}

// imported is how the duty at hand was imported, nil where it was not.
func (s *Station) imported() *audit.Import {
	f := s.ctx.Doc().File()
	if i := s.ctx.Duty(); f != nil && i >= 0 && i < len(f.Imports) {
		return f.Imports[i]
	}
	return nil
}

// changeImport opens the page with the duty at hand. It reads the file anew.
func (s *Station) changeImport() {
	if err := s.recordings.page.Reopen(s.ctx.Duty()); err != nil {
		s.ctx.Fail(err)
		return
	}
	s.recordings.show(true)
}

// importNotes say where an imported duty comes from, what was done to it, and how to change that.
func (s *Station) importNotes(im *audit.Import) {
	text := fmt.Sprintf("Imported from %s: %d rows, SHA-256 %s.", strings.Join(append([]string{im.File}, im.More...), ", "), im.Rows, im.SHA256)
	for _, a := range im.Also {
		text += fmt.Sprintf(" Beside it %s, SHA-256 %s: %s.", strings.Join(a.Files, ", "), a.SHA256, a.How)
	}
	if !im.Part.Whole() {
		text += fmt.Sprintf(" The duty is its %s, from %s to %s.", im.Part.Is, s.seconds(im.Part.From), s.seconds(im.Part.To))
	}
	s.source.SetText(s.ctx.Local(text))
	s.notes.Add(s.source)
	change := widgets.Name(widgets.NewButton("Change the import…", s.changeImport), "duty.import.change")
	buttons := container.NewHBox(change)
	if im.Expected != "" && im.Expected != im.SHA256 {
		change.SetText("Read it anew…")
		change.Importance = widget.HighImportance
	}
	s.notes.Add(buttons)
	for i, c := range im.Corrections {
		if c.Warns {
			continue // stands among the findings
		}
		s.note(fmt.Sprintf("correction%d", i+1), s.ctx.Local(strings.ToUpper(c.String()[:1])+c.String()[1:]+"."), widget.MediumImportance, false)
	}
	for _, d := range im.Derived {
		s.note("derived."+d.Track, s.ctx.Local(d.Track+": "+d.Formula+"."), widget.LowImportance, false)
	}
}
