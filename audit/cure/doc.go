// Package cure mends what check and runs find, where there is one sensible way to: a
// table says for each cause of a finding which edit of the audit file takes it away.
//
//	for _, f := range file.Check() {
//		if c := cure.Of(file, nil, f); c != nil && c.Mend != nil {
//			err := c.Mend(file) // c.Name says what this does
//		}
//	}
//
// A cure draws what is missing or sets what does not fit, with values that are marked as
// assumed; it never says that a machine is safe. Where several ways are open, such as a
// load-holding valve or a brake, there is no cure: the choice is the user's.
package cure
