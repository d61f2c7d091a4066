package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"

	"barlitre/app/widgets"
)

// part is what the panel shows of the selected block below its values, with a link to it on top.
type part struct {
	title string // "" of one that has a head of its own
	body  fyne.CanvasObject
	head  fyne.CanvasObject
	link  *link
}

// newParts makes the parts of the panel and the line of links to them.
func (p *panel) newParts() {
	p.asked, p.year, p.gallery, p.service = newAsked(p), newYear(p), newGallery(p), newService(p)
	p.links = container.New(wordsLine{})
	add := func(word, title string, body fyne.CanvasObject) {
		x := &part{title: title, body: body, head: container.New(tight{})}
		x.link = widgets.Name(newLink(word, func() { p.goTo(x) }), "sheet.to."+word)
		x.link.lead = true
		p.parts = append(p.parts, x)
		p.links.Add(x.link)
	}
	add("Values", "", nil)
	add("Now", "", p.live.content)
	add("Limits", "Asked and permitted", p.asked.content)
	add("Year", "Over the year", p.year.figure)
	add("Picture", "Picture", p.gallery.content)
	add("Beside", "Beside another machine", p.service.content)
}

// bringParts brings in what the solution says of the block.
func (p *panel) bringParts() {
	p.asked.bring()
	p.year.bring()
	p.gallery.bring()
	p.service.update()
	_, b := p.at()
	any := false
	for _, x := range p.parts[1:] {
		on := b != nil && x.body.Visible()
		any = any || on && x.title != ""
		show(x.head, on && x.title != "")
		show(x.link, on)
	}
	show(p.links, any)
}

// listParts adds the parts below the values of a block.
func (p *panel) listParts() {
	for _, x := range p.parts[1:] {
		if x.title != "" {
			x.head.(*fyne.Container).Objects = []fyne.CanvasObject{p.heading(x.title, nil)}
			p.list.Add(x.head)
		}
		p.list.Add(x.body)
	}
}

// heading is a rule with a title below it, and a link at its end.
func (p *panel) heading(text string, end *link) fyne.CanvasObject {
	k, pal := widgets.Scale(), p.s.ctx.Palette()
	title := canvas.NewText(text, pal.Ink)
	title.TextSize, title.TextStyle.Bold = 12.5*k, true
	line := container.New(headLine{}, title, canvas.NewText("", nil))
	if end != nil {
		line.Add(end)
	}
	rule := canvas.NewRectangle(pal.Edge)
	rule.SetMinSize(fyne.NewSize(1, 1))
	return container.New(tight{}, gapOf(9), rule, gapOf(3), line)
}

// goTo scrolls to a part.
func (p *panel) goTo(x *part) {
	y := float32(0)
	switch {
	case x.body == nil:
	case x.title != "":
		y = x.head.Position().Y
	default:
		y = x.body.Position().Y
	}
	p.scroll.ScrollToOffset(fyne.NewPos(0, y))
}

// wordsLine sets words side by side.
type wordsLine struct{}

func (wordsLine) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	k := widgets.Scale()
	x := 8 * k
	for _, o := range objects {
		if o.Visible() {
			m := o.MinSize()
			put(o, x, (size.Height-m.Height)/2, m.Width, m.Height)
			x += m.Width + 8*k
		}
	}
}

func (wordsLine) MinSize([]fyne.CanvasObject) fyne.Size { return fyne.NewSize(0, 20*widgets.Scale()) }
