package circuit

import (
	"math/rand/v2"
	"slices"
	"strings"

	"barlitre/circuit/duty"
)

// sick is a sound plant to plant a defect in.
type sick struct {
	*rand.Rand
	c    *Circuit
	axes []duty.Axis
	d    *duty.Duty
	add  func(row string) // a block or line
}

// defects are mistakes of a drawing. Each plants one and returns the block it is at, ""
// where the plant has no place for it.
var defects = []struct {
	name  string
	plant func(s *sick) string
	says  string // part of the finding
}{
	{"port left open", (*sick).openPort, "is not connected"},
	{"oil without a way to tank", (*sick).island, "no way to a tank"},
	{"two given pressures on one line", (*sick).twoPressures, "hold one line"},
	{"actuator against a shut port", (*sick).shutIn, "has no way out"},
	{"control that no actuator answers to", (*sick).noActuator, "no actuator in circuit"},
	{"two controls of one axis", (*sick).twoControls, "only one control"},
	{"pumps that nothing drives", (*sick).noDrive, "nothing drives the shaft"},
	{"shaft joined with oil", (*sick).mixed, "joins different things"},
	{"number out of its range", (*sick).outOfRange, "must be"},
	{"actuators of one axis that cannot move together", (*sick).mismatched, "together"},
}

// leave takes a port off its line.
func (s *sick) leave(p PortRef) {
	for i := range s.c.Lines {
		l := &s.c.Lines[i]
		l.Ports = slices.DeleteFunc(slices.Clone(l.Ports), func(o PortRef) bool { return o == p })
	}
	s.c.Lines = slices.DeleteFunc(s.c.Lines, func(l Line) bool { return len(l.Ports) < 2 })
}

// some returns a random block that fits, nil without one.
func (s *sick) some(fits func(b *Block) bool) *Block {
	var found []*Block
	for i := range s.c.Blocks {
		if b := &s.c.Blocks[i]; fits(b) {
			found = append(found, b)
		}
	}
	if len(found) == 0 {
		return nil
	}
	return found[s.IntN(len(found))]
}

func (s *sick) openPort() string {
	b := s.some(func(b *Block) bool {
		return slices.Contains([]string{kindValve, kindCheck, kindFilter, kindRelief, kindPump, kindOrifice, kindCylinder}, b.Kind)
	})
	if b == nil {
		return ""
	}
	s.leave(PortRef{b.ID, KindNamed(b.Kind).Ports[s.IntN(2)].Name})
	return b.ID
}

func (s *sick) island() string {
	s.add("OX1 orifice; nominal_flow: 10 L/min")
	s.add("OX2 orifice; nominal_flow: 10 L/min")
	s.add("- OX1.A OX2.A")
	s.add("- OX1.B OX2.B")
	return "OX1"
}

func (s *sick) twoPressures() string {
	s.add("PSX pressure_source; pressure: 5 bar")
	s.add("- PSX.P TK1.T")
	return "PSX"
}

// mover is an actuator of an axis whose motion is given.
func (s *sick) mover() *Block {
	return s.some(func(b *Block) bool { return b.Word("axis") != "" && s.d.Given(b.Word("axis")) == duty.MotionLoad })
}

func (s *sick) shutIn() string {
	b := s.mover()
	if b == nil {
		return ""
	}
	port := PortRef{b.ID, "A"}
	for i := range s.c.Lines { // a check valve the wrong way round before it
		l := &s.c.Lines[i]
		if at := slices.Index(l.Ports, port); at >= 0 {
			l.Ports = slices.Clone(l.Ports)
			l.Ports[at] = PortRef{"CX", "in"}
		}
	}
	s.add("CX check")
	s.add("- CX.out " + port.String())
	return b.ID
}

func (s *sick) noActuator() string {
	b := s.some(func(b *Block) bool { return follows(b) != "" })
	if b == nil {
		return ""
	}
	s.axes = append(slices.Clone(s.axes), duty.Axis{Name: "ghost", Kind: duty.Linear})
	flat := make([]float64, len(s.d.Time))
	s.d.Tracks = append(s.d.Tracks, duty.Track{Of: "ghost", What: duty.Speed, Values: flat}, duty.Track{Of: "ghost", What: duty.Load, Values: flat})
	b.Words["follows"] = Word{Text: "ghost"}
	return b.ID
}

func (s *sick) twoControls() string {
	b := s.some(func(b *Block) bool { return follows(b) != "" })
	if b == nil {
		return ""
	}
	s.add("VX valve; nominal_flow: 60 L/min; follows: " + follows(b))
	s.add("PSX pressure_source; pressure: 5 bar")
	s.add("OX orifice; nominal_flow: 10 L/min")
	s.add("- PSX.P VX.P")
	s.add("- VX.A OX.A")
	s.add("- VX.B OX.B")
	s.add("- VX.T TK1.T")
	return "VX"
}

func (s *sick) noDrive() string {
	s.add("PX1 pump; displacement: 10 cm3/rev")
	s.add("PX2 pump; displacement: 10 cm3/rev")
	s.add("- PX1.shaft PX2.shaft")
	s.add("- PX1.S PX1.P PX2.S PX2.P TK1.T")
	return "PX1"
}

func (s *sick) mixed() string {
	s.add("MX electric_motor; rated_power: 1 kW; efficiency: 0.9")
	s.add("OX orifice; nominal_flow: 10 L/min")
	s.add("- OX.A TK1.T")
	s.add("- OX.B MX.shaft")
	return "OX"
}

func (s *sick) outOfRange() string {
	b := s.some(func(b *Block) bool { return len(b.Values) > 0 })
	if b == nil {
		return ""
	}
	keys := make([]string, 0, len(b.Values))
	for k := range b.Values {
		keys = append(keys, k)
	}
	slices.Sort(keys)
	k := keys[s.IntN(len(keys))]
	v := b.Values[k]
	v.SI = -1e9
	b.Values[k] = v
	return b.ID
}

func (s *sick) mismatched() string {
	b := s.mover()
	if b == nil {
		return ""
	}
	if b.Kind == kindHydraulicMotor {
		s.add("CX motor; displacement: 50 cm3/rev; hold: " + b.Word("hold") + "; axis: " + b.Word("axis"))
	} else {
		hold := "brake"
		if b.Word("hold") == hold {
			hold = "valve"
		}
		s.add("CX cylinder; bore: 50 mm; rod: 30 mm; hold: " + hold + "; axis: " + b.Word("axis"))
	}
	s.add("- CX.A CX.B TK1.T")
	return "CX"
}

// named reports whether findings refuse a circuit for a defect, naming the block.
func named(found []Finding, block, says string) bool {
	return slices.ContainsFunc(found, func(f Finding) bool {
		return f.Level == Stops && strings.Contains(f.Text, says) &&
			(f.Block == block || slices.ContainsFunc(strings.FieldsFunc(f.Text, func(r rune) bool { return strings.ContainsRune(" .,;:()", r) }), func(w string) bool { return w == block }))
	})
}
