package intake

import (
	"fmt"
	"slices"
	"strings"

	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit/duty"
)

// addAxis keeps an axis to be made with the duty.
func (t *tracks) addAxis(text string) error {
	p := t.p
	if text == "" {
		return nil
	}
	if _, taken := p.kind(text); taken || !audit.IsName(text) {
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

// fillAxes lists the axes that are made with the duty, each to be named otherwise.
func (t *tracks) fillAxes() {
	p := t.p
	shows := fmt.Sprint(p.axes)
	if t.shown == shows {
		return
	}
	t.shown, t.axes.Objects = shows, nil
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
	if _, taken := p.kind(text); !audit.IsName(text) || taken && !p.isAxisOfFile(text, p.axes[i].Kind) {
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
