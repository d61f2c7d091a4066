package audit

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
)

// twoLoggers are a speed in two files, and the force of a second logger whose clock is 2 s
// behind and whose columns have two blanks in their names; both have the pressure 10 + t² bar.
func twoLoggers(t *testing.T, dir string) (first *logger.Recording, second *logger.Recording) {
	t.Helper()
	write := func(name, head string, from, to int, row func(s float64) string) string {
		text := head + "\n"
		for i := from; i < to; i++ {
			text += row(0.1*float64(i)) + "\n"
		}
		path := filepath.Join(dir, name)
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		return path
	}
	speed := func(s float64) string { return fmt.Sprintf("%.1f,%.4f,%.4f", s, 0.1*s, 10+s*s) }
	force := func(s float64) string { return fmt.Sprintf("%.1f,%.4f,%.4f", s, 3*(s+2), 10+(s+2)*(s+2)) }
	read := func(paths ...string) *logger.Recording {
		file, err := logger.OpenFiles(paths...)
		if err != nil {
			t.Fatal(err)
		}
		rec, err := file.Import(context.Background(), file.Guess(), nil)
		if err != nil {
			t.Fatal(err)
		}
		return rec
	}
	first = read(write("a1.csv", "t [s],v [m/s],p [bar]", 0, 60, speed), write("a2.csv", "t [s],v [m/s],p [bar]", 60, 101, speed))
	second = read(write("b.csv", "t [s],rod  force [kN],p  main [bar]", -20, 90, force))
	return first, second
}

// A duty of two files and a second logger is taken in from what was read, stands in the text
// with blanks as they are, and reads back from the disk the same; set again, it loses nothing.
func TestTakeInSeveralLoggers(t *testing.T) {
	dir := t.TempDir()
	first, second := twoLoggers(t, dir)
	path := filepath.Join(dir, "audit.yaml")
	f, _ := Parse([]byte(intakeHead), Beside(path), path)
	taking := Taking{Duty: "two", File: "a1.csv", More: []string{"a2.csv"}, Kept: Keep(first), Also: []TakenAlso{{Also{Files: []string{"b.csv"}, Clock: Clock{Channel: "p", With: "p  main", Within: 5}}, Keep(second)}},
		Tracks: []logged.Track{{Name: "ram.speed", Law: logged.AsMeasured, Says: map[string]string{"column": "v"}}, {Name: "ram.load", Law: logged.AsMeasured, Says: map[string]string{"column": "rod  force"}}}}
	if err := f.TakeIn(taking); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(f.Bytes()), "rod  force") || f.KeptOf(0) == nil || f.KeptOf(0).Recording() != first {
		t.Errorf("kept %v in\n%s", f.KeptOf(0), f.Bytes())
	}
	for _, clock := range []Clock{{Channel: "p", With: "p  main", Within: 5}, {Offset: "2 s"}} {
		taking.Also[0].Clock = clock
		if err := f.TakeIn(taking); err != nil {
			t.Fatal(err)
		}
		if err := f.Save(path); err != nil {
			t.Fatal(err)
		}
		g, found := Read(path)
		if stops(found) > 0 {
			t.Fatalf("%v in\n%s", found, g.Bytes())
		}
		d, im := g.Duties[0], g.Imports[0]
		if len(d.Time) != 101 || len(im.More) != 1 || len(im.Also) != 1 || im.Also[0].Clock != clock || math.Abs(im.Also[0].Offset-2) > 0.02 || im.Also[0].Expected != im.Also[0].SHA256 {
			t.Fatalf("%d rows, %+v", len(d.Time), im.Also)
		}
		for i := 0; i < 100; i += 9 {
			if force := d.Track("ram", duty.Load).Values[i]; math.Abs(force-3e3*d.Time[i]) > 60 {
				t.Errorf("%g N at %g s", force, d.Time[i])
			}
		}
		s, _ := g.SetupOf("two")
		if err := g.SetImport("two", s); err != nil || len(g.Imports[0].Also) != 1 || len(g.Imports[0].More) != 1 {
			t.Errorf("set again: %v", err)
		}
	}
	if taking.Also = nil; f.TakeIn(taking) == nil {
		t.Error("taken in with a channel that no recording has")
	}
	taking.Tracks = taking.Tracks[:1]
	if err := f.TakeIn(taking); err != nil || strings.Contains(string(f.Bytes()), "also") {
		t.Errorf("%v: what was beside stays in\n%s", err, f.Bytes())
	}
}

// A duty that was made of phases and is then taken from a recording has no phases that its
// tracks are computed of; names of stretches stay.
func TestRecordingInPlaceOfPhases(t *testing.T) {
	dir := t.TempDir()
	first, _ := twoLoggers(t, dir)
	for text, stays := range map[string]bool{"- {name: d, phases: [{name: out, lasts: 2 s, ram.stroke: 100 mm, ram.load: 5 kN}, {name: back, lasts: 2 s, ram.stroke: -100 mm, ram.load: 5 kN}]}": false,
		"- {name: d, points: {t: [0 s, 4 s], ram.speed: [0 m/s, 0 m/s], ram.load: [5 kN, 5 kN]}, phases: {out: 0 s, back: 2 s}}": true} {
		f, found := Parse([]byte(strings.Replace(intakeHead, "duties: []", "duties:\n"+text, 1)), Beside(filepath.Join(dir, "x.yaml")), "")
		if stops(found) > 0 {
			t.Fatal(found)
		}
		err := f.TakeIn(Taking{Duty: "d", File: "a1.csv", More: []string{"a2.csv"}, Kept: Keep(first), Tracks: []logged.Track{{Name: "ram.speed", Law: logged.AsMeasured, Says: map[string]string{"column": "v"}}}})
		if err != nil || strings.Contains(string(f.Bytes()), "phases") != stays || f.Imports[0] == nil {
			t.Errorf("%v\n%s", err, f.Bytes())
		}
	}
}
