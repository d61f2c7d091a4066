package intake

import (
	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/layout"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
)

// header names the file, says what is going on, and makes the duty.
type header struct {
	p            *Page
	content      fyne.CanvasObject
	title, state *widget.Label
	name, hours  *widgets.Field
	bar          *widget.ProgressBar
	stop, make   *widgets.Button
	again        *widgets.Button // after Cancel
	running      *fyne.Container
	year         *yearRow
	hoursRow     *fyne.Container
}

func newHeader(p *Page) *header {
	h := &header{p: p}
	h.title = widgets.Name(widget.NewLabelWithStyle("", fyne.TextAlignLeading, fyne.TextStyle{Bold: true}), "intake.title")
	h.title.Truncation = fyne.TextTruncateEllipsis
	h.state = widgets.Name(widget.NewLabel(""), "intake.state")
	h.state.Truncation = fyne.TextTruncateEllipsis
	h.name = widgets.Name(widgets.NewField("", func(text string) error { h.name.SetValue(text, ""); h.fill(); return nil }), "intake.name")
	h.hours = widgets.Name(widgets.NewField("", h.takeHours), "intake.hours")
	h.hours.SetPlaceHolder("none yet")
	h.bar = widgets.Name(widget.NewProgressBar(), "intake.progress")
	h.stop = widgets.Name(widgets.NewButton("Cancel", p.interrupt), "intake.cancel")
	h.again = widgets.Name(widgets.NewButton("Read again", p.readAll), "intake.again")
	h.again.Hide()
	h.make = widgets.Name(widgets.NewButton("Make the duty", p.make), "intake.make")
	h.make.Importance = widget.HighImportance
	leave := widgets.Name(widgets.NewButton("Back", p.close), "intake.back")
	h.running = container.NewHBox(container.New(widgets.Wide(140), h.bar), h.stop)
	h.year = newYearRow(p)
	h.hoursRow = container.NewHBox(widget.NewLabel("Hours a year"), container.New(widgets.Wide(90), h.hours))
	own := container.NewHBox(widget.NewLabel("Duty"), container.New(widgets.Wide(200), h.name), h.hoursRow, layout.NewSpacer())
	h.content = container.NewVBox(
		container.NewBorder(nil, nil, nil, container.NewHBox(leave, h.make), h.title),
		container.NewBorder(nil, nil, own, container.NewHBox(h.again, h.running), h.state),
		h.year.content)
	return h
}

func (h *header) takeHours(text string) error {
	if _, err := hoursText(text); err != nil {
		return err
	}
	h.hours.SetValue(text, "")
	return nil
}

// fill says how things stand.
func (h *header) fill() {
	p := h.p
	if len(p.sources) == 0 {
		return
	}
	file := p.sources[0].file
	title := "Recording " + file.Name + ", " + station.FileSize(file.Size)
	for _, s := range p.sources[1:] {
		title += " and " + s.file.Name
	}
	if p.rec != nil {
		rec := p.rec
		n := len(rec.Time)
		title += fmt.Sprintf(" · %d rows, one every %s · %s", n, p.brief(rec.Interval), p.brief(rec.Time[n-1]-rec.Time[0]))
		if rec.Start != "" {
			title += " from " + rec.Start
		}
	}
	h.title.SetText(p.ctx.Local(title))
	text, importance := h.says()
	if h.state.Importance != importance {
		h.state.Importance = importance
		h.state.Refresh()
	}
	h.state.SetText(p.ctx.Local(text))
	show(h.running, p.job.says != "")
	show(h.again, p.job.says == "" && p.job.interrupted)
	h.bar.SetValue(p.job.share)
	word := "Make the duty"
	if p.again != "" {
		word = "Change the duty"
	}
	if h.make.Text != word {
		h.make.SetText(word)
	}
	if ready := p.ready() == ""; ready == h.make.Disabled() {
		if ready {
			h.make.Enable()
		} else {
			h.make.Disable()
		}
	}
	if p.again != "" {
		h.name.Disable()
		h.hours.Disable()
	} else {
		h.name.Enable()
		h.hours.Enable()
	}
	h.year.fill()
	show(h.hoursRow, h.year.inPlaceOf() == "")
}

// says is the state in words.
func (h *header) says() (string, widget.Importance) {
	p := h.p
	switch {
	case p.job.says != "":
		return p.job.says, widget.MediumImportance
	case p.job.failed != "":
		return "⚠ " + p.job.failed, widget.DangerImportance
	case p.job.interrupted:
		return "Cancelled. Nothing was changed.", widget.DangerImportance
	}
	if why := p.ready(); why != "" {
		return why, widget.WarningImportance
	}
	if p.again != "" {
		return "Changes the duty as one step of undo.", widget.LowImportance
	}
	return "Adds a duty as one step of undo; the recording stays as it is.", widget.LowImportance
}

// ready says what the duty cannot be made for, "" if nothing.
func (p *Page) ready() string {
	switch {
	case len(p.blocking()) > 0:
		return "The file leaves a question open; answer it under File."
	case p.job.says != "":
		return p.job.says
	case p.rec == nil:
		return "Nothing was read yet."
	case len(p.tracks) == 0:
		return "No track yet; add one under Tracks."
	case len(p.out.faults) > 0:
		return "A track is at fault; see Tracks."
	case p.out.shown == nil:
		return "⚠ " + p.out.none
	case p.head.name.Text == "":
		return "Give the duty a name."
	}
	return ""
}
