package audit

import (
	"math"

	"barlitre/circuit/duty"
)

// StrokeDrift returns how far an axis ends from where it began [m or rad], of the
// way it makes in all; known is false when the duty does not give its motion. A
// repeated duty adds the drift with every cycle.
func StrokeDrift(d *duty.Duty, axis string) (drift, way float64, known bool) {
	if t := d.Track(axis, duty.Speed); t != nil && len(t.Values) == len(d.Time) {
		for i := 1; i < len(d.Time); i++ {
			h := (d.Time[i] - d.Time[i-1]) / 2
			drift += h * (t.Values[i] + t.Values[i-1])
			way += h * (math.Abs(t.Values[i]) + math.Abs(t.Values[i-1]))
		}
		return nothing(drift, way), way, len(d.Time) > 1
	}
	if t := d.Track(axis, duty.Position); t != nil && len(t.Values) > 1 {
		for i := 1; i < len(t.Values); i++ {
			way += math.Abs(t.Values[i] - t.Values[i-1])
		}
		return nothing(t.Values[len(t.Values)-1]-t.Values[0], way), way, true
	}
	return 0, 0, false
}
