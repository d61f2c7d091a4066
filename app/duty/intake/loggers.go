package intake

import (
	"fmt"
	"path/filepath"
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/whole"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
)

// loggers is which files make the recording, and which other loggers stand beside it with
// their clocks.
type loggers struct {
	p       *Page
	content fyne.CanvasObject
	list    *fyne.Container
	shows   string
	clocks  []*clockRows
}

func newLoggers(p *Page) *loggers {
	l := &loggers{p: p, list: container.NewVBox()}
	l.content = container.NewVScroll(container.New(besideBar{}, l.list))
	return l
}

// fill shows the loggers; rows are made anew where files or channels changed.
func (l *loggers) fill() {
	p := l.p
	shows := fmt.Sprint(p.hand, p.ctx.Local("0.0"))
	for _, s := range p.sources {
		shows += fmt.Sprint(s.paths, s.recipe.Channels, s.kept != nil, s.clock.Channel != "", s.clock.Offset != "")
	}
	if shows != l.shows {
		l.shows = shows
		l.rebuild()
	}
	for _, c := range l.clocks {
		c.fill()
	}
}

func (l *loggers) rebuild() {
	p := l.p
	l.list.Objects, l.clocks = []fyne.CanvasObject{say("A recording that the logger split goes on in further files. What another logger recorded at the same time stands beside it once its clock is set; its channels then make tracks as well. Several files can be dropped here at once: those with the columns of a logger go on there, others are further loggers.", widget.MediumImportance, false)}, nil
	for i := range p.sources {
		l.list.Add(l.card(i))
	}
	more := widgets.Name(widgets.NewTipButton("Add another logger…", "sets the channels of a second recording beside these", func() {
		p.pick("The recording of another logger", p.addLogger)
	}), "intake.logger.add")
	l.list.Add(container.NewHBox(more))
	l.list.Refresh()
}

// card has the files of one logger, what was read of them, and its clock.
func (l *loggers) card(i int) fyne.CanvasObject {
	p, s := l.p, l.p.sources[i]
	name := fmt.Sprintf("intake.logger%d", i+1)
	box := container.NewVBox()
	for k, path := range s.paths {
		box.Add(l.fileRow(i, k, path, fmt.Sprintf("%s.file%d", name, k+1)))
	}
	box.Add(widgets.Name(say(p.ctx.Local(s.says(p)), widget.LowImportance, false), name+".says"))
	for _, c := range s.joints() {
		importance := widget.MediumImportance
		text := strings.ToUpper(c.String()[:1]) + c.String()[1:] + "."
		if c.Warns {
			text, importance = "⚠ "+text, widget.DangerImportance
		}
		box.Add(widgets.Name(say(p.ctx.Local(text), importance, false), name+"."+strings.ReplaceAll(c.Key, " ", "")))
	}
	if i > 0 {
		c := newClockRows(p, s, name)
		l.clocks = append(l.clocks, c)
		box.Add(c.content)
	}
	goes := widgets.Name(widgets.NewTipButton("Add a file that goes on…", "the next file of a recording that was split", func() {
		p.pick("The next file of the recording", func(path string) error { return p.addFile(s, path) })
	}), name+".addfile")
	buttons := container.NewHBox(goes)
	if len(p.sources) > 1 {
		see := widgets.Name(widgets.NewTipButton("How it is read", "shows this logger under File and Columns", func() {
			p.hand = i
			p.open(fileTab)
		}), name+".show")
		buttons.Add(see)
	}
	if i > 0 {
		buttons.Add(layout.NewSpacer())
		buttons.Add(widgets.Name(widgets.NewTipButton("Remove this logger", "takes its channels away again", func() { p.removeLogger(s) }), name+".remove"))
	}
	box.Add(buttons)
	title := "The recording: its rows are those of the duty"
	if i > 0 {
		title = fmt.Sprintf("Logger %d: its channels are read at those rows", i+1)
	}
	return widgets.Card(title, box)
}

// fileRow is one file, which can be moved up and taken out where there are several.
func (l *loggers) fileRow(i, k int, path, name string) fyne.CanvasObject {
	p, s := l.p, l.p.sources[i]
	label := widgets.Name(widget.NewLabel(filepath.Base(path)), name)
	label.Truncation = fyne.TextTruncateEllipsis
	if len(s.paths) == 1 {
		return label
	}
	change := func(do func(paths []string) []string) {
		if err := p.setFiles(s, do(slices.Clone(s.paths))); err != nil {
			p.ctx.Fail(err)
		}
	}
	up := widgets.Name(widgets.NewTipButton("Earlier", "puts it before the file above", func() {
		change(func(x []string) []string { x[k-1], x[k] = x[k], x[k-1]; return x })
	}), name+".up")
	out := widgets.Name(widgets.NewTipButton("Remove", "takes the file out", func() {
		change(func(x []string) []string { return slices.Delete(x, k, k+1) })
	}), name+".remove")
	if k == 0 {
		up.Disable()
	}
	return container.NewBorder(nil, nil, nil, container.NewHBox(up, out), label)
}

// says is what was read of a logger.
func (s *source) says(p *Page) string {
	switch {
	case len(s.blocking()) > 0:
		return "⚠ The file leaves a question open; answer it under File."
	case s.kept == nil:
		return station.FileSize(s.file.Size) + ", not read yet."
	}
	rec := s.kept.Recording()
	n := len(rec.Time)
	text := fmt.Sprintf("%s, %d rows, one every %s, %s", station.FileSize(s.file.Size), n, p.brief(rec.Interval), p.brief(rec.Time[n-1]-rec.Time[0]))
	if rec.Start != "" {
		text += " from " + rec.Start
	}
	var names []string
	for _, c := range rec.Series {
		names = append(names, c.Column)
	}
	return text + ". Channels: " + strings.Join(names, ", ") + "."
}

// joints is what was found where its files follow one another.
func (s *source) joints() (out []logger.Correction) {
	if s.kept == nil || len(s.paths) < 2 {
		return nil
	}
	for _, c := range s.kept.Recording().Corrections {
		if c.Key == "joined" || c.Key == "overlap" || c.Key == "gap between files" {
			out = append(out, c)
		}
	}
	return out
}

// pick asks for a file and says why it cannot be taken.
func (p *Page) pick(title string, take func(path string) error) {
	p.ctx.PickFile(title, "Add", station.RecordingEndings, func(path string) {
		if err := take(path); err != nil {
			p.ctx.Fail(err)
		}
	})
}

// has reports whether a file is among those of the duty.
func (p *Page) has(path string) bool {
	return slices.ContainsFunc(p.sources, func(s *source) bool { return slices.Contains(s.paths, path) })
}

// addFile lets a recording go on in a further file.
func (p *Page) addFile(s *source, path string) error {
	if p.has(path) {
		return fmt.Errorf("%s is there already; choose another file", filepath.Base(path))
	}
	return p.setFiles(s, append(slices.Clone(s.paths), path))
}

// setFiles changes the files of a recording; how they are read stays.
func (p *Page) setFiles(s *source, paths []string) error {
	file, err := logger.OpenFiles(paths...)
	if err != nil {
		return fmt.Errorf("%s cannot be opened: %w", filepath.Base(paths[len(paths)-1]), whole.Plain(err))
	}
	s.paths, s.file, s.kept = paths, file, nil
	p.readAll()
	return nil
}

// addLogger sets the recording of another logger beside the first, with the clock that is likely.
func (p *Page) addLogger(path string) error {
	if p.has(path) {
		return fmt.Errorf("%s is there already; choose another file", filepath.Base(path))
	}
	s, err := newSource(path)
	if err != nil {
		return err
	}
	s.clock = audit.LikelyClock(p.sources[0].recipe, s.recipe)
	p.sources = append(p.sources, s)
	if len(s.blocking()) > 0 {
		p.hand, p.at = len(p.sources)-1, fileTab
	}
	p.readAll()
	return nil
}

// removeLogger takes a logger away, with the tracks that were made of its channels.
func (p *Page) removeLogger(s *source) {
	if s.kept != nil {
		rec := s.kept.Recording()
		gone := map[string]bool{}
		for _, c := range rec.Series {
			gone[c.Column+logger.Of(rec.Name)] = true
			gone[c.Column] = p.rec == nil || p.rec.Find(c.Column+logger.Of(rec.Name)) == nil
		}
		p.tracks = slices.DeleteFunc(slices.Clone(p.tracks), func(x logged.Track) bool {
			for _, text := range x.Says {
				if gone[text] {
					delete(p.known, x.Name)
					return true
				}
			}
			return false
		})
	}
	p.sources = slices.DeleteFunc(slices.Clone(p.sources), func(x *source) bool { return x == s })
	p.hand = 0
	p.readAll()
}
