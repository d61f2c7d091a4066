package circuit

import "barlitre/circuit/duty"

// TracksOf returns what tracks of a duty a block has a use for.
func TracksOf(b *Block) []duty.What {
	k := KindNamed(b.Kind)
	switch {
	case k == nil:
	case b.Kind == kindPressurePoint:
		return []duty.What{duty.MeasuredPressure}
	case b.Kind == kindFlowPoint:
		return []duty.What{duty.MeasuredFlow}
	case b.Kind == kindElectricMotor:
		return []duty.What{duty.MeasuredPower}
	case isPQ(b):
		return []duty.What{duty.SetPressure, duty.SetFlow}
	case (isValve(b) || k.WordOf(b, "control") == "commanded") && follows(b) == "" && b.Word("directs") == "":
		return []duty.What{duty.Command}
	}
	return nil
}
