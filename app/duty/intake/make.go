package intake

import (
	"context"
	"errors"
	"fmt"
	"path/filepath"
	"strings"

	"barlitre/audit"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// make makes the duty: the audit must have a folder, and the recording a copy in it.
func (p *Page) make() {
	if why := p.ready(); why != "" {
		p.ctx.Fail(errors.New(strings.TrimPrefix(why, "⚠ ")))
		return
	}
	if p.again == "" && p.dutyNamed(strings.TrimSpace(p.head.name.Text)) >= 0 {
		p.ctx.Fail(fmt.Errorf("there is a duty %q already; give this one another name", p.head.name.Text))
		return
	}
	hours, err := hoursText(p.head.hours.Text)
	if err != nil && p.head.year.inPlaceOf() == "" {
		p.ctx.Fail(fmt.Errorf("hours a year: %w", err))
		return
	}
	if p.ctx.Doc().Path() == "" {
		p.ctx.SaveFirst("The recording is kept beside the audit, so the audit needs a place. Save it first.", func() { p.beside(hours) })
		return
	}
	p.beside(hours)
}

// hoursText brings hours a year into the form that files have; a bare number is hours.
func hoursText(text string) (string, error) {
	if strings.TrimSpace(text) == "" {
		return "", nil
	}
	hour, _ := units.ParseUnit("h", units.Time)
	si, u, err := units.ParseLoose(text, units.Time, hour)
	if err == nil && (si < 0 || si > 366*units.Day) {
		err = errors.New("a year has 0 h to 8784 h")
	}
	if err != nil {
		return "", err
	}
	return units.FileText(si, u), nil
}

// beside makes the duty once the recordings lie beside the audit or below.
func (p *Page) beside(hours string) {
	c := copier{dir: filepath.Dir(p.ctx.Doc().Path())}
	for _, s := range p.sources {
		c.all = append(c.all, toCopy{s.paths, s.kept.Recording().SHA256})
		c.size += s.file.Size
	}
	p.start("Copying the recording beside the audit", func(ctx context.Context, share func(float64)) func() {
		names, err := c.copy(ctx, share)
		return func() {
			if err != nil {
				p.job.failed = err.Error()
				p.refresh()
				return
			}
			p.finish(names, hours)
		}
	})
}

// rowsEnough is from how many rows on a recording's energies are counted at its rows alone.
const rowsEnough = 1000

// cyclic reports whether a part is one cycle, of which the duty repeats.
func cyclic(part logged.Part) bool { return !part.Whole() && part.Is != stretchIs }

// finish edits the audit, as one step of undo, and leaves.
func (p *Page) finish(names [][]string, hours string) {
	t := p.taking()
	placed(&t, names)
	t.Duty, t.Part, t.Keys = strings.TrimSpace(p.head.name.Text), p.part, map[string]string{}
	step := "Take in " + p.sources[0].file.Name
	if p.again != "" {
		t.Duty, step = p.again, "Change how "+p.again+" is taken in"
	} else {
		if t.InPlaceOf = p.head.year.inPlaceOf(); t.InPlaceOf != "" {
			step += " in place of " + t.InPlaceOf
		} else if hours != "" {
			t.Keys["hours"] = hours
		}
		if cyclic(p.part) {
			t.Keys["repeats"] = "yes"
		} else if len(p.out.whole.Time) >= rowsEnough && p.part.Whole() {
			t.Keys["instants"] = "no" // sums over the rows, as anyone can repeat them
		}
	}
	doc := p.ctx.Doc()
	p.start("Making the duty", func(ctx context.Context, _ func(float64)) func() {
		p.work.Lock()
		defer p.work.Unlock()
		err := doc.Edit(step, func(f *audit.File) error {
			if err := f.TakeIn(t); err != nil {
				return err
			}
			return ctx.Err() // cancelled meanwhile: nothing is changed
		})
		return func() { p.made(t, err) }
	})
}

// made leaves once the duty is in the audit, and says so.
func (p *Page) made(t audit.Taking, err error) {
	if err != nil {
		p.refresh()
		p.ctx.Fail(fmt.Errorf("%w. Nothing was changed", err))
		return
	}
	i, year := p.dutyNamed(t.Duty), ""
	if t.InPlaceOf != "" && i >= 0 {
		year = fmt.Sprintf(" It has the %s a year of %s.", hoursOf(p.ctx.Doc().File().Duties[i].Hours), t.InPlaceOf)
	}
	p.close()
	if i >= 0 {
		p.ctx.SetDuty(i)
	}
	said := fmt.Sprintf("Duty %s is made of %s: %s.", t.Duty, logger.NameOf(append([]string{t.File}, t.More...)), counted(len(t.Tracks), "track", "tracks"))
	for _, a := range t.Also {
		said += " Beside it stands " + logger.NameOf(a.Files) + "."
	}
	if n := len(t.Axes); n > 0 {
		said += fmt.Sprintf(" New: %s.", counted(n, "axis", "axes"))
	}
	p.ctx.Say(said + year + " Undo takes it back.")
}

func counted(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}
