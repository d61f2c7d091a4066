package circuit

// Joined returns the ports on the same node as p, with p, by name: those that lines and junctions join to it. It is
// only p where nothing does.
func (c *Circuit) Joined(p PortRef) []PortRef {
	_, of := netsOf(c)
	n := of[p]
	if n == nil {
		return []PortRef{p}
	}
	return append([]PortRef(nil), n.ports...)
}
