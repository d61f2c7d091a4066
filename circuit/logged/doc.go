// Package logged says how the channels of a logger's recording become the tracks of a duty:
// by which laws, with which channels and numbers, and which tracks the names and quantities
// of channels make likely. The laws themselves are those of package channels; an audit file
// names them under derived.
package logged
