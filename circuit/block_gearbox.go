package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// gearboxKind is a gearbox between two shafts.
var gearboxKind = &Kind{
	Name: kindGearbox, Title: "Gearbox", Group: "supply",
	Letter: "GB", Typical: []Setting{{"ratio", "3"}},
	Text: "Joins two shafts that turn in a fixed ratio. Either side may drive; its loss is of the torque at the output and opposes motion both ways, so that driven from the output it passes the share 2 − 1/η.",
	Ports: []Port{
		{Name: "in", Type: Shaft, Text: "input shaft"},
		{Name: "out", Type: Shaft, Text: "output shaft"},
	},
	Params: []Param{
		{Key: "ratio", Title: "Ratio", Symbol: "i", Dim: units.Ratio, Need: true, Above: true, Max: 1e4, Text: "speed of the input over that of the output, above 1 slows down"},
		{Key: "efficiency", Title: "Efficiency", Symbol: "η", Dim: units.Ratio, Default: "0.97", Origin: Assumed, Source: "one or two spur stages, common practice; a worm gear has far less", Min: 0.5, Above: true, Max: 1, Text: "driven from the input; at 50 % and less a gearbox locks itself when driven from the output, which is not covered"},
	},
	Losses: []LossKind{{"gearbox", ToAir, "P = |T2|/i·(1 − η)/η·|ω1|"}},
	Equations: []Equation{
		{"ω1 = i·ω2", "fixed ratio"},
		{"T1 = T2/i + |T2|/i·(1 − η)/η·sign ω", "loss torque opposes motion; driven from the output η' = 2 − 1/η, machine elements, from memory"},
	},
	Symbol: func(*Block) string { return "gearbox" },
	build:  buildGearbox,
}

// gearJoint is a gearbox as it hangs in a train of shafts: near is the side of the
// shaft that the train is counted from.
type gearJoint struct {
	box       *Block
	near, far *net
	outward   bool // far is the output
}

// train follows gearboxes from a shaft to all that turn with it. Nets and joints come
// in the order of their distance; ring names a gearbox that closes a ring, or "".
func train(c *Circuit, of map[PortRef]*net, start *net) (nets []*net, joints []gearJoint, ring string) {
	nets = []*net{start}
	used := map[string]bool{}
	seen := map[*net]bool{start: true}
	for i := 0; i < len(nets); i++ {
		for _, p := range nets[i].ports {
			b := c.Block(p.Block)
			if b.Kind != kindGearbox || used[b.ID] {
				continue
			}
			used[b.ID] = true
			j := gearJoint{box: b, near: nets[i], outward: p.Port == "in"}
			if j.far = of[PortRef{b.ID, map[bool]string{true: "out", false: "in"}[j.outward]}]; j.far == nil {
				continue
			}
			if seen[j.far] {
				ring = b.ID
				continue
			}
			seen[j.far] = true
			nets, joints = append(nets, j.far), append(joints, j)
		}
	}
	return
}

// trainPorts are all ports on the shafts that turn with a block's shaft.
func trainPorts(c *Circuit, of map[PortRef]*net, b *Block) (ports []PortRef) {
	if n := of[PortRef{b.ID, "shaft"}]; n != nil {
		nets, _, _ := train(c, of, n)
		for _, m := range nets {
			ports = append(ports, m.ports...)
		}
	}
	return
}

// gearStep is one gearbox on the way from the first shaft of a train.
type gearStep struct {
	ratio   int // parameter
	outward bool
}

// slower is the speed of the first shaft over that of the shaft at the end of a way.
func slower(way []gearStep, p []float64) float64 {
	r := 1.0
	for _, g := range way {
		if g.outward {
			r *= p[g.ratio]
		} else {
			r /= p[g.ratio]
		}
	}
	return r
}

// placedJoint is a gearbox between two placed shafts. Its unknown u, where there is
// one, is the torque at the output, counted so that the row of the far shaft rises with it.
type placedJoint struct {
	near, far int
	outward   bool
	u         slot
	depth     int
}

// placeTrain places a shaft and all that turn with it. Their speeds are one unknown;
// it belongs to the shaft of the prime mover, else to that whose motion is imposed.
func (k *compiler) placeTrain(n *net) {
	nets, _, _ := train(k.circuit, k.of, n)
	first, rank, imposed := n, 0, false
	for _, m := range nets {
		for _, p := range m.ports {
			b := k.circuit.Block(p.Block)
			if k.imposesMotion(b) {
				imposed = true
				if rank < 1 {
					first, rank = m, 1
				}
			}
			if drives(b) && rank < 2 {
				first, rank = m, 2
			}
		}
	}
	k.shaftOf[first.id] = k.newShaft(first, imposed)
	nets, joints, _ := train(k.circuit, k.of, first)
	for _, j := range joints {
		near := k.shaftOf[j.near.id]
		s := k.shafts[near]
		far := shaft{speed: s.speed, sigma: s.sigma, row: noSlot, free: s.free, driver: s.driver, all: k.Compiled,
			way: append(append([]gearStep(nil), s.way...), gearStep{k.param(j.box, "ratio"), j.outward})}
		if far.free {
			far.row = k.unknown(otherRow, j.box.ID+" torque")
		}
		k.shaftOf[j.far.id] = len(k.shafts)
		k.joints[j.box.ID] = placedJoint{near, len(k.shafts), j.outward, far.row, len(far.way)}
		k.shafts = append(k.shafts, far)
	}
	var members []int
	for _, m := range nets {
		members = append(members, k.shaftOf[m.id])
	}
	for _, i := range members {
		k.shafts[i].train = members
	}
}

type gearboxModel struct {
	k          *Compiled
	in, out    int // shafts
	j          placedJoint
	row        slot // torque row of the near shaft
	sigma      slot
	speed      slot
	free       bool
	ratio, eta int
	loss       int
	w1, T1, P1 int // signals
	w2, T2     int

	i, g        float64 // ratio; loss torque by torque
	w1Per, tPer float64 // rad/s at the input, N·m at the output, of one scaled unit
}

func buildGearbox(k *compiler, b *Block) model {
	j := k.joints[b.ID]
	near := k.shafts[j.near]
	m := &gearboxModel{k: k.Compiled, in: j.near, out: j.far, j: j, row: near.row, sigma: near.sigma, speed: near.speed, free: near.free,
		ratio: k.param(b, "ratio"), eta: k.param(b, "efficiency"), loss: k.channel(Loss, b, "gearbox"),
		w1: k.signal(b, "w", "speed of the input", units.AngularSpeed), T1: k.signal(b, "T", "torque at the input", units.Torque), P1: k.signal(b, "shaft", "power at the input", units.Power),
		w2: k.signal(b, "w_out", "speed of the output", units.AngularSpeed), T2: k.signal(b, "T_out", "torque at the output", units.Torque)}
	if !j.outward {
		m.in, m.out = m.out, m.in
	}
	return m
}

func (m *gearboxModel) clone() model { c := *m; return &c }

func (m *gearboxModel) bind(b *binding) {
	m.i = b.p[m.ratio]
	m.g = (1 - b.p[m.eta]) / b.p[m.eta]
	m.w1Per = b.scales.q / m.k.shafts[m.in].size(b.p)
	m.tPer = m.k.shafts[m.out].size(b.p) * b.scales.p
}

func (m *gearboxModel) begin(*step) {}

// eval couples the torque rows of both shafts. Scaled torques are those at one speed,
// so that the ratio does not show. u is the scaled torque at the output, with the sign
// that makes the row of the far shaft rise.
func (m *gearboxModel) eval(e *eval) {
	if !m.free {
		return // the first shaft has its speed; torques are booked
	}
	u, sg := e.val(m.j.u), e.val(m.sigma)
	lost, slope := m.g*math.Abs(u), m.g*machines.Sign(u)
	if m.j.outward {
		// far: Σ T + u = 0 with u = −T2; near: Σ T + T1 = 0.
		e.add(m.j.u, u)
		e.d(m.j.u, m.j.u, 1)
		e.add(m.row, -u+lost*sg)
		e.d(m.row, m.j.u, -1+slope*sg)
		e.d(m.row, m.sigma, lost)
		return
	}
	// far: Σ T + T1 = 0 with u = T2; near: Σ T − T2 = 0.
	e.add(m.j.u, u+lost*sg)
	e.d(m.j.u, m.j.u, 1+slope*sg)
	e.d(m.j.u, m.sigma, lost)
	e.add(m.row, -u)
	e.d(m.row, m.j.u, -1)
}

func (m *gearboxModel) book(*booking) {} // after all machines: bookTorque

// bookTorque books the gearbox once all that hangs on its far shaft is booked, and
// hands the torque on to the near one.
func (m *gearboxModel) bookTorque(k *booking) {
	w := k.val(m.speed) * m.w1Per
	dir := machines.Sign(w)
	var T2 float64
	switch {
	case m.free:
		dir = k.val(m.sigma)
		if T2 = k.val(m.j.u) * m.tPer; m.j.outward {
			T2 = -T2
		}
	case m.j.outward:
		T2 = k.shaft[m.out].torque
	default:
		T1 := -k.shaft[m.in].torque
		T2 = T1 * m.i / (1 + m.g*dir*machines.Sign(T1))
	}
	lost := math.Abs(T2) / m.i * m.g * dir
	T1 := T2/m.i + lost
	k.shaft[m.in].torque += T1
	k.shaft[m.out].torque -= T2
	k.pow[m.loss] += lost * w
	k.put(m.w1, w)
	k.put(m.T1, T1)
	k.put(m.P1, T1*w)
	k.put(m.w2, w/m.i)
	k.put(m.T2, T2)
}

// gearsLast puts the gearboxes behind all other models, those farthest from the first
// shaft of their train foremost, so that each finds its far shaft booked.
func gearsLast(models []model) []model {
	var out []model
	var gears []*gearboxModel
	for _, m := range models {
		if g, ok := m.(*gearboxModel); ok {
			gears = append(gears, g)
		} else {
			out = append(out, m)
		}
	}
	for depth := len(gears); depth > 0; depth-- {
		for _, g := range gears {
			if g.j.depth == depth {
				out = append(out, g)
			}
		}
	}
	return out
}
