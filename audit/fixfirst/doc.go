// Package fixfirst looks for what is wrong with a circuit as found, before anything new is bought: settings, worn or
// clogged parts, running for nothing. Detect compares the drawing, its settings and its results with limits whose source
// each finding names; it solves nothing. Climb prices what was found by solving the circuit again with the cure put in as
// edits of the audit file: each cure alone, and in the order in which a practitioner would take them. What is left is
// the circuit as found with its faults cured; only what a proposal saves beyond that is credited to the proposal:
//
//	as found − proposal = settings + repair + stop-start + architecture
//
// Each term is a difference of two solved years, so the sum holds to rounding.
//
// Limits that no standard states are marked "common practice, no source". A cure never raises a relief valve for use:
// where a price needs a valve that stays shut, the edit is for the calculation alone and is said to be.
package fixfirst
