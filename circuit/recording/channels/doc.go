// Package channels makes what a duty needs of what was measured: speed of position or
// flow, load of chamber pressures or of a motor's pressures. All numbers are SI.
//
// Signs are those of a duty: speed > 0 extends a cylinder, load > 0 resists that. A load
// is what the rod gives to the outside, so friction and stated inertia, which the cylinder
// of a circuit adds again, are taken off and not counted twice.
//
// Every result is a Track that carries its formula with the numbers put in.
package channels
