// Package audit answers where the energy of a circuit went and what it is worth.
//
// Read takes an audit file; Solve runs each of its circuits over each of its duties
// and draws up, for one cycle and for the year, the energy balance
//
//	in − returned = work + stored + Σ losses
//
// the heat to the oil, the cost and the comparison of every proposal with the circuit
// as found. Every row is integrated for itself, so the balance is a check of the
// circuit's models and not a way to find a loss.
//
// A File is also what a drawing is made in: every edit splices its text, so that
// comments and layout stay as they are, and is refused with the reason when the text
// would not read or two ports cannot be joined.
//
// It does not balance circuits (package circuit does) and draws nothing: Report holds
// every figure and sentence that may be shown, Result the same figures for a program.
//
// Signs and units: SI inside; supply > 0 is drawn; work > 0 is given to a load that
// resists; stored is end minus start; losses are >= 0. Units appear in Report and in
// the keys of Result.
//
//	f, found := audit.Read("press.yaml")
//	s, err := audit.Solve(ctx, f, audit.Options{})
//	r := s.Report(units.Metric)  // for window and paper
//	err = s.Result().Write(file) // for a program
package audit
