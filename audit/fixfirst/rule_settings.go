package fixfirst

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Limits of load sensing: published machines 14 to 25 bar, up to 35 bar met on sound ones.
const (
	marginLimit  = 36 * units.Bar
	standByLimit = 40 * units.Bar
)

// marginAboveNeed finds a load-sensing margin turned up.
func marginAboveNeed(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		if look.Word(pump, "control") != "load_sensing" || look.Value(pump, "margin") <= marginLimit {
			continue
		}
		m := look.Value(pump, "margin")
		top := p.Highest(pump.ID+".P.p", look.Moving)
		f := p.found(pump, "load-sensing margin above need", Settings, NoCost)
		f.Param, f.Duty, f.Time = "margin", top.Duty, top.T
		f.Text = fmt.Sprintf("%s stands %s above the load; 14 to 25 bar move a sound machine.", pump.ID, p.bar(m))
		f.Evidence = []Quantity{
			{"margin of " + pump.ID, p.bar(m), "at most 35 bar"},
			{"pump pressure at work, highest", p.bar(top.V), ""},
			{"margin as share of it", percent(m / top.V), ""},
		}
		if mean, share := p.Mean(pump.ID+".P.p", look.Standing); share > 0 {
			f.Evidence = append(f.Evidence, Quantity{"stand-by pressure", p.bar(mean), "10 to 35 bar"})
		}
		f.Do = "Read pump and signal pressure with one function moving; the difference is the margin. Turn it down in steps of 2 bar until the fastest motion just slows, then 2 bar up. If the machine swings then, look for air or a worn orifice in the signal line instead of turning it up again."
		f.Caution = "Turn the margin, not the pressure cut-off: they sit side by side on most regulators. Keep hands off moving parts while it is set."
		f.Basis = "margin about 20 bar, 14 to 25 bar usual: published machines; 35 bar as the highest of sound ones: common practice, no source"
		f.Cures = p.pressures(lower, pump, "margin", 20e5, 22e5, 25e5, 28e5, 32e5)
		f.because = []string{(&Finding{Rule: ruleStandBy, Block: pump.ID}).key()}
		out = append(out, f)
	}
	return out
}

// settingAboveNeed finds a compensator set to far above what the work needs.
func settingAboveNeed(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		if look.Word(pump, "control") != "pressure" {
			continue
		}
		ps, need := look.Value(pump, "set_pressure"), p.workPressure(pump)
		if !need.OK || need.V <= 0 || need.V > 0.42*ps {
			continue
		}
		f := p.found(pump, "pressure setting above need", Settings, NoCost)
		f.Param, f.Duty, f.Time = "set_pressure", need.Duty, need.T
		f.Text = fmt.Sprintf("%s holds %s, and the highest load that hangs on it asks for %s: the valves burn the difference.", pump.ID, p.bar(ps), p.bar(need.V))
		f.Evidence = []Quantity{
			{"set pressure of " + pump.ID, p.bar(ps), "about the highest load pressure and 20 to 30 bar for the valve"},
			{"highest pressure behind the valves", p.bar(need.V), "above two fifths of the setting"},
			{"stand-by loss a year", kilowattHours(p.standing(pump)), ""},
		}
		f.Do = "With the heaviest load that the machine must move, turn the compensator down until the motion just slows, then up by a tenth. Write the new value beside the old one on the machine."
		f.Caution = "Ask production for the heaviest work of the year before turning down; keep pressure for clamps and brakes that this drawing does not show."
		f.Basis = "need below two fifths of the setting: common practice, no source"
		n := need.V
		f.Cures = p.pressures(lower, pump, "set_pressure", n+20e5, n+30e5, n+45e5, n+60e5)
		out = append(out, f)
	}
	return out
}

// workPressure is the highest pressure that the valves on the line of a pump need while something moves: behind a valve
// that an axis follows, what would be left to do it if the valve were fully open,
//
//	need = pFed + u²·(pP − pFed) − (1 − u²)·r·(pBack − pT)
//
// for all drops go with 1/u², and the pressure at the back counts by r, the area of its side over that of the fed one.
func (p *plant) workPressure(pump *circuit.Block) look.Moment {
	var best look.Moment
	for _, r := range p.Supply(pump) {
		b := p.C.Block(r.Block)
		if b == nil || r.Port != "P" {
			continue
		}
		var m look.Moment
		switch b.Kind {
		case "valve":
			m = p.valveNeed(b)
		case "compensator", "flow_sharing", "reducing", "sequence", "flow_control":
			m = p.Highest(b.ID+".A.p", look.Moving)
		default:
			continue
		}
		if m.OK && (!best.OK || m.V > best.V) {
			best = m
		}
	}
	return best
}

func (p *plant) valveNeed(b *circuit.Block) look.Moment {
	at := func(d *audit.DutyRun, s *look.Course, i int, what string) float64 {
		if k := look.Track(d, b.ID+"."+what); k != nil {
			return look.ValueOf(k, s, i)
		}
		return 0
	}
	var cyl *circuit.Block
	for _, c := range p.Blocks("cylinder") {
		if c.Word("axis") == b.Word("follows")+b.Word("directs") {
			cyl = c
		}
	}
	return p.Top(look.Moving, func(d *audit.DutyRun, s *look.Course, i int) float64 {
		u, fed, back := at(d, s, i, "u"), "A.p", "B.p"
		if u == 0 {
			return math.Inf(-1)
		}
		r := 1.0
		if cyl != nil {
			rod := look.Value(cyl, "rod") / look.Value(cyl, "bore")
			r = 1 - rod*rod
			if look.Track(d, cyl.ID+".v") != nil && look.ValueOf(look.Track(d, cyl.ID+".v"), s, i) < 0 {
				r = 1 / r
			}
		}
		if u < 0 {
			fed, back = back, fed
		}
		pf, uu := at(d, s, i, fed), math.Min(u*u, 1)
		return pf + uu*(at(d, s, i, "P.p")-pf) - (1-uu)*r*math.Max(0, at(d, s, i, back)-at(d, s, i, "T.p"))
	})
}

// standing is what a pump loses while nothing moves [J a year].
func (p *plant) standing(pump *circuit.Block) float64 {
	l := p.Lost("", pump.ID)
	return l.Idle + l.Holding
}

const ruleStandBy = "stand-by pressure too high"

// standByHigh finds a regulated pump that does not come down while nothing moves.
func standByHigh(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		control := look.Word(pump, "control")
		mean, share := p.Above(pump.ID+".P.p", standByLimit)
		if share < 0.02 {
			continue
		}
		f := p.found(pump, ruleStandBy, Settings, NoCost)
		f.Evidence = []Quantity{
			{"mean pressure at " + pump.ID + " in that time", p.bar(mean), "at most 35 bar"},
			{"share of the time so, with nothing moving", percent(share), ""},
			{"loss of " + pump.ID + " with nothing moving, a year", kilowattHours(p.standing(pump)), ""},
		}
		switch at := p.Highest(pump.ID+".P.p", look.Standing); {
		case control == "load_sensing":
			ls := p.Highest(pump.ID+".LS.p", look.Standing).V
			if !(ls > 5e5) {
				continue // then it is the margin
			}
			f.Param, f.Duty, f.Time = "margin", at.Duty, at.T
			f.Text = fmt.Sprintf("%s stays at %s though nothing moves, because its signal line is not relieved: it still carries up to %s.", pump.ID, p.bar(mean), p.bar(ls))
			f.Evidence = append(f.Evidence, Quantity{"signal pressure meanwhile, highest", p.bar(ls), "near zero"})
			f.Do = "Take the signal line off at the valve with the machine safe and the line drained: the pump must fall to its margin. Clean the bleed orifice, and see that the valve joins the signal to tank in its centre."
			f.Cures = p.relieved(pump)
		case control == "pressure" && p.C.PumpAtRest == circuit.Unload && look.Value(pump, "unloaded_pressure") > standByLimit:
			f.Param = "unloaded_pressure"
			f.Text = fmt.Sprintf("%s is to unload at rest but stays at %s.", pump.ID, p.bar(mean))
			f.Do = "Check the solenoid of the second pressure stage and its pilot valve; set the low stage to the lowest pressure that the pilots need."
			f.Cures = p.pressures(lower, pump, "unloaded_pressure", 20e5)
		default:
			continue
		}
		f.Caution = "The pilot and signal lines stay under pressure after a stop. Prove them zero before a fitting is opened."
		f.Basis = "stand-by 10 to 35 bar: common practice, no source"
		out = append(out, f)
	}
	return out
}

// relieved takes the signal of a pump from a valve that has an open LS port.
func (p *plant) relieved(pump *circuit.Block) []Cure {
	for _, r := range p.Supply(pump) {
		b := p.C.Block(r.Block)
		if b == nil || b.Kind != "valve" || r.Port != "P" {
			continue
		}
		if n := p.C.Joined(circuit.PortRef{Block: b.ID, Port: "LS"}); len(n) == 1 {
			return []Cure{{{rewire, p.C.Name + "/" + pump.ID + ".LS", b.ID + ".LS"}}}
		}
	}
	return nil
}

// chargeHigh finds a charge pump set too high or much too large for its loop.
func chargeHigh(p *plant) []*Finding {
	var out []*Finding
	loop := 0.0
	for _, b := range p.Blocks("pump") {
		if look.Word(b, "both_directions") == "yes" {
			loop += look.Value(b, "displacement")
		}
	}
	for _, cp := range p.Blocks("charge_pump") {
		pc, size := look.Value(cp, "charge"), look.Value(cp, "displacement")/loop
		high, large := pc > 31*units.Bar, loop > 0 && size > 0.31
		if !high && !large {
			continue
		}
		f := p.found(cp, "charge pressure or flow too high", Settings, NoCost)
		f.Param = "charge"
		spill := p.Lost("", cp.ID)
		f.Text = fmt.Sprintf("%s charges the loop at %s; all of its power becomes heat.", cp.ID, p.bar(pc))
		f.Evidence = []Quantity{{"charge pressure", p.bar(pc), "12 to 30 bar"}, {"lost at " + cp.ID + " a year", kilowattHours(spill.Total()), ""}}
		if loop > 0 {
			f.Evidence = append(f.Evidence, Quantity{"size against the loop", percent(size), "10 to 30 %"})
		}
		f.Do = "Read the charge pressure warm, at full speed, with the loop in neutral and then under load. Set its relief valve to the maker's figure; a charge pump much larger than a fifth of the loop belongs in another machine."
		f.Caution = "Too little charge pressure lets the main pump run dry and the drive lose its hold on the load. Never set it below the maker's figure."
		f.Basis = "charge pressure 12 to 30 bar, charge pump 10 to 30 % of the loop: common practice, no source"
		var c Cure
		if high {
			c = append(c, Edit{lower, p.target(cp, "charge"), "20 bar"})
		}
		if large {
			f.Class, f.Effort, f.Param = Repair, Invest, "displacement"
			c = append(c, Edit{set, p.target(cp, "displacement"), volumeText(0.2 * loop)})
		}
		f.Cures = []Cure{c}
		out = append(out, f)
	}
	return out
}

func volumeText(d float64) string {
	u, _ := units.ParseUnit("cm3/rev", units.DisplacementPerRev)
	return fmt.Sprintf("%.4g cm3/rev", u.FromSI(d))
}

// flushingHigh finds a flushing valve that takes out far more than cooling and cleaning need.
func flushingHigh(p *plant) []*Finding {
	var out []*Finding
	for _, b := range p.Blocks("flushing") {
		top := p.Highest(b.ID+".T.q", look.Always)
		low := p.Lowest(b.ID+".T.q", look.Always)
		q := math.Max(math.Abs(top.V), math.Abs(low.V))
		if !top.OK || q <= 22*units.LitrePerMinute {
			continue
		}
		f := p.found(b, "flushing flow too high", Settings, LowCost)
		f.Param, f.Duty, f.Time = "nominal_flow", low.Duty, low.T
		f.Text = fmt.Sprintf("%s takes up to %s out of the loop, which the charge pump must feed again.", b.ID, p.Shown(q, units.Flow))
		f.Evidence = []Quantity{{"flushing flow", p.Shown(q, units.Flow), "5 to 20 L/min"}, {"lost there a year", kilowattHours(p.Lost("", b.ID).Total()), ""}}
		f.Do = "Fit the orifice that the maker names for the loop; check that the flushing relief valve opens a few bar below the charge pressure."
		f.Caution = "Flushing carries the heat of the loop away: watch the case temperature after the change."
		f.Basis = "flushing 5 to 20 L/min: common practice, no source"
		f.Cures = []Cure{{{set, p.target(b, "nominal_flow"), "10 L/min"}}}
		out = append(out, f)
	}
	return out
}

// runsIdle finds duties in which nothing moves while the motor runs. It is a habit, not a fault.
func runsIdle(p *plant) []*Finding {
	var out []*Finding
	for _, d := range p.Run.Duties {
		if d.Balance == nil || d.Duty.Hours <= 0 || d.Balance.Seconds.Working > 0 || p.C.PumpAtRest == circuit.Stop {
			continue
		}
		i := slices.IndexFunc(p.Run.Year.Duties, func(y audit.YearDuty) bool { return y.Duty == d.Duty.Name })
		if i < 0 {
			continue
		}
		drawn := p.Run.Year.Duties[i].Drawn
		mean, cooling := drawn/d.Duty.Hours, d.Balance.CoolingDrawn().Total()/d.Balance.Cycle
		if drawn < 0.01*p.Drawn() {
			continue
		}
		f := p.found(nil, "pump kept running idle", StopStart, NoCost)
		f.Habit, f.Duty = true, d.Duty.Name
		f.Text = fmt.Sprintf("In %s nothing moves for %s a year and the motor draws %s.", d.Duty.Name, yearHours(d.Duty.Hours), p.Shown(mean-cooling, units.Power))
		if cooling > 0 {
			f.Text = strings.TrimSuffix(f.Text, ".") + ", fan and pumps of the cooling " + p.Shown(cooling, units.Power) + "."
		}
		f.Evidence = []Quantity{
			{"hours a year", yearHours(d.Duty.Hours) + ", " + percent(d.Duty.Hours/p.Run.Year.Hours) + " of all", "as few as the work allows"},
			{"mean power drawn meanwhile, in all", p.Shown(mean, units.Power), ""},
			{"drawn a year", kilowattHours(drawn) + ", " + percent(drawn/p.Drawn()) + " of all", ""},
		}
		f.Do = "Switch the motor off in breaks of 20 minutes and more, by hand or by a timer. Name somebody who does it. The oil cools slowly; a short warm-up is seldom needed."
		f.Caution = "Stopped is not safe: loads, accumulators and trapped oil keep their energy. Let the restart be by hand, and keep below the starts an hour that the motor's maker allows."
		f.Basis = "breaks of 20 min and more: trade literature; the price takes all of these hours, ask which of them are breaks so long"
		f.Cures = []Cure{{{off, d.Duty.Name, ""}}}
		out = append(out, f)
	}
	return out
}

func yearHours(s float64) string { return units.Number(s/units.Hour, 4) + "\u202fh" }
