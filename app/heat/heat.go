// Package heat is the station for the heat put into the oil: its course by block, its
// means, and the cooler that it asks for. Everything shown comes from the report and the
// courses of the solution.
package heat

import (
	"slices"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/widgets"
	"barlitre/audit"
)

// Heat is the station.
type Heat struct {
	ctx     station.Context
	content fyne.CanvasObject
	plot    *plot
	table   *widgets.FigureTable
	oil     *temperature
	air     *temperature
	empty   *widgets.Text
	tableOf *fyne.Container // the table with its head, hidden while there is none
	fault   *widgets.Text
	basis   *widgets.Text
	caution *widgets.Text
	hot     *widgets.Text
	curves  *curves
	section *section
	warmth  *widgets.FigureTable
	request *widgets.TipButton
	missing *widgets.Text

	head []string // of warmth, as last worked out
	rows []widgets.FigureRow
}

// New makes the station.
func New(ctx station.Context) station.Station {
	h := &Heat{ctx: ctx}
	h.build()
	return h
}

// Name is the word on the rail.
func (h *Heat) Name() string { return "Heat" }

// Content is the station's page.
func (h *Heat) Content() fyne.CanvasObject { return h.content }

// Help is the short help.
func (h *Heat) Help() string {
	return "The areas show how much heat each block puts into the oil at every instant of one cycle, the largest lowest; all circuits have the same scale. " +
		"A click into them sets the clock. The dashed line is the mean of the cycle.\n\n" +
		"The table gives the mean heat of each duty and of all running hours, and the cooler this asks for at the oil and air temperature beside it: " +
		"heat divided by the difference of the two. Type another temperature and the figures follow. A click on a figure, or Enter on it, opens its calculation.\n\n" +
		"Choose a cooler for the hottest duty, not for the mean of the year. Walls of tank and pipes are not credited there: they are a reserve.\n\n" +
		"Oil temperature follows the oil of all circuits over the week that repeats itself, over one day, and after a winter start, with the limits drawn across. The circuits are solved " +
		"at several oil temperatures, so thick and thin oil change every loss. Three sliders try another cooler, air and tank; the curves follow at once, and the audit changes only with Put into the audit.\n\n" +
		"Below the curves stand the oil temperature, the cooler needed for the oil wanted, and the check matrix: hot day and worst duty, a fouled cooler, a fan off, a relief valve that takes all the power, " +
		"and a winter start. A sign says what is passed. Tank, cooler and air takes what this rests on, for all circuits or for one; an empty field has its default, which stands in grey. " +
		"What fan and loop pump draw is booked with the energy of every circuit.\n\n" +
		"Cooler request sheet… writes what a maker of coolers asks for, as PDF or, with the ending .csv, as a table. Lines left blank are for whom their note names."
}

func (h *Heat) build() {
	h.plot = newPlot(h.ctx)
	h.table = widgets.NewFigureTable(h.ctx.Palette, h.ctx.Explain, h.ctx.Local)
	widgets.Name(h.table.Table, "heat.table")
	h.oil = newTemperature(h.ctx, "Oil temperature", "oil.temperature", "heat.oil")
	h.air = newTemperature(h.ctx, "Air temperature", "air.temperature", "heat.air")
	h.empty, h.fault, h.basis = widgets.Wrapped("heat.empty"), widgets.Wrapped("heat.fault"), widgets.Wrapped("heat.basis")
	h.caution, h.hot = widgets.Wrapped("heat.caution"), widgets.Wrapped("heat.hot")
	h.fault.Importance = widget.DangerImportance
	h.basis.Importance = widget.LowImportance
	h.tableOf = container.NewVBox(h.table.Table, h.fault, h.basis)
	h.curves, h.section = newCurves(h.ctx), newSection(h.ctx)
	h.warmth = widgets.NewFigureTable(h.ctx.Palette, h.ctx.Explain, h.ctx.Local)
	widgets.Name(h.warmth.Table, "heat.warmth")
	h.request = widgets.Name(widgets.NewTipButton("Cooler request sheet…", "what a maker of coolers asks for, a page for each circuit; with the ending .csv as a table", h.saveRequest), "heat.request")
	h.missing = widgets.Wrapped("heat.missing")
	side := container.NewVBox(
		widgets.Card("Temperatures", container.NewVBox(h.oil.content, h.air.content, h.caution)),
		widget.NewSeparator(),
		widgets.Card("Mean heat and the cooler for it", container.NewVBox(h.empty, h.tableOf)),
		h.hot,
		widget.NewSeparator(),
		widgets.Card("Tank, cooler and air", h.section.content),
	)
	scroll := container.NewScroll(widgets.Spaced(side))
	h.table.In(scroll)
	wide := container.NewScroll(widgets.Spaced(container.NewVBox(h.plot.content, widget.NewSeparator(), h.curves.content, widget.NewSeparator(),
		widgets.Card("Oil temperature, cooler needed, checks", container.NewVBox(h.missing, container.NewHBox(h.request), h.warmth.Table)))))
	h.warmth.In(wide)
	split := container.NewHSplit(wide, scroll)
	split.Offset = 0.57
	h.content = split
}

// Changed shows anew what changed.
func (h *Heat) Changed(w station.What) {
	if w.Has(station.Model | station.Settings) {
		h.oil.show(h.ctx.Doc().File())
		h.air.show(h.ctx.Doc().File())
		h.section.show()
	}
	if w.Has(station.Solution | station.Selection | station.Settings | station.Model) {
		h.figures()
		h.plot.load()
		h.temperatures(w)
	}
	if w.Has(station.Clock) {
		h.plot.clock()
	}
}

// figures fills the table and what is said about it.
func (h *Heat) figures() {
	r, s := h.ctx.Report(), h.ctx.Solution()
	solved := false
	if r != nil {
		for _, c := range r.Circuits {
			solved = solved || c.Solved
		}
	}
	if !solved {
		h.empty.SetText(emptyText(r))
		h.empty.Show()
		h.tableOf.Hide()
		h.caution.SetText("")
		h.hot.SetText("")
		return
	}
	h.empty.Hide()
	h.tableOf.Show()
	head, rows := rows(r)
	h.table.Set(head, rows)
	h.fault.SetText(h.ctx.Local(fault(s)))
	if h.fault.Text == "" {
		h.fault.Hide()
	} else {
		h.fault.Show()
	}
	h.basis.SetText(h.ctx.Local(basis(r)))
	h.caution.SetText("")
	if len(r.Assumptions) > 0 { // the first says what oil all circuits have, and what follows
		h.caution.SetText("▲ " + h.ctx.Local(r.Assumptions[0]))
	}
	h.hot.SetText("")
	for _, c := range r.Cautions {
		if c.Topic == "Hot surfaces" {
			h.hot.SetText("▲ " + c.Topic + ": " + h.ctx.Local(c.Text))
		}
	}
}

// temperatures fills what is said of the oil temperature.
func (h *Heat) temperatures(w station.What) {
	if w.Has(station.Solution | station.Settings) {
		h.curves.load()
	}
	r, s := h.ctx.Report(), h.ctx.Solution()
	if r == nil || len(r.Warmth) == 0 {
		h.request.Disable()
		if s != nil && s.Pending && len(h.rows) > 0 {
			h.warmth.Set(h.head, blanked(h.rows))
			return
		}
		h.rows = nil
		h.missing.SetText(h.ctx.Local(whyNoWarmth(h.ctx, s)))
		h.missing.Show()
		h.warmth.Table.Hide()
		return
	}
	h.missing.Hide()
	h.warmth.Table.Show()
	h.request.Enable()
	var rows []widgets.FigureRow
	for _, t := range r.Warmth {
		rows = append(rows, widgets.FigureRow{Name: t.Title})
		for _, x := range t.Rows {
			row := widgets.FigureRow{Name: x.Cells[0]}
			for i, cell := range x.Cells[1:] {
				row.Cells = append(row.Cells, audit.Figure{Name: t.Title + ", " + x.Cells[0] + ", " + t.Head[i+1], Text: cell,
					Calculation: audit.Calculation{Formula: t.Formula, Numbers: x.Cells[0] + ": " + cell, Source: t.Note}})
			}
			rows = append(rows, row)
		}
	}
	h.head, h.rows = r.Warmth[0].Head, rows
	h.warmth.Set(h.head, rows)
}

// blanked are the rows of a table whose values are being worked out anew.
func blanked(rows []widgets.FigureRow) []widgets.FigureRow {
	out := slices.Clone(rows)
	for i, r := range rows {
		out[i].Cells = make([]audit.Figure, len(r.Cells))
		for k := range out[i].Cells {
			out[i].Cells[k].Text = "…"
		}
	}
	return out
}

// whyNoWarmth says what belongs here and how to get it.
func whyNoWarmth(ctx station.Context, s *audit.Solution) string {
	if s != nil && s.Pending {
		return pendingText(ctx)
	}
	if s != nil {
		for _, c := range s.Circuits {
			if c.Warmth != nil && c.Warmth.Fault != "" {
				return c.Warmth.Fault
			}
		}
	}
	if waits(ctx, s) {
		return "The oil temperature, the cooler needed, the checks of hot day and faults, and the sheet to ask for a cooler stand here as soon as there is a result."
	}
	return "The oil temperature, the cooler needed, the checks of hot day and faults, and the sheet to ask for a cooler stand here once the audit knows the oil in the tank: type it under Tank, cooler and air, at the right."
}

// waits reports whether the audit knows its tank, and only a result is missing.
func waits(ctx station.Context, s *audit.Solution) bool {
	_, tank := ctx.Doc().File().Heat.Values["tank_volume"]
	return s == nil && tank
}

// emptyText says what belongs here and how to get it.
func emptyText(r *audit.Report) string {
	if r == nil {
		return "The heat of each circuit stands here as soon as there is a result. Open an audit, or take one from File > New; it is then solved by itself."
	}
	return "No circuit could be solved, so there is no heat to show. Circuit lists under its findings what is missing; a click on one leads to it."
}

// rows sets the report's heat figures side by side, means first, then coolers.
func rows(r *audit.Report) (head []string, rows []widgets.FigureRow) {
	head = []string{""}
	var names []string
	for _, c := range r.Circuits {
		if !c.Solved {
			continue
		}
		head = append(head, c.Name)
		for _, f := range c.Heat {
			if !slices.Contains(names, f.Name) {
				names = append(names, f.Name)
			}
		}
	}
	for _, group := range []struct{ title, prefix string }{
		{"Mean heat to the oil", "mean heat to the oil, "}, {"Cooler for it", "cooler for it, "},
	} {
		first := true
		for _, name := range names {
			rest, ok := strings.CutPrefix(name, group.prefix)
			if !ok {
				continue
			}
			if first {
				rows = append(rows, widgets.FigureRow{Name: group.title})
				first = false
			}
			row := widgets.FigureRow{Name: rest}
			for _, c := range r.Circuits {
				if c.Solved {
					row.Cells = append(row.Cells, named(c.Heat, name))
				}
			}
			rows = append(rows, row)
		}
	}
	return head, rows
}

func named(fs []audit.Figure, name string) audit.Figure {
	for _, f := range fs {
		if f.Name == name {
			return f
		}
	}
	return audit.Figure{Name: name, Text: "–"}
}

// fault is why no cooler is named.
func fault(s *audit.Solution) string {
	for _, c := range s.Circuits {
		if c.Heat != nil && c.Heat.Fault != "" {
			return c.Heat.Fault
		}
	}
	return ""
}

// basis is what the report assumes of coolers.
func basis(r *audit.Report) string {
	for _, a := range r.Assumptions {
		if _, ok := strings.CutPrefix(a, "Coolers are named for"); ok {
			return a
		}
	}
	return ""
}

// Mend reports that no cooler can be named though there is heat.
func (h *Heat) Mend() bool {
	s := h.ctx.Solution()
	return s != nil && len(s.Circuits) > 0 && fault(s) != ""
}
