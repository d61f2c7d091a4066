package circuit

import (
	"math"
	"sort"
	"sync"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// ParamRef names an entry of the flat parameter vector.
type ParamRef struct {
	Block, Key string
	Dim        units.Dim
}

// Compiled is a circuit as equations. It does not change; any number of
// goroutines may run it at once, each with its own parameters.
type Compiled struct {
	circuit  *Circuit
	params   []ParamRef
	defaults []float64
	index    map[PortRef]int // block and key → params
	channels []Channel
	signals  []Signal
	axes     []duty.Axis
	movers   []mover // by axis
	shafts   []shaft
	nodes    []oilNode // unknown and fixed pressures
	n, nfix  int
	rows     []rowName // by unknown
	models   []model
	openings []slot // of valves that a pilot pressure opens
	inertia  bool
	electric int // number of electric nodes
	slow     []slowState
	portP    []portSignal
	void     int       // channel of the voids of all nodes
	solvers  sync.Pool // whose runs have ended
}

// mover is the actuator of an axis.
type mover struct {
	block  string
	speed  slot // scaled by volume
	sigma  slot // share of the dry friction, −1..1
	given  duty.Given
	hold   string
	sizes  []pistonSize              // of its cylinders, which move as one
	volume func(p []float64) float64 // m² or m³/rad per unit of axis speed
	slip   func(p []float64) float64 // leakage past the actuator times viscosity [m³], nil = none
}

// shaft is a node of speed and torque.
type shaft struct {
	speed  slot
	sigma  slot // of a free shaft
	row    slot // of a free shaft: its torque balance
	free   bool // its torque balance is a row: no prime mover, or one of limited torque
	driver string
	sizes  []int      // displacement parameters of the machines on it
	way    []gearStep // gearboxes from the first shaft of its train, whose speed it shares
	train  []int      // shafts of its train, itself included; nil without gearboxes
	all    *Compiled
}

// oilNode is a pressure.
type oilNode struct {
	slot  slot
	name  string
	pilot bool
}

type rowKind int

const (
	flowRow  rowKind = iota // of a node
	forceRow                // of an actuator or free shaft
	passRow                 // a flow through an edge
	otherRow                // a pressure, or the aim of a control
)

// rowName says what a row is, for messages and the certificate.
type rowName struct {
	kind  rowKind
	where string
	axis  int // of a force row
}

type portSignal struct {
	signal int
	node   slot
}

// compiler wires one circuit.
type compiler struct {
	*Compiled
	duty     *duty.Duty
	of       map[PortRef]*net
	slots    map[int]slot // by net id
	air      slot         // where unconnected drains go
	shaftOf  map[int]int  // net id → shaft
	elOf     map[int]int
	axisOf   map[string]int
	ownShaft map[string]int         // blocks whose shaft is on no line
	joints   map[string]placedJoint // of gearboxes
	nets     []*net
}

// Compile turns a circuit into equations for the axes as the duty gives them.
// It returns nil and the findings when something stops it. Findings that do not
// stop are returned too. The result holds for all values of the numbers; a
// changed choice (centre of a valve, kind of control) needs a new compile.
func Compile(c *Circuit, axes []duty.Axis, d *duty.Duty) (*Compiled, []Finding) {
	found := Check(c, axes, []*duty.Duty{d})
	if AnyStops(found) {
		return nil, found
	}
	k := &compiler{Compiled: &Compiled{circuit: c, axes: axes, index: map[PortRef]int{}}, duty: d,
		slots: map[int]slot{}, shaftOf: map[int]int{}, elOf: map[int]int{}, axisOf: map[string]int{}, ownShaft: map[string]int{}, joints: map[string]placedJoint{}}
	k.nets, k.of = netsOf(c)
	for i, a := range axes {
		k.axisOf[a.Name] = i
		k.movers = append(k.movers, mover{given: d.Given(a.Name), speed: noSlot, sigma: noSlot})
	}
	k.air = k.fixed()
	k.placeNodes()
	k.placeShafts()
	for _, b := range sorted(c.Blocks) { // movers first, so that controls find them
		k.placeMover(b)
	}
	for _, b := range sorted(c.Blocks) {
		if kind := KindNamed(b.Kind); kind.build != nil {
			k.models = append(k.models, kind.build(k, b))
		}
	}
	k.models = gearsLast(k.models)
	k.void = len(k.channels)
	k.channels = append(k.channels, Channel{Role: Loss, Block: "nodes", Kind: "void", Sink: ToOil})
	return k.Compiled, found
}

// noSlot marks what a circuit does not have.
const noSlot slot = math.MinInt32

// sorted returns the blocks by id, so that nothing depends on their order in the file.
func sorted(bs []Block) []*Block {
	out := make([]*Block, len(bs))
	for i := range bs {
		out[i] = &bs[i]
	}
	sort.Slice(out, func(i, j int) bool { return out[i].ID < out[j].ID })
	return out
}

// Params lists the flat parameter vector.
func (c *Compiled) Params() []ParamRef { return c.params }

// Defaults returns the circuit's own values, a fresh slice in the order of Params.
func (c *Compiled) Defaults() []float64 { return append([]float64(nil), c.defaults...) }

// Index finds a parameter in the flat vector.
func (c *Compiled) Index(block, key string) (int, bool) {
	i, ok := c.index[PortRef{block, key}]
	return i, ok
}

// Channels lists the powers a run books.
func (c *Compiled) Channels() []Channel { return c.channels }

// Signals lists the quantities a run reports.
func (c *Compiled) Signals() []Signal { return c.signals }

// Axes lists the axes, as given to Compile.
func (c *Compiled) Axes() []duty.Axis { return c.axes }

// Circuit returns what was compiled.
func (c *Compiled) Circuit() *Circuit { return c.circuit }

// HasInertia reports whether a mass is moved, so that its acceleration counts.
func (c *Compiled) HasInertia() bool { return c.inertia }

// Series lays a duty out in the time steps that this circuit needs; circuits for the
// same axes that agree in HasInertia need the same ones.
func (c *Compiled) Series(d *duty.Duty) *duty.Series { return d.Series(c.axes, c.inertia) }

// unknown adds an unknown and names its row.
func (k *compiler) unknown(kind rowKind, where string) slot {
	k.rows = append(k.rows, rowName{kind: kind, where: where, axis: -1})
	k.n++
	return slot(k.n - 1)
}

// fixed adds a number that is known within a time step.
func (k *compiler) fixed() slot {
	k.nfix++
	return slot(-k.nfix)
}

// param adds a number of a block to the parameter vector and returns its index,
// −1 when the block has none.
func (k *compiler) param(b *Block, key string) int {
	if i, ok := k.index[PortRef{b.ID, key}]; ok {
		return i
	}
	kind := KindNamed(b.Kind)
	v, _, ok := kind.Value(b, key)
	if !ok {
		return -1
	}
	i := len(k.params)
	k.index[PortRef{b.ID, key}] = i
	k.params = append(k.params, ParamRef{b.ID, key, kind.Param(key).Dim})
	k.defaults = append(k.defaults, v.SI)
	return i
}

// placeNodes gives every oil and pilot net its pressure.
func (k *compiler) placeNodes() {
	for _, n := range k.nets {
		if n.typ != Oil && n.typ != Pilot {
			continue
		}
		node := oilNode{name: n.name(), pilot: n.typ == Pilot}
		switch {
		case n.tank != "", n.src != "":
			node.slot = k.fixed()
		case node.pilot:
			node.slot = k.unknown(otherRow, n.name())
		default:
			node.slot = k.unknown(flowRow, n.name())
		}
		k.slots[n.id] = node.slot
		k.nodes = append(k.nodes, node)
	}
}

// placeShafts finds the shafts and who drives them.
func (k *compiler) placeShafts() {
	for _, n := range k.nets {
		switch n.typ {
		case Shaft:
			if _, done := k.shaftOf[n.id]; !done {
				k.placeTrain(n)
			}
		case Electric:
			k.elOf[n.id] = k.electric
			k.electric++
		}
	}
}

// newShaft places the first shaft of a train; imposed says that the duty gives its motion.
func (k *compiler) newShaft(n *net, imposed bool) int {
	s := shaft{sigma: noSlot, row: noSlot, all: k.Compiled}
	for _, p := range n.ports {
		b := k.circuit.Block(p.Block)
		if !drives(b) {
			continue
		}
		s.driver = b.ID
		tracks := follows(b) != "" && k.duty.Given(follows(b)) == duty.MotionLoad
		switch {
		case limited(b), slips(b), commandsTorque(b):
			s.free, s.speed = true, k.unknown(forceRow, b.ID+" speed")
			s.row = s.speed
			if tracks || commandsTorque(b) {
				s.sigma = k.unknown(otherRow, b.ID+" friction")
			} else {
				s.sigma = k.fixed() // it turns the way it is told to
			}
		case tracks:
			s.speed = k.unknown(otherRow, b.ID+" speed")
		default:
			s.speed = k.fixed()
		}
	}
	if s.driver == "" {
		s = k.freeShaft(n.name(), imposed)
	}
	k.shafts = append(k.shafts, s)
	return len(k.shafts) - 1
}

// freeShaft makes a shaft without a prime mover: its speed is found from its
// torque balance, unless the duty imposes the motion of an axis on it.
func (k *compiler) freeShaft(name string, imposed bool) shaft {
	s := shaft{free: true, all: k.Compiled}
	if imposed {
		s.speed, s.sigma = k.fixed(), k.fixed()
	} else {
		s.speed, s.sigma = k.unknown(forceRow, name), k.unknown(otherRow, name+" friction")
	}
	s.row = s.speed
	return s
}

// imposesMotion reports whether a block moves an axis whose motion and command are given.
func (k *compiler) imposesMotion(b *Block) bool {
	a := b.Word("axis")
	return a != "" && k.duty.Given(a) == duty.MotionCommand
}

// shaftAt returns the shaft at a block's port; without a line a block gets its own.
func (k *compiler) shaftAt(b *Block) int {
	if n := k.of[PortRef{b.ID, "shaft"}]; n != nil {
		return k.shaftOf[n.id]
	}
	if i, ok := k.ownShaft[b.ID]; ok {
		return i
	}
	k.shafts = append(k.shafts, k.freeShaft(b.ID, k.imposesMotion(b)))
	k.ownShaft[b.ID] = len(k.shafts) - 1
	return len(k.shafts) - 1
}

// referenceSpeed returns the parameter of a pump's reference speed: its own, else that of
// what drives it, −1 without either; through tells that gearboxes lie between.
func (k *compiler) referenceSpeed(b *Block) (i int, through []gearStep) {
	if i := k.param(b, "reference_speed"); i >= 0 {
		return i, nil
	}
	s := &k.shafts[k.shaftAt(b)]
	if d := k.circuit.Block(s.driver); d != nil {
		return k.param(d, "speed"), s.way
	}
	return -1, nil
}

// node returns the pressure at a port; an unconnected port goes to the air.
func (k *compiler) node(b *Block, port string) slot {
	if n := k.of[PortRef{b.ID, port}]; n != nil {
		return k.slots[n.id]
	}
	return k.air
}

// joined reports whether a port is on a line.
func (k *compiler) joined(b *Block, port string) bool { return k.of[PortRef{b.ID, port}] != nil }

// channel adds a power channel.
func (k *compiler) channel(role Role, b *Block, kind string) int {
	ch := Channel{Role: role, Block: b.ID, Kind: kind}
	if role == Loss {
		for _, l := range KindNamed(b.Kind).Losses {
			if l.Name == kind {
				ch.Sink = l.Sink
			}
		}
		if ch.Sink == "" {
			panic("circuit: " + b.Kind + " books a loss it does not list: " + kind)
		}
	}
	k.channels = append(k.channels, ch)
	return len(k.channels) - 1
}

// signal adds a signal of the block itself.
func (k *compiler) signal(b *Block, what, title string, dim units.Dim) int {
	k.signals = append(k.signals, Signal{Name: b.ID + "." + what, Block: b.ID, What: what, Title: title, Dim: dim})
	return len(k.signals) - 1
}

// port adds pressure and flow of a port and returns the index of the flow.
func (k *compiler) port(b *Block, port string) int {
	n := k.of[PortRef{b.ID, port}]
	if n == nil {
		return -1
	}
	name := b.ID + "." + port
	k.signals = append(k.signals, Signal{Name: name + ".p", Block: b.ID, Port: port, What: "p", Title: "pressure at " + port, Dim: units.Pressure})
	k.portP = append(k.portP, portSignal{len(k.signals) - 1, k.slots[n.id]})
	if KindNamed(b.Kind).Port(port).Type == Pilot {
		return -1
	}
	k.signals = append(k.signals, Signal{Name: name + ".q", Block: b.ID, Port: port, What: "q", Title: "flow into " + port, Dim: units.Flow})
	return len(k.signals) - 1
}

// follows returns the axis that a control follows, or "".
func follows(b *Block) string { return b.Word("follows") }
