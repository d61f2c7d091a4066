package circuit

// tankKind is the reservoir: a node at zero gauge pressure that takes and gives oil.
var tankKind = &Kind{
	Name: kindTank, Title: "Tank", Group: "supply",
	Letter:    "T",
	Text:      "Open reservoir at zero gauge pressure. Its port may stand in any number of lines.",
	Ports:     []Port{{Name: "T", Type: Oil, Text: "oil to and from the tank"}},
	Equations: []Equation{{"p = 0 (gauge)", "definition"}},
	Symbol:    func(*Block) string { return "tank_return" },
}
