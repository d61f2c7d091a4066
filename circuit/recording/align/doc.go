// Package align finds by how much the clock of one recording is off that of another, by a
// channel that both have or that goes with one of the other, such as two pressures of one
// event. It resamples both evenly and takes the shift at which their cross-correlation is
// highest, over what overlaps there.
package align
