package circuit

import (
	"fmt"

	"barlitre/circuit/duty"
)

// consumers hangs sections on the rail until there is no room or no wish for more.
func (p *plant) consumers() {
	if len(p.rails) == 0 { // the supply has its own
		return
	}
	for n := 0; p.room(3) && (n == 0 || p.sensing && len(p.signals) == 0 || !p.one(5)); n++ {
		switch {
		case p.room(4) && !p.one(5):
			p.section()
		case p.sensing && len(p.signals) == 0:
			p.section()
		default:
			p.bleed()
		}
	}
	if len(p.rails) > 1 {
		p.join(p.rails...)
		p.readable = append(p.readable, p.rails[0])
		return
	}
	if len(p.rails) == 1 { // nothing hangs on it
		o := p.block("O", "orifice", p.num("nominal_flow", 10, "L/min"))
		p.join(p.rails[0], o+".A")
		p.tank = append(p.tank, o+".B")
	}
}

// bleed is a consumer without an actuator: a throttle to the return, behind a flow
// control valve or a sequence valve.
func (p *plant) bleed() {
	in := ""
	o := p.block("O", "orifice", p.num("nominal_flow", 10, "L/min"), p.bar("nominal_drop", 10))
	in = o + ".A"
	p.returns = append(p.returns, o+".B")
	if p.room(1) {
		switch p.IntN(5) {
		case 0:
			f := p.block("FC", "flow_control_3", p.num("set_flow", 10, "L/min"), p.bar("drop", 8), p.num("nominal_flow", 60, "L/min"))
			p.join(f+".A", in)
			p.returns = append(p.returns, f+".T")
			in = f + ".P"
		case 1:
			in = p.before(in, "sequence", "P", "A", p.bar("set", p.pressure/2), p.bar("band", 5), p.num("nominal_flow", 60, "L/min"))
		case 2:
			in = p.before(in, "reducing", "P", "A", p.bar("set", p.pressure/2), p.num("nominal_flow", 60, "L/min"), p.word("relieving", "no", "yes"))
		case 3:
			in = p.before(in, "flow_control", "A", "B", p.num("set_flow", 10, "L/min"), p.bar("least_drop", 8))
		}
	}
	p.rails = append(p.rails, in)
}

// before puts a block before a port and returns the port that now stands there.
func (p *plant) before(port, kind, in, out string, params ...string) string {
	id := p.block("K", kind, params...)
	p.join(id+"."+out, port)
	p.readable = append(p.readable, port)
	return id + "." + in
}

// axis names a new axis, of a kind to be found.
func (p *plant) axis() string { return fmt.Sprintf("a%d", len(p.axes)+1) }

// section is a valve and what it moves.
func (p *plant) section() {
	axis := p.axis()
	given := duty.MotionLoad
	if p.one(6) {
		given = duty.LoadCommand
	}
	centre := []string{"closed", "closed", "float", "tandem", "open"}[p.IntN(5)]
	if p.sensing && centre != "float" {
		centre = "closed"
	}
	params := []string{"follows: " + axis, p.num("nominal_flow", 60, "L/min"), p.bar("nominal_drop", 5), "centre: " + centre}
	if p.one(8) {
		params = append(params, "extend: regenerative")
	}
	v := p.block("V", "valve", params...)
	a, b := v+".A", v+".B"
	signal := v + ".LS"
	if p.one(4) {
		a, b = b, a
	}
	p.signals = append(p.signals, signal)
	p.rails = append(p.rails, p.feed(v+".P", signal))
	out := v + ".T"
	if p.room(3) && p.one(6) {
		c := p.check("BP")
		p.join(out, c+".in")
		out = c + ".out"
	}
	p.returns = append(p.returns, out)
	hold := "valve"
	if centre != "closed" && centre != "tandem" {
		hold = "brake"
	}
	a, b = p.behind(a, b)
	p.actuator(axis, a, b, hold, given)
}

// feed is what stands between the rail and a valve.
func (p *plant) feed(port, signal string) string {
	if !p.room(3) {
		return port
	}
	switch p.IntN(9) {
	case 0, 1:
		id := p.block("PC", "compensator", p.bar("drop", 8), p.num("nominal_flow", 60, "L/min"), p.bar("nominal_drop", 1))
		p.join(id+".A", port)
		i := len(p.signals) - 1
		p.signals[i] = signal + " " + id + ".LS"
		if !p.sensing {
			p.join(p.signals[i])
		}
		return id + ".P"
	case 2:
		return p.before(port, "reducing", "P", "A", p.bar("set", p.pressure/2), p.num("nominal_flow", 60, "L/min"), p.word("relieving", "no", "yes"), p.word("reverse", "blocked", "free"))
	case 3:
		return p.before(port, "sequence", "P", "A", p.bar("set", p.pressure/3), p.bar("band", 5), p.num("nominal_flow", 60, "L/min"), p.word("reverse", "blocked", "free"))
	case 4:
		return p.before(port, "flow_control", "A", "B", p.num("set_flow", p.flow/2, "L/min"), p.bar("least_drop", 8), p.word("reverse", "throttled", "free"))
	case 5:
		return p.before(port, "filter", "A", "B", p.num("nominal_flow", 60, "L/min"), p.bar("nominal_drop", 0.7))
	case 6:
		return p.before(port, "flow_point", "A", "B", fmt.Sprintf("nominal_drop: %g bar", 0.3*float64(p.IntN(2))))
	}
	return port
}

// behind is what stands between a valve and its actuator.
func (p *plant) behind(a, b string) (string, string) {
	if !p.room(4) {
		return a, b
	}
	switch p.IntN(8) {
	case 0:
		a = p.line(a)
		if p.room(3) {
			b = p.line(b)
		}
	case 1:
		a = p.after(a, "throttle_check", "A", "B", p.num("nominal_flow", 30, "L/min"), p.two("check_flow", 60, "L/min"))
	case 2:
		b = p.after(b, "flow_control", "B", "A", p.num("set_flow", p.flow/2, "L/min"), "reverse: free")
	case 3:
		a, b = p.held(a, b, "pilot_check", p.share("pilot_ratio", 2, 8), p.num("nominal_flow", 60, "L/min"))
	case 4:
		a, b = p.held(a, b, "counterbalance", p.bar("setting", p.pressure), p.share("pilot_ratio", 2, 10), p.num("back_flow", 60, "L/min"))
	case 5:
		if p.sensing {
			id := p.block("FS", "flow_sharing", p.bar("setting", 5), p.num("nominal_flow", 60, "L/min"), "reverse: free")
			p.join(a, id+".P")
			p.join(p.signals[len(p.signals)-1])
			p.signals[len(p.signals)-1] = id + ".A"
			p.highest = append(p.highest, id+".LS")
			a = id + ".A"
		}
	case 6:
		id := p.block("FD", "flow_divider", p.num("displacement", 15, "cm3/rev"), p.share("ratio", 0.1, 0.9))
		r := p.limit(p.pressure / 2)
		m := p.check("MU")
		p.join(a, id+".P")
		p.join(id+".B", r, m+".out")
		p.tank = append(p.tank, m+".in")
		a = id + ".A"
	}
	return a, b
}

func (p *plant) line(port string) string {
	return p.after(port, "line", "A", "B", fmt.Sprintf("length: %.3g m; diameter: %.3g mm", p.about(3), p.within(16)), p.share("fittings", 0, 10))
}

// after puts a block behind a port and returns the port that now stands there.
func (p *plant) after(port, kind, in, out string, params ...string) string {
	id := p.block("K", kind, params...)
	p.join(port, id+"."+in)
	p.readable = append(p.readable, port)
	return id + "." + out
}

// held puts a load-holding valve on one side, its pilot on the other.
func (p *plant) held(a, b, kind string, params ...string) (string, string) {
	id := p.block("H", kind, params...)
	if p.one(2) {
		p.join(a, id+".V")
		return id + ".C", b + " " + id + ".X"
	}
	p.join(b, id+".V")
	return a + " " + id + ".X", id + ".C"
}
