package circuit

import (
	"math"

	"barlitre/machines/units"
)

// regulated is a way that oil takes from a to b only, through a throat that is
// throttled further by the drop z >= 0; whoever owns it says what z answers to.
type regulated struct {
	a, b, q, z slot
	t          throat
}

func (k *compiler) regulated(b *Block, from, to string) regulated {
	return regulated{a: k.node(b, from), b: k.node(b, to), q: k.unknown(otherRow, b.ID), z: k.unknown(otherRow, b.ID+" throttling")}
}

func (w *regulated) bind(b *binding, t throat) {
	w.t = t
	b.bound.Lo[w.q], b.bound.Hi[w.q] = 0, math.Inf(1)
	b.bound.Lo[w.z], b.bound.Hi[w.z] = 0, throttleMax
	b.bound.Long[w.z] = true
}

// eval adds the flow and its row: pa − pb = Δp(q) + z.
func (w *regulated) eval(e *eval) {
	e.throttle(w.a, w.b, w.q, &w.t, e.val(w.z), 0)
	e.d(w.q, w.z, 1)
}

func (w *regulated) cold(x []float64) { x[w.q], x[w.z] = w.t.first(), 0.1 }

// returnParams are the parameters of a check valve built in beside another way.
func returnParams(reverse ...string) []Param {
	return []Param{
		{Key: "reverse", Title: "Against its direction", Type: Choice, Default: reverse[0], Choices: reverse, Text: "free: a built-in check valve passes oil back"},
		{Key: "check_opens", Title: "Check opens at", Symbol: "po", Dim: units.Pressure, Default: "0.5 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "pressure drop at which the built-in check valve begins to open"},
		{Key: "check_flow", Title: "Nominal flow of the check", Symbol: "q2", Dim: units.Flow, Default: "60 L/min", Origin: Assumed, Source: "state the size of the valve", Above: true, Max: 10, Text: "of the built-in check valve, at its nominal drop beyond its opening pressure"},
		{Key: "check_drop", Title: "Nominal drop of the check", Symbol: "Δp2", Dim: units.Pressure, Default: "1 bar", Origin: Assumed, Source: "common practice", Max: 100e5, Text: "of the built-in check valve at its nominal flow; 0 bar makes it lossless"},
	}
}

var returnLoss = LossKind{"check valve", ToOil, "P = Δp·q of the built-in check valve"}

var returnEquation = Equation{"reverse free: q = q2·√((Δp − po)/Δp2) back above po", "orifice law beyond the opening pressure"}

// returnCheck is the built-in check valve; without one q is noSlot.
type returnCheck struct {
	a, b, q    slot
	po, qN, dN int
	loss       int
	opens      float64
	t          throat
}

func (k *compiler) returnCheck(b *Block, from, to string) returnCheck {
	w := returnCheck{a: k.node(b, from), b: k.node(b, to), q: noSlot, po: k.param(b, "check_opens"), qN: k.param(b, "check_flow"), dN: k.param(b, "check_drop"), loss: k.channel(Loss, b, returnLoss.Name)}
	if KindNamed(b.Kind).WordOf(b, "reverse") == "free" {
		w.q = k.unknown(otherRow, b.ID+" check valve")
	}
	return w
}

func (w *returnCheck) bind(b *binding) {
	w.opens = b.p[w.po] / b.scales.p
	w.t = throatOf(b.p[w.qN]/b.scales.q, b.p[w.dN]/b.scales.p)
	if w.q >= 0 {
		b.bound.Lo[w.q] = 0
	}
}

func (w *returnCheck) eval(e *eval) {
	if w.q < 0 {
		return
	}
	e.throttle(w.a, w.b, w.q, &w.t, w.opens, 0)
}

// book books the loss and returns the flow.
func (w *returnCheck) book(k *booking) float64 {
	if w.q < 0 {
		return 0
	}
	q := k.val(w.q)
	k.lose(w.loss, k.watts((k.val(w.a)-k.val(w.b))*q))
	return q
}

func (w *returnCheck) cold(x []float64) {
	if w.q >= 0 {
		x[w.q] = w.t.first()
	}
}

// checked adds to the name of a symbol what it is called with a built-in check valve.
func checked(b *Block, symbol string) string {
	if b.Word("reverse") == "free" {
		return symbol + "_check"
	}
	return symbol
}

// checkedThrottle is a throat from A to B beside a check valve from B to A.
type checkedThrottle struct {
	back         returnCheck
	A, B, q      slot
	qA, qB, loss int
	t            throat
}

func (k *compiler) checkedThrottle(b *Block, loss string) checkedThrottle {
	return checkedThrottle{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID),
		qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, loss), back: k.returnCheck(b, "B", "A")}
}

func (m *checkedThrottle) begin(*step) {}

func (m *checkedThrottle) eval(e *eval) {
	e.throttle(m.A, m.B, m.q, &m.t, 0, math.Inf(-1))
	m.back.eval(e)
}

func (m *checkedThrottle) book(k *booking) {
	q := k.val(m.q)
	k.lose(m.loss, k.watts((k.val(m.A)-k.val(m.B))*q))
	q -= m.back.book(k)
	k.put(m.qA, k.m3s(q))
	k.put(m.qB, -k.m3s(q))
}

func (m *checkedThrottle) cold(s *step, level int, x []float64) {
	x[m.q] = m.t.first()
	m.back.cold(x)
}
