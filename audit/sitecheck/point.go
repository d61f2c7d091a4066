package sitecheck

import (
	"fmt"
	"math"

	"barlitre/audit"
	"barlitre/audit/look"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Point is a place where something is read.
type Point struct {
	Name    string // as readings name it: "P1.pressure"
	Block   string // "" for the oil
	Place   string // where to fit it, as drawn
	What    string // "pump pressure"
	Dim     units.Dim
	Gauge   string // kind, range and accuracy
	Rate    string // how often, how long
	Caution string
	signal  string // of the model; "" for supply power and temperature
	minus   string // signal to be taken off: a drop
	sign    float64
	feed    bool
}

// gaugeRanges are ranges of pressure gauges and transducers [bar]: EN 837-1, from memory.
var gaugeRanges = []float64{1, 1.6, 2.5, 4, 6, 10, 16, 25, 40, 60, 100, 160, 250, 400, 600, 1000}

// gaugeMargin is how far the range lies above the highest pressure: 1.5 times, common practice, no source.
const gaugeMargin = 1.5

// gaugeRange is the next customary range [Pa] that leaves the margin above a pressure, at least from least up.
func gaugeRange(top, least float64) float64 {
	for _, r := range gaugeRanges {
		if x := r * units.Bar; x >= gaugeMargin*top && x >= least {
			return x
		}
	}
	return gaugeRanges[len(gaugeRanges)-1] * units.Bar
}

const (
	noLeak     = "Fit couplings with the machine stopped, locked off and proven at zero; hoses and couplings for the full range. Never feel for a leak."
	powerWork  = "Live work: by a qualified electrician, with meters of the right category. Check the direction of each clamp."
	drainWork  = "Hot oil. Never close or choke the drain: the shaft seal bursts. Guards stay closed, mind the coupling."
	gasWork    = "A charged vessel. Read at the coupling provided; shut off and discharge before anything is opened."
	loadWork   = "A load may stand on this line: lower and prop it before the coupling is fitted."
	filterWork = "Relieve the pressure before the bowl or its couplings are opened."
	oilWork    = "Oil and metal above some 55 °C burn: do not touch."
)

// mostPoints is how many fit a page.
const mostPoints = 10

// guards reports whether a relief valve stands on a pump that strokes back: its outlet must stay cool then.
func guards(p *look.Plant, rv *circuit.Block) bool {
	for _, b := range p.Blocks("pump") {
		if look.Word(b, "control") != "fixed" {
			for _, o := range p.ReliefsOf(b) {
				if o == rv {
					return true
				}
			}
		}
	}
	return false
}

// shown writes the end of a range.
func shown(p *look.Plant, x float64, d units.Dim) string {
	u := units.Preferred(d, p.System)
	return number(u.FromSI(x)) + "\u202f" + u.Label()
}

// points lists what can be read in a circuit, the most telling first.
func points(p *look.Plant) []Point {
	var out []Point
	rate := pace(p.S.File)
	for _, b := range p.Blocks("converter", "electric_motor") {
		if b.Kind == "electric_motor" && feedsFrom(p, b) {
			continue
		}
		r := look.Value(b, "rated_power")
		out = append(out, Point{Name: b.ID + ".power", Block: b.ID, What: "electric power drawn", Place: "feed of " + b.ID + " alone, without fan and pumps of the cooling; three clamps and three voltages", Dim: units.Power, feed: true, sign: 1,
			Gauge: "power logger, to " + shown(p, niceUp(1.25*r), units.Power) + ", 1 to 3 %", Rate: rate, Caution: powerWork})
	}
	for _, b := range p.Blocks("pump", "charge_pump") {
		out = append(out, pressurePoint(p, b, "P", b.ID+".pressure", map[bool]string{true: "charge pressure", false: "pump pressure"}[b.Kind == "charge_pump"], rate))
		if drain := b.ID + ".D.q"; drains(p, b) {
			top := p.Lowest(drain, look.Always)
			flow := niceUp(3*math.Abs(top.V)/units.LitrePerMinute) * units.LitrePerMinute
			out = append(out, Point{Name: b.ID + ".drain", Block: b.ID, What: "case drain", Place: "drain line at " + b.ID + ".D", Dim: units.Flow, signal: drain, sign: -1,
				Gauge: "small gear meter to " + shown(p, flow, units.Flow) + ", 2 %, or can and watch", Rate: "5 min each, oil warm", Caution: drainWork})
		}
	}
	for _, b := range p.Blocks("pump") {
		if look.Word(b, "control") == "load_sensing" {
			out = append(out, pressurePoint(p, b, "LS", b.ID+"_LS.pressure", "load signal", rate))
		}
	}
	for _, b := range p.Blocks("accumulator") {
		pt := pressurePoint(p, b, "P", b.ID+".pressure", "accumulator pressure", rate)
		pt.Caution = gasWork
		out = append(out, pt)
	}
	for _, rv := range p.Blocks("relief") {
		if guards(p, rv) {
			out = append(out, Point{Name: rv.ID + ".temperature", Block: rv.ID, What: "outlet of the relief valve", Place: "pipe at " + rv.ID + ".T, by hand-held thermometer", Dim: units.Temperature,
				Gauge: "infrared or contact, 2 K, on a dull spot", Rate: "once in each state", Caution: oilWork})
		}
	}
	for _, b := range p.Blocks("filter") {
		out = append(out, Point{Name: b.ID + ".drop", Block: b.ID, What: "filter drop", Place: "both sides of " + b.ID, Dim: units.Pressure, signal: b.ID + ".A.p", minus: b.ID + ".B.p", sign: 1,
			Gauge: "one gauge moved from side to side, 0 to " + shown(p, 10*units.Bar, units.Pressure) + ", 1 %", Rate: "a minute each, oil warm", Caution: filterWork})
	}
	for _, b := range p.Blocks("cylinder", "double_rod", "plunger", "motor") {
		port := circuit.KindNamed(b.Kind).Ports[0].Name
		if b.Kind == "motor" {
			port = "A"
		}
		if b.Word("axis") != "" && len(out) < mostPoints-1 {
			pt := pressurePoint(p, b, port, b.ID+".pressure", "load pressure", rate)
			pt.Caution = loadWork
			out = append(out, pt)
		}
	}
	return append(out[:min(len(out), mostPoints-1)], Point{Name: "oil.temperature", What: "oil temperature", Place: "tank, at the suction", Dim: units.Temperature,
		Gauge: "sensor in the oil, 1 to 2 K", Rate: "every minute for a shift", Caution: oilWork})
}

func pressurePoint(p *look.Plant, b *circuit.Block, port, name, what, rate string) Point {
	top := p.Highest(b.ID+"."+port+".p", look.Always)
	r := gaugeRange(math.Max(top.V, limitAt(p, b)), 10*units.Bar)
	caution := noLeak
	for _, j := range p.C.Joined(circuit.PortRef{Block: b.ID, Port: port}) {
		if o := p.C.Block(j.Block); o != nil && o.Word("axis") != "" {
			caution = loadWork
		}
	}
	return Point{Name: name, Block: b.ID, What: what, Place: "test coupling at " + b.ID + "." + port, Dim: units.Pressure, signal: b.ID + "." + port + ".p", sign: 1,
		Gauge: "0 to " + shown(p, r, units.Pressure) + ", 0.5 %", Rate: rate, Caution: caution}
}

// limitAt is the highest setting of the relief valves on the line of a pump: what its gauge must stand.
func limitAt(p *look.Plant, b *circuit.Block) float64 {
	top := 0.0
	if b.Kind != "pump" {
		return 0
	}
	for _, rv := range p.ReliefsOf(b) {
		for _, key := range []string{"crack", "set"} {
			if v := look.Value(rv, key); v > top {
				top = v
			}
		}
	}
	return top
}

// feedsFrom reports whether a motor hangs on a converter of the drawing, whose feed is measured then.
func feedsFrom(p *look.Plant, b *circuit.Block) bool {
	for _, port := range circuit.KindNamed(b.Kind).Ports {
		for _, r := range p.C.Joined(circuit.PortRef{Block: b.ID, Port: port.Name}) {
			if o := p.C.Block(r.Block); o != nil && o.Kind == "converter" {
				return true
			}
		}
	}
	return false
}

// drains reports whether a machine has a case drain that is drawn and carries oil.
func drains(p *look.Plant, b *circuit.Block) bool {
	return look.Value(b, "case_share") > 0 && len(p.C.Joined(circuit.PortRef{Block: b.ID, Port: "D"})) > 1
}

// niceUp is the next of 1, 2, 3, 5 times a power of ten.
func niceUp(x float64) float64 {
	if x <= 0 || math.IsNaN(x) {
		return 1
	}
	scale := math.Pow(10, math.Floor(math.Log10(x)))
	for _, k := range []float64{1, 2, 3, 5, 10} {
		if k*scale >= x*(1-1e-9) {
			return k * scale
		}
	}
	return 10 * scale
}

// pace is how fast and how long to log: at most a tenth of the shortest phase, and at least twenty cycles or half an
// hour; no whole part of the cycle, or each would be met at the same instants (common practice, no source).
func pace(f *audit.File) string {
	shortest, cycle := math.Inf(1), 0.0
	for _, d := range f.Duties {
		if len(d.Time) == 0 || len(d.Phases) < 2 {
			continue
		}
		length := d.Time[len(d.Time)-1] - d.Time[0]
		cycle = math.Max(cycle, length)
		for i, ph := range d.Phases {
			end := d.Time[len(d.Time)-1]
			if i+1 < len(d.Phases) {
				end = d.Phases[i+1].From
			}
			if end > ph.From {
				shortest = math.Min(shortest, end-ph.From)
			}
		}
	}
	step := 0.2
	for _, s := range []float64{0.2, 0.1, 0.05, 0.02} {
		step = s
		if s <= shortest/10 {
			break
		}
	}
	minutes := math.Max(30, math.Ceil(20*cycle/60/5)*5)
	return fmt.Sprintf("every %g s, %g min at work, 5 min in each other state", step, minutes)
}
