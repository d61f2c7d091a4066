// Package sitecheck says what to measure at a machine to see whether its circuit is what the drawing says, and what the
// readings tell. NewPlan writes a test plan of one page from the solved circuit: which gauge where, its range, how fast and
// how long, in which of four states, what is to be read there if all is well and what if the likeliest fault is present,
// and the caution for that very point. Compare sets what was read beside the model, and looks for the fault that
// explains it: each is put into the circuit as an edit, in more than one strength, and the circuit is balanced again.
//
// Of a steady balance over a duty only what lasts can be read off: means by state, and the highest value at work.
package sitecheck
