package intake

import (
	"fmt"
	"regexp"
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/machines/units"
)

// tracks is which channels make which tracks, by which law, and what comes of it.
type tracks struct {
	p       *Page
	content fyne.CanvasObject
	list    *fyne.Container
	made    []*trackRows
	shows   string
	axes    *fyne.Container
	add     *choice
	axis    *widgets.Field
	turns   *widgets.Check
	works   *widget.Label
	plot    *widgets.ClockPlot
	ground  *canvas.Rectangle
}

// trackRows are the rows of one track.
type trackRows struct {
	says, fault *widget.Label
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

var axisName = regexp.MustCompile(`^[\pL\pN_]+$`)

// addAxis keeps an axis to be made with the duty.
func (t *tracks) addAxis(text string) error {
	p := t.p
	if text == "" {
		return nil
	}
	if _, taken := p.kind(text); taken || !axisName.MatchString(text) {
		return fmt.Errorf("use letters, digits and _ only, and a name that no axis has")
	}
	kind := duty.Linear
	if t.turns.Checked {
		kind = duty.Rotary
	}
	p.axes = append(p.axes, duty.Axis{Name: text, Kind: kind})
	t.axis.SetText("")
	p.refresh()
	return nil
}

// options are the tracks that may be added.
func (t *tracks) options() (out []string) {
	p := t.p
	add := func(name string) {
		if !slices.Contains(out, name) && p.track(name) < 0 {
			out = append(out, name)
		}
	}
	for _, a := range p.allAxes() {
		for _, w := range []duty.What{duty.Speed, duty.Load, duty.Position, duty.Command} {
			add(a.Name + "." + w.String())
		}
	}
	for _, c := range p.ctx.Doc().File().Circuits {
		for i := range c.Blocks {
			for _, w := range circuit.TracksOf(&c.Blocks[i]) {
				add(c.Blocks[i].ID + "." + w.String())
			}
		}
	}
	return out
}

func (p *Page) track(name string) int {
	return slices.IndexFunc(p.tracks, func(t logged.Track) bool { return t.Name == name })
}

// addTrack begins a track with the likely channel, if there is one that nothing has yet.
func (t *tracks) addTrack(name string) {
	p := t.p
	x := logged.Track{Name: name, Law: logged.AsMeasured, Says: map[string]string{}}
	of, what, err := x.Split()
	if err != nil {
		return
	}
	kind, _ := p.kind(of)
	used := map[string]bool{}
	for _, o := range p.tracks {
		for _, c := range o.Says {
			used[c] = true
		}
	}
	fits := p.channelsOf(what.Dim(kind))
	if i := slices.IndexFunc(fits, func(c string) bool { return !used[c] }); i >= 0 {
		x.Says["column"] = fits[i]
	} else if len(fits) == 0 { // another law can be met, perhaps
		for _, l := range logged.Laws(what, kind) {
			if p.meets(l) && l.Word != logged.Constant {
				x.Law = l.Word
				break
			}
		}
	}
	p.known[name] = true
	p.tracks = append(p.tracks, x)
	p.derive()
}

// meets reports whether there is a channel for each that a law must have.
func (p *Page) meets(l logged.Law) bool {
	for _, c := range l.Channels {
		if !c.Optional && len(p.channelsOf(c.Dim)) == 0 {
			return false
		}
	}
	return true
}

// channelsOf are the columns that hold a quantity.
func (p *Page) channelsOf(d units.Dim) (out []string) {
	if p.rec == nil {
		return nil
	}
	for _, s := range p.rec.Series {
		if s.Dim == d && s.Quantity != "" || d == units.Ratio && s.Quantity == "" {
			out = append(out, s.Column)
		}
	}
	return out
}

// edit changes a track.
func (t *tracks) edit(name string, set func(x *logged.Track)) {
	p := t.p
	i := p.track(name)
	if i < 0 {
		return
	}
	p.tracks = slices.Clone(p.tracks)
	x := &p.tracks[i]
	says := map[string]string{}
	for k, v := range x.Says {
		says[k] = v
	}
	x.Says = says
	set(x)
	p.derive()
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
		setText(r.says, p.ctx.Local(text))
		fault := p.out.faults[x.Name]
		if fault != "" {
			fault = "⚠ " + fault
		}
		setText(r.fault, p.ctx.Local(fault))
		show(r.fault, fault != "")
		show(r.says, fault == "")
	}
	options := t.options()
	t.add.offer(options, nil)
	if t.add.Selected != "" {
		t.add.ClearSelected()
	}
	t.fillAxes()
	setText(t.works, p.ctx.Local(t.worksText()))
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

func (t *tracks) rows(x logged.Track, r *trackRows) fyne.CanvasObject {
	p, name := t.p, x.Name
	of, what, _ := x.Split()
	kind, _ := p.kind(of)
	head := widget.NewLabelWithStyle(strings.Replace(name, ".", " ", 1), fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	head.Truncation = fyne.TextTruncateEllipsis
	remove := widgets.Name(widgets.NewTipButton("Remove", "takes the track out", func() {
		p.tracks = slices.Delete(slices.Clone(p.tracks), p.track(name), p.track(name)+1)
		p.derive()
	}), "intake.track."+name+".remove")
	box := container.NewVBox(container.NewBorder(nil, nil, nil, remove, head))
	var words []string
	for _, l := range logged.Laws(what, kind) {
		words = append(words, l.Word)
	}
	law := p.newChoice("intake.track."+name+".law", words, nil, func(w string) { t.edit(name, func(x *logged.Track) { x.Law = w; t.keepFitting(x, what, kind) }) })
	law.set(x.Law)
	box.Add(widgets.Row("Made by", law.Select, nil))
	l, ok := logged.LawOf(x.Law, what, kind)
	if !ok {
		return box
	}
	for _, c := range l.Channels {
		fits := p.channelsOf(c.Dim)
		labels := fits
		if c.Optional {
			fits, labels = append([]string{""}, fits...), append([]string{"none"}, fits...)
		}
		pick := p.newChoice("intake.track."+name+"."+c.Key, fits, labels, func(w string) { t.edit(name, func(x *logged.Track) { x.Says[c.Key] = w }) })
		pick.PlaceHolder = "Choose a column"
		if len(fits) == 0 {
			pick.PlaceHolder = "no column is a " + c.Dim.Name()
		}
		r.picks[c.Key] = pick
		box.Add(widgets.Row(c.Name, pick.Select, nil))
	}
	for _, n := range l.Numbers {
		field := widgets.Name(widgets.NewField("", func(text string) error { return t.takeNumber(name, n, text) }), "intake.track."+name+"."+n.Key)
		r.fields[n.Key] = field
		field.SetPlaceHolder(n.Default)
		if n.Default == "" {
			field.SetPlaceHolder("such as " + example(n.Dim))
		}
		box.Add(widgets.FieldRow(n.Name, field))
	}
	return box
}

// example is a quantity as it may be typed.
func example(d units.Dim) string {
	return map[units.Dim]string{units.Length: "80 mm", units.DisplacementPerRev: "56 cm3/rev", units.Force: "12 kN", units.Torque: "400 N m", units.Velocity: "0.2 m/s",
		units.AngularSpeed: "20 rpm", units.Pressure: "150 bar", units.Flow: "60 L/min", units.Ratio: "1"}[d]
}

// keepFitting keeps what the new law has a use for, and takes the only channel that fits.
func (t *tracks) keepFitting(x *logged.Track, what duty.What, kind duty.AxisKind) {
	l, _ := logged.LawOf(x.Law, what, kind)
	old := x.Says
	x.Says = map[string]string{}
	for _, c := range l.Channels {
		fits := t.p.channelsOf(c.Dim)
		if slices.Contains(fits, old[c.Key]) {
			x.Says[c.Key] = old[c.Key]
		} else if len(fits) == 1 && !c.Optional {
			x.Says[c.Key] = fits[0]
		}
	}
	of, _, _ := x.Split()
	sizes := t.p.machine().Sizes[of]
	for _, n := range l.Numbers {
		if x.Says[n.Key] = old[n.Key]; old[n.Key] == "" && sizes[n.Key] != "" {
			x.Says[n.Key] = sizes[n.Key]
		}
	}
}

// takeNumber keeps a number as it is typed; a bare one is in the user's unit.
func (t *tracks) takeNumber(name string, n logged.Number, text string) error {
	if text != "" {
		u := units.Preferred(n.Dim, t.p.ctx.System())
		if n.Key == "bore" || n.Key == "rod" {
			u, _ = units.ParseUnit("mm", units.Length)
		}
		if n.Dim == units.Ratio {
			u = units.Unit{Factor: 1, Dim: units.Ratio}
		}
		si, u, err := units.ParseLoose(text, n.Dim, u)
		if err != nil {
			return err
		}
		text = units.FileText(si, u)
	}
	t.edit(name, func(x *logged.Track) { x.Says[n.Key] = text })
	return nil
}

// fillAxes lists the axes that are made with the duty, each to be named otherwise.
func (t *tracks) fillAxes() {
	p := t.p
	shows := fmt.Sprint(p.axes)
	if len(t.axes.Objects) > 0 && t.axes.Objects[0].(*widget.Label).Text == shows {
		return
	}
	mark := widget.NewLabel(shows)
	mark.Hide()
	t.axes.Objects = []fyne.CanvasObject{mark}
	if len(p.axes) > 0 {
		t.axes.Add(say("Axes that are made with the duty", widget.MediumImportance, true))
	}
	for i, a := range p.axes {
		field := widgets.Name(widgets.NewField(a.Name, func(text string) error { return t.renameAxis(i, text) }), "intake.axis."+a.Name)
		says := "moves along a line"
		if a.Kind == duty.Rotary {
			says = "turns"
		}
		t.axes.Add(container.NewBorder(nil, nil, nil, widget.NewLabel(says), field))
	}
	t.axes.Refresh()
}

func (t *tracks) renameAxis(i int, text string) error {
	p := t.p
	old := p.axes[i].Name
	if text == old {
		return nil
	}
	if _, taken := p.kind(text); !axisName.MatchString(text) || taken && !p.isAxisOfFile(text, p.axes[i].Kind) {
		return fmt.Errorf("use letters, digits and _ only, and a name that no axis has")
	}
	p.tracks = slices.Clone(p.tracks)
	for k := range p.tracks {
		if rest, ok := strings.CutPrefix(p.tracks[k].Name, old+"."); ok {
			p.tracks[k].Name = text + "." + rest
		}
	}
	p.axes = slices.Clone(p.axes)
	if p.isAxisOfFile(text, p.axes[i].Kind) {
		p.axes = slices.Delete(p.axes, i, i+1) // it is that one
	} else {
		p.axes[i].Name = text
	}
	p.derive()
	return nil
}

// isAxisOfFile reports whether the audit has an axis of a name and kind.
func (p *Page) isAxisOfFile(name string, kind duty.AxisKind) bool {
	return slices.ContainsFunc(p.ctx.Doc().File().Axes, func(a duty.Axis) bool { return a.Name == name && a.Kind == kind })
}

// worksText says what the tracks come to.
func (t *tracks) worksText() string {
	p := t.p
	if len(p.out.works) == 0 {
		return "The work of an axis stands here once it has a motion and a load."
	}
	kJ, _ := units.ParseUnit("kJ", units.Energy)
	text := func(j float64) string {
		s := units.Format(j, kJ, 5)
		if j > 0 {
			s = "+" + s
		}
		return s
	}
	plus, minus := 0.0, 0.0
	var parts []string
	for _, w := range p.out.works {
		plus, minus = plus+w.Positive, minus+w.Negative
		parts = append(parts, fmt.Sprintf("%s %s / %s", w.Axis, text(w.Positive), text(w.Negative)))
	}
	whole := fmt.Sprintf("Work on the load, counted at the rows: %s / %s", text(plus), text(minus))
	if len(parts) > 1 {
		whole += "  (" + strings.Join(parts, ", ") + ")"
	}
	return whole
}

func (t *tracks) unit(k duty.Track) units.Unit {
	if k.What == duty.Command {
		return units.Percent
	}
	kind, _ := t.p.kind(k.Of)
	return units.Preferred(k.What.Dim(kind), t.p.ctx.System())
}

func (t *tracks) fillPlot() {
	p := t.p
	plot := figures.Plot{Axis: "time", AxisUnit: "s"}
	if d := p.out.shown; d != nil {
		for _, k := range d.Tracks {
			u, course, role := t.unit(k), audit.CourseOf(d, k), figures.RoleGain
			if k.What == duty.Load {
				role = figures.RoleInk
			}
			plot.Lanes = append(plot.Lanes, figures.Lane{Title: k.Of + " " + k.What.String(), Unit: u.Label(), Zero: true,
				Series: []figures.Series{{X: course.T, Y: inUnit(course.V, u), Role: role}}})
		}
	}
	t.plot.SetMin(fyne.NewSize(300, float32(60+62*len(plot.Lanes))))
	t.plot.SetPlot(plot)
}

func (t *tracks) valueAt(lane int, at float64) string {
	d := t.p.out.shown
	if d == nil || lane >= len(d.Tracks) {
		return ""
	}
	k := d.Tracks[lane]
	course := audit.Track{T: d.Time, V: k.Values}
	return t.p.ctx.Local(units.Format(course.At(at), t.unit(k), 3))
}
