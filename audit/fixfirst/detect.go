package fixfirst

import (
	"slices"

	"barlitre/audit"
	"barlitre/machines/units"
)

// rules are the detectors, each of which says what it finds in a solved circuit.
var rules = []func(*plant) []*Finding{
	reliefAtCompensator, marginAboveNeed, settingAboveNeed, standByHigh, unloadsAtPressure, unloaderHigh, preChargeOff,
	runsIdle, reliefInWork, wornPump, pumpTooLarge, filterClogged, lineNarrow, sizedApart, chargeHigh, flushingHigh,
	oilTemperature, oilGrade,
}

// Detect lists what is wrong with a solved circuit, with evidence in a family of units, in the order of the rules; nothing
// where it was not solved.
func Detect(s *audit.Solution, run *audit.CircuitRun, system units.System) []*Finding {
	if run.Year == nil || !run.Year.Complete || len(run.Year.Duties) == 0 {
		return nil
	}
	p := newPlant(s, run, system)
	var out []*Finding
	for _, rule := range rules {
		for _, f := range rule(p) {
			if !explained(out, f) && !heatMade(out, f) {
				out = append(out, f)
			}
		}
	}
	return out
}

// heatMade reports whether faults found before make heat, so that a cooler that is too small is judged once they are cured.
func heatMade(before []*Finding, f *Finding) bool {
	return f.Rule == coolerSmall && slices.ContainsFunc(before, func(b *Finding) bool { return !b.Habit })
}

// explained reports whether an earlier finding is the cause of a later one: where a relief valve stands at the compensator
// it is open in work as well, and where the margin is turned up the pump stands by too high.
func explained(before []*Finding, f *Finding) bool {
	for _, b := range before {
		if slices.Contains(b.because, f.key()) {
			return true
		}
	}
	return false
}
