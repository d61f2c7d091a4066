package fixfirst

import (
	"fmt"
	"math"
	"slices"

	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

const (
	wornPumpRule  = "worn pump"
	wornMotorRule = "worn motor"
)

// wornPump finds pumps whose slip is far above that of a new one, as given, by a wear factor, or from the case drain.
func wornPump(p *plant) []*Finding {
	var out []*Finding
	for _, b := range p.Blocks("pump", "charge_pump", "motor") {
		law, ok := circuit.MachineLaw(b, p.S.Conditions)
		if !ok {
			continue
		}
		as, edits := p.asNew(b)
		fresh, ok := circuit.MachineLaw(as, p.S.Conditions)
		if !ok {
			continue
		}
		dp, w := p.workDrop(b), p.speed(b)
		if dp <= 0 || w <= 0 {
			continue
		}
		mu, rho := p.S.Conditions.Viscosity, p.S.Conditions.Density
		slip, was := law.Slip(1, w, dp, mu, rho, 1e9), fresh.Slip(1, w, dp, mu, rho, 1e9)
		share := slip / (law.D * w)
		if was <= 0 || slip < 2*was || share < 0.08 {
			continue
		}
		f := p.found(b, map[bool]string{true: wornMotorRule, false: wornPumpRule}[b.Kind == "motor"], Repair, Invest)
		f.Param = edits[0].Target[len(p.C.Name)+len(b.ID)+2:]
		top := p.Highest(b.ID+".P.p", look.Moving)
		if b.Kind == "motor" {
			top = p.Highest(b.ID+".A.p", look.Moving)
		}
		f.Duty, f.Time = top.Duty, top.T
		f.Text = fmt.Sprintf("%s loses %s at %s, %s of what it displaces; a new one loses %s.", b.ID, p.Shown(slip, units.Flow), p.bar(dp), percent(share), p.Shown(was, units.Flow))
		f.Evidence = []Quantity{
			{"leakage at " + p.bar(dp), p.Shown(slip, units.Flow), "new " + p.Shown(was, units.Flow)},
			{"against new", units.Number(slip/was, 2) + " times", "below 2"},
			{"volumetric efficiency there, full stroke", percent(1 - share), "new " + percent(1-was/(law.D*w))},
			{"lost in slip a year", kilowattHours(p.Lost("slip", b.ID).Total()), ""},
		}
		f.Do = "Measure the case drain warm, at full pressure and speed, into a measured can or a small gear meter; compare with the figure from when it was new. If it confirms, have it overhauled or exchanged, and look for the dirt that did it."
		f.Caution = "The drain line is hot and must never be closed: its back pressure bursts the shaft seal. Catch the oil, keep hands away from the coupling."
		f.Basis = "two to four times the slip of a new one is worn, and some 10 % of flow may be normal: trade literature and common practice"
		if b.Values[f.Param].Origin == circuit.Assumed {
			f.Basis += ". What is known of its leakage is assumed: measure it before money is spent"
		}
		f.Cures = []Cure{edits}
		out = append(out, f)
	}
	return out
}

// asNew is a machine with the slip of one in good order, and the edits that make it.
func (p *plant) asNew(b *circuit.Block) (*circuit.Block, Cure) {
	n := *b
	n.Values = map[string]circuit.Value{}
	var edits Cure
	for k, v := range b.Values {
		n.Values[k] = v
	}
	for _, k := range []string{"drain_flow", "drain_pressure", "drain_temperature"} {
		delete(n.Values, k)
	}
	kind := circuit.KindNamed(b.Kind)
	one := circuit.Value{SI: 1}
	if _, ok := b.Values["wear"]; ok {
		n.Values["wear"] = one
		return &n, Cure{{set, p.target(b, "wear"), "1"}}
	}
	if _, ok := b.Values["drain_flow"]; ok {
		law, _ := circuit.MachineLaw(&n, p.S.Conditions)
		dp := look.Value(b, "drain_pressure")
		fresh := look.Value(b, "case_share") * law.Slip(1, 0, dp, p.S.Conditions.Viscosity, p.S.Conditions.Density, 1e9)
		return &n, Cure{{set, p.target(b, "drain_flow"), fmt.Sprintf("%.5g L/min", fresh/units.LitrePerMinute)}}
	}
	delete(n.Values, "best_volumetric")
	delete(n.Values, "slip")
	fresh, _, _ := kind.Value(&n, "slip")
	edits = append(edits, Edit{lower, p.target(b, "slip"), fmt.Sprintf("%.4g", fresh.SI)})
	return &n, edits
}

// workDrop is the highest pressure difference over a machine while something moves [Pa].
func (p *plant) workDrop(b *circuit.Block) float64 {
	out, in, ok := circuit.MachinePorts(b)
	if !ok {
		return 0
	}
	m := p.Highest(b.ID+"."+out+".p", look.Moving)
	if n := p.Highest(b.ID+"."+in+".p", look.Moving); n.OK {
		m.V = math.Max(m.V, n.V)
	}
	return m.V
}

// pumpTooLarge finds a fixed pump of which much is never needed.
func pumpTooLarge(p *plant) []*Finding {
	var out []*Finding
	for _, pump := range p.Blocks("pump") {
		if !fixed(pump) || p.fillsAccumulator(pump) || len(p.Blocks("pump")) > 1 || len(p.Blocks("flow_divider")) > 0 {
			continue
		}
		spare := p.leastSurplus(pump)
		if !spare.OK || spare.V < 0.38 {
			continue
		}
		want := (1 - spare.V) * 1.1 * look.Value(pump, "displacement")
		size := nextSize(want)
		if size >= 0.85*look.Value(pump, "displacement") {
			continue
		}
		f := p.found(pump, "pump larger than the duty needs", Repair, Invest)
		f.Param, f.Duty, f.Time = "displacement", spare.Duty, spare.T
		f.Text = fmt.Sprintf("Even at its fastest moment the machine takes %s of the flow of %s; the rest is spilled at full pressure.", percent(1-spare.V), pump.ID)
		f.Evidence = []Quantity{
			{"displacement of " + pump.ID, p.Shown(look.Value(pump, "displacement"), units.DisplacementPerRev), "enough: " + p.Shown(size, units.DisplacementPerRev)},
			{"surplus at the fastest moment", percent(spare.V), "below 38 %: one standard size or two"},
		}
		for _, rv := range p.ReliefsOf(pump) {
			f.Evidence = append(f.Evidence, Quantity{"spilled over " + rv.ID + " a year", kilowattHours(p.Lost("relief spill", rv.ID).Total()), ""})
		}
		f.Do = fmt.Sprintf("At the next overhaul fit the size that the fastest motion needs with a tenth in hand, about %s; until then see whether the speed of the motor can come down.", p.Shown(size, units.DisplacementPerRev))
		f.Caution = "A smaller pump needs another suction fitting, coupling check and relief setting: by a qualified person. Prove the cycle time with production before it is bought."
		f.Basis = "surplus above 38 % at the fastest moment, two steps of the R10 series: common practice, no source"
		for _, s := range []float64{want, 1.08 * want, 1.2 * want} {
			if n := nextSize(s); n < look.Value(pump, "displacement") {
				f.Cures = append(f.Cures, Cure{{set, p.target(pump, "displacement"), volumeText(n)}})
			}
		}
		out = append(out, f)
	}
	return out
}

// nextSize is the next geometric displacement of a customary row (R20 rounded) at or above d [m³/rad].
func nextSize(d float64) float64 {
	u, _ := units.ParseUnit("cm3/rev", units.DisplacementPerRev)
	row := []float64{1, 1.12, 1.25, 1.4, 1.6, 1.8, 2, 2.24, 2.5, 2.8, 3.15, 3.55, 4, 4.5, 5, 5.6, 6.3, 7.1, 8, 9, 10}
	x := u.FromSI(d)
	scale := math.Pow(10, math.Floor(math.Log10(x)))
	for _, r := range row {
		if r*scale >= x*(1-1e-9) {
			return u.ToSI(r * scale)
		}
	}
	return d
}

// leastSurplus is the smallest share of the flow of a pump that leaves unused, over relief valves or through open
// centres, while something moves.
func (p *plant) leastSurplus(pump *circuit.Block) look.Moment {
	var ways []string
	for _, rv := range p.ReliefsOf(pump) {
		ways = append(ways, rv.ID+".P.q")
	}
	for _, v := range p.centres(pump) {
		if v.Kind == "section_6_3" {
			return look.Moment{} // its by-pass meters: no surplus by itself
		}
	}
	m := p.Top(look.Moving, func(d *audit.DutyRun, s *look.Course, i int) float64 {
		k := look.Track(d, pump.ID+".P.q")
		if k == nil {
			return math.Inf(-1)
		}
		q, over := math.Abs(look.ValueOf(k, s, i)), 0.0
		for _, w := range ways {
			if t := look.Track(d, w); t != nil {
				over += math.Abs(look.ValueOf(t, s, i))
			}
		}
		if q <= 0 {
			return math.Inf(-1)
		}
		return -over / q
	})
	m.V = -m.V
	return m
}

// filterClogged finds a filter whose element is full.
func filterClogged(p *plant) []*Finding {
	var out []*Finding
	for _, b := range p.Blocks("filter") {
		top := p.dropOver(b)
		if !top.OK || top.V < 2.4*units.Bar || look.Value(b, "nominal_drop") <= 3.6*units.Bar {
			continue
		}
		f := p.found(b, "return or filter loss", Repair, LowCost)
		f.Param, f.Duty, f.Time = "nominal_drop", top.Duty, top.T
		f.Text = fmt.Sprintf("%s takes up to %s: its element is full.", b.ID, p.bar(top.V))
		f.Evidence = []Quantity{{"drop over " + b.ID + ", highest", p.bar(top.V), "0.3 to 0.7 bar clean, bypass at 3.5 bar"}, {"lost there a year", kilowattHours(p.Lost("", b.ID).Total()), ""}}
		f.Do = "Read its indicator with warm oil, change the element, and look into the old one for metal and rubber. If it fills again soon, find the source."
		f.Caution = "Stop, lock off and relieve before the bowl is opened; hot oil burns. Used elements are hazardous waste."
		f.Basis = "bypass of return filters at about 3.5 bar: common practice, no source"
		f.Cures = p.drops(b, "nominal_drop", 0.7)
		out = append(out, f)
	}
	return out
}

func (p *plant) drops(b *circuit.Block, key string, bars float64) []Cure {
	return []Cure{{{lower, p.target(b, key), fmt.Sprintf("%.3g bar", bars)}}}
}

// dropOver is the highest drop over a two-way part.
func (p *plant) dropOver(b *circuit.Block) look.Moment {
	return p.Top(look.Always, func(d *audit.DutyRun, s *look.Course, i int) float64 {
		a, z := look.Track(d, b.ID+".A.p"), look.Track(d, b.ID+".B.p")
		if a == nil || z == nil {
			return math.Inf(-1)
		}
		return math.Abs(look.ValueOf(a, s, i) - look.ValueOf(z, s, i))
	})
}

// bores are inner diameters of customary tube [mm].
var bores = []float64{6, 8, 10, 12, 16, 20, 25, 30, 38, 50, 63, 80, 100}

// lineNarrow finds lines that take far more pressure than a line should.
func lineNarrow(p *plant) []*Finding {
	var out []*Finding
	for _, b := range p.Blocks("line") {
		top := p.dropOver(b)
		if !top.OK || top.V < 11*units.Bar {
			continue
		}
		f := p.found(b, "return or filter loss", Repair, Invest)
		f.Rule = "line too narrow"
		f.Param, f.Duty, f.Time = "diameter", top.Duty, top.T
		f.Text = fmt.Sprintf("%s takes up to %s on %s.", b.ID, p.bar(top.V), p.Shown(look.Value(b, "length"), units.Length))
		f.Evidence = []Quantity{{"drop over " + b.ID + ", highest", p.bar(top.V), "1 to 10 bar a side, 1 to 6 bar to tank"}, {"inner diameter", p.Shown(look.Value(b, "diameter"), units.Length), ""},
			{"lost there a year", kilowattHours(p.Lost("", b.ID).Total()), ""}}
		f.Do = "Look for a kinked hose, a half-closed ball valve, a coupling of the wrong size. If all is as drawn, lay the next two sizes up at the next stop."
		f.Caution = "Hoses and fittings for the highest pressure that their place can see, fitted clean and by trained persons."
		f.Basis = "pressure line 1 to 10 bar a side: common practice, no source"
		i := slices.IndexFunc(bores, func(d float64) bool { return d*1e-3 > look.Value(b, "diameter")*1.01 })
		if i >= 0 {
			for _, j := range []int{i + 1, i + 2, i + 3} {
				if j < len(bores) {
					f.Cures = append(f.Cures, Cure{{set, p.target(b, "diameter"), fmt.Sprintf("%g mm", bores[j])}})
					break
				}
			}
		}
		out = append(out, f)
	}
	return out
}
