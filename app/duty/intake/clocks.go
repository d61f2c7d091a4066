package intake

import (
	"errors"
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// Ways in which the clock of a logger is set.
const (
	clockAsIs  = "as is"
	clockGiven = "given"
	clockFound = "found"
)

var (
	clockWords  = []string{clockAsIs, clockFound, clockGiven}
	clockLabels = []string{"its times and dates are right", "found by a channel that both have", "an offset, typed"}
)

// clockRows say how the clock of a logger is set, and what came of it.
type clockRows struct {
	p              *Page
	s              *source
	content        *fyne.Container
	way            *choice
	first, with    *choice
	within, offset *widgets.Field
	found, given   *fyne.Container
	how            *widgets.Text
}

func newClockRows(p *Page, s *source, name string) *clockRows {
	c := &clockRows{p: p, s: s}
	c.way = p.newChoice(name+".clock", clockWords, clockLabels, c.take)
	change := func(set func(k *audit.Clock, word string)) func(string) {
		return func(word string) {
			k := s.clock
			set(&k, word)
			p.setClock(s, k)
		}
	}
	c.first = p.newChoice(name+".clock.channel", channelsIn(p.sources[0].recipe), nil, change(func(k *audit.Clock, w string) { k.Channel = w }))
	c.with = p.newChoice(name+".clock.with", channelsIn(s.recipe), nil, change(func(k *audit.Clock, w string) { k.With = w }))
	c.within = widgets.Name(widgets.NewField("", c.takeWithin), name+".clock.within")
	c.within.SetPlaceHolder("1 h")
	c.offset = widgets.Name(widgets.NewField("", c.takeOffset), name+".clock.offset")
	c.found = container.NewVBox(widgets.Row("By the channel", c.first.Select, nil), widgets.Row("the same as its", c.with.Select, nil), widgets.FieldRow("within", c.within))
	c.given = container.NewVBox(widgets.FieldRow("Added to its times", c.offset))
	c.how = widgets.Name(say("", widget.MediumImportance, false), name+".clock.says")
	c.content = container.NewVBox(widgets.Row("Its clock", c.way.Select, nil), c.found, c.given, c.how)
	return c
}

// channelsIn are the columns that hold numbers.
func channelsIn(r logger.Recipe) (out []string) {
	for _, x := range r.Channels {
		if !x.Leave && !x.Text {
			out = append(out, x.Column)
		}
	}
	return out
}

// take changes the way; what was found before is the offset that typing begins with.
func (c *clockRows) take(way string) {
	k := audit.Clock{}
	switch way {
	case clockFound:
		if k = audit.LikelyClock(undated(c.p.sources[0].recipe), undated(c.s.recipe)); k.Channel == "" {
			k.Channel, k.With = column(c.first.words, 0), column(c.with.words, 0)
		}
	case clockGiven:
		k.Offset = units.FileText(c.s.also.Offset, units.Preferred(units.Time, units.SI))
	}
	c.p.setClock(c.s, k)
}

// undated is a recipe whose dates do not count.
func undated(r logger.Recipe) logger.Recipe {
	r.Time.Form = logger.Elapsed
	return r
}

func (c *clockRows) takeWithin(text string) error {
	k := c.s.clock
	k.Within = 0
	if strings.TrimSpace(text) != "" {
		x, _, err := units.ParseLoose(text, units.Time, units.Preferred(units.Time, units.SI))
		if err == nil && !(x > 0) {
			err = errors.New("must be above 0 s; nothing stands for an hour")
		}
		if err != nil {
			return err
		}
		k.Within = x
	}
	c.p.setClock(c.s, k)
	return nil
}

func (c *clockRows) takeOffset(text string) error {
	x, u, err := units.ParseLoose(text, units.Time, units.Preferred(units.Time, units.SI))
	if err != nil {
		return err
	}
	c.p.setClock(c.s, audit.Clock{Offset: units.FileText(x, u)})
	return nil
}

// setClock changes how a clock is set; nothing is read again.
func (p *Page) setClock(s *source, k audit.Clock) {
	s.clock = k
	p.readAll()
}

// fill shows the clock, and where its offset comes from.
func (c *clockRows) fill() {
	k := c.s.clock
	way := clockAsIs
	switch {
	case k.Channel != "":
		way = clockFound
	case k.Offset != "":
		way = clockGiven
	}
	c.way.set(way)
	show(c.found, way == clockFound)
	show(c.given, way == clockGiven)
	c.first.set(k.Channel)
	c.with.set(k.With)
	within := ""
	if k.Within > 0 {
		within = c.p.seconds(k.Within)
	}
	c.within.SetValue(c.p.ctx.Local(within), "")
	c.offset.SetValue(c.p.ctx.Local(k.Offset), "")
	text, importance := "", widget.MediumImportance
	switch how := c.s.also.How; {
	case c.p.rec == nil && c.p.job.failed != "":
		text, importance = "⚠ "+c.p.job.failed, widget.DangerImportance
	case c.p.rec == nil:
	case c.s.also.Unclear:
		text, importance = "⚠ "+how+".", widget.DangerImportance
	case how != "":
		text = fmt.Sprintf("%s%s.", strings.ToUpper(how[:1]), how[1:])
	}
	if c.how.Importance != importance {
		c.how.Importance = importance
		c.how.Refresh()
	}
	c.how.SetText(c.p.ctx.Local(text))
	show(c.how, text != "")
}
