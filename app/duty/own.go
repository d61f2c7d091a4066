package duty

import (
	"fmt"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/machines/units"
)

// newLength is how long a new duty lasts: a round number to be typed over.
const newLength = "10 s"

// newDuty adds a duty with speed and load of every axis, and goes to its name.
func (p *panel) newDuty() {
	name := p.freeName("duty %d", 1)
	if err := p.s.ctx.Doc().Edit("Add duty "+name, func(f *audit.File) error {
		if err := f.AddDuty(name, newLength); err != nil {
			return err
		}
		for _, a := range f.Axes {
			if err := speedAndLoad(f, name, a.Name); err != nil {
				return err
			}
		}
		return nil
	}); err != nil {
		p.s.ctx.Fail(err)
		return
	}
	p.open(name)
	if len(p.s.ctx.Doc().File().Axes) > 0 {
		p.s.ctx.Say("Added " + name + ", with speed and load of every axis at zero. " + signs)
	}
}

// signs says what the signs of the tracks mean.
const signs = "Speed above zero extends a cylinder or hoists; a load above zero resists that."

// speedAndLoad gives a duty the two tracks that an axis usually needs.
func speedAndLoad(f *audit.File, duty, axis string) error {
	if err := f.AddTrack(duty, axis+".speed", ""); err != nil {
		return err
	}
	return f.AddTrack(duty, axis+".load", "")
}

func (p *panel) duplicate() {
	from := p.s.shown.Name
	name := p.freeName(from+" %d", 2)
	if err := p.s.ctx.Doc().CopyDuty(from, name); err != nil {
		p.s.ctx.Fail(err)
		return
	}
	p.open(name)
}

// freeName is the first name of a row that no duty has.
func (p *panel) freeName(form string, n int) string {
	name := fmt.Sprintf(form, n)
	for _, d := range p.s.ctx.Doc().File().Duties {
		if d.Name == name {
			return p.freeName(form, n+1)
		}
	}
	return name
}

// open shows a duty that was just made, with the keys in its name.
func (p *panel) open(name string) {
	for i, d := range p.s.ctx.Doc().File().Duties {
		if d.Name == name {
			p.s.ctx.SetDuty(i)
		}
	}
	p.s.reload()
	if w := p.s.ctx.Window(); w != nil {
		w.Canvas().Focus(p.name)
		p.name.TypedShortcut(&fyne.ShortcutSelectAll{})
	}
}

func (p *panel) remove() {
	name, at := p.s.shown.Name, p.s.ctx.Duty()
	if err := p.s.ctx.Doc().RemoveDuty(name); err != nil {
		p.s.ctx.Fail(err)
		return
	}
	p.s.ctx.SetDuty(max(0, at-1))
	p.s.reload()
	p.s.ctx.Say("Removed duty " + name + "; undo brings it back.")
}

func (p *panel) rename(text string) error {
	return p.took(p.s.ctx.Doc().RenameDuty(p.s.shown.Name, text))
}

func (p *panel) setHours(text string) error {
	return p.setTime("hours", text, "h")
}

func (p *panel) setStep(text string) error {
	return p.setTime("step", text, "ms")
}

// setTime sets a time of the duty; a bare number is in the unit said, and nothing takes it out.
func (p *panel) setTime(key, text, bare string) error {
	if text != "" {
		u, err := units.ParseUnit(bare, units.Time)
		if err != nil {
			return err
		}
		si, u, err := units.ParseLoose(text, units.Time, u)
		if err != nil {
			return err
		}
		text = units.FileText(si, u)
	}
	return p.took(p.s.ctx.Doc().SetDuty(p.s.shown.Name, key, text))
}

func (p *panel) setRepeats(on bool) {
	if p.loading || p.s.shown == nil {
		return
	}
	text := "no"
	if on {
		text = "yes"
	}
	p.do(p.s.ctx.Doc().SetDuty(p.s.shown.Name, "repeats", text))
}
