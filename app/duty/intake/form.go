package intake

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// form is how the file is written: the guess, each item of it to be corrected in place, and
// the first and last lines, as they stand and as they are read.
type form struct {
	p                                     *Page
	content                               fyne.CanvasObject
	questions, reasons                    *fyne.Container
	encoding, separator, decimal, group   *choice
	shape, clock, second, order, unit     *choice
	head, unitsRow, first, interval, wide *widgets.Field
	rows                                  []fyne.CanvasObject // of order, unit, interval, widths and the second column
	raw, read                             *widgets.Table
	wrong                                 *widgets.Text
}

var (
	separatorWords = map[string]string{";": "semicolon ;", ",": "comma ,", "tab": "tab", "|": "bar |", "space": "blanks", "fixed": "fixed width"}
	formWords      = map[logger.Form]string{logger.Elapsed: "time elapsed", logger.Clock: "clock", logger.Dated: "date and clock", logger.Serial: "spreadsheet days", logger.Epoch: "since 1970", logger.Spaced: "none: even rows"}
	forms          = []string{string(logger.Elapsed), string(logger.Clock), string(logger.Dated), string(logger.Serial), string(logger.Epoch), string(logger.Spaced)}
	orders         = []string{"ymd", "dmy", "mdy"}
	orderWords     = []string{"year, month, day", "day, month, year", "month, day, year"}
	timeUnits      = []string{"s", "ms", "min", "h"}
)

func newForm(p *Page) *form {
	f := &form{p: p, questions: container.NewVBox(), reasons: container.NewVBox()}
	structure := func(set func(r *logger.Recipe, word string)) func(string) {
		return func(word string) { p.restructure(func(r *logger.Recipe) { set(r, word) }) }
	}
	change := func(set func(r *logger.Recipe, word string)) func(string) {
		return func(word string) { p.change(func(r *logger.Recipe) { set(r, word) }) }
	}
	f.encoding = p.newChoice("intake.encoding", logger.Encodings, nil, structure(func(r *logger.Recipe, w string) { r.Encoding = w }))
	f.separator = p.newChoice("intake.separator", logger.Separators, named(logger.Separators, separatorWords), structure(func(r *logger.Recipe, w string) { r.Separator = w }))
	f.decimal = p.newChoice("intake.decimal", []string{".", ","}, []string{"point .", "comma ,"}, change(func(r *logger.Recipe, w string) {
		if r.Decimal = w; r.Thousands == w {
			r.Thousands = ""
		}
		r.Questions = slices.DeleteFunc(r.Questions, func(q logger.Question) bool { return q.Field == "decimal" })
	}))
	f.group = p.newChoice("intake.thousands", []string{"", ".", ",", "'", " "}, []string{"none", "point .", "comma ,", "apostrophe '", "blank"}, change(func(r *logger.Recipe, w string) { r.Thousands = w }))
	f.shape = p.newChoice("intake.time.form", forms, forms4(), change(func(r *logger.Recipe, w string) { r.Time.Form = logger.Form(w) }))
	f.clock = p.newChoice("intake.time.column", nil, nil, change(func(r *logger.Recipe, w string) { setTimeColumn(r, 0, w) }))
	f.second = p.newChoice("intake.time.second", nil, nil, change(func(r *logger.Recipe, w string) { setTimeColumn(r, 1, w) }))
	f.order = p.newChoice("intake.time.order", orders, orderWords, change(func(r *logger.Recipe, w string) {
		r.Time.Order = w
		r.Questions = slices.DeleteFunc(r.Questions, func(q logger.Question) bool { return q.Field == "order" })
	}))
	f.unit = p.newChoice("intake.time.unit", timeUnits, nil, change(func(r *logger.Recipe, w string) { r.Time.Unit = w }))
	line := func(name string, of func(r *logger.Recipe) *int, low int) *widgets.Field {
		return widgets.Name(widgets.NewField("", func(text string) error {
			n, err := lineNumber(text, low)
			if err == nil {
				p.restructure(func(r *logger.Recipe) { *of(r) = n })
			}
			return err
		}), name)
	}
	f.head = line("intake.head", func(r *logger.Recipe) *int { return &r.Head }, 0)
	f.unitsRow = line("intake.unitsrow", func(r *logger.Recipe) *int { return &r.UnitsRow }, 0)
	f.first = line("intake.first", func(r *logger.Recipe) *int { return &r.First }, 1)
	f.interval = widgets.Name(widgets.NewField("", f.takeInterval), "intake.time.interval")
	f.wide = widgets.Name(widgets.NewField("", f.takeWidths), "intake.widths")
	f.wrong = widgets.Name(say("", widget.DangerImportance, false), "intake.form.wrong")
	f.content = f.lay()
	return f
}

func forms4() (out []string) {
	for _, w := range forms {
		out = append(out, formWords[logger.Form(w)])
	}
	return out
}

func named(words []string, names map[string]string) (out []string) {
	for _, w := range words {
		out = append(out, names[w])
	}
	return out
}

func (f *form) lay() fyne.CanvasObject {
	row := func(name string, c *choice) fyne.CanvasObject { return widgets.Row(name, c.Select, nil) }
	f.rows = []fyne.CanvasObject{row("Date is", f.order), row("Unit of time", f.unit), widgets.FieldRow("Interval", f.interval),
		widgets.FieldRow("Columns begin at", f.wide), row("and column", f.second)}
	left := container.NewVBox(f.questions,
		widgets.Card("Text", container.NewVBox(row("Encoding", f.encoding), row("Columns parted by", f.separator), f.rows[3], row("Decimal sign", f.decimal), row("Thousands sign", f.group))),
		widgets.Card("Lines, from 1", container.NewVBox(widgets.FieldRow("Names of columns", f.head), widgets.FieldRow("Units", f.unitsRow), widgets.FieldRow("First row", f.first))),
		widgets.Card("Time stamps", container.NewVBox(row("Written as", f.shape), row("in column", f.clock), f.rows[4], f.rows[0], f.rows[1], f.rows[2])),
		f.reasons)
	f.raw = widgets.Name(widgets.NewTable(fyne.NewSize(260, 110), f.p.ctx.Palette), "intake.raw")
	f.read = widgets.Name(widgets.NewTable(fyne.NewSize(260, 120), f.p.ctx.Palette), "intake.read")
	f.raw.ByRow, f.read.ByRow = true, true
	both := container.NewVSplit(widgets.Card("As it stands: first and last lines", f.raw), widgets.Card("As it is read, before corrections", container.NewBorder(f.wrong, nil, nil, nil, f.read)))
	room := container.NewVScroll(both)
	f.raw.Outer, f.read.Outer = room.Scrolled, room.Scrolled
	split := container.NewHSplit(container.NewVScroll(container.New(besideBar{}, left)), room)
	split.Offset = 0.32
	return split
}

func lineNumber(text string, low int) (int, error) {
	if text == "" && low == 0 {
		return 0, nil
	}
	n, err := strconv.Atoi(text)
	if err != nil || n < low {
		return 0, fmt.Errorf("write the number of a line, from %d; nothing where there is none", max(1, low))
	}
	return n, nil
}

func (f *form) takeInterval(text string) error {
	second, _ := units.ParseUnit("s", units.Time)
	x, _, err := units.ParseLoose(text, units.Time, second)
	if err == nil && !(x > 0) {
		err = errors.New("must be above 0")
	}
	if err == nil {
		f.p.change(func(r *logger.Recipe) {
			r.Time.Interval = x
			r.Questions = slices.DeleteFunc(r.Questions, func(q logger.Question) bool { return q.Field == "interval" })
		})
	}
	return err
}

func (f *form) takeWidths(text string) error {
	var out []int
	for _, w := range strings.FieldsFunc(text, func(r rune) bool { return r == ' ' || r == ',' || r == ';' }) {
		n, err := strconv.Atoi(w)
		if err != nil || n < 0 || len(out) > 0 && n <= out[len(out)-1] {
			return errors.New("write where each column begins, in characters from 0 and rising, such as 0 8 16")
		}
		out = append(out, n)
	}
	f.p.restructure(func(r *logger.Recipe) { r.Widths = out })
	return nil
}

func setTimeColumn(r *logger.Recipe, i int, column string) {
	for len(r.Time.Columns) <= i {
		r.Time.Columns = append(r.Time.Columns, "")
	}
	r.Time.Columns = slices.Clone(r.Time.Columns)
	if r.Time.Columns[i] = column; column == "" {
		r.Time.Columns = r.Time.Columns[:i]
	}
	r.Channels = slices.DeleteFunc(r.Channels, func(c logger.Channel) bool { return c.Column == column })
}

// change changes the recipe and reads anew.
func (p *Page) change(set func(r *logger.Recipe)) { p.changeOf(p.src(), set) }

// changeOf is change for one of the loggers.
func (p *Page) changeOf(s *source, set func(r *logger.Recipe)) {
	s.recipe = cloned(s.recipe)
	set(&s.recipe)
	s.kept = nil
	p.readAll()
}

// fill shows the recipe.
func (f *form) fill() {
	r := f.p.src().recipe
	f.fillQuestions()
	f.encoding.set(r.Encoding)
	f.separator.set(r.Separator)
	f.decimal.set(r.Decimal)
	f.group.set(r.Thousands)
	f.shape.set(string(r.Time.Form))
	number := func(l *widgets.Field, n int) {
		text := ""
		if n > 0 {
			text = strconv.Itoa(n)
		}
		l.SetValue(text, "")
	}
	number(f.head, r.Head)
	number(f.unitsRow, r.UnitsRow)
	number(f.first, r.First)
	f.order.set(r.Time.Order)
	f.unit.set(r.Time.Unit)
	f.interval.SetValue(f.p.ctx.Local(units.FileText(r.Time.Interval, units.Preferred(units.Time, units.SI))), "")
	f.wide.SetValue(strings.Trim(fmt.Sprint(r.Widths), "[]"), "")
	dated := r.Time.Form == logger.Dated
	show(f.rows[0], dated)
	show(f.rows[1], r.Time.Form == logger.Elapsed || r.Time.Form == logger.Epoch)
	show(f.rows[2], r.Time.Form == logger.Spaced)
	show(f.rows[3], r.Separator == "fixed")
	show(f.rows[4], dated)
	f.fillTables()
	f.reasons.Objects = nil
	if len(r.Reasons) > 0 {
		f.reasons.Add(say("Why so", widget.MediumImportance, true))
		for _, text := range r.Reasons {
			f.reasons.Add(say(text, widget.LowImportance, false))
		}
	}
	f.reasons.Refresh()
}

// besideBar leaves room for a scroll bar at the right.
type besideBar struct{}

func (besideBar) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Resize(size.SubtractWidthHeight(12*widgets.Scale(), 0))
	}
}

func (besideBar) MinSize(objects []fyne.CanvasObject) fyne.Size {
	return objects[0].MinSize().AddWidthHeight(12*widgets.Scale(), 0)
}
