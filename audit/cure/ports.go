package cure

import (
	"fmt"

	"barlitre/audit"
	"barlitre/circuit"
)

// connect is a step that joins two ports.
func (p *patient) connect(a, b string) func(f *audit.File) error {
	return func(f *audit.File) error { return f.Connect(p.e.Name, a, b) }
}

// openPort leads a return to a tank, a shaft to what turns it, and any other port to
// the one port that it can belong to.
func openPort(p *patient) *Cure {
	at := p.Port
	port := circuit.KindNamed(p.b.Kind).Port(at.Port)
	switch {
	case port == nil:
		return nil
	case p.b.Kind == tank:
		return p.tankPort()
	case p.e.ReturnsAt(at):
		return p.toTank("Connect "+at.String()+" to a tank", at)
	}
	if to, ok := p.partner(at); ok {
		return &Cure{Name: fmt.Sprintf("Connect %s to %s", at, to), Mend: p.connect(at.String(), to.String())}
	}
	if port.Type == circuit.Shaft && p.b.Passes() != circuit.PrimeMover {
		return noDrive(p)
	}
	return nil
}

// tankPort joins a tank that stands alone to a return that misses it, or takes it out where
// none does and another tank is there.
func (p *patient) tankPort() *Cure {
	others := 0
	for _, b := range p.e.Blocks {
		if b.Kind == tank && b.ID != p.Block {
			others++
		}
	}
	for _, to := range p.freePorts() {
		if p.e.ReturnsAt(to) && p.e.Block(to.Block).Kind != tank {
			return &Cure{Name: fmt.Sprintf("Connect %s to %s", to, p.Port), Mend: p.connect(to.String(), p.Port.String())}
		}
	}
	if others == 0 {
		return nil
	}
	return joinsNothing(p)
}

// freePorts lists the ports that must be connected and are not.
func (p *patient) freePorts() []circuit.PortRef {
	joined := map[circuit.PortRef]bool{}
	for _, l := range p.e.Lines {
		for _, q := range l.Ports {
			joined[q] = true
		}
	}
	var out []circuit.PortRef
	for _, b := range p.e.Blocks {
		kind := circuit.KindNamed(b.Kind)
		for i := 0; kind != nil && i < len(kind.Ports); i++ {
			if q := (circuit.PortRef{Block: b.ID, Port: kind.Ports[i].Name}); !joined[q] && !kind.Ports[i].Optional {
				out = append(out, q)
			}
		}
	}
	return out
}

// partner is the only open port that another can belong to; of several the only one
// of the same name, as A of a valve and A of a cylinder.
func (p *patient) partner(at circuit.PortRef) (to circuit.PortRef, ok bool) {
	var fit, named []circuit.PortRef
	for _, q := range p.freePorts() {
		if q.Block == at.Block || p.e.Block(q.Block).Kind == tank || p.e.ReturnsAt(q) || p.e.TypeOf(q) != p.e.TypeOf(at) || p.e.MayJoin(at, q) != nil {
			continue
		}
		fit = append(fit, q)
		if q.Port == at.Port {
			named = append(named, q)
		}
	}
	if len(named) == 1 {
		return named[0], true
	}
	if len(fit) == 1 {
		return fit[0], true
	}
	return circuit.PortRef{}, false
}

// openLine takes a line out that ends at one port.
func openLine(p *patient) *Cure {
	for i, l := range p.e.Lines {
		if len(l.Ports) == 1 && l.Ports[0] == p.Port {
			return &Cure{Name: "Take the line at " + p.Port.String() + " out", Mend: func(f *audit.File) error { return f.DeleteLine(p.e.Name, i) }}
		}
	}
	return nil
}

func noTank(p *patient) *Cure {
	if p.Port.Port == "" {
		return nil
	}
	return p.toTank("Connect "+p.Port.String()+" to a tank", p.Port)
}

// noLoadSignal leads the port of a pump that follows a load pressure to the one port
// that gives it.
func noLoadSignal(p *patient) *Cure {
	to, n := circuit.PortRef{}, 0
	for _, b := range p.e.Blocks {
		kind := circuit.KindNamed(b.Kind)
		for i := 0; kind != nil && i < len(kind.Ports); i++ {
			q := circuit.PortRef{Block: b.ID, Port: kind.Ports[i].Name}
			if kind.Ports[i].Source && p.e.MayJoin(p.Port, q) == nil {
				to, n = q, n+1
			}
		}
	}
	if n != 1 {
		return nil
	}
	return &Cure{Name: fmt.Sprintf("Connect %s to %s", p.Port, to), Mend: p.connect(p.Port.String(), to.String())}
}

func joinsNothing(p *patient) *Cure {
	return &Cure{Name: "Take " + p.Block + " out", Mend: func(f *audit.File) error { return f.Delete(p.e.Name, false, p.Block) }}
}
