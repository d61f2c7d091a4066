package pdf

import (
	"fmt"
	"math"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// The scale of drawn circuits [mm a module]: at the most, names are little larger
// than body text; below the least, circuits no longer share a page.
const (
	drawnMost  = 1.7
	drawnLeast = 1.15
	drawnSmall = 0.8 // a circuit that needs less is drawn smaller than the others
)

// Room about a drawn circuit [mm].
const (
	drawnGap = 1.5
	symbols  = "Symbols based on ISO 1219-1."
)

// drawn is a circuit ready for the page.
type drawn struct {
	*figures.Sheet
	c     *audit.CircuitRun
	run   *audit.DutyRun // nil = without results
	state *figures.SheetState
	notes []string // between its name and the drawing
	w, h  float64  // modules
	k     float64  // mm a module
}

// drawings are all circuits at one instant, on common scales.
type drawings struct {
	all    []drawn
	at     instant
	scales figures.SheetScales
	intro  string
	share  int     // how many share a page at the least
	k      float64 // mm a module, of all that are not too large for it
}

// drawings lays all circuits out, once for all trials of the report.
func (l *layout) drawings() *drawings {
	if l.drawn != nil {
		return l.drawn
	}
	d := &drawings{at: mostDrawn(l.s)}
	var runs []*audit.DutyRun
	for _, c := range l.s.Circuits {
		one := drawn{c: c, run: d.at.run(c), Sheet: figures.NewSheet(c.Circuit)}
		if one.run != nil {
			one.Sheet = one.Labelled(one.run)
			one.state = figures.OverCycle(one.run, d.at.t)
			runs = append(runs, one.run)
		}
		one.notes = l.small().wrap(l.drawnNote(d.at, one), fullW)
		one.w, one.h = one.Size()
		d.all = append(d.all, one)
	}
	d.scales = figures.ScalesOf(runs...)
	d.intro = l.drawnIntro(d.at)
	l.fitDrawings(d)
	l.drawn = d
	return d
}

// drawnIntro says which instant is drawn and what the signs mean.
func (l *layout) drawnIntro(at instant) string {
	if at.of == nil {
		return "No circuit could be solved, so all are drawn without results."
	}
	run := at.of.Duties[at.duty]
	phase := phaseAt(run.Duty, at.t)
	if phase != "" {
		phase = " (" + phase + ")"
	}
	return fmt.Sprintf("All circuits at the same instant, at %s%s of duty “%s”%s: the middle of the longest stretch in which “%s” draws at least %s of its largest power, %s. "+
		"Pressures, flows, speeds and openings are those of this instant; arrowheads show where the oil goes. "+
		"Discs and the figures in their colour are the heat of one whole cycle, by area: the larger the disc, the more energy is lost there. "+
		"Tint, width and discs have the same scales in all circuits.", units.Format(at.t, units.Preferred(units.Time, l.r.System), 4), phase, run.Duty.Name, l.whyDuty(at), at.of.Circuit.Name, units.Format(nearMost, units.Percent, 2),
		units.Format(run.Balance.PeakSupply, units.Preferred(units.Power, l.r.System), 4))
}

// whyDuty says behind its name why it is this duty, where there are others.
func (l *layout) whyDuty(at instant) string {
	f := l.s.File
	switch order := f.DutiesByYear(); {
	case len(f.Duties) < 2 || len(f.InYear()) == 0:
		return ""
	case at.duty != order[0]:
		return fmt.Sprintf(" (for “%s” could not be solved)", f.Duties[order[0]].Name)
	case len(f.InYear()) == 1:
		return ", which alone runs in the year"
	}
	return ", which moves most in the year"
}

// phaseAt names the phase of a duty at time t, "" where there is none.
func phaseAt(d *duty.Duty, t float64) string {
	name := ""
	for _, p := range d.Phases {
		if p.From <= t {
			name = p.Name
		}
	}
	return name
}

// drawnNote says what a circuit draws at the instant, and turns to heat over the cycle.
func (l *layout) drawnNote(at instant, d drawn) string {
	if d.run == nil {
		if at.of == nil {
			return "This circuit could not be solved; it is drawn without results. See the findings."
		}
		return "This circuit could not be solved over the duty shown; it is drawn without results. See the findings."
	}
	power := drawnAt(d.run.Plot, at.t)
	heat := 0.0
	for _, b := range d.c.Circuit.Blocks {
		heat += d.state.Heat(b.ID)
	}
	in := func(v float64, dim units.Dim) string { return units.Format(v, units.Preferred(dim, l.r.System), 4) }
	what := "Draws"
	if power < 0 {
		what, power = "Returns", -power
	}
	text := fmt.Sprintf("%s %s at this instant; its blocks turn %s into heat over the cycle", what, in(power, units.Power), in(heat, units.Energy))
	if fan := d.run.Balance.CoolingDrawn().Total(); fan > 0 {
		text += ", fan and pumps of the cooling " + in(fan, units.Energy) + " besides"
	}
	return text + "."
}

// fitDrawings chooses one scale for all circuits: the largest at which two share a page,
// or, where that is too small to read, at which each fits a page. A circuit that is too
// large for either has a scale of its own.
func (l *layout) fitDrawings(d *drawings) {
	_, head := l.headLines(1, string(Circuits))
	room := bottom - top - head - 3.6 - l.introHeight(d) - l.small().line() - drawnGap
	one, pair := drawnMost, math.Inf(1)
	for i := range d.all {
		c := &d.all[i]
		c.k = l.ownScale(*c, room)
		if c.k < drawnSmall {
			c.notes = l.small().wrap(l.drawnNote(d.at, *c)+" Drawn smaller to fit the page, lines and discs as well; magnify to read it.", fullW)
			c.k = l.ownScale(*c, room)
			continue
		}
		one = min(one, c.k)
	}
	for i := 0; i+1 < len(d.all); i += 2 {
		a, b := d.all[i], d.all[i+1]
		pair = min(pair, (room-l.above(a)-l.above(b))/(figures.LegendHeight+a.h+b.h))
	}
	d.k, d.share = one, 1
	if len(d.all) > 1 && pair >= drawnLeast {
		d.k, d.share = min(one, pair), 2
	}
	for i := range d.all {
		d.all[i].k = min(d.all[i].k, d.k)
	}
}

// ownScale is the largest scale at which a circuit fits a page beside room mm for what
// is written about it.
func (l *layout) ownScale(c drawn, room float64) float64 {
	return min(fullW/c.w, max(room-l.above(c), (bottom-top)/3)/(figures.LegendHeight+c.h))
}

func (l *layout) introHeight(d *drawings) float64 {
	return float64(len(l.body().wrap(d.intro, fullW)))*l.body().line() + 1.2
}

// above is the height of what stands over the drawing of a circuit, and of the gap below.
func (l *layout) above(c drawn) float64 {
	_, head := l.headLines(2, c.c.Circuit.Name)
	return 5.5 + head + 1.2 + float64(len(c.notes))*l.small().line() + drawnGap
}

// below is the height of what stays with the name of a circuit.
func (l *layout) below(c drawn) float64 {
	return float64(len(c.notes))*l.small().line() + c.k*c.h
}

// firstDrawings is the height of what stays with the heading of the section: what
// explains the drawings, and as many of them as share the page.
func (l *layout) firstDrawings() float64 {
	d := l.drawings()
	h := l.introHeight(d) + d.k*figures.LegendHeight
	for _, c := range d.all[:min(len(d.all), d.share)] {
		h += l.above(c) + c.k*c.h
	}
	return h
}

// circuits prints every circuit as it is drawn, with its results.
func (l *layout) circuits() {
	d := l.drawings()
	if len(d.all) == 0 {
		l.para("The file holds no circuit.", l.body())
		return
	}
	opt := figures.SheetOptions{Palette: l.pal, System: l.r.System, Scales: d.scales}
	l.para(d.intro, l.body())
	l.need(d.k * figures.LegendHeight)
	l.p.Push(side, l.y, d.k)
	figures.DrawLegend(l.p, fullW/d.k, d.scales, true, opt)
	l.p.Pop()
	l.y += d.k * figures.LegendHeight
	for _, c := range d.all {
		l.heading(2, c.c.Circuit.Name, l.below(c))
		l.lines(side, c.notes, l.small())
		l.need(c.k * c.h)
		c.Draw(l.p, side+(fullW-c.k*c.w)/2, l.y, c.k, c.state, opt)
		l.y += c.k*c.h + drawnGap
	}
	l.para(symbols, l.small())
}
