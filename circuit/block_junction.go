package circuit

// junctionKind joins lines; it has no law of its own.
var junctionKind = &Kind{
	Name: kindJunction, Title: "Junction", Group: "lines and conditioning",
	Letter: "J",
	Text:   "Joins lines without any drop. Lines that meet in it are one node.",
	Ports: []Port{
		{Name: "1", Type: Oil, Optional: true, Text: "joined"}, {Name: "2", Type: Oil, Optional: true, Text: "joined"},
		{Name: "3", Type: Oil, Optional: true, Text: "joined"}, {Name: "4", Type: Oil, Optional: true, Text: "joined"},
	},
	Equations: []Equation{{"p1 = p2 = p3 = p4; Σq = 0", "continuity"}},
	Symbol:    func(*Block) string { return "junction" },
}
