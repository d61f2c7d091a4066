package audit

import (
	"strings"
	"testing"

	"barlitre/machines/units"
)

// A circuit that says what it draws while off is booked with that, the other with what the calendar
// says: by hand, the watts times the hours off. The value can be set and taken out again.
func TestStandbyOfACircuit(t *testing.T) {
	s := sampleWith(t, "handling-machine.yaml", nil)
	f := s.File.Clone()
	names := []string{f.Circuits[0].Name, f.Circuits[1].Name}
	if err := f.SetCalendar("standby", "80 W"); err != nil {
		t.Fatal(err)
	}
	before := string(f.Bytes())
	if err := f.Set(names[1]+"/standby", "25 W"); err != nil {
		t.Fatal(err)
	}
	for i, watts := range []float64{80, 25} {
		y := year(s.Circuits[i].Duties, f.Calendar, f.standbyOf(f.Circuit(names[i])))
		wants(t, names[i]+", kWh while off", y.Drawn.Off/units.KilowattHour, watts*f.Calendar.Hours.Off/units.KilowattHour, 1e-12)
	}
	if text := strings.Join(f.calendarLines(printer{}), " "); !strings.Contains(text, "that of "+names[1]+" draws") {
		t.Error(text)
	}
	if err := f.Set(names[1]+"/standby", "-3 W"); err == nil {
		t.Error("less than nothing was taken")
	}
	if err := f.Drop(names[1] + "/standby"); err != nil || string(f.Bytes()) != before {
		t.Errorf("%v; taken out it leaves\n%s", err, f.Bytes())
	}
}
