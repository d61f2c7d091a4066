package machines

import (
	"fmt"
	"strings"

	"barlitre/machines/units"
)

// poorFit is the rms from which a law does not describe its points well (our choice).
const poorFit = 0.03

// warn says what to distrust.
func (f *Fit) warn(apart [2][]int) {
	for _, columns := range apart {
		if len(columns) > 1 {
			f.Warnings = append(f.Warnings, fmt.Sprintf("the points cannot tell %s apart: their sum holds, each alone does not. Measure at speeds and pressures further apart", named(columns)))
		}
	}
	if n := len(Speeds(f.Points)); n < 3 {
		f.Warnings = append(f.Warnings, fmt.Sprintf("the points lie at %s only; at other speeds the law is a guess", [...]string{"no speed", "one speed", "2 speeds"}[n]))
	}
	if f.RMS > poorFit {
		f.Warnings = append(f.Warnings, fmt.Sprintf("the law leaves %s efficiency points rms: look at the residuals, and for points that do not belong", units.Number(100*f.RMS, 2)))
	}
}

func named(columns []int) string {
	var names []string
	for _, c := range columns {
		names = append(names, termNames[c])
	}
	last := len(names) - 1
	return strings.Join(names[:last], ", ") + " and " + names[last]
}
