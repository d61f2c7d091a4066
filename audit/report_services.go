package audit

import (
	"fmt"

	"barlitre/machines/units"
)

// serviceTable sets the services of a cylinder-switched machine side by side; empty without any.
func serviceTable(p printer, c *CircuitRun) Table {
	if len(c.Services) == 0 {
		return Table{}
	}
	t := Table{Title: "Services of the cylinder-switched machine", Head: []string{""}}
	row := func(name string, of func(*Service) string) {
		cells := []string{name}
		for _, s := range c.Services {
			cells = append(cells, of(s))
		}
		t.add(false, cells...)
	}
	for _, s := range c.Services {
		t.Head = append(t.Head, s.Block)
	}
	row("cylinders", func(s *Service) string { return fmt.Sprintf("%.0f", s.Law.N) })
	row("mean pressure of its flow", func(s *Service) string { return orDash(s.Beside.MeanPressure(), units.Pressure, p) })
	row("flow step: one cylinder more", func(s *Service) string { return orDash(s.Law.Step(s.Beside.MeanSpeed()), units.Flow, p) })
	row("peak flow of one stroke", func(s *Service) string { return orDash(s.Law.StrokePeak(s.Beside.MeanSpeed()), units.Flow, p) })
	row("strokes a second at the low-flow limit", func(s *Service) string { return numberOr(s.Law.Strokes(s.Limit, s.Beside.MeanSpeed()), 3) })
	row("low-flow limit, fraction", func(s *Service) string { return p.share(s.Limit) })
	row("time at work below that", func(s *Service) string {
		if s.Busy <= 0 {
			return "–"
		}
		return p.share(s.Low / s.Busy)
	})
	row("events of one valve a year", func(s *Service) string {
		if !s.Year {
			return "–"
		}
		return units.Number(s.Events, 3)
	})
	row("years to its endurance", func(s *Service) string { return numberOr(s.Life, 3) })
	row("mean loss, likely", func(s *Service) string { return orDash(s.MeanLost[1], units.Power, p) })
	row("mean loss, low to high", func(s *Service) string {
		return units.Range(orDash(s.MeanLost[0], units.Power, p), orDash(s.MeanLost[2], units.Power, p))
	})
	row("the swashplate machine beside it has", func(s *Service) string {
		if s.Fitted {
			return "losses of measured points"
		}
		return "usual losses"
	})
	row("mean loss of that machine", func(s *Service) string { return orDash(s.Beside.LostOther/s.Beside.Seconds, units.Power, p) })
	row("advantage gone at an idle loss of", func(s *Service) string { return s.goneText(p.system) })
	t.Note = serviceNote(c.Services)
	return t
}

// serviceNote says what the figures rest on.
func serviceNote(all []*Service) string {
	text := "Beside each stands a swashplate machine of the same displacement, delivering the same flow at the same pressure and speed at every time step."
	for _, s := range all {
		if s.Assumed {
			text += " Idle and switching losses of the switched machine are assumed (low, likely, high); no open measurement of them is known to us."
			break
		}
	}
	text += " An event is one valve opening and closing once; the controller is taken to wear all valves alike."
	for _, s := range all {
		if s.Beside.Beyond > 0 {
			text += fmt.Sprintf(" For %s the machine beside %s would need more than its full displacement.", units.Format(s.Beside.Beyond/s.Beside.Seconds, units.Percent, 2)+" of the time", s.Block)
		}
	}
	return text
}

// goneText says at which idle loss the advantage is gone, in words where it never is.
func (s *Service) goneText(system units.System) string {
	p, gone := printer{system: system}, s.Beside.Gone()
	switch {
	case !known(gone):
		return "never idles"
	case gone < 0:
		return "has none"
	}
	return p.in(gone, units.Pressure, 3)
}

// Verdict says in one sentence how the service fares beside the other machine.
func (s *Service) Verdict(system units.System) string {
	p := printer{system: system}
	if s.Beside.Seconds <= 0 {
		return "It does not turn in this duty."
	}
	text := fmt.Sprintf("Over the duty it loses %s than %s; %s with the low end of its own losses, %s with the high end.",
		lessText(p, s.Gain[1]), s.Other, lessText(p, s.Gain[0]), lessText(p, s.Gain[2]))
	switch gone := s.Beside.Gone(); {
	case !known(gone):
		return text
	case gone < 0:
		return text + " It has no advantage even without idle loss."
	default:
		return text + fmt.Sprintf(" The advantage is gone at an idle loss of %s; likely is %s.", p.in(gone, units.Pressure, 3),
			units.Around(p.in(s.Idle[1].Loss, units.Pressure, 3), "", p.in(s.Idle[0].Loss, units.Pressure, 3), p.in(s.Idle[2].Loss, units.Pressure, 3)))
	}
}

// lessText writes an advantage in words.
func lessText(p printer, gain float64) string {
	if gain < 0 {
		return p.power(-gain) + " more"
	}
	return p.power(gain) + " less"
}

func orDash(v float64, d units.Dim, p printer) string {
	if !known(v) {
		return "–"
	}
	return p.in(v, d, 3)
}

func numberOr(v float64, digits int) string {
	if !known(v) {
		return "–"
	}
	return units.Number(v, digits)
}
