//go:build unix

package sheet

import "testing"

// A circuit of 60 blocks, light and dark, at 100 % and 150 %, to be looked at.
func TestSixtyBlocks(t *testing.T) {
	b := openLarge(t, 60)
	b.SetClock(9)
	b.picture("sixty-light")
	b.theme(true, 1.5)
	b.s.fitAll()
	b.picture("sixty-dark-150")
	b.whole()
}
