package station

// Action is what the Edit menu asks of a station that draws.
type Action int

// The actions of the Edit menu.
const (
	Cut Action = iota
	Copy
	Paste
	Duplicate
	Delete
	Rotate
	Mirror
	Rename
	AddBlock
	SelectAll
	Group // a box with a label around what is selected
	AddNote
	Connect // draw a line by keys
	Straighten
	FitSelection
)

// Drawing is a station whose selection the Edit menu acts on.
type Drawing interface{ Act(a Action) }
