package calendar

import (
	"cmp"
	"errors"
	"fmt"
	"slices"
)

// Lengths [s].
const (
	Hour = 3600.0
	Day  = 24 * Hour
	Week = 7 * Day
	Year = 365 * Day
)

// MostWeeks is how many weeks a year has.
const MostWeeks = Year / Week

// Break is a pause within a shift.
type Break struct {
	From, To float64 // s after midnight; not used when Lasts is above 0
	Lasts    float64 // s, for one whose time of day is not given
}

// Shift is when people work at the machine on some days of the week.
type Shift struct {
	Name     string
	From, To float64 // s after midnight, 0 to Day; one that ends at or before its beginning ends on the next day
	Days     [7]bool // on which it begins, from Monday on
	Breaks   []Break
}

// Length is how long a shift lasts, its breaks included [s].
func (s *Shift) Length() float64 {
	if s.To > s.From {
		return s.To - s.From
	}
	return s.To + Day - s.From
}

// pauses are the breaks of a shift from its beginning on, in order. Breaks without a time of day are laid such that the stretches
// between them are alike. The error says which break does not fit.
func (s *Shift) pauses() ([]Stretch, error) {
	var out []Stretch
	untimed, rest := 0, s.Length()
	for _, b := range s.Breaks {
		if b.Lasts > 0 {
			untimed++
			rest -= b.Lasts
		}
	}
	if untimed > 0 && untimed < len(s.Breaks) {
		return nil, errors.New("breaks are given by their times and by their lengths; give all in one way")
	}
	if untimed > 0 && rest <= 0 {
		return nil, fmt.Errorf("its breaks last %s, the shift only %s", span(s.Length()-rest), span(s.Length()))
	}
	at := 0.0
	for _, b := range s.Breaks {
		if untimed > 0 {
			at += rest / float64(untimed+1)
			out = append(out, Stretch{From: at, To: at + b.Lasts, Break: true})
			at += b.Lasts
			continue
		}
		from, to := after(s.From, b.From), after(s.From, b.To)
		if to == 0 {
			to = Day
		}
		if to <= from || to > s.Length() {
			return nil, fmt.Errorf("the break %s - %s does not lie within the shift, %s - %s", Clock(b.From), Clock(b.To), Clock(s.From), Clock(s.To))
		}
		out = append(out, Stretch{From: from, To: to, Break: true})
	}
	slices.SortStableFunc(out, func(a, b Stretch) int { return cmp.Compare(a.From, b.From) })
	worked := s.Length()
	for i, p := range out {
		if worked -= p.To - p.From; i > 0 && p.From < out[i-1].To {
			return nil, fmt.Errorf("breaks overlap at %s", Clock(s.From+p.From))
		}
	}
	if worked <= 0 {
		return nil, fmt.Errorf("its breaks take all of it, %s", span(s.Length()))
	}
	return out, nil
}

// after is how long after one time of day another comes [s].
func after(from, at float64) float64 {
	if d := at - from; d >= 0 {
		return d
	}
	return at - from + Day
}

// Stretch is a time of the week in which a shift works or has its break.
type Stretch struct {
	From, To float64 // s from Monday 0:00
	Shift    int
	Break    bool
}

// WeekOf lays shifts out over a week that repeats itself, in order; what runs past its end goes on at its beginning. The
// error names what does not fit; shift is the place of the shift at fault.
func WeekOf(shifts []Shift) (week []Stretch, shift int, err error) {
	for i := range shifts {
		s := &shifts[i]
		pauses, err := s.pauses()
		if err != nil {
			return nil, i, err
		}
		for d, on := range s.Days {
			if !on {
				continue
			}
			begin, at := float64(d)*Day+s.From, 0.0
			for _, p := range append(pauses, Stretch{From: s.Length(), To: s.Length()}) {
				week = laid(week, Stretch{From: begin + at, To: begin + p.From, Shift: i})
				week = laid(week, Stretch{From: begin + p.From, To: begin + p.To, Shift: i, Break: true})
				at = p.To
			}
		}
	}
	slices.SortStableFunc(week, func(a, b Stretch) int { return cmp.Compare(a.From, b.From) })
	for i := 1; i < len(week); i++ {
		if a, b := week[i-1], week[i]; b.From < a.To {
			at := max(a.Shift, b.Shift)
			return nil, at, fmt.Errorf("it overlaps with the shift %s on %s at %s", shifts[min(a.Shift, b.Shift)].Name, DayNames[int(b.From/Day)%7], Clock(b.From))
		}
	}
	return week, -1, nil
}

// laid puts a stretch into the week, in two pieces where it runs past its end.
func laid(week []Stretch, s Stretch) []Stretch {
	switch {
	case s.To <= s.From:
		return week
	case s.From >= Week:
		s.From, s.To = s.From-Week, s.To-Week
	case s.To > Week:
		late := s
		late.From, late.To, s.To = 0, s.To-Week, Week
		week = append(week, late)
	}
	return append(week, s)
}
