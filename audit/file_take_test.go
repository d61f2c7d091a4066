package audit

import (
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
)

const intakeHead = `format: barlitre/1
title: Recorded ram
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear}
duties: []
circuits:
- name: As found
  role: as found
  blocks:
    C1: {kind: cylinder, axis: ram, hold: valve, bore: 80 mm, rod: 56 mm}
`

// intakeCSV is a ram that goes out and back against 12 kN, in German notation, with rows doubled.
func intakeCSV(force float64) string {
	var b strings.Builder
	b.WriteString("Prüfstand 2\nZeit;ram_v;ram_F\ns;m/s;kN\n")
	for i := range 101 {
		row := fmt.Sprintf("%.1f;%.4f;%.3f\n", 0.1*float64(i), 0.2*math.Sin(2*math.Pi*float64(i)/100), force+0.001*float64(i%2))
		b.WriteString(strings.ReplaceAll(row, ".", ","))
		if i == 50 {
			b.WriteString(strings.ReplaceAll(row, ".", ","))
		}
	}
	return b.String()
}

// intakeFile is an audit file in a folder of its own with a recording taken in.
func intakeFile(t *testing.T) (path string, f *File) {
	t.Helper()
	dir := t.TempDir()
	path = filepath.Join(dir, "audit.yaml")
	for name, text := range map[string]string{"audit.yaml": intakeHead, "ram.csv": intakeCSV(12)} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	f, _ = Read(path)
	rec := recordingAt(t, filepath.Join(dir, "ram.csv"))
	taking := Taking{Duty: "day 1", File: "ram.csv", Kept: Keep(rec), Tracks: logged.Suggest(rec.Series, logged.Machine{Axes: f.Axes}).Tracks,
		Keys: map[string]string{"repeats": "no", "hours": "100 h"}}
	if err := f.TakeIn(taking); err != nil {
		t.Fatal(err)
	}
	if err := f.Save(path); err != nil {
		t.Fatal(err)
	}
	return path, f
}

func recordingAt(t *testing.T, path string) *logger.Recording {
	t.Helper()
	file, err := logger.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	rec, err := file.Import(context.Background(), file.Guess(), nil)
	if err != nil {
		t.Fatal(err)
	}
	return rec
}

// What was taken in reads back from the disk: rows, tracks, corrections, fingerprint.
func TestTakeInReadsBack(t *testing.T) {
	path, f := intakeFile(t)
	g, found := Read(path)
	if stops(found) > 0 {
		t.Fatalf("%v in\n%s", found, f.Bytes())
	}
	im, d := g.Imports[0], g.Duties[0]
	if im == nil || im.Expected != im.SHA256 || d.Repeats || len(d.Time) != 101 || !slices.Equal(d.Time, f.Duties[0].Time) {
		t.Fatalf("%+v, %d rows", im, len(d.Time))
	}
	if v := d.Track("ram", duty.Speed).Values[25]; math.Abs(v-0.2) > 1e-9 {
		t.Errorf("speed %g", v)
	}
	if force := d.Track("ram", duty.Load).Values[25]; math.Abs(force-12001) > 1e-6 {
		t.Errorf("load %g N", force)
	}
	if !slices.ContainsFunc(im.Corrections, func(c logger.Correction) bool { return c.Key == "doubled rows" && c.Count == 1 }) {
		t.Errorf("no doubled row in %v", im.Corrections)
	}
}

// The recording that was read for the edit is the one that the file then has: it is not read again.
func TestTakeInReadsOnce(t *testing.T) {
	path, f := intakeFile(t)
	kept := f.KeptOf(0)
	if err := os.Remove(filepath.Join(filepath.Dir(path), "ram.csv")); err != nil {
		t.Fatal(err)
	}
	if err := f.SetDuty("day 1", "hours", "200 h"); err != nil || f.KeptOf(0) == nil || f.KeptOf(0).Recording() != kept.Recording() {
		t.Errorf("%v", err)
	}
}

// Another part and other laws replace what the duty was made by; an unknown axis or channel
// is refused, and then nothing is changed.
func TestTakeInAgain(t *testing.T) {
	_, f := intakeFile(t)
	taking := Taking{Duty: "day 1", File: "ram.csv", Kept: f.KeptOf(0), Part: logged.Part{From: 2, To: 4, Is: "chosen"}, Tracks: []logged.Track{
		{Name: "ram.speed", Law: logged.Scaled, Says: map[string]string{"column": "ram_v", "factor": "-2", "offset": "10 mm/s"}},
		{Name: "ram.load", Law: logged.Constant, Says: map[string]string{"value": "7 kN"}}}}
	if err := f.TakeIn(taking); err != nil {
		t.Fatal(err)
	}
	d := f.Duties[0]
	if v, want := d.Track("ram", duty.Speed).Values[0], -2*0.2*math.Sin(2*math.Pi*0.2)+0.01; math.Abs(v-want) > 2e-4 || d.Track("ram", duty.Load).Values[3] != 7000 {
		t.Errorf("%g m/s, want %g", v, want)
	}
	if d.Hours != 100*3600 || math.Abs(d.Cycle()-2) > 1e-9 || f.Imports[0].Part != taking.Part {
		t.Errorf("%+v, %+v", d, f.Imports[0].Part)
	}
	if got := f.Imports[0].TracksOf(); len(got) != 2 || !slices.ContainsFunc(got, func(x logged.Track) bool { return x.Law == logged.Constant && x.Says["value"] == "7 kN" }) {
		t.Errorf("%+v", got)
	}
	text := string(f.Bytes())
	for says, track := range map[string]logged.Track{"winch": {Name: "winch.speed", Law: logged.AsMeasured, Says: map[string]string{"column": "ram_v"}}, "ram_q": {Name: "ram.speed", Law: logged.AsMeasured, Says: map[string]string{"column": "ram_q"}},
		"value": {Name: "ram.load", Law: logged.Constant}, "offset": {Name: "ram.load", Law: logged.Scaled, Says: map[string]string{"column": "ram_F", "offset": "3 bar"}}} {
		taking.Tracks = []logged.Track{track}
		if err := f.TakeIn(taking); err == nil || !strings.Contains(err.Error(), says) || string(f.Bytes()) != text {
			t.Errorf("%+v: %v", track, err)
		}
	}
	taking.Part, taking.Tracks = logged.Part{From: 50, To: 60}, nil
	if err := f.TakeIn(taking); err == nil || !strings.Contains(err.Error(), "not in the recording") {
		t.Error(err)
	}
}

// A power over its speed is the force it came from, and nothing at standstill.
func TestLoadOfPower(t *testing.T) {
	dir := t.TempDir()
	var b strings.Builder
	b.WriteString("t [s],ram_v [m/s],P [kW]\n")
	for i := range 50 {
		v := 0.01 * float64(max(0, i-10))
		fmt.Fprintf(&b, "%.1f,%.3f,%.4f\n", 0.1*float64(i), v, 5*v)
	}
	path := filepath.Join(dir, "p.csv")
	if err := os.WriteFile(path, []byte(b.String()), 0o644); err != nil {
		t.Fatal(err)
	}
	f, _ := Parse([]byte(intakeHead), nil, "")
	taking := Taking{Duty: "d", File: "p.csv", Kept: Keep(recordingAt(t, path)), Tracks: []logged.Track{{Name: "ram.load", Law: logged.OfPower, Says: map[string]string{"power": "P", "speed": "ram_v"}}}}
	if err := f.TakeIn(taking); err != nil {
		t.Fatal(err)
	}
	for i, force := range f.Duties[0].Tracks[0].Values {
		if want := 5000.0; i > 10 && math.Abs(force-want) > 1e-6 || i <= 10 && force != 0 {
			t.Fatalf("row %d: %g N", i, force)
		}
	}
}
