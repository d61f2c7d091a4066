package circuit

import (
	"fmt"
	"math"

	"barlitre/circuit/duty"
	"barlitre/machines"
)

// lawsOfBlocks finds the laws that the blocks of the circuit must keep.
func (j *judge) lawsOfBlocks() {
	for _, b := range sorted(j.c.circuit.Blocks) {
		switch b.Kind {
		case kindCheck:
			j.oneWay(b, "in", "out", "opens")
		case kindRelief:
			j.relief(b)
		case kindOrifice, kindFlowPoint:
			j.orifice(b)
		case kindCylinder, kindDoubleRod, kindPlunger:
			j.piston(b)
		case kindValve:
			j.edges(b)
		case kindPump:
			j.pump(b)
		}
	}
	for i := range j.c.axes {
		if j.s.Axes[i].Given == duty.MotionLoad {
			j.control(i)
		}
	}
}

func (j *judge) number(b *Block, key string) float64 {
	v, _, _ := KindNamed(b.Kind).Value(b, key)
	return v.SI
}

// sig returns the value of a signal; of a port that is on no line, zero.
func (j *judge) sig(x *Sample, name string) float64 {
	if i, ok := j.at[name]; ok {
		return x.Signals[i]
	}
	return 0
}

// turbulent compares a flow with qN·√(Δp/ΔpN). Below a millionth of a bar it runs
// laminar, and parts without a drop keep a trace of one: the flow may be off by what
// a hundredth of a bar, or a thousandth of the drop, makes.
func (j *judge) turbulent(q, dp, qN, dN float64) bool {
	const slack = 1e3 // Pa
	law := func(dp float64) float64 { return machines.Sign(dp) * qN * math.Sqrt(math.Abs(dp)/dN) }
	e := slack + 1e-3*math.Abs(dp)
	return law(dp-e) <= q+j.tiny() && q-j.tiny() <= law(dp+e)
}

// tiny is a flow that is none: a billionth of the largest of the circuit.
func (j *judge) tiny() float64 { return 1e-9 * j.flow }

// oneWay: nothing passes backwards, nothing before it opens, then the square-root law.
func (j *judge) oneWay(b *Block, in, out, opens string) {
	po, qN, dN := j.number(b, opens), j.number(b, "nominal_flow"), j.number(b, "nominal_drop")
	j.laws = append(j.laws, func(x *Sample) error {
		q, dp := j.sig(x, b.ID+"."+in+".q"), j.sig(x, b.ID+"."+in+".p")-j.sig(x, b.ID+"."+out+".p")
		dp -= 1e-10 * 100e5 * q / j.c.flowScale(j.c.defaults) // what an ideal part keeps
		switch {
		case q < -j.tiny():
			return fmt.Errorf("%s passes %g L/min backwards", b.ID, -q*60000)
		case dN == 0 && math.Abs(dp-po) > 1e3+1e-3*math.Abs(dp) && (q > j.tiny() || dp > po):
			return fmt.Errorf("%s at %g bar, opens at %g, passes %g L/min", b.ID, dp/1e5, po/1e5, q*60000)
		case dN > 0 && (q > j.tiny() || dp > po) && !j.turbulent(q, dp-po, qN, dN) && q > j.tiny():
			return fmt.Errorf("%s at %g bar, opens at %g, passes %g L/min", b.ID, dp/1e5, po/1e5, q*60000)
		}
		return nil
	})
}

// relief: shut below its cracking pressure, on its line above.
func (j *judge) relief(b *Block) {
	pc, R := j.number(b, "crack"), j.number(b, "override")
	j.laws = append(j.laws, func(x *Sample) error {
		q, dp := j.sig(x, b.ID+".P.q"), j.sig(x, b.ID+".P.p")-j.sig(x, b.ID+".T.p")
		slack := 1e3 + 1e-3*math.Abs(dp)
		if q < -j.tiny() || dp > pc+R*math.Max(q, 0)+slack || (q > j.tiny() && dp < pc+R*q-slack) {
			return fmt.Errorf("%s at %g bar, cracks at %g, passes %g L/min", b.ID, dp/1e5, pc/1e5, q*60000)
		}
		return nil
	})
}

func (j *judge) orifice(b *Block) {
	qN, dN := j.number(b, "nominal_flow"), j.number(b, "nominal_drop")
	j.laws = append(j.laws, func(x *Sample) error {
		q, dp := j.sig(x, b.ID+".A.q"), j.sig(x, b.ID+".A.p")-j.sig(x, b.ID+".B.p")
		if dN > 0 && !j.turbulent(q, dp, qN, dN) || dN == 0 && math.Abs(dp) > 1e3 {
			return fmt.Errorf("%s passes %g L/min at %g bar", b.ID, q*60000, dp/1e5)
		}
		return nil
	})
}

// edges: each edge of a valve off its centre passes u·qN·√(Δp/ΔpN).
func (j *judge) edges(b *Block) {
	qN, dN, regen := j.number(b, "nominal_flow"), j.number(b, "nominal_drop"), b.Word("extend") == "regenerative"
	j.laws = append(j.laws, func(x *Sample) error {
		u := j.sig(x, b.ID+".u")
		p, q := map[string]float64{}, map[string]float64{}
		for _, port := range []string{"P", "A", "B", "T"} {
			p[port], q[port] = j.sig(x, b.ID+"."+port+".p"), j.sig(x, b.ID+"."+port+".q")
		}
		off := func(q, dp float64) error {
			if !j.turbulent(q, dp, math.Abs(u)*qN, dN) {
				return fmt.Errorf("%s open by %g passes %g L/min at %g bar", b.ID, u, q*60000, dp/1e5)
			}
			return nil
		}
		switch {
		case u == 0:
			return nil
		case u > 0 && regen:
			return first(off(-q["A"], p["P"]-p["A"]), off(-q["B"], p["P"]-p["B"]))
		case u > 0:
			return first(off(-q["A"], p["P"]-p["A"]), off(q["B"], p["B"]-p["T"]))
		}
		return first(off(-q["B"], p["P"]-p["B"]), off(q["A"], p["A"]-p["T"]))
	})
}

func first(errs ...error) error {
	for _, e := range errs {
		if e != nil {
			return e
		}
	}
	return nil
}

// piston: what the pressures leave over of load and viscous friction is dry friction,
// against the motion, unless an end or a brake holds it.
func (j *judge) piston(b *Block) {
	i := -1
	for k, a := range j.c.axes {
		if a.Name == b.Word("axis") {
			i = k
		}
	}
	bore := j.number(b, "bore") + j.number(b, "diameter")
	rod, back := j.number(b, "rod"), 0.0
	if b.Kind == kindDoubleRod {
		back = rod
	}
	A, B := math.Pi/4*(bore*bore-back*back), math.Pi/4*(bore*bore-rod*rod)
	kp := j.number(b, "pressure_friction")
	if b.Kind == kindPlunger {
		B = 0
	}
	seal := B
	if b.Kind == kindPlunger {
		seal = A
	} else if part, has := j.annulus[b.Word("axis")]; b.Kind != kindDoubleRod && (!has || B/A < part) {
		j.annulus[b.Word("axis")] = B / A
	}
	given := j.s.Axes[i].Given
	j.laws = append(j.laws, func(x *Sample) error {
		now := x.Axes[i]
		pA, pB := j.sig(x, b.ID+".A.p"), j.sig(x, b.ID+".B.p")
		if now.Standing || now.End != 0 || given == duty.MotionCommand {
			return nil
		}
		dry := j.number(b, "friction") + kp*math.Abs(pA-pB)*seal
		N := pA*A - pB*B - now.Load - j.number(b, "viscous")*now.Speed
		if m := j.number(b, "mass"); m > 0 {
			return nil // the inertia force is of the duty, not of the signals
		}
		slack := 1e-6*(pA*A+pB*B+math.Abs(now.Load)) + 1e3*A
		if math.Abs(N) > dry+slack {
			return fmt.Errorf("%s: %g N are left, dry friction %g", b.ID, N, dry)
		}
		if math.Abs(now.Speed)*A > 20*j.tiny() && math.Abs(N-machines.Sign(now.Speed)*dry) > slack {
			return fmt.Errorf("%s moves at %g m/s with %g N of dry friction %g", b.ID, now.Speed, N, dry)
		}
		return nil
	})
}

// pump: it delivers what it displaces less what slips, and a control of pressure never
// holds more setting than its pressure lets it.
func (j *judge) pump(b *Block) {
	control := KindNamed(b.Kind).WordOf(b, "control")
	D, slip, share := j.number(b, "displacement"), j.number(b, "slip"), j.number(b, "case_share")
	set := j.number(b, "set_pressure")
	j.laws = append(j.laws, func(x *Sample) error {
		e, w := j.sig(x, b.ID+".e"), j.sig(x, b.ID+".w")
		pP, pS := j.sig(x, b.ID+".P.p"), j.sig(x, b.ID+".S.p")
		k := slip * D / j.cond.Viscosity
		q := e*D*w - k*(1-share)*(pP-pS) - k*share*pP
		if d := math.Abs(-j.sig(x, b.ID+".P.q") - q); d > 1e-6*(D*math.Abs(w)+k*math.Abs(pP))+j.tiny() {
			return fmt.Errorf("%s delivers %g L/min, by its law %g", b.ID, -j.sig(x, b.ID+".P.q")*60000, q*60000)
		}
		limit := set
		switch control {
		case "load_sensing":
			limit = math.Max(0, j.sig(x, b.ID+".LS.p")) + j.number(b, "margin")
		case "pressure", "pq":
		default:
			return nil
		}
		if slack := 1e-6*limit + 1e3; e > 1e-6 && pP > limit+slack {
			return fmt.Errorf("%s strokes to %g at %g bar, its limit is %g", b.ID, e, pP/1e5, limit/1e5)
		} else if _, limited := b.Values["power_limit"]; control != "pq" && !limited && e < 1-1e-6 && pP < limit-slack {
			return fmt.Errorf("%s strokes back to %g at %g bar, its limit is %g", b.ID, e, pP/1e5, limit/1e5)
		}
		return nil
	})
}

// control: an axis does what is asked, or less with its control wide open, or more with
// it shut.
func (j *judge) control(i int) {
	axis := j.c.axes[i].Name
	least := j.tiny() / j.c.movers[i].volume(j.c.defaults) // speed that is none
	for _, b := range sorted(j.c.circuit.Blocks) {
		if follows(b) != axis {
			continue
		}
		name, limited := b.ID+".u", false
		if b.Kind == kindPump {
			name = b.ID + ".e"
			_, limited = b.Values["power_limit"]
		}
		j.laws = append(j.laws, func(x *Sample) error {
			now := x.Axes[i]
			if now.Standing || now.End != 0 || limited {
				return nil
			}
			open, lag := math.Abs(j.sig(x, name)), (now.Demand-now.Speed)*machines.Sign(now.Demand)
			slack := 1e-6*math.Abs(now.Demand) + least
			switch {
			case lag > slack && open < 1-1e-6:
				return fmt.Errorf("%s does %g of %g with %s open by %g only", axis, now.Speed, now.Demand, b.ID, open)
			case lag < -slack && open > 2e-6 && j.sig(x, name)*machines.Sign(now.Demand) > -1+1e-6 && b.Kind == kindValve:
				return fmt.Errorf("%s does %g of %g with %s open by %g", axis, now.Speed, now.Demand, b.ID, open)
			}
			return nil
		})
	}
}
