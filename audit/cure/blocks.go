package cure

import (
	"fmt"
	"math"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// The kinds of block that cures draw.
const (
	tank          = "tank"
	relief        = "relief"
	electricMotor = "electric_motor"
	converter     = "converter"
)

// beside is where a new block goes: how far from the block that misses it [modules].
var beside = map[string][2]float64{tank: {0, 12}, relief: {12, 4}, electricMotor: {-12, 0}, converter: {-14, 0}}

// add draws a block beside another on a free place.
func (p *patient) add(f *audit.File, kind, near string) (id string, err error) {
	c := f.Circuit(p.e.Name)
	if c == nil {
		return "", fmt.Errorf("there is no circuit %q any more", p.e.Name)
	}
	sheet := figures.NewSheet(c.Circuit)
	x, y, _ := sheet.At(near)
	x, y = sheet.FreePlace(kind, x+beside[kind][0], y+beside[kind][1])
	return f.AddBlock(p.e.Name, kind, [2]float64{x, y}, "")
}

// leadToTank joins a port to the tank that is drawn, or to a new one.
func (p *patient) leadToTank(f *audit.File, port circuit.PortRef) error {
	id := ""
	for _, b := range f.Circuit(p.e.Name).Blocks {
		if b.Kind == tank {
			id = b.ID
			break
		}
	}
	if id == "" {
		var err error
		if id, err = p.add(f, tank, port.Block); err != nil {
			return err
		}
	}
	return f.Connect(p.e.Name, port.String(), id+".T")
}

func (p *patient) toTank(name string, port circuit.PortRef) *Cure {
	return &Cure{Name: name, Mend: all(func(f *audit.File) error { return p.leadToTank(f, port) })}
}

// noRelief draws a relief valve from a port to the tank, set above what works there.
func noRelief(p *patient) *Cure {
	at := p.Port
	works, from := p.working(at)
	text := settingText(circuit.ReliefAbove(works))
	if works == 0 {
		text = circuit.KindNamed(relief).Typical[0].Text
		from = "a typical value"
	}
	return &Cure{
		Name: "Add a relief valve at " + at.String(),
		Told: fmt.Sprintf("Its setting of %s is assumed, from %s. Who may set it, and to what, is for the maker of the machine and the local rules.", text, from),
		Mend: all(func(f *audit.File) error {
			id, err := p.add(f, relief, at.Block)
			if err != nil {
				return err
			}
			key := circuit.KindNamed(relief).Typical[0].Key
			target := p.e.Name + "/" + id + "." + key
			if err := f.Set(target, text); err != nil {
				return err
			}
			if err := f.Set(target+".note", "from "+from+"; the maker's setting comes first"); err != nil {
				return err
			}
			if err := f.Connect(p.e.Name, at.String(), id+".P"); err != nil {
				return err
			}
			return p.leadToTank(f, circuit.PortRef{Block: id, Port: "T"})
		}),
	}
}

// working is the pressure that a relief valve at a port must lie above [Pa], and what
// it follows from; 0 where nothing is known. At a pump that is what the pump holds; at
// an actuator, whose valve stands above those of the supply, the highest of what pumps
// hold and relief valves open at; at both what the port was found to work at.
func (p *patient) working(at circuit.PortRef) (pressure float64, from string) {
	take := func(v float64, what string) {
		if v > pressure && v < implausible {
			pressure, from = v, what
		}
	}
	atPump := p.b.Passes() == circuit.PumpShaft
	for i := range p.e.Blocks {
		b := &p.e.Blocks[i]
		if atPump && b.ID != p.Block {
			continue
		}
		if v, ok := circuit.HoldsPressure(b); ok {
			take(v, "what "+b.ID+" holds")
		}
		if v, ok := circuit.ReliefOpens(b); ok {
			take(v, "what "+b.ID+" opens at")
		}
	}
	if p.sol == nil || atPump && pressure > 0 {
		return pressure, from
	}
	for _, c := range p.sol.Circuits {
		for _, d := range c.Duties {
			if c.Circuit.Name == p.e.Name && d.Plot != nil {
				take(highest(d.Plot, at.String()+".p"), "the highest pressure found at "+at.String())
			}
		}
	}
	return pressure, from
}

// implausible [Pa] is a pressure that only shows that nothing limits it.
const implausible = 500 * units.Bar

// highest is the largest value of a signal in a plot, 0 where it has none.
func highest(plot *audit.Plot, signal string) float64 {
	top := 0.0
	for i := range plot.Signals {
		if plot.Signals[i].Name == signal {
			for _, v := range plot.Signals[i].V {
				top = math.Max(top, v)
			}
		}
	}
	return top
}

// noDrive joins a shaft to a motor that turns nothing yet, or to a new electric motor.
func noDrive(p *patient) *Cure {
	at := p.Port
	if at.Port == "" {
		return nil
	}
	for _, q := range p.freePorts() {
		b := p.e.Block(q.Block)
		if b.Passes() == circuit.PrimeMover && q.Port == "shaft" && p.e.MayJoin(at, q) == nil {
			return &Cure{Name: fmt.Sprintf("Connect %s to %s", at, q), Mend: p.connect(at.String(), q.String())}
		}
	}
	return &Cure{
		Name: "Add an electric motor for " + at.Block,
		Told: "Its rated power and efficiency are typical values; put in those of the name plate.",
		Mend: all(func(f *audit.File) error {
			id, err := p.add(f, electricMotor, at.Block)
			if err != nil {
				return err
			}
			return f.Connect(p.e.Name, at.String(), id+".shaft")
		}),
	}
}

// noConverter draws a frequency converter of the power of the motor.
func noConverter(p *patient) *Cure {
	power, given := p.b.Values["rated_power"]
	if !given {
		return nil
	}
	return &Cure{
		Name: "Add a converter for " + p.Block,
		Told: "Its rated power is that of " + p.Block + "; put in that of its name plate.",
		Mend: all(func(f *audit.File) error {
			id, err := p.add(f, converter, p.Block)
			if err != nil {
				return err
			}
			if err := f.Set(p.e.Name+"/"+id+".rated_power", units.FileText(power.SI, power.Unit)); err != nil {
				return err
			}
			return f.Connect(p.e.Name, p.Block+".E", id+".M")
		}),
	}
}
