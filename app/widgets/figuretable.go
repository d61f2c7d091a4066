package widgets

import (
	"fmt"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"

	"barlitre/audit"
)

// FigureRow is a row of a FigureTable. One without cells is a heading.
type FigureRow struct {
	Name  string
	Cells []audit.Figure // one with an empty Text stays empty
	Bold  bool
}

// FigureTable shows figures of the report in columns. Each opens its calculation.
type FigureTable struct {
	widget.BaseWidget
	open  func(audit.Figure)
	local func(string) string
	head  []string
	rows  []FigureRow
	box   *fyne.Container
}

// NewFigureTable makes a table; open opens a calculation, local puts the user's
// decimal sign into a text.
func NewFigureTable(open func(audit.Figure), local func(string) string) *FigureTable {
	t := &FigureTable{open: open, local: local, box: container.New(&columnLayout{cols: 1})}
	t.ExtendBaseWidget(t)
	return t
}

// Set shows rows under a head whose first entry stands over the names. Objects are kept where the
// shape of the table is the same, so that the focus stays.
func (t *FigureTable) Set(head []string, rows []FigureRow) {
	same := len(head) == len(t.head) && len(rows) == len(t.rows)
	t.head, t.rows = head, rows
	if !same {
		t.rebuild()
	}
	at := 0
	label := func(text string, bold bool, quiet bool) {
		l := t.box.Objects[at].(*widget.Label)
		importance := widget.MediumImportance
		if quiet {
			importance = widget.LowImportance
		}
		if l.Text != text || l.TextStyle.Bold != bold || l.Importance != importance {
			l.TextStyle.Bold, l.Importance = bold, importance
			l.SetText(text)
		}
		at++
	}
	for _, h := range head {
		label(h, false, true)
	}
	for _, row := range rows {
		label(row.Name, row.Bold || len(row.Cells) == 0, false)
		for i := range head[1:] {
			var f audit.Figure
			if i < len(row.Cells) {
				f = row.Cells[i]
			}
			t.fill(t.box.Objects[at].(*Reading), f, row.Bold)
			at++
		}
	}
	t.Refresh()
}

func (t *FigureTable) fill(r *Reading, f audit.Figure, bold bool) {
	if f.Calculation == (audit.Calculation{}) || t.open == nil {
		r.Set(t.local(f.Text), bold, nil)
		return
	}
	r.Set(t.local(f.Text), bold, func() { t.open(f) })
}

// rebuild makes the objects for the shape of the table.
func (t *FigureTable) rebuild() {
	var all []fyne.CanvasObject
	for i := range t.head {
		l := widget.NewLabel("")
		l.Truncation = fyne.TextTruncateEllipsis
		if i > 0 {
			l.Truncation, l.Alignment = fyne.TextTruncateOff, fyne.TextAlignTrailing
		}
		all = append(all, l)
	}
	for range t.rows {
		l := widget.NewLabel("")
		l.Truncation = fyne.TextTruncateEllipsis
		all = append(all, l)
		for range t.head[1:] {
			all = append(all, NewReading("", nil))
		}
	}
	t.box.Layout = &columnLayout{cols: max(1, len(t.head))}
	t.box.Objects = all
	t.box.Refresh()
}

// DumpText is the whole table as a script reads it: cells apart by " | ", rows by " / ".
func (t *FigureTable) DumpText() string {
	rows := []string{strings.Join(t.head, " | ")}
	for _, r := range t.rows {
		cells := []string{r.Name}
		for _, c := range r.Cells {
			cells = append(cells, t.local(c.Text))
		}
		rows = append(rows, strings.Join(cells, " | "))
	}
	return strings.Join(rows, " / ")
}

// Parts tells where the cells are, by the number of their row and column from 1: "2.1".
func (t *FigureTable) Parts() []Part {
	var out []Part
	for i, o := range t.box.Objects {
		r, ok := o.(*Reading)
		if !ok || r.text.Text == "" {
			continue
		}
		n := len(t.head)
		at, size := r.Position(), r.Size()
		out = append(out, Part{Name: fmt.Sprintf("%d.%d", i/n, i%n), Text: t.rows[i/n-1].Name + ": " + r.text.Text,
			X: float64(at.X), Y: float64(at.Y), W: float64(size.Width), H: float64(size.Height), Click: r.Open != nil})
	}
	return out
}

// CreateRenderer is for the toolkit.
func (t *FigureTable) CreateRenderer() fyne.WidgetRenderer { return widget.NewSimpleRenderer(t.box) }

// columnLayout sets objects in columns: the first takes what the others leave.
type columnLayout struct{ cols int }

const firstColumn = 90 // least width of the first column, at scale 1

func (l *columnLayout) sizes(objects []fyne.CanvasObject) (widths, heights []float32) {
	widths = make([]float32, l.cols)
	for i, o := range objects {
		m := o.MinSize()
		if i%l.cols == 0 {
			heights = append(heights, 0)
			m.Width = max(m.Width, firstColumn*Scale())
		}
		widths[i%l.cols] = max(widths[i%l.cols], m.Width)
		heights[len(heights)-1] = max(heights[len(heights)-1], m.Height)
	}
	return widths, heights
}

func (l *columnLayout) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	widths, heights := l.sizes(objects)
	rest := size.Width
	for _, w := range widths[1:] {
		rest -= w
	}
	widths[0] = max(widths[0], rest)
	y := float32(0)
	for i, o := range objects {
		col := i % l.cols
		x := float32(0)
		for _, w := range widths[:col] {
			x += w
		}
		h := heights[i/l.cols]
		o.Move(fyne.NewPos(x, y))
		o.Resize(fyne.NewSize(widths[col], h))
		if col == l.cols-1 {
			y += h - theme.Padding()/2 // rows a little closer than labels ask for
		}
	}
}

func (l *columnLayout) MinSize(objects []fyne.CanvasObject) fyne.Size {
	widths, heights := l.sizes(objects)
	var m fyne.Size
	for _, w := range widths {
		m.Width += w
	}
	for _, h := range heights {
		m.Height += h - theme.Padding()/2
	}
	m.Height += theme.Padding() / 2
	return m
}
