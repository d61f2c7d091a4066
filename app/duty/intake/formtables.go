package intake

import (
	"strconv"
	"strings"

	"barlitre/app/widgets"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// ends is how many lines of either end are shown.
const ends = 12

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
