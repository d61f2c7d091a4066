package report

import (
	"context"
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"strings"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pdf"
	"barlitre/audit/whole"
)

const saveDirVariable = station.SaveDirVariable

// today is the date of the report.
var today = time.Now

// progressEvery keeps progress from flooding the window's queue.
const progressEvery = 50 * time.Millisecond

// saver writes what leaves the program, one file or folder at a time.
type saver struct {
	ctx     station.Context
	options func() pdf.Options
	content fyne.CanvasObject
	buttons []*widgets.TipButton
	bar     *widget.ProgressBar
	cancel  *widgets.Button
	working *fyne.Container
	busy    bool
	stop    context.CancelFunc
	start   func(func())
}

func newSaver(ctx station.Context, options func() pdf.Options) *saver {
	s := &saver{ctx: ctx, options: options, stop: func() {}, start: func(work func()) { go work() }}
	button := func(name, text, tip string, do func()) *widgets.TipButton {
		b := widgets.Name(widgets.NewTipButton(text, tip, do), name)
		s.buttons = append(s.buttons, b)
		return b
	}
	asPDF := button("report.pdf", "Save PDF…", "the report of the audit as it stands, even while the pages here are older", s.savePDF)
	asPDF.Importance = widget.HighImportance
	asCSV := button("report.csv", "Save CSV…", "every time step of each circuit and duty, as tables in a folder", s.saveCSV)
	asJSON := button("report.json", "Save JSON…", "all results as numbers in SI units", s.saveJSON)
	s.bar = widgets.Name(widget.NewProgressBar(), "report.progress")
	s.cancel = widgets.Name(widgets.NewButton("Cancel", func() { s.stop() }), "report.cancel")
	s.working = container.NewBorder(nil, nil, nil, s.cancel, s.bar)
	s.working.Hide()
	s.content = container.NewVBox(s.working, container.New(&buttonRow{}, asPDF, asCSV, asJSON))
	s.refresh()
	return s
}

// refresh lets the buttons be pressed where there is something to save.
func (s *saver) refresh() {
	for _, b := range s.buttons {
		if s.busy || s.ctx.Solution() == nil {
			b.Disable()
		} else {
			b.Enable()
		}
	}
}

// base is the name of the audit without its ending.
func (s *saver) base() string {
	name := strings.TrimSuffix(s.ctx.Doc().Title(), "*")
	name = strings.TrimSuffix(name, " (sample)")
	return strings.TrimSuffix(name, filepath.Ext(name))
}

func (s *saver) savePDF() {
	opt := s.options()
	s.saveFile("the report", ".pdf", func(ctx context.Context, w io.Writer, r *audit.Solution) error {
		a, err := s.ctx.Doc().AdviceOn(ctx, r, opt.System, s.progress())
		if err != nil {
			return err
		}
		return pdf.Write(w, r, withAdvice(opt, a))
	})
}

func (s *saver) saveJSON() {
	system := s.ctx.System()
	s.saveFile("the results", ".json", func(ctx context.Context, w io.Writer, r *audit.Solution) error {
		a, err := s.ctx.Doc().AdviceOn(ctx, r, system, s.progress())
		if err != nil {
			return err
		}
		out := r.Result()
		for _, l := range a.Ladders {
			out.FixFirst = append(out.FixFirst, l.Result())
		}
		return out.Write(w)
	})
}

// saveFile asks for a name and writes one file.
func (s *saver) saveFile(what, ext string, write func(context.Context, io.Writer, *audit.Solution) error) {
	do := func(path string) {
		s.work(what, path, func(ctx context.Context, progress func(int, int)) error {
			r, err := s.ctx.Doc().Settled(ctx, progress)
			if err != nil {
				return err
			}
			return station.WriteWhole(path, func(w io.Writer) error { return write(ctx, w, r) })
		})
	}
	s.ctx.PickPlace("Save "+what, s.base()+ext, do)
}

// work runs in the background with progress and a way to cancel, and says how it ended.
func (s *saver) work(what, where string, do func(ctx context.Context, progress func(done, total int)) error) {
	if s.busy {
		return
	}
	ctx, stop := context.WithCancel(context.Background())
	s.busy, s.stop = true, stop
	s.bar.SetValue(0)
	s.working.Show()
	s.refresh()
	s.start(func() {
		err := station.Guarded(func() error { return do(ctx, s.progress()) })
		fyne.Do(func() {
			stop()
			s.busy = false
			s.working.Hide()
			s.refresh()
			s.ended(what, where, err)
		})
	})
}

// progress returns what takes the progress of one solve, which comes one call at a time.
func (s *saver) progress() func(done, total int) {
	var last time.Time
	return func(done, total int) {
		if now := time.Now(); total > 0 && now.Sub(last) >= progressEvery {
			last = now
			fyne.Do(func() { s.bar.SetValue(float64(done) / float64(total)) })
		}
	}
}

func (s *saver) ended(what, where string, err error) {
	var part *whole.PartError
	switch {
	case err == nil:
		s.ctx.Say("Saved " + what + ": " + where)
	case errors.Is(err, context.Canceled):
		s.ctx.Say("Saving was cancelled; nothing was written.")
	case errors.As(err, &part):
		s.ctx.Fail(fmt.Errorf("save %s to %s: %w; the audit with its results is still open here", what, where, err))
	default:
		s.ctx.Fail(fmt.Errorf("save %s to %s: %w; nothing was written there, and the audit with its results is still open here", what, where, whole.Plain(err)))
	}
}
