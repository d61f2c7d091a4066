package circuit

import (
	"math"

	"barlitre/machines"
	"barlitre/machines/units"
)

// gravity is standard gravity, ISO 80000-3.
const gravity = 9.80665 // m/s²

// lineKind is a pipe or hose.
var lineKind = &Kind{
	Name: kindLine, Title: "Line", Group: "lines and conditioning",
	Letter: "L", Typical: []Setting{{"length", "2 m"}, {"diameter", "20 mm"}},
	Text: "Pipe or hose with laminar or turbulent friction, fittings and a difference in height.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "one end"},
		{Name: "B", Type: Oil, Text: "other end"},
	},
	Params: []Param{
		{Key: "length", Title: "Length", Symbol: "l", Dim: units.Length, Need: true, Max: 1e4, Text: "straight length; 0 m has no drop"},
		{Key: "diameter", Title: "Inner diameter", Symbol: "d", Dim: units.Length, Need: true, Above: true, Max: 2, Text: "inside"},
		{Key: "roughness", Title: "Roughness", Symbol: "ε", Dim: units.Length, Default: "0.0015 mm", Origin: Assumed, Source: "drawn tube, handbook value", Max: 0.01, Text: "of the wall"},
		{Key: "fittings", Title: "Fittings", Symbol: "ζ", Dim: units.Ratio, Default: "0", Origin: Assumed, Source: "none counted unless given", Max: 1e4, Text: "sum of the loss coefficients of bends and fittings"},
		{Key: "rise", Title: "Rise from A to B", Symbol: "h", Dim: units.Length, Default: "0 m", Origin: Assumed, Source: "level unless given", Min: -1000, Max: 1000, Text: "the lift of the oil is booked as stored energy"},
	},
	Losses: []LossKind{{"line", ToOil, "P = (Δp − ρ·g·h)·q"}},
	Equations: []Equation{
		{"Δp = (λ·l/d + ζ)·ρ·v²/2 + ρ·g·h", "Darcy-Weisbach; λ = 64/Re below Re 2000, Colebrook above 4000, smooth between"},
	},
	Symbol: func(*Block) string { return "line" },
	build: func(k *compiler, b *Block) model {
		return &lineModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID), l: k.param(b, "length"), dia: k.param(b, "diameter"), eps: k.param(b, "roughness"), zeta: k.param(b, "fittings"), rise: k.param(b, "rise"),
			qA: k.port(b, "A"), qB: k.port(b, "B"), sigV: k.signal(b, "v", "velocity", units.Velocity), loss: k.channel(Loss, b, "line"), lift: k.channel(Stored, b, "lifted oil")}
	},
}

type lineModel struct {
	A, B, q                      slot
	l, dia, eps, zeta, rise      int
	qA, qB, sigV, loss, lift     int
	L, d, rough, k, rho, mu, dpH float64
	qs, ps                       float64
}

func (m *lineModel) clone() model { c := *m; return &c }

func (m *lineModel) bind(b *binding) {
	m.L, m.d, m.rough, m.k = b.p[m.l], b.p[m.dia], b.p[m.eps], b.p[m.zeta]
	m.rho, m.mu = b.cond.Density, b.cond.Viscosity
	m.dpH = m.rho * gravity * b.p[m.rise] / b.scales.p
	m.qs, m.ps = b.scales.q, b.scales.p
}

func (m *lineModel) begin(*step) {}

func (m *lineModel) friction(q float64) (r, dr float64) {
	dp, slope := machines.PipeDrop(q*m.qs, m.d, m.L, m.rough, m.k, m.rho, m.mu)
	return dp / m.ps, slope * m.qs / m.ps
}

func (m *lineModel) eval(e *eval) {
	q := e.branch(m.A, m.B, m.q)
	r, dr := m.friction(q)
	e.drop(m.A, m.B, m.q, m.dpH+r, dr)
}

func (m *lineModel) book(k *booking) {
	q := k.val(m.q)
	k.put(m.qA, k.m3s(q))
	k.put(m.qB, -k.m3s(q))
	k.put(m.sigV, k.m3s(q)/(math.Pi/4*m.d*m.d))
	k.pow[m.loss] += k.watts((k.val(m.A) - k.val(m.B) - m.dpH) * q)
	k.pow[m.lift] += k.watts(m.dpH * q)
}
