package circuit

import "barlitre/circuit/duty"

func Check(c *Circuit, axes []duty.Axis, duties []*duty.Duty) []Finding { return nil }
