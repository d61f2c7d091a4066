package calendar

import (
	"fmt"
	"math"
)

// State is what a machine does over some hours of the year.
type State string

// The states. Off has no duty.
const (
	Work State = "work"
	Idle State = "idle"
	Hold State = "hold"
	Off  State = "off"
)

// Busy are the states that duties stand for.
var Busy = []State{Work, Idle, Hold}

// Amount is a part of something: a share, or hours a year. The zero Amount is nothing.
type Amount struct {
	Share float64 // 0 to 1
	Hours float64 // s a year; counts when above 0
}

// of returns the part of a whole [s].
func (a Amount) of(whole float64) float64 {
	if a.Hours > 0 {
		return a.Hours
	}
	return a.Share * whole
}

// Use says that a duty stands for a part of a state: a share of what hours leave of it, or hours.
type Use struct {
	Duty string
	Amount
}

// Stop is a planned stop, out of the hours worked.
type Stop struct {
	Name  string
	Hours float64 // s a year
}

// Plan is a year: shifts, and what the machine does in them.
type Plan struct {
	Shifts   []Shift
	Weeks    float64 // worked a year
	Stops    []Stop
	InBreaks State // idle, hold or off
	IdleTime Amount
	HoldTime Amount
	Uses     map[State][]Use
	Standby  float64 // W, of the electric supply while the machine is off
}

// Hours is how a year falls to states [s]. Work, Idle, Hold, Own and Off add up to Year.
type Hours struct {
	Work, Idle, Hold float64
	Own              float64 // of duties that have hours of their own, beside the calendar
	Off              float64

	Worked  float64 // of the shifts in all weeks worked, without breaks and stops
	Breaks  float64 // in those weeks
	Stops   float64
	Away    float64 // weeks that are not worked, all of their hours
	Between float64 // of the weeks worked, outside the shifts

	Duty map[string]float64 // of each duty of the plan
}

// Of returns the hours of a state.
func (h *Hours) Of(s State) float64 {
	return map[State]float64{Work: h.Work, Idle: h.Idle, Hold: h.Hold, Off: h.Off}[s]
}

// tolerance [s] is what rounding of typed hours may miss.
const tolerance = 1.0

// Year sums the hours up. own is the sum of the hours of duties that have their own [s]: they run while the machine would
// be off. The error says in words what does not fit.
func (p *Plan) Year(own float64) (*Hours, error) {
	week, at, err := WeekOf(p.Shifts)
	if err != nil {
		return nil, fmt.Errorf("shift %q: %w", p.Shifts[at].Name, err)
	}
	h := &Hours{Own: own, Duty: map[string]float64{}}
	for _, s := range week {
		if s.Break {
			h.Breaks += (s.To - s.From) * p.Weeks
		} else {
			h.Worked += (s.To - s.From) * p.Weeks
		}
	}
	h.Between = p.Weeks*Week - h.Worked - h.Breaks
	h.Away = Year - p.Weeks*Week
	for _, s := range p.Stops {
		h.Stops += s.Hours
	}
	if h.Stops > h.Worked+tolerance {
		return nil, fmt.Errorf("planned stops take %s, the shifts work only %s a year", span(h.Stops), span(h.Worked))
	}
	h.Worked = math.Max(0, h.Worked-h.Stops)
	h.Idle, h.Hold = p.IdleTime.of(h.Worked), p.HoldTime.of(h.Worked)
	if h.Work = h.Worked - h.Idle - h.Hold; h.Work < -tolerance {
		return nil, fmt.Errorf("idle %s and hold %s are more than the %s that the shifts work", span(h.Idle), span(h.Hold), span(h.Worked))
	}
	h.Work = math.Max(0, h.Work)
	switch p.InBreaks {
	case Idle:
		h.Idle += h.Breaks
	case Hold:
		h.Hold += h.Breaks
	}
	if h.Off = Year - h.Work - h.Idle - h.Hold - own; h.Off < -tolerance {
		return nil, fmt.Errorf("duties with hours of their own take %s, but only %s of the year are left beside the shifts", span(own), span(h.Off+own))
	}
	h.Off = math.Max(0, h.Off)
	return h, p.share(h)
}

// share gives every duty its hours.
func (p *Plan) share(h *Hours) error {
	for _, state := range Busy {
		whole, uses := h.Of(state), p.Uses[state]
		fixed, shares := 0.0, 0.0
		for _, u := range uses {
			if fixed += u.Hours; u.Hours == 0 {
				shares += u.Share
			}
		}
		rest := whole - fixed
		switch {
		case whole > tolerance && len(uses) == 0:
			return fmt.Errorf("%s takes %s a year and has no duty; give it one", state, span(whole))
		case rest < -tolerance:
			return fmt.Errorf("the duties of %s take %s, it has only %s a year", state, span(fixed), span(whole))
		case rest > tolerance && shares == 0:
			return fmt.Errorf("the duties of %s take %s of its %s a year; give one of them a share in place of hours, and it takes the rest", state, span(fixed), span(whole))
		}
		for _, u := range uses {
			if h.Duty[u.Duty] = u.Hours; u.Hours == 0 && shares > 0 {
				h.Duty[u.Duty] = math.Max(0, rest) * u.Share / shares
			}
		}
	}
	return nil
}

// Shares returns what the shares of a state add up to, and whether there are any.
func (p *Plan) Shares(s State) (sum float64, any bool) {
	for _, u := range p.Uses[s] {
		if u.Hours == 0 {
			sum, any = sum+u.Share, true
		}
	}
	return sum, any
}

// StateOf returns the state that a duty stands for, "" for one that is not in the plan.
func (p *Plan) StateOf(duty string) State {
	for _, s := range Busy {
		for _, u := range p.Uses[s] {
			if u.Duty == duty {
				return s
			}
		}
	}
	return ""
}

// InBreak returns the hours a year of a duty that fall in breaks, of the hours that it has.
func (p *Plan) InBreak(duty string, hours float64, h *Hours) float64 {
	all := h.Of(p.InBreaks)
	if p.InBreaks == Off || p.StateOf(duty) != p.InBreaks || !(all > 0) {
		return 0
	}
	return h.Breaks * hours / all
}

// Runs returns the times of the week in which the machine runs: the shifts, and their breaks unless it is off in them. Times of a
// kind that meet are one.
func (p *Plan) Runs() []Stretch {
	week, _, err := WeekOf(p.Shifts)
	if err != nil {
		return nil
	}
	var out []Stretch
	for _, s := range week {
		if s.Break && p.InBreaks == Off {
			continue
		}
		if n := len(out); n > 0 && out[n-1].To == s.From && out[n-1].Break == s.Break {
			out[n-1].To = s.To
		} else {
			out = append(out, Stretch{From: s.From, To: s.To, Break: s.Break})
		}
	}
	return out
}
