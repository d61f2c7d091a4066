package audit

import (
	"math"

	"barlitre/audit/thermal"
)

// Trial is what a window changes on the fly: the table of heat stays, so the courses follow at once.
type Trial struct {
	Rate float64 // W/K of the cooler, as the file states it; 0 = no cooler
	Tank float64 // oil in the tank over that of the file
	Air  float64 // K, added to the air of all days
}

// Untried is the trial that changes nothing.
func (h *HeatStudy) Untried() Trial { return Trial{Rate: h.Rate(), Tank: 1} }

// Rate is the capacity of the cooler as the file states it [W/K], 0 without one.
func (h *HeatStudy) Rate() float64 {
	if h.Section.Word("cooler") == noCooler {
		return 0
	}
	return h.Section.stated()
}

// Tried is a study with a trial in it.
type Tried struct{ Week, Hot, Start *thermal.Course }

// Try follows the plant of a trial over an ordinary week and a hot one, and after a winter start.
func (h *HeatStudy) Try(x Trial) (t Tried, err error) {
	p := h.tried(x)
	if t.Week, err = Periodic(p); err != nil {
		return t, err
	}
	p.Air.Mean = h.HotDay + x.Air
	if t.Hot, err = Periodic(p); err != nil {
		return t, err
	}
	t.Start, err = ColdStart(p, h.WinterStart+x.Air, startFor)
	return t, err
}

func (h *HeatStudy) tried(x Trial) thermal.Plant {
	p := h.Resized(h.Plant, x.Tank)
	p.Air.Mean += x.Air
	c := &p.Cooler
	switch most := p.Body.RhoC * c.RateFlow; {
	case x.Rate <= 0:
		c.Rate, c.Points = 0, nil
	case len(c.Points) > 0:
		c.Scale *= x.Rate / h.Section.stated()
	default:
		c.Rate = x.Rate
		if c.RateFlow > 0 && c.Rate >= 0.95*most { // so large a cooler is stated at more oil
			c.RateFlow = 2 * c.Rate / p.Body.RhoC
		}
	}
	return p
}

// Largest is how far a slider for the capacity of the cooler goes [W/K]: twice what is needed or there.
func (h *HeatStudy) Largest() float64 {
	most := math.Max(100, h.Rate())
	for _, n := range h.Needs {
		if n.Fault == "" && !math.IsInf(n.Rate, 1) {
			most = math.Max(most, n.Rate)
		}
	}
	return 2 * most
}
