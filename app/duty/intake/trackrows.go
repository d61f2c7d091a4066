package intake

import (
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/machines/units"
)

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
