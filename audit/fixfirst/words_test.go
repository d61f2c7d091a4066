package fixfirst

import (
	"testing"

	"barlitre/audit"
	"barlitre/samples"
)

// A cure is told in the words that stand beside the fields of the window.
func TestCureInWords(t *testing.T) {
	data, err := samples.Read("quayside-winch.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, _ := audit.Parse(data, nil, "")
	of := "As found/"
	for want, e := range map[string]Edit{
		"RV1 cracks at 231 bar":                      {set, of + "RV1.crack", "231 bar"},
		"P1 set pressure 180 bar":                    {lower, of + "P1.set_pressure", "180 bar"},
		"P1 control load sensing":                    {set, of + "P1.control", "load_sensing"},
		"pumps switched off while every axis stands": {set, of + "pump_at_rest", "stop"},
		"oil temperature 50 C":                       {set, "oil.temperature", "50 C"},
		"thermostat opens at 45 C":                   {heat, of + "heat.thermostat_opens", "45 C"},
	} {
		if got := (Cure{e}).InWords(f); got != want {
			t.Errorf("%v is told as %q, want %q", e, got, want)
		}
	}
}
