package duty

import (
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/app/duty/intake"
	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/audit"
	cycle "barlitre/circuit/duty"
)

// loggerFiles are a speed in two files, of which the second repeats a row, and in another folder
// a file of the same name with the force; that clock is 2 s behind. Both have a pressure whose steps never come again.
func loggerFiles(t *testing.T) (first, goesOn, other string) {
	t.Helper()
	dir := t.TempDir()
	p := func(s float64) float64 { return 50 + 20*math.Sin(1.7*math.Pow(math.Floor(1.3*s+9), 2)) }
	write := func(name, head string, from, to int, row func(s float64) string) string {
		text := head + "\n"
		for i := from; i < to; i++ {
			text += row(0.1*float64(i)) + "\n"
		}
		path := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o755); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	speed := func(s float64) string { return fmt.Sprintf("%.1f,%.4f,%.4f", s, 0.1*math.Sin(s/3), p(s)) }
	force := func(s float64) string { return fmt.Sprintf("%.1f,%.4f,%.4f", s, 3*(s+2), p(s+2)) }
	const head = "t [s],ram_v [m/s],p [bar]"
	first, goesOn = write("day.csv", head, 0, 100, speed), write("day2.csv", head, 99, 301, speed)
	return first, goesOn, write("other/day.csv", "t [s],ram_F [kN],p [bar]", -20, 290, force)
}

func add(t *testing.T, f interface{ LastError() error }, picked *string, button func(), path string) {
	t.Helper()
	*picked = path
	button()
	if err := f.LastError(); err != nil {
		t.Fatal(err)
	}
}

// A file that goes on and a second logger are added on the page: what was found at the joint and
// of the clock stands there, the duty has all rows and both tracks, and all of it is there when
// the audit is opened and the import changed again.
func TestLoggersOnThePage(t *testing.T) {
	first, goesOn, other := loggerFiles(t)
	f, _ := importing(t, pressFile, first)
	click(t, f, "intake.tab.loggers")
	add(t, f, &f.PickedFile, func() { click(t, f, "intake.logger1.addfile") }, goesOn)
	if text := label("intake.logger1.overlap"); !strings.Contains(text, "1 row of a file") {
		t.Errorf("overlap %q", text)
	}
	if text := label("intake.logger1.says"); !strings.Contains(text, "301 rows") {
		t.Errorf("%q", text)
	}
	add(t, f, &f.PickedFile, func() { click(t, f, "intake.logger.add") }, other)
	if text := label("intake.logger2.clock.says"); !strings.Contains(text, "Aligned by p with p, 2") {
		t.Errorf("clock %q", text)
	}
	look(f, "intake-loggers")
	click(t, f, "intake.tab.findings")
	look(f, "intake-loggers-findings")
	if dump := f.Dump(); !strings.Contains(dump, "2 files make one recording") || !strings.Contains(dump, "day.csv, 310 rows") {
		t.Errorf("findings:\n%s", dump)
	}
	click(t, f, "intake.tab.file")
	choose(t, "intake.logger", "2: day.csv")
	f.SetTheme(true, 1)
	look(f, "intake-loggers-file-dark")
	click(t, f, "intake.tab.loggers")
	look(f, "intake-loggers-dark")
	click(t, f, "intake.tab.tracks")
	if !strings.Contains(f.Dump(), "intake.track.ram.load.law") {
		t.Fatalf("no load:\n%s", f.Dump())
	}
	click(t, f, "intake.make")
	if err := f.LastError(); err != nil {
		t.Fatal(err)
	}
	check := func(file *audit.File) {
		t.Helper()
		d, im := file.Duties[0], file.Imports[0]
		if len(d.Time) != 301 || len(im.More) != 1 || len(im.Also) != 1 || im.Also[0].Files[0] != "day-2.csv" || math.Abs(im.Also[0].Offset-2) > 0.02 {
			t.Fatalf("%d rows, more %v, also %+v", len(d.Time), im.More, im.Also)
		}
		for i := 0; i < 300; i += 17 {
			if got := d.Track("ram", cycle.Load).Values[i]; math.Abs(got-3e3*d.Time[i]) > 60 {
				t.Errorf("%g N at %g s", got, d.Time[i])
			}
		}
	}
	check(f.Document.File())
	if err := f.Document.Save(); err != nil {
		t.Fatal(err)
	}
	again, found := audit.Read(f.Document.Path())
	if again == nil {
		t.Fatal(found)
	}
	check(again)
	f.Station.Changed(station.Model)
	click(t, f, "duty.import.change")
	click(t, f, "intake.tab.loggers")
	choose(t, "intake.logger2.clock", "an offset, typed")
	put(t, "intake.logger2.clock.offset", "2100 ms")
	if text := label("intake.logger2.clock.says"); !strings.HasPrefix(text, "2.1 s, as given") {
		t.Errorf("clock %q", text)
	}
	click(t, f, "intake.make")
	if im := f.Document.File().Imports[0]; f.LastError() != nil || im.Also[0].Offset != 2.1 || im.Also[0].Clock.Offset != "2100 ms" {
		t.Errorf("%v, %+v", f.LastError(), im.Also)
	}
}

// A file that is there already, one that is not there, and an offset that leads out of the
// recording are refused in words; a logger that is removed takes its channels along.
func TestLoggersThatDoNotFit(t *testing.T) {
	first, _, other := loggerFiles(t)
	f, _ := importing(t, pressFile, first)
	click(t, f, "intake.tab.loggers")
	for path, want := range map[string]string{first: "there already", filepath.Join(t.TempDir(), "gone.csv"): "gone.csv"} {
		f.PickedFile = path
		click(t, f, "intake.logger.add")
		if err := f.LastError(); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v", path, err)
		}
	}
	f.PickedFile = other
	click(t, f, "intake.logger.add")
	choose(t, "intake.logger2.clock", "an offset, typed")
	put(t, "intake.logger2.clock.offset", "900 s")
	if text := label("intake.logger2.clock.says"); !strings.Contains(text, "give another offset") {
		t.Errorf("%q", text)
	}
	if label("intake.state") == "" || !strings.Contains(label("intake.state"), "give another offset") {
		t.Errorf("state %q", label("intake.state"))
	}
	click(t, f, "intake.logger2.remove")
	if text := label("intake.title"); !strings.Contains(text, "100 rows") || strings.Contains(text, " and ") || strings.Contains(label("intake.state"), "fault") {
		t.Errorf("%q, %q", text, label("intake.state"))
	}
}

// Several files dropped at once go where they belong: one with the same columns goes on, one
// with others is another logger with its clock. On the page of the loggers they are added, and
// one that is there already, or cannot be read, leaves all as it was.
func TestSeveralFilesAtOnce(t *testing.T) {
	first, goesOn, other := loggerFiles(t)
	check := func(f *stationtest.Frame) {
		t.Helper()
		if err := f.LastError(); err != nil {
			t.Fatal(err)
		}
		if text := label("intake.logger1.says"); !strings.Contains(text, "301 rows") || !strings.Contains(text, "ram_v") {
			t.Errorf("the recording: %q", text)
		}
		if text := label("intake.logger2.says"); !strings.Contains(text, "310 rows") || !strings.Contains(text, "ram_F") {
			t.Errorf("the other logger: %q", text)
		}
		if text := label("intake.logger2.clock.says"); !strings.Contains(text, "ligned by p with p") {
			t.Errorf("its clock: %q", text)
		}
	}
	t.Cleanup(intake.Inline())
	f := stationtest.Open(t, New, pressFile, nil)
	s := f.Station.(*Station)
	s.TakeIn(other, goesOn, first)
	f.Settle(1190, 590)
	check(f)
	look(f, "intake-several")
	s.TakeIn(goesOn)
	if err := f.LastError(); err == nil || !strings.Contains(err.Error(), "day2.csv is there already") {
		t.Error(err)
	}
	f.Failed = nil
	s.TakeIn(first, filepath.Join(t.TempDir(), "gone.csv"))
	if f.LastError() == nil || label("intake.logger2.says") == "" {
		t.Error("a file that is not there was taken")
	}

	f, s = importing(t, pressFile, first)
	click(t, f, "intake.tab.loggers")
	s.TakeIn(goesOn, other)
	f.Settle(1190, 590)
	check(f)
	click(t, f, "intake.tab.tracks")
	if s.TakeIn(other); strings.Contains(label("intake.title"), "and day.csv") {
		t.Errorf("dropped elsewhere it does not begin anew: %q", label("intake.title"))
	}
}
