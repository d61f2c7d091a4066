package frame

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"barlitre/app/station"
	"barlitre/audit"
	"barlitre/circuit/duty"
)

// twoDuties is an audit whose second duty works more in the year than the first, though it has
// fewer hours: 2 kW for 1000 h, most of it in the row at 7 s, against 1 W for 2000 h.
const twoDuties = `format: barlitre/1
title: Two duties
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear}
duties:
- {name: idle, hours: 2000 h, points: {t: [0 s, 10 s], ram.speed: [0.001 m/s, 0.001 m/s], ram.load: [1 kN, 1 kN]}}
- {name: press, hours: 1000 h, points: {t: [0 s, 6 s, 7 s, 8 s, 20 s], ram.speed: [0.1 m/s, 0.1 m/s, 0.2 m/s, 0.1 m/s, 0.1 m/s], ram.load: [20 kN, 20 kN, 40 kN, 20 kN, 20 kN]}}
circuits: []
`

func (b *bench) openText(name, text string) {
	b.t.Helper()
	path := filepath.Join(b.t.TempDir(), name)
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		b.t.Fatal(err)
	}
	b.Frame.open(path)
	b.until("opened", func() bool { return b.working == nil })
	b.drain()
}

// What is found for an instant comes when it is there, also after an edit of something else, and
// is dropped where the user or another audit has gone elsewhere meanwhile.
func TestInstantIsFoundBehindTheWindow(t *testing.T) {
	b := newBench(t)
	b.openText("two.yaml", twoDuties)
	if b.duty != 1 || b.clock != 7 {
		t.Fatalf("opened in duty %d at %g s, not in the second at 7 s", b.duty, b.clock)
	}
	edit := func(err error) {
		if err != nil {
			t.Error(err)
		}
		b.drain()
	}
	for _, c := range []struct {
		meanwhile string
		do        func()
		comes     bool
	}{
		{"nothing", func() {}, true},
		{"another axis", func() { edit(b.doc.AddAxis("swing", duty.Rotary)) }, true},
		{"another name", func() { edit(b.doc.RenameDuty("press", "bale")) }, false},
		{"the clock is moved", func() { b.SetClock(5) }, false},
		{"another duty is taken", func() { b.SetDuty(1) }, false},
		{"another audit is opened", func() { b.openText("one.yaml", strings.Replace(twoDuties, "1000 h", "0 h", 1)) }, false},
	} {
		waitsFor = 20 * time.Second
		b.openText("two.yaml", twoDuties)
		b.SetDuty(0)
		hold := make(chan struct{})
		waitsFor = 0
		b.find(func(*audit.File) instant { <-hold; return instant{1, 3} })
		waitsFor = 20 * time.Second
		c.do()
		d, at := b.duty, b.clock
		b.pages[0].told = nil
		close(hold)
		if c.comes {
			d, at = 1, 3
			b.until("it came", func() bool { return b.clock == 3 && b.pages[0].told != nil })
		} else {
			for end := time.Now().Add(50 * time.Millisecond); time.Now().Before(end); time.Sleep(time.Millisecond) {
				b.drain()
			}
		}
		if told := slices.Contains(b.pages[0].told, station.Selection|station.Clock|station.Reading); b.duty != d || b.clock != at || told != c.comes {
			t.Errorf("%s: duty %d at %g s, want %d at %g s; told %v", c.meanwhile, b.duty, b.clock, d, at, b.pages[0].told)
		}
	}
}

// A long recording is weighed while the window answers: where it takes longer than the window
// waits, the first duty is shown until then.
func TestLongRecordingIsWeighedBehindTheWindow(t *testing.T) {
	b := newBench(t)
	waitsFor = 0
	dir := t.TempDir()
	write := func(name string, v func(i int) float64) {
		var rows strings.Builder
		rows.WriteString("t [s],v [m/s],F [kN]\n")
		for i := range 200_000 {
			fmt.Fprintf(&rows, "%.2f,%g,5\n", 0.01*float64(i), v(i))
		}
		if err := os.WriteFile(filepath.Join(dir, name), []byte(rows.String()), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	write("a.csv", func(int) float64 { return 0.01 })
	write("b.csv", func(i int) float64 { return 0.05 + 1e-7*float64(i) })
	text := `format: barlitre/1
title: Long
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear}
duties:
- {name: a, hours: 2000 h, file: a.csv, columns: {t: t, ram.speed: v, ram.load: F}}
- {name: b, hours: 1500 h, file: b.csv, columns: {t: t, ram.speed: v, ram.load: F}}
circuits: []
`
	path := filepath.Join(dir, "long.yaml")
	if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
		t.Fatal(err)
	}
	b.Frame.open(path)
	b.until("opened", func() bool { return b.working == nil && b.doc.File().Title == "Long" })
	b.until("weighed", func() bool { return b.duty == 1 && b.clock > 1999 })
}
