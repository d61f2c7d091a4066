// Package balance solves box-constrained complementarity problems: find x with
// l <= x <= h such that for every i
//
//	x_i = l_i and G_i(x) >= 0,  or
//	x_i = h_i and G_i(x) <= 0,  or
//	l_i < x_i < h_i and G_i(x) = 0.
//
// It knows vectors and no oil. A circuit writes each row so that it rises with
// its own unknown; the bounds then give the physics of closed valves, stops,
// saturation and cavitation without cases.
//
// Method: semismooth Newton on the min/max form of the conditions, which near a
// solution is a primal-dual active set method; where that fails, Newton on the
// Fischer-Burmeister function with a non-monotone line search; then
// pseudo-transient continuation (implicit Euler on x' = −G); each from the last
// solution and from cold starts. Where the problem has turned to another form, so that
// the last solution may lie far off, Fischer-Burmeister comes as soon as a step has to be
// halved. Which rung solved a step is reported.
//
// Speed: most points cost two evaluations, one with slopes and one to accept the
// step. The start is foretold from up to six solutions (past.go), so that in a smooth
// duty one Newton step does; in a rough one a last step is taken with the factors at
// hand. The elimination is worked out once for each set of active bounds and replayed
// on the entries that the slopes have and that are not zero (plan.go, slopes.go), of weighed
// rows too (weighted.go); slopes that stay as they are a problem states once (Slopes.AddSteady). Numbers
// known in advance stand before the unknowns (Border), so that the problem never asks which
// is which. Where a plan does not serve, pivots are chosen for that step alone (direct.go,
// planner.go); that, and finding plans, is what a change of direction costs. Only plans are
// allocated on the way, and their room is used again when there are too many.
//
// Sources: Facchinei and Pang, Finite-Dimensional Variational Inequalities and
// Complementarity Problems, Springer 2003, ch. 8-9; Billups, Algorithms for
// complementarity problems and generalized equations, thesis, Wisconsin 1995
// (nesting of two bounds); Kelley and Keyes, Convergence analysis of
// pseudo-transient continuation, SIAM J. Numer. Anal. 35 (1998).
package balance
