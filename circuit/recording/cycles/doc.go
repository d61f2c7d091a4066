// Package cycles finds the cycles and the states in a long recording.
//
// The period comes from the autocorrelation of what moves, taken by fast Fourier transform
// over the longest stretch of work; from its peak on, cycle after cycle is put where it is most like the one
// before, so a period may wander. States come from levels: what moves is work, what
// stands under pressure is hold, what stands without is idle, and off is where nothing is left.
//
// The typical cycle is the medoid: the one whose distance from all others is the least. It
// is a cycle that was measured, not a mean that never was.
package cycles
