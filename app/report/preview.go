package report

import (
	"fmt"
	"image"
	"image/color"
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pdf"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// widths of a page in the preview [units of the window, at scale 1].
var widths = []float32{150, 220, 320, 460, 640}

// preview shows the pages of the report.
type preview struct {
	ctx     station.Context
	options func() pdf.Options
	content fyne.CanvasObject
	head    *widget.Label
	index   *widget.Label
	pages   *fyne.Container
	smaller *widgets.TipButton
	larger  *widgets.TipButton
	scroll  *container.Scroll
	size    int // index into widths
	asked   request
	shown   request // that the pages are of
	start   func(func())
}

// request is what a drawing hangs on.
type request struct {
	of      *audit.Solution
	without string
	system  units.System
	width   float32
	palette figures.Palette // of the edges
	advised bool            // with what to put right first and the site check
}

func newPreview(ctx station.Context, options func() pdf.Options) *preview {
	p := &preview{ctx: ctx, options: options, size: 2, start: func(work func()) { go work() }}
	p.head = widgets.Name(widget.NewLabel(""), "report.pages")
	p.head.Truncation = fyne.TextTruncateEllipsis
	p.index = widgets.Name(widget.NewLabel(""), "report.contents")
	p.index.Wrapping = fyne.TextWrapWord
	p.index.Importance = widget.LowImportance
	p.smaller = widgets.Name(widgets.NewTipButton("−", "show the pages smaller", func() { p.resize(-1) }), "report.smaller")
	p.larger = widgets.Name(widgets.NewTipButton("+", "show the pages larger", func() { p.resize(1) }), "report.larger")
	p.pages = container.New(&flow{})
	p.scroll = container.NewScroll(container.NewVBox(p.index, p.pages))
	up := widgets.Name(widgets.NewTipButton("◀", "show the pages before", func() { p.turn(-1) }), "report.back")
	down := widgets.Name(widgets.NewTipButton("▶", "show the pages after", func() { p.turn(1) }), "report.next")
	bar := container.NewBorder(nil, nil, widget.NewLabelWithStyle("Pages", fyne.TextAlignLeading, fyne.TextStyle{Bold: true}),
		container.NewHBox(up, down, p.smaller, p.larger), p.head)
	p.content = container.NewBorder(bar, nil, nil, nil, p.scroll)
	return p
}

func (p *preview) resize(by int) {
	p.size = max(0, min(len(widths)-1, p.size+by))
	p.load()
}

// drawn is a report laid out and drawn.
type drawn struct {
	pages  []*image.RGBA
	starts map[pdf.Section]int
	err    error
}

// turn scrolls by a row of pages, for the keyboard.
func (p *preview) turn(by float32) {
	if len(p.pages.Objects) > 0 {
		step := p.pages.Objects[0].MinSize().Height + flowGap*widgets.Scale()
		most := max(0, p.scroll.Content.Size().Height-p.scroll.Size().Height)
		p.scroll.ScrollToOffset(fyne.NewPos(p.scroll.Offset.X, max(0, min(most, p.scroll.Offset.Y+by*step))))
	}
}

// load lays the report out and draws it, in the background; a later request overtakes it.
func (p *preview) load() {
	opt, width := p.options(), widths[p.size]*widgets.Scale()
	all, _ := p.ctx.Doc().Solution()
	if all != nil && all.Pending && p.ctx.Doc().Warming() {
		if len(p.pages.Objects) == 0 {
			p.say("The report is being laid out.", "It waits for the oil temperatures.")
		}
		p.state()
		return
	}
	ask := request{all, fmt.Sprint(opt.Without, opt.Sheets), opt.System, width, p.ctx.Palette(), len(opt.SiteCheck) > 0}
	if ask == p.asked && ask.of != nil {
		p.state()
		return
	}
	p.asked = ask
	p.smaller.Disable()
	p.larger.Disable()
	if ask.of == nil {
		p.say("The pages stand here as soon as there is a result.", "Draw a circuit under Circuit and give its duty under Duty; the report is then laid out by itself.")
		p.pages.Objects = nil
		p.pages.Refresh()
		return
	}
	if len(p.pages.Objects) == 0 {
		p.say("The pages are being laid out …", "")
	}
	p.state()
	pixels := width
	if c := fyne.CurrentApp().Driver().CanvasForObject(p.pages); c != nil {
		pixels *= c.Scale()
	}
	p.start(func() {
		d := drawPages(ask.of, opt, int(pixels+0.5))
		fyne.Do(func() {
			if ask == p.asked {
				p.show(d, ask)
			}
		})
	})
}

// leastWidth is the width of a page [pixels] below which the pen leaves text out.
const leastWidth = 600

// drawPages draws on paper-white images of a width [pixels].
func drawPages(s *audit.Solution, opt pdf.Options, width int) (d drawn) {
	defer func() {
		if v := recover(); v != nil {
			d = drawn{err: fmt.Errorf("the pages could not be drawn (%v); the audit is not touched by that", v)}
		}
	}()
	n := max(1, (leastWidth+width-1)/max(width, 1)) // small pages are drawn larger and made smaller
	d.starts, d.err = pdf.Pages(s, opt, func(w, h float64) pen.Pen {
		k, high := float64(n*width)/w, int(float64(width)*h/w+0.5)
		if last := len(d.pages) - 1; last >= 0 {
			d.pages[last] = smaller(d.pages[last], n)
		}
		img := image.NewRGBA(image.Rect(0, 0, n*width, n*high))
		d.pages = append(d.pages, img)
		r := pen.NewRaster(img)
		r.Clear(figures.Light.Card)
		r.Push(0, 0, k)
		return r
	})
	if last := len(d.pages) - 1; last >= 0 {
		d.pages[last] = smaller(d.pages[last], n)
	}
	return d
}

// smaller makes an image n times smaller, each pixel the mean of n × n.
func smaller(in *image.RGBA, n int) *image.RGBA {
	if n == 1 {
		return in
	}
	size := in.Rect.Size().Div(n)
	out := image.NewRGBA(image.Rect(0, 0, size.X, size.Y))
	for y := range size.Y {
		for x := range size.X {
			var sum [4]int
			for j := range n {
				row := in.Pix[(y*n+j)*in.Stride+4*x*n:]
				for i := range 4 * n {
					sum[i%4] += int(row[i])
				}
			}
			for i, v := range sum {
				out.Pix[y*out.Stride+4*x+i] = uint8((v + n*n/2) / (n * n))
			}
		}
	}
	return out
}

func (p *preview) say(head, below string) {
	p.head.Importance = widget.MediumImportance
	p.head.SetText(head)
	p.index.SetText(below)
	if below == "" {
		p.index.Hide()
	} else {
		p.index.Show()
	}
}

func (p *preview) show(d drawn, of request) {
	p.shown = of
	if d.err != nil {
		p.pages.Objects = nil // those of before would pass for these
		p.pages.Refresh()
		p.say("The pages could not be laid out: "+d.err.Error(), "")
		return
	}
	width := of.width
	var objects []fyne.CanvasObject
	for _, img := range d.pages {
		size := img.Rect.Size()
		page := newSheet(img, fyne.NewSize(width, width*float32(size.Y)/float32(size.X)))
		if size.X > size.Y { // lying, in the room of one that stands
			page = container.NewCenter(page)
		}
		objects = append(objects, page)
	}
	p.pages.Objects = objects
	p.pages.Refresh()
	p.index.SetText(contents(d.starts))
	p.index.Show()
	p.state()
	if p.size > 0 {
		p.smaller.Enable()
	}
	if p.size < len(widths)-1 {
		p.larger.Enable()
	}
}

// state says how many pages there are, and whether they are of the audit as it stands.
func (p *preview) state() {
	n := len(p.pages.Objects)
	if n == 0 {
		return
	}
	text, importance := plural(n, "page")+", drawn as they will print", widget.MediumImportance
	switch doc := p.ctx.Doc(); {
	case p.unsolved():
		text, importance = "The last change is not solved; the "+plural(n, "page")+" here are from before it", widget.DangerImportance
	case !doc.Current(), doc.Warming(), p.asked != p.shown:
		text, importance = "Being laid out anew; the "+plural(n, "page")+" here are from before the last change", widget.WarningImportance
	default:
		if running, _, _, _ := doc.Advising(); running {
			text += "; fix first and site check follow"
		}
	}
	if p.head.Importance != importance {
		p.head.Importance = importance
		p.head.Refresh()
	}
	p.head.SetText(text)
}

// unsolved reports whether no solution of the present audit will come: solving failed, or
// was given up.
func (p *preview) unsolved() bool {
	doc := p.ctx.Doc()
	running, _, _ := doc.Solving()
	return !doc.Current() && !running
}

// contents lists the sections with their pages.
func contents(starts map[pdf.Section]int) string {
	type start struct {
		section pdf.Section
		page    int
	}
	var order []start
	all := pdf.Sections()
	place := func(s pdf.Section) int { // the cautions are not among those that can be left out, and come last
		if i := slices.Index(all, s); i >= 0 {
			return i
		}
		return len(all)
	}
	for s, n := range starts {
		order = append(order, start{s, n})
	}
	slices.SortFunc(order, func(a, b start) int { return place(a.section) - place(b.section) })
	var parts []string
	for _, s := range order {
		parts = append(parts, fmt.Sprintf("%s\u00a0%d", strings.ReplaceAll(string(s.section), " ", "\u00a0"), s.page))
	}
	return strings.Join(parts, "\u00a0· ")
}

// newSheet is a page with an edge.
func newSheet(img image.Image, size fyne.Size) fyne.CanvasObject {
	page := canvas.NewImageFromImage(img)
	page.FillMode, page.ScaleMode = canvas.ImageFillStretch, canvas.ImageScaleFastest
	page.SetMinSize(size)
	edge := canvas.NewRectangle(color.Transparent)
	edge.StrokeColor, edge.StrokeWidth = theme.Color(theme.ColorNameSeparator), 1
	return container.NewStack(page, edge)
}

// flow sets objects of one size in rows, as many as fit, in the middle.
type flow struct{ columns int }

const flowGap = 14

func (l *flow) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	if len(objects) == 0 {
		return
	}
	each, gap := objects[0].MinSize(), flowGap*widgets.Scale()
	columns := max(1, min(len(objects), int((size.Width-gap)/(each.Width+gap))))
	l.columns = columns
	left := max(0, (size.Width-float32(columns)*(each.Width+gap)+gap)/2)
	for i, o := range objects {
		o.Resize(each)
		o.Move(fyne.NewPos(left+float32(i%columns)*(each.Width+gap), gap/2+float32(i/columns)*(each.Height+gap)))
	}
}

// MinSize is that of the columns of the last layout.
func (l *flow) MinSize(objects []fyne.CanvasObject) fyne.Size {
	if len(objects) == 0 {
		return fyne.NewSize(10, 10)
	}
	each, gap := objects[0].MinSize(), flowGap*widgets.Scale()
	columns := max(1, min(l.columns, len(objects)))
	rows := (len(objects) + columns - 1) / columns
	return fyne.NewSize(each.Width+gap, float32(rows)*(each.Height+gap))
}
