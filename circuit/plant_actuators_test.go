package circuit

import (
	"fmt"
	"math"
	"strings"

	"barlitre/circuit/duty"
	"barlitre/machines"
)

// actuator hangs a cylinder or motor between two ports, with or without make-up.
func (p *plant) actuator(axis, a, b, hold string, given duty.Given) {
	makeUp := !p.one(4)
	tie := func(port, end string) {
		ports := append(strings.Fields(port), end)
		if makeUp && p.room(1) {
			m := p.check("MU")
			ports = append(ports, m+".out")
			p.tank = append(p.tank, m+".in")
		}
		p.join(ports...)
		p.readable = append(p.readable, end)
	}
	if p.one(4) {
		p.motor(axis, tie, a, b, given)
		return
	}
	bore := p.within(80)
	common := []string{"axis: " + axis, "hold: " + hold, p.num("friction", 100+bore*bore*0.05, "N"), p.num("viscous", 1500, "N s/m"), fmt.Sprintf("pressure_friction: %g", 0.03*float64(p.IntN(2))), fmt.Sprintf("mass: %g kg", 300*float64(p.IntN(2)))}
	if given == duty.MotionLoad && p.one(4) {
		stroke := p.about(0.3)
		common = append(common, fmt.Sprintf("stroke: %.4g m; start: %.4g m", stroke, stroke*p.Float64()))
	}
	kind := p.IntN(5)
	id, area := "", math.Pi/4*bore*bore // mm²
	switch kind {
	case 0:
		id = p.block("C", "plunger", append(common, fmt.Sprintf("diameter: %.4g mm", bore))...)
	case 1:
		id = p.block("C", "double_rod", append(common, fmt.Sprintf("bore: %.5g mm; rod: %.4g mm; leakage: %.3g L/min per 100 bar", bore, bore*(0.1+0.7*p.Float64()), 0.1*float64(p.IntN(2))))...)
	default:
		id = p.block("C", "cylinder", append(common, fmt.Sprintf("bore: %.5g mm; rod: %.4g mm; leakage: %.3g L/min per 100 bar", bore, bore*(0.1+0.8*p.Float64()), 0.1*float64(p.IntN(2))))...)
	}
	tie(a, id+".A")
	if kind == 0 { // the other side is shut
		p.tank = append(p.tank, strings.Fields(b)...)
	} else {
		tie(b, id+".B")
	}
	p.moves(axis, duty.Linear, p.about(p.flow/60000/(area*1e-6)), p.about(0.4*area*p.pressure*0.1), given)
}

// motor drives an axis, by itself or through a gearbox.
func (p *plant) motor(axis string, tie func(port, end string), a, b string, given duty.Given) {
	size := p.about(80)
	own := append(p.machine(1)[1:], fmt.Sprintf("displacement: %.5g cm3/rev", size), "axis: "+axis, "hold: brake", p.two("gear", 3, ""), p.share("gear_efficiency", 0.8, 1))
	id := p.block("HM", "motor", own...)
	tie(a, id+".A")
	tie(b, id+".B")
	p.moves(axis, duty.Rotary, p.about(p.flow/size*100/3), p.about(0.4*size/62.8*p.pressure), given)
}

// winch is a motor in a closed loop, by itself or behind a gearbox.
func (p *plant) winch(axis, a, b, hold string) {
	size := p.about(80)
	own := append(p.machine(1)[1:], fmt.Sprintf("displacement: %.5g cm3/rev", size))
	drives := []string{"axis: " + axis, "hold: " + hold}
	if p.room(3) && p.one(2) {
		m := p.block("HM", "motor", own...)
		g := p.block("G", "gearbox", p.two("ratio", 5, ""), p.share("efficiency", 0.85, 1))
		drum := p.block("HM", "motor", append(drives, "displacement: 0.1 cm3/rev; drag: 0.1 N m")...)
		p.join(m+".shaft", g+".in")
		p.join(g+".out", drum+".shaft")
		p.tank = append(p.tank, drum+".A", drum+".B")
		p.join(a, m+".A")
		p.join(b, m+".B")
	} else {
		m := p.block("HM", "motor", append(own, drives...)...)
		p.join(a, m+".A")
		p.join(b, m+".B")
	}
	p.moves(axis, duty.Rotary, p.about(p.flow/size*100/3), p.about(0.4*size/62.8*p.pressure), duty.MotionLoad)
}

// moves gives an axis its tracks: forwards and back, or the other way round, under
// loads of either sign.
func (p *plant) moves(axis string, kind duty.AxisKind, top, load float64, given duty.Given) {
	p.axes = append(p.axes, duty.Axis{Name: axis, Kind: kind})
	v1, v2 := top*(0.3+p.Float64()), -top*(0.3+p.Float64())
	if p.one(2) {
		v1, v2 = v2, v1
	}
	what := duty.Speed
	if given == duty.LoadCommand {
		what, v1, v2 = duty.Command, machines.Sign(v1)*(0.05+0.95*p.Float64()), machines.Sign(v2)*(0.05+0.95*p.Float64())
	}
	f1, f2 := load*p.Float64(), load*(p.Float64()-0.4)
	if p.one(8) { // it pulls all the time
		f1, f2 = -f1, -math.Abs(f2)
	}
	p.tracks = append(p.tracks,
		duty.Track{Of: axis, What: what, Values: []float64{0, v1, v1, 0, 0, v2, v2, 0, 0}},
		duty.Track{Of: axis, What: duty.Load, Values: []float64{f1, f1, f2, f2, f2, f1, f1, f2, f2}})
}
