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

// filterKind is a filter with a linear and a square part and a bypass valve.
var filterKind = &Kind{
	Name: kindFilter, Title: "Filter", Group: "lines and conditioning",
	Text: "Return or pressure filter, with a bypass where one is given.",
	Ports: []Port{
		{Name: "A", Type: Oil, Text: "dirty side"},
		{Name: "B", Type: Oil, Text: "clean side"},
	},
	Params: []Param{
		{Key: "nominal_flow", Title: "Nominal flow", Symbol: "qN", Dim: units.Flow, Need: true, Above: true, Max: 10, Text: "at the nominal drop"},
		{Key: "nominal_drop", Title: "Nominal drop", Symbol: "ΔpN", Dim: units.Pressure, Default: "0.7 bar", Origin: Assumed, Source: "half-used element, common practice 0.3 to 3.5 bar", Max: 50e5, Text: "at the nominal flow"},
		{Key: "linear_share", Title: "Laminar share", Symbol: "kl", Dim: units.Ratio, Default: "0.5", Origin: Assumed, Source: "element laminar, housing turbulent; common practice", Max: 1, Text: "part of the nominal drop that grows with flow, the rest with its square"},
		{Key: "bypass", Title: "Bypass opens at", Symbol: "pb", Dim: units.Pressure, Above: true, Max: 50e5, Text: "without it there is no bypass"},
	},
	Losses:    []LossKind{{"filter", ToOil, "P = Δp·q"}},
	Equations: []Equation{{"Δp = ΔpN·(kl·q/qN + (1 − kl)·(q/qN)²), at most pb with a bypass", "element and housing losses, common form"}},
	Symbol: func(b *Block) string {
		if _, ok := b.Values["bypass"]; ok {
			return "filter_bypass"
		}
		return "filter"
	},
	build: func(k *compiler, b *Block) model {
		return &filterModel{A: k.node(b, "A"), B: k.node(b, "B"), q: k.unknown(otherRow, b.ID), qN: k.param(b, "nominal_flow"), dN: k.param(b, "nominal_drop"), share: k.param(b, "linear_share"), by: k.param(b, "bypass"),
			qA: k.port(b, "A"), qB: k.port(b, "B"), loss: k.channel(Loss, b, "filter")}
	},
}

type filterModel struct {
	A, B, q           slot
	qN, dN, share, by int
	qA, qB, loss      int
	lin, opens        float64
	t                 throat
}

func (m *filterModel) clone() model { c := *m; return &c }

func (m *filterModel) bind(b *binding) {
	q, dp, s := b.p[m.qN]/b.scales.q, b.p[m.dN]/b.scales.p, b.p[m.share]
	m.lin = s * dp / q
	m.t = throatOf(q, (1-s)*dp)
	m.opens = b.get(m.by, math.Inf(1)) / b.scales.p
}

func (m *filterModel) begin(*step) {}

// drop is the element, or beyond the bypass pressure the bypass valve, which
// opens fully within a hundredth of the element's slope there.
func (m *filterModel) at(q float64) (r, dr float64) {
	r, dr = m.t.at(q)
	r, dr = r+m.lin*q, dr+m.lin
	if r > m.opens {
		r, dr = m.opens+0.01*(r-m.opens), 0.01*dr
	}
	return
}

func (m *filterModel) eval(e *eval) {
	q := e.branch(m.A, m.B, m.q)
	r, dr := m.at(q)
	e.drop(m.A, m.B, m.q, r, dr)
}

func (m *filterModel) book(k *booking) { k.through(m.A, m.B, k.val(m.q), m.qA, m.qB, m.loss) }
