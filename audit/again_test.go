package audit

import (
	"bytes"
	"context"
	"path/filepath"
	"testing"
)

// The same file gives the same result to the last bit, however the parts of the work fall on
// the cores and in whatever order the tables of the program are gone through.
func TestSameAgain(t *testing.T) {
	files, err := filepath.Glob("../samples/*.yaml")
	if err != nil || len(files) == 0 {
		t.Fatal("no sample audits", err)
	}
	for _, path := range files {
		t.Run(filepath.Base(path), func(t *testing.T) {
			var first []byte
			for range 8 {
				f, found := Read(path)
				if f == nil {
					t.Fatal(found)
				}
				s, err := Solve(context.Background(), f, Options{})
				if err != nil {
					t.Fatal(err)
				}
				var b bytes.Buffer
				if err := s.Result().Write(&b); err != nil {
					t.Fatal(err)
				}
				if first == nil {
					first = b.Bytes()
				} else if !bytes.Equal(first, b.Bytes()) {
					t.Fatal("solved anew, the result differs")
				}
			}
		})
	}
}
