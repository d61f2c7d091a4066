package drawing

import (
	"math"
	"strings"
)

// Placed gives the symbol mirrored left to right if wanted, then turned
// clockwise by turn quarter turns, then moved so that its origin is at at.
// Letters stay upright, and so do symbols marked Upright.
func (s Symbol) Placed(at Pt, turn int, mirror bool) Symbol {
	turn = ((turn % 4) + 4) % 4
	if s.Upright {
		turn = 0
	}
	dir := func(p Pt) Pt {
		if mirror {
			p.X = -p.X
		}
		for i := 0; i < turn; i++ {
			p = Pt{-p.Y, p.X}
		}
		return Pt{p.X + 0, p.Y + 0} // +0 turns a negative zero into zero
	}
	move := func(p Pt) Pt { return dir(p).add(at) }
	out := s.clone()
	for i := range out.Prims {
		p := &out.Prims[i]
		for j := range p.Pts {
			p.Pts[j] = move(p.Pts[j])
		}
		p.C = move(p.C)
		if p.Kind == Arc {
			p.turnArc(turn, mirror)
		}
	}
	for i := range out.Ports {
		p := &out.Ports[i]
		p.At, p.Dir = move(p.At), dir(p.Dir)
	}
	out.measure()
	return out
}

func (p *Prim) turnArc(turn int, mirror bool) {
	if mirror {
		p.A0, p.A1 = 180-p.A1, 180-p.A0
	}
	span := p.A1 - p.A0
	p.A0 = math.Mod(p.A0+90*float64(turn)+720, 360)
	p.A1 = p.A0 + span
}

// Keep gives the symbol without those optional ports, and their stubs, for
// which used is false. Ports that belong to the symbol's meaning stay.
func (s Symbol) Keep(used func(port string) bool) Symbol {
	out := s
	out.Prims, out.Ports = nil, nil
	for _, p := range s.Prims {
		if port, isStub := strings.CutPrefix(p.Part, "port:"); !isStub || used(port) {
			out.Prims = append(out.Prims, p)
		}
	}
	for _, p := range s.Ports {
		if !p.Optional || used(p.Name) {
			out.Ports = append(out.Ports, p)
		}
	}
	out = out.clone()
	out.measure()
	return out
}

func (s Symbol) clone() Symbol {
	s.Ports = append([]Port(nil), s.Ports...)
	s.Prims = append([]Prim(nil), s.Prims...)
	for i := range s.Prims {
		s.Prims[i].Pts = append([]Pt(nil), s.Prims[i].Pts...)
	}
	return s
}
