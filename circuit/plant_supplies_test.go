package circuit

import (
	"fmt"

	"barlitre/circuit/duty"
)

// supply draws what gives pressure to the rail.
func (p *plant) supply() {
	p.pressure, p.flow = min(p.within(120), 900), p.about(60)
	if !p.room(6) {
		p.source()
		return
	}
	switch k := p.IntN(11); {
	case k == 0:
		p.source()
	case k == 1 && p.room(8):
		p.highLow()
	case k == 2 && p.room(8):
		p.charged()
	case k == 3:
		p.displacement()
	default:
		p.pumped(k)
	}
}

// source is a small pressure source, as a charge line is.
func (p *plant) source() {
	p.pressure = min(p.within(6), 60)
	p.rails = append(p.rails, p.block("PS", "pressure_source", fmt.Sprintf("pressure: %.4g bar", p.pressure))+".P")
}

// drive is a motor or an engine, with or without a gearbox, and returns the port of its shaft.
func (p *plant) drive() string {
	rated := min(p.pressure*p.flow/600, 100)
	var m string
	switch {
	case p.one(8):
		m = p.block("EN", "engine", p.num("rated_power", rated, "kW"), p.share("speed", 1200, 2400)+" rpm", p.share("droop", 0, 0.08), p.share("torque_rise", 0, 0.4))
	case p.one(6):
		m = p.block("M", "electric_motor", p.num("rated_power", rated, "kW"), p.share("efficiency", 0.8, 0.96), p.num("torque_limit", rated*6.5, "N m"))
	default:
		m = p.block("M", "electric_motor", p.num("rated_power", rated, "kW"), p.share("efficiency", 0.8, 0.96))
	}
	if p.room(8) && p.one(4) {
		g := p.block("G", "gearbox", p.two("ratio", 1, ""), p.share("efficiency", 0.85, 1))
		p.join(m+".shaft", g+".in")
		return g + ".out"
	}
	return m + ".shaft"
}

// machine are the parameters of a pump or motor of about so many cm³ a revolution.
func (p *plant) machine(size float64) []string {
	return []string{p.num("displacement", size, "cm3/rev"), p.num("slip", 1.5e-8, ""), p.share("friction", 0, 0.08), p.num("viscous", 3e4, ""), p.num("drag", 1, "N m"), p.share("case_share", 0, 1)}
}

// limit is a relief valve to tank; it returns its inlet.
func (p *plant) limit(bar float64) string {
	id := p.block("RV", "relief", p.bar("crack", bar), p.num("override", 10, "bar per 100 L/min"))
	p.tank = append(p.tank, id+".T")
	return id + ".P"
}

// pumped is one pump of any control beside a relief valve.
func (p *plant) pumped(k int) {
	shaft := p.drive()
	params := p.machine(p.flow / 1.48)
	control := ""
	switch k {
	case 4, 5:
		params = append(params, "control: pressure", p.bar("set_pressure", p.pressure))
	case 6, 7:
		params = append(params, "control: load_sensing", p.bar("margin", 14))
		control = "LS"
	case 8:
		params = append(params, "control: pq", p.bar("set_pressure", p.pressure), p.num("set_flow", p.flow, "L/min"))
	case 9:
		params = append(params, "control: power", p.num("power_limit", min(p.pressure*p.flow/1200, 100), "kW"))
	}
	if (k == 5 || k == 7 || k == 8) && p.one(2) {
		params = append(params, p.num("power_limit", min(p.pressure*p.flow/1200, 100), "kW"))
	}
	id := p.block("P", "pump", params...)
	p.join(shaft, id+".shaft")
	p.tank = append(p.tank, id+".S")
	at := []string{id + ".P", p.limit(p.pressure * 1.2)}
	if p.room(6) && p.one(3) {
		c := p.check("CV")
		p.join(append(at, c+".in")...)
		at = []string{c + ".out"}
	}
	p.rails = append(p.rails, at...)
	if control != "" {
		p.sensing = true
		p.highest = append(p.highest, id+".LS")
	}
}

func (p *plant) check(prefix string) string {
	return p.block(prefix, "check", fmt.Sprintf("opens: %.3g bar", []float64{0, 0.5, 5}[p.IntN(3)]), p.num("nominal_flow", 100, "L/min"), fmt.Sprintf("nominal_drop: %.3g bar", []float64{0, 0.05, 1}[p.IntN(3)]))
}

// highLow is a pair of pumps on one shaft, the large one unloaded by pressure.
func (p *plant) highLow() {
	shaft := p.drive()
	large, small := p.block("P", "pump", p.machine(p.flow/2)...), p.block("P", "pump", p.machine(p.flow/8)...)
	cv := p.check("CV")
	u := p.block("UV", "unloading_pilot", p.bar("setting", p.pressure/2), p.bar("range", 10), p.num("nominal_flow", 100, "L/min"))
	p.join(shaft, large+".shaft", small+".shaft")
	p.join(large+".P", cv+".in", u+".P")
	p.tank = append(p.tank, large+".S", small+".S", u+".T")
	p.rails = append(p.rails, cv+".out", small+".P", u+".X", p.limit(p.pressure*1.2))
}

// charged is an accumulator that an unloading valve keeps between two pressures.
func (p *plant) charged() {
	shaft := p.drive()
	pump := p.block("P", "pump", p.machine(p.flow/4)...)
	lo := p.pressure * (0.6 + 0.3*p.Float64())
	u := p.block("UV", "unloading", fmt.Sprintf("unloads: %.5g bar; loads: %.5g bar", p.pressure, lo), p.num("nominal_flow", 60, "L/min"), p.bar("unloaded_drop", 3))
	a := p.block("AC", "accumulator", p.num("volume", 20, "L"), fmt.Sprintf("precharge: %.4g bar; start_pressure: %.4g bar", lo*(0.3+0.6*p.Float64()), lo+(p.pressure-lo)*p.Float64()))
	p.join(shaft, pump+".shaft")
	p.join(pump+".P", u+".P", p.limit(p.pressure*1.3))
	p.tank = append(p.tank, pump+".S", u+".T")
	p.rails = append(p.rails, u+".A", a+".P")
}

// displacement is a pump that follows an axis, whose valve only directs it.
func (p *plant) displacement() {
	shaft := p.drive()
	axis := p.axis()
	pump := p.block("P", "pump", append(p.machine(p.flow/1.48), "follows: "+axis)...)
	p.join(shaft, pump+".shaft")
	p.tank = append(p.tank, pump+".S")
	v := p.block("V", "valve", "directs: "+axis, p.num("nominal_flow", 100, "L/min"), p.word("centre", "closed", "tandem"))
	p.join(pump+".P", p.limit(p.pressure*1.2), v+".P")
	p.tank = append(p.tank, v+".T")
	p.actuator(axis, v+".A", v+".B", "valve", duty.MotionLoad)
}

// closedLoop is a winch or a double-rod cylinder in a closed circuit.
func (p *plant) closedLoop() {
	p.pressure, p.flow = p.within(200), p.about(60)
	shaft := p.drive()
	axis := p.axis()
	pump := p.block("P", "pump", append(p.machine(p.flow/1.48), "follows: "+axis, "both_directions: yes")...)
	cp := p.block("CP", "charge_pump", append(p.machine(p.flow/6), p.bar("charge", 20))...)
	p.join(shaft, pump+".shaft", cp+".shaft")
	a, b := p.check("CV"), p.check("CV")
	p.join(cp+".P", a+".in", b+".in")
	p.tank = append(p.tank, cp+".S", cp+".T")
	r1 := p.block("RV", "relief", p.bar("crack", p.pressure*1.2))
	r2 := p.block("RV", "relief", p.bar("crack", p.pressure*1.2))
	A, B := []string{pump + ".P", a + ".out", r1 + ".P", r2 + ".T"}, []string{pump + ".S", b + ".out", r2 + ".P", r1 + ".T"}
	if p.room(4) && p.one(2) {
		f := p.block("FV", "flushing", p.bar("opens", 12), p.num("override", 10, "bar per 100 L/min"), p.num("nominal_flow", 10, "L/min"))
		A, B = append(A, f+".A"), append(B, f+".B")
		p.tank = append(p.tank, f+".T")
	}
	portA, portB := A[0], B[0]
	p.join(A...)
	p.join(B...)
	p.winch(axis, portA, portB, []string{"pump", "brake"}[p.IntN(2)])
}
