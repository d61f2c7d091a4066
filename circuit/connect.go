package circuit

import (
	"errors"
	"fmt"
	"strings"

	"barlitre/circuit/duty"
)

// passing says in words what a line of a type is, wants what may be connected to it.
var (
	passing = map[PortType]string{Oil: "an oil line", Pilot: "a pilot line, which only passes a pressure on", Shaft: "a shaft, which turns", Electric: "a motor's electric feed"}
	wants   = map[PortType]string{Oil: "an oil or pilot port", Pilot: "an oil or pilot port", Shaft: "another shaft", Electric: "the terminals of a motor or converter"}
)

// MayJoin reports why the ports of two lines, or two ports that are free, must not
// become one line, or nil. What is only incomplete, such as a pilot line that nothing
// gives a pressure to yet, is left to Check.
func (c *Circuit) MayJoin(a, b PortRef) error {
	for _, p := range []PortRef{a, b} {
		if _, err := c.portOf(p); err != nil {
			return err
		}
	}
	if a == b {
		return fmt.Errorf("%s cannot be connected to itself; choose a second port", a)
	}
	if a.Block == b.Block && c.senseless(a, b) {
		return fmt.Errorf("%s and %s are of one block; a line between them would only bridge it. Connect each to another block", a, b)
	}
	if s, t := c.TypeOf(a), c.TypeOf(b); s != t && !(s == Oil && t == Pilot) && !(s == Pilot && t == Oil) {
		return fmt.Errorf("%s is %s, %s is %s; they cannot be connected. Choose %s for %s", a, passing[s], b, passing[t], wants[s], a)
	}
	d := *c
	d.Lines = append(append([]Line{}, c.Lines...), Line{Ports: []PortRef{a, b}})
	if err := d.Clash(a); err != nil {
		return fmt.Errorf("%s and %s: %w", a, b, err)
	}
	return nil
}

// Clash reports why what meets at a port cannot be joined, or nil.
func (c *Circuit) Clash(p PortRef) error {
	_, of := netsOf(c)
	if of[p] == nil {
		return nil
	}
	m := c.meets(of[p].ports)
	if text := m.clash(); text != "" {
		return errors.New(text)
	}
	if text := m.heldTwice(); text != "" {
		return errors.New(text)
	}
	return nil
}

// portOf finds a port, or says what is wrong with its name.
func (c *Circuit) portOf(p PortRef) (*Port, error) {
	b := c.Block(p.Block)
	if b == nil {
		return nil, fmt.Errorf("there is no block %s in circuit %q; name one that is drawn", p.Block, c.Name)
	}
	kind := KindNamed(b.Kind)
	if kind == nil {
		return nil, fmt.Errorf("%s: there is no kind %q; correct it first", b.ID, b.Kind)
	}
	port := kind.Port(p.Port)
	if port == nil {
		return nil, fmt.Errorf("%s: a %s has no port %q; it has %s", b.ID, strings.ToLower(kind.Title), p.Port, join(portNames(kind), "and"))
	}
	return port, nil
}

// senseless reports whether a line between two ports of one block does nothing but
// bridge it. A drain or a pilot line may lead to the block's own ports.
func (c *Circuit) senseless(a, b PortRef) bool {
	p, _ := c.portOf(a)
	q, _ := c.portOf(b)
	if c.Block(a.Block).Kind == kindJunction {
		return true
	}
	return p.Type == q.Type && p.Type != Pilot && !p.Optional && !q.Optional
}

// Through returns the two ports between which a block stands in a line, such as a
// filter or a check valve; ok is false for all others.
func (k *Kind) Through() (a, b string, ok bool) {
	ways := passes[k.Name]
	if len(ways) != 2 {
		return "", "", false
	}
	for _, p := range k.Ports {
		if out := ways[p.Name]; len(out) == 1 && len(ways[out[0]]) == 1 {
			return p.Name, out[0], true
		}
	}
	return "", "", false
}

// JoinedBeside reports whether two ports are one node without the line between
// them: by lines that share a port, or by junctions.
func (c *Circuit) JoinedBeside(a, b PortRef) bool {
	d := *c
	d.Blocks = nil
	for _, b := range c.Blocks {
		if b.Kind != kindTank { // all drawn tanks are one, but each line to one is its own
			d.Blocks = append(d.Blocks, b)
		}
	}
	_, of := netsOf(&d)
	return of[a] != nil && of[a] == of[b]
}

// TypeOf says what passes the line that a port stands on.
func (c *Circuit) TypeOf(p PortRef) PortType {
	if _, of := netsOf(c); of[p] != nil {
		return of[p].typ
	}
	if port, err := c.portOf(p); err == nil {
		return port.Type
	}
	return ""
}

// Moves reports whether such a block can move an axis of a sort.
func (k *Kind) Moves(a duty.AxisKind) bool {
	return k.Param("axis") != nil && movesAlong(k.Name) == (a == duty.Linear)
}
