package circuit

import "barlitre/machines/units"

// meterOutParams are the parameters of an edge to tank with an opening of its own.
var meterOutParams = []Param{
	{Key: "meter_out", Title: "Edge to tank", Type: Choice, Default: "coupled", Choices: []string{"coupled", "separate"}, Text: "coupled: one spool, the same opening on both edges; separate: an edge of its own (independent metering), open as far as the pressure at the port that is fed is kept"},
	{Key: "in_pressure", Title: "Pressure kept at the port fed", Symbol: "pi", Dim: units.Pressure, Default: "5 bar", Origin: Assumed, Source: "enough to keep the fed side full, our choice", Max: 100e5, Text: "with a separate edge to tank, while the load drives"},
}

func checkMeterOut(k *Kind, b *Block, bad func(Level, string, string, ...any)) {
	separate := k.WordOf(b, "meter_out") == "separate"
	switch _, given := b.Values["in_pressure"]; {
	case separate && follows(b) == "":
		bad(Stops, "meter_out", "an edge to tank of its own is for a valve that follows an axis; name its axis (follows), or couple the edges (meter_out: coupled)")
	case separate && b.Word("extend") == "regenerative":
		bad(Stops, "meter_out", "the regenerative position has no edge to tank; keep one of the two (extend: regenerative, meter_out: separate)")
	case given && !separate:
		bad(Warns, "in_pressure", "it only counts with a separate edge to tank (meter_out: separate)")
	}
}

// meterOut is the opening of an edge to tank of its own; without one open is noSlot.
type meterOut struct {
	open   slot
	p, sig int
	kept   float64 // scaled pressure kept at the port fed
}

func (k *compiler) meterOut(b *Block) meterOut {
	if KindNamed(b.Kind).WordOf(b, "meter_out") != "separate" {
		return meterOut{open: noSlot}
	}
	return meterOut{open: k.unknown(otherRow, b.ID+" edge to tank"), p: k.param(b, "in_pressure"), sig: k.signal(b, "w", "opening of the edge to tank", units.Ratio)}
}

func (m *meterOut) bind(b *binding) {
	if m.open >= 0 {
		m.kept = b.p[m.p] / b.scales.p
	}
}

func (m *meterOut) begin(s *step, moves bool) {
	switch {
	case m.open < 0:
	case moves:
		s.bounds(m.open, leastOpening, 1)
	default:
		s.set(m.open, 0)
	}
}

// eval adds the row: a wider way out lets the pressure at the port fed fall.
func (m *meterOut) eval(e *eval, fed slot, moves bool) {
	switch {
	case m.open < 0:
	case moves:
		e.add(m.open, m.kept-e.val(fed))
		e.d(m.open, fed, -1)
	default:
		e.add(m.open, e.val(m.open))
		e.d(m.open, m.open, 1)
	}
}

func (m *meterOut) book(k *booking) {
	if m.open >= 0 {
		k.put(m.sig, k.val(m.open))
	}
}
