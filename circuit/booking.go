package circuit

// booking receives what a balanced step holds.
type booking struct {
	eval // for val and row
	scales
	cond   Conditions
	step   *step
	sig    []float64
	sums   []float64 // what is summed up over the blocks: pow, pulse, el, each and elJ, one after the other
	pow    []float64
	shaft  []shaftBook
	el     []float64 // W drawn at electric nodes, by node
	each   []float64 // W, Σ|P| of what hangs at electric nodes
	elJ    []float64 // J drawn at electric nodes at this instant
	pulse  []float64 // J, by channel
	pulsed bool      // some are not 0
	next   []float64 // slow states at this point
}

// room makes room for the sums over the blocks, which are cleared in one go.
func (k *booking) room(channels, electric int) {
	k.sums = make([]float64, 2*channels+3*electric)
	left := k.sums
	for _, part := range []struct {
		of *[]float64
		n  int
	}{{&k.pow, channels}, {&k.pulse, channels}, {&k.el, electric}, {&k.each, electric}, {&k.elJ, electric}} {
		*part.of, left = left[:part.n:part.n], left[part.n:]
	}
}

type shaftBook struct{ torque, speed float64 } // N·m needed, rad/s

// pa returns a pressure [Pa], m3s a flow [m³/s], watts a power [W].
func (k *booking) pa(s slot) float64       { return k.val(s) * k.scales.p }
func (k *booking) m3s(v float64) float64   { return v * k.scales.q }
func (k *booking) watts(v float64) float64 { return v * k.scales.p * k.scales.q }

// put writes a signal; a negative index means nobody wants it.
func (k *booking) put(i int, v float64) {
	if i >= 0 {
		k.sig[i] = v
	}
}

// lose adds to a power channel [W].
func (k *booking) lose(i int, w float64) {
	if i >= 0 {
		k.pow[i] += w
	}
}

// strike adds to what a channel draws or loses at this instant [J].
func (k *booking) strike(i int, J float64) {
	if J != 0 {
		k.pulse[i] += J
		k.pulsed = true
	}
}

// through books a flow from a to b: both port flows and the loss Δp·q.
func (k *booking) through(a, b slot, q float64, qa, qb, loss int) {
	k.put(qa, k.m3s(q))
	k.put(qb, -k.m3s(q))
	k.lose(loss, k.watts((k.val(a)-k.val(b))*q))
}
