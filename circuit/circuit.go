package circuit

import "barlitre/machines"

// Circuit is a drawing: blocks, and the lines that join their ports.
type Circuit struct {
	Name       string
	Note       string
	PumpAtRest AtRest
	Blocks     []Block
	Lines      []Line
	Notes      []SheetNote // notes, groups and bends change how the sheet looks, not what is computed
	Groups     []SheetGroup
	Bends      []SheetBend
	Line       int // where it stands in the file
}

// AtRest says what the prime movers do while every axis stands.
type AtRest string

// The three ways; there is no default, Check asks.
const (
	Keep   AtRest = "keep"   // they keep turning, settings stay
	Unload AtRest = "unload" // they keep turning, relief valves with a vented pressure are vented
	Stop   AtRest = "stop"   // they are switched off
)

// AtRests lists them.
var AtRests = []AtRest{Keep, Unload, Stop}

// Name is what it is called on screen and paper.
func (a AtRest) Name() string {
	return map[AtRest]string{Keep: "keep turning", Unload: "turn unloaded", Stop: "switched off"}[a]
}

// Block is one part of a circuit.
type Block struct {
	ID     string
	Kind   string
	Values map[string]Value // numbers, by parameter key
	Words  map[string]Word  // choices and references, by parameter key
	Fit    *machines.Fit    // of the measured points it names, or nil
	At     *[2]float64      // place on the sheet, modules
	Turn   int              // quarter turns
	Mirror bool
	Line   int
}

// Word is a choice or a reference as written.
type Word struct {
	Text string
	Line int
}

// Word returns a choice or reference, or "".
func (b *Block) Word(key string) string { return b.Words[key].Text }

// PortRef names a port of a block.
type PortRef struct{ Block, Port string }

func (p PortRef) String() string { return p.Block + "." + p.Port }

// Line joins ports: one line is one node.
type Line struct {
	Ports []PortRef
	Line  int
}

// Block returns a block by id, or nil.
func (c *Circuit) Block(id string) *Block {
	for i := range c.Blocks {
		if c.Blocks[i].ID == id {
			return &c.Blocks[i]
		}
	}
	return nil
}

// Value returns what block b has for a parameter: the number given, else what
// follows from others that are given, else the default of its kind (ok = true for both), else ok = false.
func (k *Kind) Value(b *Block, key string) (v Value, isDefault, ok bool) {
	if v, found := b.Values[key]; found {
		return v, false, true
	}
	if k.derive != nil {
		if v, ok := k.derive(k, b, key); ok {
			return v, true, true
		}
	}
	if p := k.Param(key); p != nil && p.Default != "" {
		return p.defaultValue, true, true
	}
	return Value{}, false, false
}

// WordOf returns the choice of block b for a parameter: as given, else the default of its kind.
func (k *Kind) WordOf(b *Block, key string) string {
	if w := b.Word(key); w != "" {
		return w
	}
	if p := k.Param(key); p != nil {
		return p.Default
	}
	return ""
}
