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
	wrong                                 *widget.Label
}

// ends is how many lines of either end are shown.
const ends = 12

// choice is a list whose choices are not the user's while the page is filled.
type choice struct {
	*widgets.Select
	words  []string // as the recipe has them
	labels []string
}

// newChoice makes a list of words; labels are what is shown of them, nil for the words.
func (p *Page) newChoice(name string, words, labels []string, take func(word string)) *choice {
	c := &choice{words: words, labels: labels}
	if labels == nil {
		c.labels = words
	}
	c.Select = widgets.Name(widgets.NewSelect(c.labels, nil), name)
	c.OnChanged = func(string) {
		if i := c.SelectedIndex(); !p.loading && i >= 0 {
			take(c.words[i])
		}
	}
	return c
}

// set shows a word of the recipe.
func (c *choice) set(word string) {
	if i := slices.Index(c.words, word); i >= 0 {
		if c.SelectedIndex() != i {
			c.SetSelectedIndex(i)
		}
	} else if c.Selected != "" {
		c.ClearSelected()
	}
}

// offer changes what can be chosen.
func (c *choice) offer(words, labels []string) {
	if labels == nil {
		labels = words
	}
	if !slices.Equal(c.words, words) || !slices.Equal(c.labels, labels) {
		c.words, c.labels = words, labels
		c.SetOptions(labels)
	}
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

// fillQuestions asks what the file leaves open.
func (f *form) fillQuestions() {
	f.questions.Objects = nil
	for _, q := range f.p.src().recipe.Open() {
		f.questions.Add(say("⚠ "+q.Text, widget.DangerImportance, false))
		f.questions.Add(f.answerTo(q))
	}
	f.questions.Refresh()
}

// answerTo is a list of choices, or a field where an answer is free.
func (f *form) answerTo(q logger.Question) fyne.CanvasObject {
	name := "intake.question." + q.Field
	if len(q.Choices) == 0 {
		return widgets.Name(widgets.NewField("", func(text string) error { return f.p.answer(q.Field, text) }), name)
	}
	c := f.p.newChoice(name, q.Choices, nil, func(word string) {
		if err := f.p.answer(q.Field, word); err != nil {
			f.p.ctx.Fail(err)
		}
	})
	c.PlaceHolder = "Choose"
	return c.Select
}

// blocking are the questions without whose answer nothing is read. What a signal means can
// be told later: until then it is read in mA.
func (p *Page) blocking() (out []logger.Question) {
	for _, s := range p.sources {
		out = append(out, s.blocking()...)
	}
	return out
}

func (s *source) blocking() []logger.Question {
	return slices.DeleteFunc(s.recipe.Open(), func(q logger.Question) bool { return strings.HasSuffix(q.Field, logger.ScalingField) })
}

// unscaled is a recipe by which signals of unknown meaning are read in mA.
func unscaled(r logger.Recipe) logger.Recipe {
	r = cloned(r)
	for _, q := range r.Open() {
		if strings.HasSuffix(q.Field, logger.ScalingField) {
			r.Questions = slices.Clone(r.Questions)
			_ = r.Answer(q.Field, "mA") // always taken of a question that is open
		}
	}
	return r
}

func (p *Page) answer(field, word string) error {
	if field == "separator" {
		p.restructure(func(r *logger.Recipe) { r.Separator, r.Questions = word, nil })
		return nil
	}
	r := cloned(p.src().recipe)
	r.Questions = slices.Clone(r.Questions)
	if err := r.Answer(field, word); err != nil {
		return err
	}
	p.src().recipe = r
	p.read()
	return nil
}

// fillTables shows both ends of the file.
func (f *form) fillTables() {
	p := f.p
	pre, err := p.src().file.Preview(p.src().recipe, ends)
	if err != nil {
		f.wrong.SetText("⚠ " + err.Error())
		pre = &logger.Preview{}
		if raw, err := p.src().file.Preview(logger.Recipe{Encoding: p.src().recipe.Encoding, Separator: p.src().recipe.Separator, Decimal: ".", First: 1, Time: logger.Time{Form: logger.Spaced, Interval: 1}}, ends); err == nil {
			pre.First, pre.Last = raw.First, raw.Last
		}
	} else {
		f.wrong.SetText("")
	}
	show(f.wrong, f.wrong.Text != "")
	if err == nil {
		f.clock.offer(pre.Names, nil)
		f.second.offer(append([]string{""}, pre.Names...), append([]string{"none"}, pre.Names...))
		f.clock.set(column(p.src().recipe.Time.Columns, 0))
		f.second.set(column(p.src().recipe.Time.Columns, 1))
	}
	rows := joinedEnds(pre)
	f.raw.SetData([]widgets.Column{{Name: "line", Head: "Line"}, {Name: "text", Head: "Text", Left: true}}, len(rows), func(i int) widgets.TableRow {
		if rows[i] == nil {
			return widgets.TableRow{Cells: []string{"", "…"}}
		}
		return widgets.TableRow{Cells: []string{lineText(rows[i]), strings.ReplaceAll(rows[i].Text, "\t", " → ")}}
	})
	columns := []widgets.Column{{Name: "line", Head: "Line"}, {Name: "t", Head: "Time", Unit: "s"}}
	var shown []int
	for i, c := range p.src().recipe.Channels {
		if !c.Leave && !c.Text {
			shown = append(shown, i)
			columns = append(columns, widgets.Column{Name: c.Column, Head: c.Column, Unit: c.Unit})
		}
	}
	f.read.SetData(columns, len(rows), func(i int) widgets.TableRow { return f.readRow(rows[i], shown) })
}

func column(list []string, i int) string {
	if i < len(list) {
		return list[i]
	}
	return ""
}

// joinedEnds are the lines of both ends, each once, nil between them where lines are left out.
func joinedEnds(pre *logger.Preview) (out []*logger.PreviewRow) {
	last := 0
	for i := range pre.First {
		out = append(out, &pre.First[i])
		last = pre.First[i].Line
	}
	gap := true
	for i := range pre.Last {
		r := &pre.Last[i]
		if r.Line > 0 && r.Line <= last {
			continue
		}
		if gap && (r.Line == 0 || r.Line > last+1) {
			out = append(out, nil)
		}
		gap = false
		out = append(out, r)
	}
	return out
}

func lineText(r *logger.PreviewRow) string {
	if r.Line == 0 {
		return ""
	}
	return strconv.Itoa(r.Line)
}

func (f *form) readRow(r *logger.PreviewRow, shown []int) widgets.TableRow {
	switch {
	case r == nil:
		return widgets.TableRow{Cells: []string{"", "…"}}
	case !r.Row:
		return widgets.TableRow{Cells: []string{lineText(r), "no row"}}
	}
	cells := []string{lineText(r), f.p.ctx.Local(r.Time)}
	for _, i := range shown {
		text := "–"
		if i < len(r.SI) && r.SI[i] == r.SI[i] {
			text = f.p.ctx.Local(units.Number(unitOf(f.p.src().recipe.Channels[i]).FromSI(r.SI[i]), 5))
		}
		cells = append(cells, text)
	}
	return widgets.TableRow{Cells: cells}
}

// unitOf is the unit that a channel is in.
func unitOf(c logger.Channel) units.Unit {
	if c.Quantity != "" {
		if u, ok := units.Find(c.Unit, dimOf(c.Quantity)); ok {
			return u
		}
	}
	return units.Unit{Factor: 1}
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
