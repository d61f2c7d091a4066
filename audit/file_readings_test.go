package audit

import (
	"strings"
	"testing"
)

func TestReadings(t *testing.T) {
	f := full(t)
	before := string(f.Bytes())
	for _, r := range [][3]string{{"idling", "M1.power", "5.2 kW"}, {"working", "P1.pressure", "150 bar"}, {"stopped", "oil.temperature", "38 C"}, {"idling", "M1.power", "5.4 kW"}} {
		if err := f.SetReading(r[0], r[1], r[2]); err != nil {
			t.Fatal(err)
		}
	}
	if got, ok := f.Reading("idling", "M1.power"); !ok || got.SI != 5400 {
		t.Errorf("idling: %+v", got)
	}
	if len(f.Readings) != 3 || !strings.HasPrefix(string(f.Bytes()), strings.TrimRight(before, "\n")) {
		t.Errorf("%d readings in\n%s", len(f.Readings), f.Bytes())
	}
	for _, r := range [][2]string{{"idling", "M1.power"}, {"working", "P1.pressure"}, {"stopped", "oil.temperature"}} {
		if err := f.SetReading(r[0], r[1], ""); err != nil {
			t.Fatal(err)
		}
	}
	if len(f.Readings) != 0 {
		t.Errorf("%d are left", len(f.Readings))
	}
	for _, r := range [][3]string{{"asleep", "M1.power", "5 kW"}, {"idling", "M1.power", "5 bar"}, {"idling", "M1.colour", "5 kW"}} {
		if err := f.SetReading(r[0], r[1], r[2]); err == nil {
			t.Errorf("%v was taken", r)
		}
	}
}
