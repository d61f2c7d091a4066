// Package drawing holds what a circuit sheet is made of: symbols as data,
// the placing of blocks that have no place yet, and right-angle routes
// between their ports. The result is a display list; it is drawn elsewhere.
//
// # Units and axes
//
// Every length is in modules M of the symbol grid (2.5 mm on paper). x runs
// right, y runs down, angles are in degrees clockwise on screen from +x.
//
// # Symbols
//
// The symbols are based on ISO 1219-1: meanings follow the standard's
// practice, every coordinate is our own construction. Marks with no
// counterpart in the standard carry Own and should be explained in a legend.
// The geometry is in symbols.json: pieces that several symbols share, then
// the symbols. A drawing step is one of
//
//	line[:style] x y x y ...   open polyline
//	poly[:style] x y x y ...   closed polygon, not filled
//	fill x y x y ...           closed polygon in the line colour
//	ring x y r                 circle
//	disc x y r                 circle in the line colour
//	arc x y r a0 a1            arc
//	text x y h WORD            letters h high, centred on x y
//	arrow x y ... x y          polyline with a head at its last point
//	adjust x y d               45 degree arrow through x y, half-length d aside
//	spring x0 y0 x1 y1 w       zigzag, w aside
//	use PIECE [dx dy]          a piece, moved
//	part NAME                  names the part that the next steps draw
//
// The part "port:NAME" is the stub of a port that may stay unused; Keep
// leaves it out. Parts "square:left", "square:middle", "square:right" are the
// positions of a directional valve.
package drawing
