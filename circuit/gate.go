package circuit

// gate is a valve that passes oil freely from V to C and, as far as it is lifted
// by s (0..1), from C to V.
type gate struct {
	V, C, q1, q2, s slot // q1 >= 0 free flow, q2 >= 0 controlled flow C to V
	po, qN, dN      int
	qN2, dN2        int // of the controlled way, −1 as the free one
	qV, qC, loss    int
	opens           float64
	free, back      throat
	closed          float64 // linear resistance of the controlled way as s falls
	seat            float64 // lift at which a shut gate leaks as much as a chamber at rest may: it fills a pocket behind it
}

func newGate(k *compiler, b *Block, V, C string, po, qN, dN, qV, qC, loss int) gate {
	g := gate{V: k.node(b, V), C: k.node(b, C), q1: k.unknown(otherRow, b.ID), q2: k.unknown(otherRow, b.ID), s: k.unknown(otherRow, b.ID+" opening"),
		po: po, qN: qN, dN: dN, qN2: -1, dN2: -1, qV: qV, qC: qC, loss: loss}
	k.openings = append(k.openings, g.s)
	return g
}

func (m *gate) bindGate(b *binding) {
	m.opens = b.p[m.po] / b.scales.p
	m.free = throatOf(b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p)
	m.back = m.free
	if m.qN2 >= 0 {
		m.back = throatOf(b.p[m.qN2]/b.scales.q, b.p[m.dN2]/b.scales.p)
	}
	m.closed = (100e5 / b.scales.p) / (b.p[m.qN] / b.scales.q)
	m.seat = restLeak * m.closed
	b.bound.Lo[m.q1], b.bound.Lo[m.q2] = 0, 0
	b.bound.Lo[m.s], b.bound.Hi[m.s] = 0, 1
}

// evalGate adds both ways; lift adds the row of s.
func (m *gate) evalGate(e *eval) {
	e.throttle(m.V, m.C, m.q1, &m.free, m.opens, 0)
	q2, s := e.branch(m.C, m.V, m.q2), e.val(m.s)
	r, dr := m.back.at(q2)
	dp := e.val(m.C) - e.val(m.V)
	e.add(m.q2, r+(1-s)*m.closed*q2+minResistance*q2-(s+m.seat)*dp)
	e.d(m.q2, m.q2, dr+(1-s)*m.closed+minResistance)
	e.d(m.q2, m.s, -m.closed*q2-dp)
	e.d(m.q2, m.C, -s-m.seat)
	e.d(m.q2, m.V, s+m.seat)
}

func (m *gate) bookGate(k *booking) {
	k.through(m.V, m.C, k.val(m.q1)-k.val(m.q2), m.qV, m.qC, m.loss)
}

func (m *gate) cold(s *step, level int, x []float64) {
	x[m.q1], x[m.q2], x[m.s] = m.free.first(), m.back.first(), 0.5
}
