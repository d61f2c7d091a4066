package intake

import (
	"fmt"
	"slices"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/machines/units"
)

// yearRow asks whose hours of the year the new duty takes: a recording usually stands for a
// duty that was assumed before, and the year must not have both.
type yearRow struct {
	p       *Page
	content fyne.CanvasObject
	which   *choice
	text    *widget.Label
	picked  bool
	place   string // the duty that was picked, "" for beside the others
}

func newYearRow(p *Page) *yearRow {
	y := &yearRow{p: p}
	y.which = p.newChoice("intake.year", nil, nil, func(word string) {
		y.picked, y.place = true, word
		p.head.fill()
	})
	y.text = widgets.Name(widget.NewLabel(""), "intake.year.text")
	y.text.Truncation = fyne.TextTruncateEllipsis
	y.content = container.NewBorder(nil, nil, container.NewHBox(widget.NewLabel("In the year"), container.New(widgets.Wide(240), y.which.Select)), nil, y.text)
	return y
}

// inPlaceOf is the duty whose hours the new one takes, "" for none: the one that has hours,
// unless there are several or the user picked.
func (y *yearRow) inPlaceOf() string {
	names := y.p.ctx.Doc().File().InYear()
	switch {
	case y.p.again != "":
		return ""
	case y.picked && (y.place == "" || slices.Contains(names, y.place)):
		return y.place
	case len(names) == 1:
		return names[0]
	}
	return ""
}

// fill offers the duties that have hours; without any there is nothing to ask.
func (y *yearRow) fill() {
	names := y.p.ctx.Doc().File().InYear()
	show(y.content, y.p.again == "" && len(names) > 0)
	var labels []string
	for _, n := range names {
		labels = append(labels, "in place of "+n)
	}
	loading := y.p.loading
	y.p.loading = true
	y.which.offer(append(names, ""), append(labels, "beside the others"))
	y.which.set(y.inPlaceOf())
	y.p.loading = loading
	if text := y.p.ctx.Local(y.says()); y.text.Text != text {
		y.text.SetText(text)
	}
}

// says what becomes of the hours of the year.
func (y *yearRow) says() string {
	f, place := y.p.ctx.Doc().File(), y.inPlaceOf()
	if place == "" {
		sum := 0.0
		for _, d := range f.Duties {
			sum += d.Hours
		}
		return fmt.Sprintf("Its hours come on top of the %s a year that there are.", hoursOf(sum))
	}
	hours := hoursOf(f.Duties[y.p.dutyNamed(place)].Hours)
	if f.StateOf(place) != "" {
		return fmt.Sprintf("It takes the place of %s in the calendar, %s a year; that duty stays, out of the year.", place, hours)
	}
	return fmt.Sprintf("It takes the %s a year of %s, which stays with 0 h.", hours, place)
}

func hoursOf(t float64) string { return units.Number(t/units.Hour, 4) + "\u202fh" }
