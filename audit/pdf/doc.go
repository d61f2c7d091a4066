// Package pdf lays out the report of a solved audit as an A4 document. It decides
// nothing: every number and sentence of the audit comes from audit.Report and
// audit.Solution, and the figures are those of the window, drawn by audit/figures.
//
// The document opens with one decision page for each proposal, then shows the
// circuits as drawn with their results, where the energy goes, what to put right first
// (where Options carries it), the duty, heat and cooler, money, every value with its
// origin, the findings, the site check on a page of its own (where Options carries it)
// and the method, and ends with the cautions, which cannot be left out.
//
// Lengths are in mm, y runs down from the upper edge of a page. Equal solutions,
// options and dates give equal bytes; the clock is never read. Any text may stand
// in names and notes: what the font cannot show becomes U+FFFD, long words are cut
// between letters, long rows go on over the page.
//
//	err := pdf.Write(w, solution, pdf.Options{System: units.Metric, Date: date})
package pdf
