package duty

import (
	"testing"

	"barlitre/app/station/stationtest"
)

// The page in light and dark, at the scales and window sizes that are used: pictures to be
// looked at, where they are asked for.
func TestLookOfImport(t *testing.T) {
	if !stationtest.Looking() {
		t.Skip("set BARLITRE_PICTURES to a folder for pictures")
	}
	f, _ := importing(t, pressFile, "../../samples/recordings/press-shift.csv")
	for _, v := range []struct {
		name  string
		dark  bool
		scale float32
		w, h  float32
	}{{"small", false, 1, 938, 445}, {"dark-150", true, 1.5, 1170, 520}, {"light-200", false, 2, 1150, 470}} {
		f.Theme(v.dark, v.scale)
		for _, tab := range []string{"file", "columns", "findings", "tracks", "cycles"} {
			click(t, f, "intake.tab."+tab)
			f.Picture("import-"+v.name+"-"+tab, v.w, v.h)
		}
	}
}
