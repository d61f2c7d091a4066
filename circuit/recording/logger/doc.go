// Package logger reads what data loggers write: tables of numbers with lines before and
// after them, heads and units in many shapes, clocks of many kinds, and faults.
//
//	f, err := logger.Open("press.csv")     // reads its head and its tail
//	r := f.Guess()                         // a Recipe: what the file seems to be, with open questions
//	p, err := f.Preview(r, 20)             // first and last rows, as written and as read
//	rec, err := f.Import(ctx, r, progress) // all rows, streamed
//	for _, c := range rec.Corrections { ... }
//
// Every item of a Recipe may be overridden before Import; kept with an audit, it repeats
// the same import. What the guess leaves open is a Question, and Import refuses to go on
// until it is answered. Nothing is changed silently: whatever Import finds or changes is a
// Correction that says what, where, how often, what was done and what else may be chosen.
//
// Values are SI, pressures gauge, times in seconds. A stamp of a clock counts from the
// first row. A file is read once, line by line; a column keeps its decimals as they stand
// in the text in half the memory of a float64 where they fit.
//
// Not here: what the channels mean for a machine (package channels), whether they were
// logged fast enough (package rate), which cycles they hold (package cycles).
package logger
