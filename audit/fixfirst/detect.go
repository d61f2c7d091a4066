package fixfirst

import (
	"barlitre/audit"
)

// rules are the detectors, each of which says what it finds in a solved circuit.
var rules = []func(*plant) []*Finding{
	reliefAtCompensator, marginAboveNeed, settingAboveNeed, standByHigh, unloadsAtPressure, unloaderHigh, preChargeOff,
	runsIdle, reliefInWork, wornPump, pumpTooLarge, filterClogged, lineNarrow, sizedApart, chargeHigh, flushingHigh,
	oilTemperature, oilGrade,
}

// Detect lists what is wrong with a solved circuit, with evidence, in the order of the rules; nothing where it was not solved.
func Detect(s *audit.Solution, run *audit.CircuitRun) []*Finding {
	if run.Year == nil || !run.Year.Complete || len(run.Year.Duties) == 0 {
		return nil
	}
	p := newPlant(s, run)
	var out []*Finding
	for _, rule := range rules {
		for _, f := range rule(p) {
			if !p.explained(out, f) {
				out = append(out, f)
			}
		}
	}
	return out
}

// explained reports whether an earlier finding is the cause of a later one: where a relief valve stands at the
// compensator it is open in work as well, and where the motor idles over a relief valve it stands by too high.
func (p *plant) explained(before []*Finding, f *Finding) bool {
	for _, b := range before {
		for _, c := range b.causes() {
			if c == f.key() {
				return true
			}
		}
	}
	return false
}

// causes lists the keys of findings that follow from this one.
func (f *Finding) causes() []string { return f.because }
