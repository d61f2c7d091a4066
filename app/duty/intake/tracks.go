package intake

import (
	"fmt"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit/logged"
)

// tracks is which channels make which tracks, by which law, and what comes of it.
type tracks struct {
	p       *Page
	content fyne.CanvasObject
	list    *fyne.Container
	made    []*trackRows
	shows   string
	axes    *fyne.Container
	shown   string // what axes lists
	add     *choice
	axis    *widgets.Field
	turns   *widgets.Check
	works   *widgets.Text
	plot    *widgets.ClockPlot
	ground  *canvas.Rectangle
}

// trackRows are the rows of one track.
type trackRows struct {
	says, fault *widgets.Text
	picks       map[string]*choice        // of channels, by key
	fields      map[string]*widgets.Field // of numbers, by key
}

func newTracks(p *Page) *tracks {
	t := &tracks{p: p, list: container.NewVBox(), axes: container.NewVBox()}
	t.add = p.newChoice("intake.track.add", nil, nil, t.addTrack)
	t.add.PlaceHolder = "Choose a track"
	t.axis = widgets.Name(widgets.NewField("", t.addAxis), "intake.axis.new")
	t.axis.SetPlaceHolder("name a new axis")
	t.turns = widgets.Name(widgets.NewCheck("turns", nil), "intake.axis.turns")
	t.works = widgets.Name(say("", widget.MediumImportance, false), "intake.works")
	t.plot = widgets.Name(widgets.NewClockPlot(fyne.NewSize(300, 120), p.ctx.Palette), "intake.plot")
	t.plot.Value = t.valueAt
	t.plot.Moved = t.plot.SetClock
	t.plot.Format = p.seconds
	t.ground = canvas.NewRectangle(p.ctx.Palette().Card)
	more := container.NewVBox(widget.NewSeparator(), widgets.Row("Add a track", t.add.Select, nil),
		widgets.Row("Add an axis", container.NewBorder(nil, nil, nil, t.turns, t.axis), nil), t.axes)
	left := container.NewVScroll(container.New(besideBar{}, container.NewVBox(t.list, more)))
	right := container.NewBorder(t.works, nil, nil, nil, container.NewStack(t.ground, container.NewVScroll(widgets.Spaced(t.plot))))
	split := container.NewHSplit(left, right)
	split.Offset = 0.4
	t.content = split
	return t
}

func (t *tracks) fill() {
	p := t.p
	if shows := t.key(); shows != t.shows {
		t.shows = shows
		t.rebuild()
	}
	for i, x := range p.tracks {
		r := t.made[i]
		for key, pick := range r.picks {
			pick.set(x.Says[key])
		}
		for key, field := range r.fields {
			field.SetValue(p.ctx.Local(x.Says[key]), "")
		}
		text := p.out.says[x.Name]
		if x.Law == logged.AsMeasured && text == "" {
			text = "as it was measured"
		}
		r.says.SetText(p.ctx.Local(text))
		fault := p.out.faults[x.Name]
		if fault != "" {
			fault = "⚠ " + fault
		}
		r.fault.SetText(p.ctx.Local(fault))
		show(r.fault, fault != "")
		show(r.says, fault == "")
	}
	options := t.options()
	t.add.offer(options, nil)
	if t.add.Selected != "" {
		t.add.ClearSelected()
	}
	t.fillAxes()
	t.works.SetText(p.ctx.Local(t.worksText()))
	t.ground.FillColor = p.ctx.Palette().Card
	t.ground.Refresh()
	t.fillPlot()
}

// key names what the rows are made for.
func (t *tracks) key() string {
	p := t.p
	s := fmt.Sprint(p.allAxes(), p.ctx.Local("0.0"))
	for _, x := range p.tracks {
		s += x.Name + x.Law
	}
	if p.rec != nil {
		s += p.rec.SHA256 + fmt.Sprint(p.src().recipe.Channels)
	}
	return s
}

// rebuild makes the rows of all tracks anew.
func (t *tracks) rebuild() {
	p := t.p
	t.list.Objects, t.made = nil, nil
	if len(p.tracks) == 0 {
		t.list.Add(say("No track yet. Add one below: what an axis does (speed or position), what it works against (load), what it is told (command), or what a measuring point showed.", widget.MediumImportance, false))
	}
	for i, x := range p.tracks {
		if i > 0 {
			t.list.Add(widget.NewSeparator())
		}
		r := &trackRows{says: widgets.Name(say("", widget.LowImportance, false), "intake.track."+x.Name+".formula"), fault: widgets.Name(say("", widget.DangerImportance, false), "intake.track."+x.Name+".fault"),
			picks: map[string]*choice{}, fields: map[string]*widgets.Field{}}
		t.made = append(t.made, r)
		t.list.Add(t.rows(x, r))
		t.list.Add(r.says)
		t.list.Add(r.fault)
	}
	t.list.Refresh()
}
