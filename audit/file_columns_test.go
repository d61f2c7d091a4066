package audit

import (
	"math"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

const loggerHead = `format: barlitre/1
title: recording with names of its own
oil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}
axes: {ram: linear, drum: rotary}
duties:
- name: day
  file: log.csv
  columns: {t: "time [s]", ram.speed: v1, ram.load: "F1 [kN]", drum.speed: "n [rpm]", drum.load: M}
  standstill: {ram: 1 mm/s, drum: 0.01 rad/s}
circuits:
- name: As found
  pump_at_rest: keep
  blocks: {T1: {kind: tank}}
  lines: []
`

const loggerRows = `time,note,v1 [mm/s],F1,n,M [N m]
0,1,0,10,0,5
1,1,0.5,10,60,5
2,2,100,20,60,5
`

func logged(text, table string) (*File, []string) {
	f, found := Parse([]byte(text), FromBytes(func(string) ([]byte, error) { return []byte(table), nil }), "")
	var said []string
	for _, x := range found {
		said = append(said, x.Text)
	}
	return f, said
}

// Columns are taken under the names of the recording, with the unit from where it stands;
// those that are not named are left out.
func TestColumnsOfARecording(t *testing.T) {
	f, said := logged(loggerHead, loggerRows)
	if len(said) > 0 {
		t.Fatal(said)
	}
	d := f.Duties[0]
	near(t, "speed", d.Track("ram", duty.Speed).Values[2], 0.1, 1e-12)
	near(t, "load", d.Track("ram", duty.Load).Values[2], 20e3, 1e-12)
	near(t, "turning", d.Track("drum", duty.Speed).Values[1], 2*math.Pi, 1e-12)
	near(t, "torque", d.Track("drum", duty.Load).Values[1], 5, 0)
	if len(d.Tracks) != 4 || f.Sources[0].File != "log.csv" {
		t.Errorf("%d tracks, %+v", len(d.Tracks), f.Sources)
	}
	// 0.5 mm/s stand, though 0.1 % of the top speed is less; the drum turns.
	s := d.Series(f.Axes, false)
	for k, at := range s.T {
		if at == 1 && (!s.Axes[0].Standing[k] || s.Axes[1].Standing[k]) {
			t.Errorf("at 1 s: ram stands %v, drum stands %v", s.Axes[0].Standing[k], s.Axes[1].Standing[k])
		}
	}
}

func TestColumnsThatAreWrong(t *testing.T) {
	for _, c := range []struct{ old, now, want string }{
		{"ram.load: \"F1 [kN]\"", "ram.load: \"F2 [kN]\"", `columns, ram.load: log.csv has no column "F2"; did you mean "F1"?`},
		{"ram.load: \"F1 [kN]\"", "ram.load: F1", `ram.load: unit "" is not a unit of force`},
		{"ram.speed: v1", "ram.speed: \"v1 [m/s]\"", "is in m/s here and in mm/s in the head of log.csv; keep one"},
		{"t: \"time [s]\", ", "", "do not say which one holds the time stamps"},
		{"ram.load: \"F1 [kN]\"", "rom.load: \"F1 [kN]\"", `there is no axis or block "rom"; did you mean "ram"?`},
		{"drum.load: M", "drum.load: \"M [N m\"", "write the name of the column and its unit between brackets"},
		{"ram: 1 mm/s", "ram: 1 bar", `unit "bar" is not a unit of velocity`},
		{"ram: 1 mm/s", "ram: -1 mm/s", "must not be below 0"},
		{"ram: 1 mm/s", "rum: 1 mm/s", `there is no axis "rum"; did you mean "ram"?`},
		{"file: log.csv", `points: {t: [0 s, 1 s]}`, "points name their tracks themselves"},
	} {
		_, said := logged(strings.Replace(loggerHead, c.old, c.now, 1), loggerRows)
		if len(said) != 1 || !strings.Contains(said[0], c.want) {
			t.Errorf("%s: got %q, want %q", c.now, said, c.want)
		}
	}
}
