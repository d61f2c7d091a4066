package circuit

import (
	"fmt"
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

func show(x float64, d units.Dim) string {
	return units.Format(x, units.Preferred(d, units.Metric), 3)
}

func clock(t float64) string { return units.Number(t, 4) + " s" }

// Findings says which limits were passed and what stands out.
func (w *Watch) Findings() []Finding {
	f := &findings{circuit: w.c.circuit, duty: w.series.Duty.Name}
	w.ratings(f)
	w.speeds(f)
	w.drivesHeld(f)
	w.gatesMissed(f)
	w.motions(f)
	w.reliefs(f)
	w.accumulators(f)
	w.switchedFindings(f)
	for i, v := range w.voids {
		if v.worst > 0.01*units.LitrePerMinute {
			f.add(Warns, nil, "", v.t, "%s runs empty: %s are missing at %s. Feed it through a make-up check valve, or hold the load back with a counterbalance valve", w.c.nodes[i].name, show(v.worst, units.Flow), clock(v.t))
		}
	}
	return f.list
}

type findings struct {
	circuit *Circuit
	duty    string
	list    []Finding
}

func (f *findings) add(l Level, b *Block, param string, t float64, format string, args ...any) {
	x := Finding{Level: l, Circuit: f.circuit.Name, Duty: f.duty, Parameter: param, Time: t, Text: fmt.Sprintf(format, args...)}
	if b != nil {
		x.Block, x.Line = b.ID, b.Line
		x.Text = b.ID + ": " + x.Text
	}
	f.list = append(f.list, x)
}

// ratings compares each block's port pressures with its rating.
func (w *Watch) ratings(f *findings) {
	for _, b := range sorted(w.c.circuit.Blocks) {
		k := KindNamed(b.Kind)
		if k.Rating == "" {
			continue
		}
		v, ok := b.Values[k.Rating]
		if !ok {
			continue
		}
		top, at, port := 0.0, 0.0, ""
		for i, s := range w.c.signals {
			if s.Block == b.ID && s.What == "p" && w.ext.max[i] > top {
				top, at, port = w.ext.max[i], w.ext.tMax[i], s.Port
			}
		}
		if top > v.SI {
			est := ""
			if w.fastRamp(at) {
				est = " (upper estimate of a fast ramp)"
			}
			f.add(Caution, b, k.Rating, at, "%s at port %s%s is above its rated %s; do not run it so", show(top, units.Pressure), port, est, show(v.SI, units.Pressure))
		}
	}
	if p := w.PeakPressure(); p.Value > 1000*units.Bar {
		f.add(Caution, nil, "", p.T, "%s at %s: nothing limits the pressure there, the figure only shows that a relief valve is missing", show(p.Value, units.Pressure), p.At)
	}
}

func (w *Watch) speeds(f *findings) {
	for _, m := range w.mach {
		if m.fast > 0 {
			f.add(Warns, m.b, "max_speed", m.tFast, "turns at %s, above its highest speed of %s", show(m.fast, units.AngularSpeed), show(m.max, units.AngularSpeed))
		}
		if m.slowTime > 0 {
			f.add(Warns, m.b, "min_speed", m.tSlow, "turns at %s under pressure, below its lowest speed of %s, for %s a cycle; its bearings may run dry", show(m.slow, units.AngularSpeed), show(m.min, units.AngularSpeed), clock(m.slowTime))
		}
	}
}

func (w *Watch) motions(f *findings) {
	for i, a := range w.axes {
		ax := w.c.axes[i]
		b := w.c.circuit.Block(w.c.movers[i].block)
		speed, way := units.Velocity, units.Length
		if ax.Kind == duty.Rotary {
			speed, way = units.AngularSpeed, units.Angle
		}
		if a.short > 0 {
			f.add(Warns, b, "", a.at, "slower than the duty asks for %s a cycle, at worst %s of the speed at %s; %s of travel are lost", clock(a.short), units.Format(a.ratio, units.Percent, 3), clock(a.at), show(a.lost, way))
		}
		if a.over != 0 {
			f.add(Caution, b, "", a.tOver, "it runs ahead of the duty, at %s it moves at %s, %s times what is asked: leakage or the load moves it and the control cannot hold it back", clock(a.tOver), show(math.Abs(a.over), speed), units.Number(a.overRatio, 3))
		}
		if a.backwards != 0 {
			f.add(Caution, b, "", a.tBack, "the load drives it backwards at up to %s; fit a load check", show(math.Abs(a.backwards), speed))
		}
		if a.falls != 0 {
			f.add(Caution, b, "hold", a.tFall, "it is not held: it moves at up to %s while it should stand", show(math.Abs(a.falls), speed))
		}
		if b != nil && movesAlong(b.Kind) {
			w.strokes(f, b, a, w.series.Axes[i].Given)
		}
	}
}

// strokes compares the way of a cylinder with its stroke.
func (w *Watch) strokes(f *findings, b *Block, a axisWatch, given duty.Given) {
	if _, ok := b.Values["stroke"]; !ok {
		return
	}
	stroke, start := w.value(b, "stroke"), w.value(b, "start")
	_, placed := b.Values["start"]
	slack := 2 * endSlack * stroke
	switch {
	case a.end != 0:
		f.add(Warns, b, "stroke", a.tEnd, "runs against its end %s at %s and stands there for %s a cycle, pushing. Shorten the strokes of the duty, or correct its stroke of %s or its start at %s",
			map[int]string{1: "(drawn out)", -1: "(drawn in)"}[a.end], clock(a.tEnd), clock(a.ended), mm(stroke), mm(start))
	case placed && given == duty.MotionCommand && (start+a.lo < -slack || start+a.hi > stroke+slack):
		f.add(Warns, b, "stroke", 0, "the motion given takes it from %s to %s, beyond its stroke of 0 to %s; correct its start, its stroke or the recording", mm(start+a.lo), mm(start+a.hi), mm(stroke))
	case !placed && a.hi-a.lo > stroke*(1+1e-6):
		f.add(Warns, b, "stroke", 0, "the duty moves it over %s, more than its stroke of %s", mm(a.hi-a.lo), mm(stroke))
	}
}

func (w *Watch) reliefs(f *findings) {
	for _, r := range w.reds {
		if share := r.open / math.Max(w.span, 1e-12); share > 0.02 {
			f.add(Note, r.b, "", 0, "open for %s of the cycle, %s of it while an axis moves: what passes it is lost as heat. Never raise a relief setting to gain speed", units.Format(share, units.Percent, 2), units.Format(r.work/math.Max(r.open, 1e-12), units.Percent, 2))
		}
	}
}

// accumulators compares the pressures an accumulator saw with its pre-charge: a bladder
// is usually kept between 1.1 and 4 times it, absolute (common practice; its maker's
// limits come first).
func (w *Watch) accumulators(f *findings) {
	const atm = units.AtmosphericPressure
	for i, s := range w.c.signals {
		b := w.c.circuit.Block(s.Block)
		if b == nil || b.Kind != kindAccumulator || s.What != "p" {
			continue
		}
		p0 := (w.value(b, "precharge") + atm) * w.value(b, "gas_temperature") / 293.15
		lo, hi := w.ext.min[i]+atm, w.ext.max[i]+atm
		switch {
		case lo <= p0*1.0001:
			f.add(Warns, b, "precharge", w.ext.tMin[i], "it runs empty: the pressure falls to its pre-charge of %s; lower the pre-charge or the band", show(p0-atm, units.Pressure))
		case lo < 1.1*p0:
			f.add(Note, b, "precharge", w.ext.tMin[i], "its lowest pressure %s is less than 1.1 times the pre-charge %s, both absolute at the gas temperature; a bladder may strike its valve (common practice p0 <= 0.9·p1; its maker's limits come first)", show(lo-atm, units.Pressure), show(p0-atm, units.Pressure))
		}
		if hi > 4*p0 {
			f.add(Note, b, "precharge", w.ext.tMax[i], "its highest pressure %s is more than 4 times the pre-charge %s, both absolute at the gas temperature; a bladder is folded too far or the pre-charge is lost (common practice p2 <= 4·p0; pistons stand more, its maker's limits come first)", show(hi-atm, units.Pressure), show(p0-atm, units.Pressure))
		}
	}
}
