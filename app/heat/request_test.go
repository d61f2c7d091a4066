package heat

import (
	"bytes"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"barlitre/app/station/stationtest"
	"barlitre/audit"
)

// The request sheet is of the audit as it stands, also right after an edit; cancelled, the file
// that was there is as it was.
func TestRequestFollowsTheLastEdit(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	path := filepath.Join(t.TempDir(), "cooler.csv")
	written := func() []byte {
		h.writeRequest(path)
		data, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		return data
	}
	before := written()
	if err := c.Document.Set("As found/RV1.crack", "190 bar"); err != nil {
		t.Fatal(err)
	}
	atOnce := written()
	c.Wait()
	var want bytes.Buffer
	if err := audit.WriteRequestCSV(&want, c.Solution().Requests(c.System())); err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(atOnce, want.Bytes()) || bytes.Equal(atOnce, before) {
		t.Errorf("at once it is\n%s\nnot\n%s", atOnce, want.Bytes())
	}
	if err := c.Document.Set("As found/RV1.crack", "200 bar"); err != nil {
		t.Fatal(err)
	}
	c.Cancelling = true
	if got := written(); !bytes.Equal(got, atOnce) {
		t.Errorf("cancelled, the file holds\n%s", got)
	}
	if !slices.ContainsFunc(c.Said, func(s string) bool { return strings.HasPrefix(s, "Cancelled") }) || len(c.Failed) > 0 {
		t.Errorf("said %q, failed %v", c.Said, c.Failed)
	}
}
