// Package fixfirst is the page that shows what to put right in a circuit as found before anything is bought, with
// evidence, advice and price, and what is then left for a proposal. It is a page of the station for money.
package fixfirst

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/widgets"
)

// Page is the page.
type Page struct {
	ctx     station.Context
	content fyne.CanvasObject
	say     *widgets.Text // while there is nothing to show, or it is of an older drawing
	bar     *widget.ProgressBar
	working *fyne.Container
	list    *fyne.Container
	scroll  *container.Scroll
	shown   *document.Advice
	parts   []*ladder
	comma   string // how a number looks, to see a change of the decimal sign
}

// New makes the page.
func New(ctx station.Context) *Page {
	p := &Page{ctx: ctx, say: widgets.Wrapped("fixfirst.say"), bar: widgets.Name(widget.NewProgressBar(), "fixfirst.progress"), list: container.NewVBox()}
	cancel := widgets.Name(widgets.NewButton("Cancel", func() { ctx.Doc().CancelAdvice() }), "fixfirst.cancel")
	p.working = container.NewBorder(nil, nil, nil, cancel, p.bar)
	p.working.Hide()
	p.scroll = container.NewScroll(widgets.Spaced(container.NewVBox(p.say, p.working, p.list)))
	p.content = p.scroll
	return p
}

// Content is the page.
func (p *Page) Content() fyne.CanvasObject { return p.content }

// Help is its part of the short help.
const Help = "Fix first lists what is wrong with the circuit as found (settings, worn or clogged parts, a motor that runs for nothing) before anything is bought: what was found and what it should be, " +
	"what to do, the caution that goes with it, and what it is worth alone and after those above it. The prices come from balancing the circuit again with the cure in it. " +
	"What costs nothing stands first. Below stands how much of the saving of a proposal could be had without it. \"Show\" selects the block on the sheet; \"Add the circuit put right\" adds a copy with the faults cured beside the proposals, to be compared and changed."

// Changed shows anew what changed.
func (p *Page) Changed(w station.What) {
	if !w.Has(station.Solution | station.Advice | station.Settings | station.Model) {
		return
	}
	if w.Has(station.Solution|station.Settings|station.Model) && p.ctx.Solution() != nil { // not on the end of advice: it may have been cancelled
		p.ctx.Doc().Advise(p.ctx.System())
	}
	p.progress()
	a, current := p.ctx.Doc().Advice()
	switch comma := p.ctx.Local("0.5"); {
	case a == nil || p.ctx.Solution() == nil:
		p.list.Objects, p.parts, p.shown = nil, nil, nil
	case a != p.shown || comma != p.comma:
		p.comma = comma
		p.show(a)
	}
	p.told(a, current)
	p.content.Refresh()
}

func (p *Page) progress() {
	running, done, total, _ := p.ctx.Doc().Advising()
	if !running {
		p.working.Hide()
		return
	}
	p.bar.Max = float64(max(total, 1))
	p.bar.SetValue(float64(done))
	p.working.Show()
}

// told says why there is nothing, or why it may be old.
func (p *Page) told(a *document.Advice, current bool) {
	running, _, _, err := p.ctx.Doc().Advising()
	running = running || p.ctx.Doc().AdviceFollows()
	text := ""
	switch {
	case p.ctx.Solution() == nil:
		text = "What to put right first stands here as soon as there is a result. Draw the circuit as found under Circuit and give its duty under Duty."
	case running && a == nil:
		text = "Looking for faults and balancing the circuit with each of them cured…"
	case running:
		text = "What stands below is of the drawing before; it is being worked out anew."
	case err != nil:
		text = "It could not be worked out: " + err.Error()
	case !current:
		text = "Cancelled. The next change, or another look at this page, begins again."
	}
	p.say.SetText(text)
	if text == "" {
		p.say.Hide()
	} else {
		p.say.Show()
	}
}

func (p *Page) show(a *document.Advice) {
	p.shown, p.list.Objects, p.parts = a, nil, nil
	for i, l := range a.Ladders {
		part := newLadder(p.ctx, l, l.Page(a.System), i, p.scroll)
		p.parts = append(p.parts, part)
		p.list.Add(part.content)
	}
	if len(a.Ladders) == 0 {
		p.list.Add(widget.NewLabel("There is no circuit as found in this audit."))
	}
}
