package cycles

import "math"

// begin is where the cycles of a run begin that begins at from. One that begins with the
// recording has its first cycle cut: cycles then begin with the work after its longest
// stand, unless a whole period lies before that. A recording that begins at rest has nothing cut.
func begin(in Input, s []Stretch, from, period float64) float64 {
	if from > in.T[0] {
		return from
	}
	at, longest, stands := from, 0.0, math.Inf(1) // since when nothing moves
	for _, x := range s {
		if x.State != Work {
			continue
		}
		if l := x.From - stands; l > longest && stands < from+period {
			at, longest = x.From, l
		}
		stands = x.To
	}
	if at-period >= from-lacking*period {
		return from
	}
	return at
}

// worksFor is how long after the start of a cycle its work ends, by the first one. Work that
// begins late in the period belongs to the next one, which may come early.
func worksFor(s []Stretch, from, period float64) float64 {
	end := period
	for _, x := range s {
		if x.State == Work && x.To > from && x.From < from+period*(1-late) {
			end = math.Min(x.To-from, period)
		}
	}
	return end
}

// late is our choice.
const late = 0.15
