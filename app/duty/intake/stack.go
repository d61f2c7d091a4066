package intake

import (
	"fmt"

	"barlitre/app/widgets"
	"barlitre/audit/figures"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	found "barlitre/circuit/recording/cycles"
	"barlitre/machines/units"
)

// Cycles that are drawn, and points of each; of more, every so manieth is left out.
const (
	stackCycles = 40
	stackPoints = 200
	stackLanes  = 4
)

// stacked is the plot of all cycles over one another: the power of all axes, then speeds.
func stacked(r *found.Result, d *duty.Duty, p *Page) figures.Plot {
	kW := units.Preferred(units.Power, p.ctx.System())
	plot := figures.Plot{Axis: "time into the cycle", AxisUnit: "s"}
	if works := logged.Works(d); len(works) > 0 {
		plot.Lanes = append(plot.Lanes, stackLane(r, p.extreme(), logged.Power(works), "power", kW))
	}
	for _, t := range d.Tracks {
		if t.What == duty.Speed && len(plot.Lanes) < stackLanes {
			kind, _ := p.kind(t.Of)
			plot.Lanes = append(plot.Lanes, stackLane(r, p.extreme(), t.Values, t.Of+" speed", units.Preferred(duty.Speed.Dim(kind), p.ctx.System())))
		}
	}
	return plot
}

func stackLane(r *found.Result, most int, channel []float64, title string, u units.Unit) figures.Lane {
	lane := figures.Lane{Title: title, Unit: u.Label(), Zero: true}
	all := r.Overlay(channel, stackPoints)
	add := func(s *figures.Series, i int) { // time goes back between two cycles, where the line breaks
		for k := range stackPoints {
			s.X = append(s.X, r.Cycles[i].Length()*float64(k)/(stackPoints-1))
		}
		s.Y = append(s.Y, inUnit(all[i], u)...)
	}
	stride := (len(all) + stackCycles - 1) / stackCycles
	others := figures.Series{Name: "others", Role: figures.RoleBar}
	for i := 0; i < len(all); i += stride {
		if i != r.Typical && i != most {
			add(&others, i)
		}
	}
	extreme, typical := figures.Series{Name: "extreme", Role: figures.RoleDanger, Dash: true}, figures.Series{Name: "typical", Role: figures.RoleGain}
	if add(&typical, r.Typical); len(others.X) > 0 {
		lane.Series = append(lane.Series, others)
	}
	if most >= 0 && most != r.Typical {
		add(&extreme, most)
		lane.Series = append(lane.Series, extreme)
	}
	lane.Series = append(lane.Series, typical)
	return lane
}

// fillTable lists the cycles.
func (c *cyclesTab) fillTable() {
	r, p := c.p.out.found, c.p
	n := 0
	if r != nil {
		n = len(r.Cycles)
	}
	second := units.Preferred(units.Time, units.SI)
	energy := units.Preferred(units.Energy, p.ctx.System())
	number := func(x float64, u units.Unit, digits int) string {
		return p.ctx.Local(units.Number(u.FromSI(x), digits))
	}
	c.table.Empty = "Each cycle stands here with its energy; a click makes it the duty."
	c.table.SetData([]widgets.Column{{Name: "cycle", Head: "Cycle"}, {Name: "from", Head: "From", Unit: "s"}, {Name: "length", Head: "Length", Unit: "s"},
		{Name: "out", Head: "Work out", Unit: energy.Label()}, {Name: "back", Head: "Work back", Unit: energy.Label()}, {Name: "like", Head: "Like the\ntypical one", Unit: "%"}, {Name: "note", Head: "", Left: true}}, n,
		func(i int) widgets.TableRow {
			k := r.Cycles[i]
			note := ""
			switch i {
			case r.Typical:
				note = "typical"
			case p.extreme():
				note = "extreme"
			case r.Odd:
				note = "least like the typical one"
			}
			return widgets.TableRow{Cells: []string{fmt.Sprint(i + 1), number(k.From, second, 5), number(k.Length(), second, 4), number(k.Positive, energy, 4),
				number(k.Negative, energy, 4), p.ctx.Local(units.Number(100*k.Likeness, 3)), note}}
		})
}
