package document

import (
	"fmt"

	"barlitre/audit"
	"barlitre/circuit/duty"
)

// dutyEdit makes one random edit of axes, duties and phases.
func (p *player) dutyEdit(f *audit.File) (what string, err error) {
	du, axis, n := pick(p, f.Duties), pick(p, f.Axes).Name, p.r.IntN(1000)
	name, stages := "none", 1
	for i, d := range f.Duties {
		if d == du {
			name, stages = d.Name, len(f.Stages[i])+1
		}
	}
	words := append(audit.StageWords(), "")
	key := pick(p, []string{"name", "lasts", "ramp", axis + "." + pick(p, words)})
	switch p.r.IntN(9) {
	case 0:
		return "load side", p.d.SetAxisLoad(axis, pick(p, []string{"", "platen", "hook: and block #2"}))
	case 1:
		return "kind of axis", p.d.SetAxisKind(axis, duty.AxisKind(n%2))
	case 2:
		if len(f.Duties) > 5 {
			return "remove duty", nil
		}
		return "copy duty", p.d.CopyDuty(name, fmt.Sprintf("duty, %d", n%7))
	case 3:
		return "staged duty", p.d.AddStagedDuty(fmt.Sprintf("duty %d", n%4), [][]string{{"name", "out", "lasts", "2 s", axis + ".load", "5 kN"}, {"name", "in: slow", "lasts", "1 s"}})
	case 4, 5:
		value := pick(p, []string{"", "0.5 s", "3 s", "10 mm", "-2 rad", "0.1 m/s", "4 kN", "7 N m", "x # y"})
		return "stage " + key, p.d.SetStage(name, p.r.IntN(stages), key, value)
	case 6:
		return "stage added", p.d.AddStage(name, p.r.IntN(stages), fmt.Sprintf("phase %d", n))
	case 7:
		return "stage removed", p.d.RemoveStage(name, p.r.IntN(stages))
	}
	if n%3 == 0 {
		return "points of stages", p.d.StagesToPoints(name)
	}
	return "close", p.d.CloseStrokes(name, axis)
}
