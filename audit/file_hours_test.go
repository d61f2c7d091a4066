package audit

import (
	"path/filepath"
	"strings"
	"testing"

	"barlitre/audit/calendar"
	"barlitre/circuit/logged"
	"barlitre/machines/units"
)

const twoDuties = `format: barlitre/1
oil: {grade: ISO VG 46, temperature: 50 C}
axes: {ram: linear}
duties:
- name: guess
  hours: 3000 h # two shifts
  points: {t: [0 s, 1 s], ram.speed: [0.1 m/s, 0.1 m/s]}
- name: measured
  points: {t: [0 s, 1 s], ram.speed: [0.2 m/s, 0.2 m/s]}
circuits: []
`

// Hours are handed over as they are written, with origin and range; nothing else changes.
func TestHoursAreHandedOver(t *testing.T) {
	said := "  points: {t: [0 s, 1 s], ram.speed: [0.2 m/s, 0.2 m/s]}\n"
	for _, x := range [][3]string{
		{"3000 h", "0 h", "3000 h"},
		{"{value: 125 d, origin: measured, low: 100 d, high: 150 d, note: \"meter, 2024\"}", "", "{value: 125 d, origin: measured, low: 100 d, high: 150 d, note: \"meter, 2024\"}"},
	} {
		f, _ := Parse([]byte(strings.Replace(twoDuties, "3000 h", x[0], 1)), nil, "")
		if err := f.HandHours("guess", "measured"); err != nil {
			t.Fatal(err)
		}
		want := strings.Replace(twoDuties, said, said+"  hours: "+x[2]+"\n", 1)
		if x[1] != "" {
			want = strings.Replace(want, "3000 h #", x[1]+" #", 1)
		} else { // a mapping goes, with its range; its comment stays
			want = strings.Replace(want, "  hours: 3000 h # two shifts\n  points: {t: [0 s, 1 s], ram.speed: [0.1 m/s, 0.1 m/s]}\n",
				"  # two shifts\n  points: {t: [0 s, 1 s], ram.speed: [0.1 m/s, 0.1 m/s]}\n  hours: 0 h\n", 1)
		}
		if got := string(f.Bytes()); got != want {
			t.Errorf("%s", got)
		}
		if f.Duties[0].Hours != 0 || f.Duties[1].Hours != 3000*units.Hour || strings.Join(f.InYear(), ",") != "measured" {
			t.Errorf("%g and %g s, %v", f.Duties[0].Hours, f.Duties[1].Hours, f.InYear())
		}
	}
}

// In a calendar the other duty takes the share; the hours of the year stay the same.
func TestShareOfCalendarIsHandedOver(t *testing.T) {
	extra := "- name: measured\n  points: {t: [0 s, 1 s], ram.speed: [0.2 m/s, 0.2 m/s]}\ncalendar:\n"
	f, _ := Parse([]byte(strings.Replace(planned, "calendar:\n", extra, 1)), nil, "")
	hours := f.Duties[0].Hours
	if err := f.HandHours("product A", "measured"); err != nil {
		t.Fatal(err)
	}
	if !strings.Contains(string(f.Bytes()), "work: {measured: 60 %, product B: 40 %}") {
		t.Errorf("%s", f.Bytes())
	}
	if f.StateOf("product A") != "" || f.StateOf("measured") != calendar.Work || f.Duties[0].Hours != 0 {
		t.Error("the duty still stands in the calendar")
	}
	wants(t, "hours", f.Duties[3].Hours, hours, 0)
}

// What cannot be handed over is refused in words, and nothing is changed.
func TestHoursAreNotHandedOver(t *testing.T) {
	for _, x := range [][3]string{{"measured", "guess", "no hours a year to give"}, {"guess", "guess", "already"}, {"guess", "gone", `no duty "gone"`}, {"gone", "guess", `no duty "gone"`}} {
		f, _ := Parse([]byte(twoDuties), nil, "")
		if err := f.HandHours(x[0], x[1]); err == nil || !strings.Contains(err.Error(), x[2]) || string(f.Bytes()) != twoDuties {
			t.Errorf("%v: %v", x, err)
		}
	}
}

// A recording taken in in place of a duty leaves the hours of the year as they were; beside it, it adds to them.
func TestTakeInInPlaceOf(t *testing.T) {
	path, f := intakeFile(t)
	rec := recordingAt(t, filepath.Join(filepath.Dir(path), "ram.csv"))
	taking := Taking{Duty: "day 2", File: "ram.csv", Kept: Keep(rec), Tracks: logged.Suggest(rec.Series, logged.Machine{Axes: f.Axes}).Tracks, InPlaceOf: "day 1"}
	beside, g := *f, *f
	if err := g.TakeIn(taking); err != nil {
		t.Fatal(err)
	}
	if g.Duties[0].Hours != 0 || g.Duties[1].Hours != 100*units.Hour {
		t.Errorf("%g and %g s", g.Duties[0].Hours, g.Duties[1].Hours)
	}
	taking.InPlaceOf, taking.Keys = "", map[string]string{"hours": "40 h"}
	if err := beside.TakeIn(taking); err != nil || beside.Duties[0].Hours+beside.Duties[1].Hours != 140*units.Hour {
		t.Errorf("%v, %g s", err, beside.Duties[0].Hours+beside.Duties[1].Hours)
	}
	before := string(f.Bytes())
	if taking.InPlaceOf = "gone"; f.TakeIn(taking) == nil || string(f.Bytes()) != before {
		t.Error("taken in in place of a duty that is not there")
	}
}
