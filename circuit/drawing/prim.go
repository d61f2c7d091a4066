package drawing

// Pt is a place or a direction on the sheet [M], x right, y down.
type Pt struct{ X, Y float64 }

func (p Pt) add(q Pt) Pt          { return Pt{p.X + q.X, p.Y + q.Y} }
func (p Pt) sub(q Pt) Pt          { return Pt{p.X - q.X, p.Y - q.Y} }
func (p Pt) scale(f float64) Pt   { return Pt{p.X * f, p.Y * f} }
func (p Pt) dot(q Pt) float64     { return p.X*q.X + p.Y*q.Y }
func lerp(p, q Pt, f float64) Pt  { return p.add(q.sub(p).scale(f)) }
func (b Box) grown(m float64) Box { return Box{b.Min.sub(Pt{m, m}), b.Max.add(Pt{m, m})} }
func (b Box) moved(d Pt) Box      { return Box{b.Min.add(d), b.Max.add(d)} }
func (b Box) overlaps(c Box) bool {
	return b.Min.X < c.Max.X && c.Min.X < b.Max.X && b.Min.Y < c.Max.Y && c.Min.Y < b.Max.Y
}

// Box is an upright rectangle [M], Min at the upper left.
type Box struct{ Min, Max Pt }

// LineWidth is the one line width of all symbol lines [M]. The kind of line,
// not its width, carries the meaning.
const LineWidth = 0.1

// Style is the kind of a line.
type Style int

// Solid: working, supply and return lines. Pilot and Drain: dashed, long and
// short. Chain: enclosure of parts that form one unit, never an oil line.
const (
	Solid Style = iota
	Pilot
	Drain
	Chain
)

// Dashes gives the lengths of dash and gap in turn [M]; nil for Solid.
// Current practice has one dash for pilot and drain; the two lengths follow
// older practice, so that a reader can tell them apart.
func (s Style) Dashes() []float64 {
	switch s {
	case Pilot:
		return []float64{1.2, 0.5}
	case Drain:
		return []float64{0.4, 0.4}
	case Chain:
		return []float64{2.4, 0.5, 0.2, 0.5}
	}
	return nil
}

// PrimKind says which fields of a Prim hold.
type PrimKind int

const (
	Line   PrimKind = iota // open polyline through Pts
	Poly                   // closed polygon through Pts
	Circle                 // centre C, radius R
	Arc                    // centre C, radius R, from A0 to A1 > A0
	Text                   // Text, H high, at C
)

// Align says where a text's anchor is along its width.
type Align int

const (
	Middle Align = iota
	Start
	End
)

// Prim is one thing to draw, in the line colour and LineWidth.
type Prim struct {
	Kind   PrimKind
	Style  Style
	Filled bool // filled with the line colour
	Pts    []Pt
	C      Pt      // centre; for Text the anchor, its y at mid-height of the letters
	R      float64 // radius [M]
	A0, A1 float64 // [degrees], clockwise on screen from +x
	Text   string
	H      float64 // height of the letters [M]
	Align  Align
	Part   string // what the primitive belongs to, see the package comment
}

// PortType says what may be connected to a port.
type PortType int

const (
	Oil PortType = iota
	PilotLine
	DrainLine
	Shaft
	Electric
	Rod
)

// Style gives the kind of line drawn for a connection of this type.
func (t PortType) Style() Style {
	switch t {
	case PilotLine:
		return Pilot
	case DrainLine:
		return Drain
	}
	return Solid
}

// Fluid tells whether oil passes the port.
func (t PortType) Fluid() bool { return t == Oil || t == PilotLine || t == DrainLine }

// Port is where a line may be connected: the free end of a stub.
type Port struct {
	Name     string
	At, Dir  Pt // Dir is the unit vector away from the block
	Type     PortType
	Optional bool // drawn only when used, see Symbol.Keep
}

// Symbol is the picture of a block with its ports.
type Symbol struct {
	Name, Title string
	Prims       []Prim
	Ports       []Port
	Min, Max    Pt   // box round all primitives and ports, without tag and value
	Tag, Value  Pt   // anchors (Start) of the block's name and main value
	Level       int  // height in an automatic layout: 0 tank ... 6 actuators
	Own         bool // own mark, not of the standard
	Upright     bool // is never turned (tank, accumulator); may be mirrored
	above       bool // tag and value above the symbol instead of beside it
}

// Box is the symbol's bounding box.
func (s Symbol) Box() Box { return Box{s.Min, s.Max} }

// Port finds a port by name.
func (s Symbol) Port(name string) (Port, bool) {
	for _, p := range s.Ports {
		if p.Name == name {
			return p, true
		}
	}
	return Port{}, false
}
