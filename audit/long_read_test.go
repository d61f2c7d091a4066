package audit

import (
	"bufio"
	"fmt"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
	"time"
)

// A day at 100 Hz, 8.64 million rows in a table beside the audit file, is read in less memory
// than three times its columns: neither its text nor a second copy in SI is kept. It runs only with
// BARLITRE_LONG set.
func TestReadDay(t *testing.T) {
	if os.Getenv("BARLITRE_LONG") == "" {
		t.Skip("set BARLITRE_LONG to read a day")
	}
	const rows = 8_640_000
	dir := t.TempDir()
	out, err := os.Create(filepath.Join(dir, "day.csv"))
	if err != nil {
		t.Fatal(err)
	}
	w := bufio.NewWriter(out)
	fmt.Fprintln(w, "t [s];ram.speed [mm/s];ram.load [kN]")
	for i := range rows {
		fmt.Fprintf(w, "%d.%02d;%d.%d;%d.%03d\n", i/100, i%100, i%150, i%10, i%60, i%1000)
	}
	if err := w.Flush(); err != nil {
		t.Fatal(err)
	}
	out.Close()
	path := filepath.Join(dir, "day.yaml")
	text := strings.Replace(longText, "points: {t: [0 s, 1 s], ram.speed: [0 m/s, 0 m/s], ram.load: [5 kN, 5 kN]}", "file: day.csv", 1)
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	from := time.Now()
	f, found := Read(path)
	if f == nil || len(f.Duties[0].Time) != rows {
		t.Fatal(found)
	}
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	t.Logf("%d rows in %.1f s, %.0f MB taken from the system, %.0f MB in use", rows, time.Since(from).Seconds(), float64(m.Sys)/1e6, float64(m.HeapAlloc)/1e6)
	if columns := 3 * 8 * rows; m.Sys > 3*uint64(columns) {
		t.Errorf("%d MB for columns of %d MB", m.Sys>>20, columns>>20)
	}
}
