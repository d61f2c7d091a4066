package sitecheck

import (
	"fmt"
	"math"
	"strings"

	"barlitre/audit"
	"barlitre/machines/units"
)

// Reading is a reading beside the model.
type Reading struct {
	State, Point string
	Read, Model  float64 // SI; Model NaN where it says nothing
	Off          float64 // in spreads of a sound machine
	Words        string
}

// Verdict is what the readings say together.
type Verdict struct {
	Readings []Reading
	Fault    *Fault  // that explains them best, nil where none is needed or none does
	Share    float64 // of what differs that it explains, 0..1
	Text     string
}

// Compare sets the readings of a file beside the plan. A model explains the readings by the sum of the squares of their
// distances to it, each in spreads of a sound machine; a fault is named when it leaves less than half of what the sound
// model leaves, and less than any other.
func (p *Plan) Compare(readings []audit.Reading) Verdict {
	v := Verdict{}
	var own []audit.Reading
	for _, r := range readings {
		if pt, ok := p.point(r.Point); ok {
			own = append(own, r)
			v.Readings = append(v.Readings, p.beside(r, pt))
		}
	}
	sound, compared := p.distance(own, p.Sound)
	switch {
	case len(own) == 0:
		v.Text = "Nothing was read yet. Type what the gauges show; each field says what the model expects there."
		return v
	case compared == 0:
		v.Text = "The model says nothing of what was read in these states: the duty has no such state."
		return v
	case sound <= float64(compared) && !anyOff(v.Readings):
		v.Text = fmt.Sprintf("What was read agrees with the model: %s, each within what gauges and a sound machine scatter.", count(compared))
		return v
	}
	left := sound
	for _, x := range p.Faults {
		for _, m := range x.model {
			if m == nil {
				continue
			}
			if d, n := p.distance(own, m); n == compared && d < left {
				v.Fault, left = x, d
			}
		}
	}
	if v.Fault != nil && left < sound/2 {
		v.Share = 1 - left/sound
		share := units.Format(v.Share, units.Percent, 2)
		if v.Share > 0.98 {
			share = "nearly all"
		}
		v.Text = fmt.Sprintf("Most likely: %s. It explains %s of what differs. %s", v.Fault.Name, share, v.Fault.Do)
		if compared < 3 {
			v.Text += " That is a guess from few readings: read the other states as well."
		}
		return v
	}
	v.Fault = nil
	v.Text = "No single fault that was tried explains this. " + p.hint(v.Readings)
	return v
}

func count(n int) string {
	if n == 1 {
		return "one reading"
	}
	return fmt.Sprintf("%d readings", n)
}

func anyOff(rs []Reading) bool {
	for _, r := range rs {
		if r.Off > 2 {
			return true
		}
	}
	return false
}

func (p *Plan) point(name string) (Point, bool) {
	for _, pt := range p.Points {
		if pt.Name == name {
			return pt, true
		}
	}
	return Point{}, false
}

// distance is how far readings lie from a model, and how many could be compared.
func (p *Plan) distance(rs []audit.Reading, m Model) (sum float64, n int) {
	for _, r := range rs {
		pt, _ := p.point(r.Point)
		want := m[at(r.State, r.Point)].Mean
		if math.IsNaN(want) || math.IsNaN(p.Sound[at(r.State, r.Point)].Mean) || pt.Dim == units.Temperature {
			continue
		}
		d := (r.SI - want) / spread(pt, p.Sound[at(r.State, r.Point)].Mean)
		sum, n = sum+d*d, n+1
	}
	return sum, n
}

func (p *Plan) beside(r audit.Reading, pt Point) Reading {
	m := p.Sound[at(r.State, r.Point)].Mean
	out := Reading{State: r.State, Point: r.Point, Read: r.SI, Model: m}
	if math.IsNaN(m) {
		out.Words = "the model says nothing here"
		return out
	}
	out.Off = math.Abs(r.SI-m) / spread(pt, m)
	diff := units.Format(math.Abs(r.SI-m), differenceUnit(pt.Dim, p.System), 2)
	more := "more"
	if r.SI < m {
		more = "less"
	}
	switch {
	case out.Off <= 1:
		out.Words = "agrees"
	case pt.Dim == units.Temperature && pt.Block != "":
		out.Words = diff + " " + map[string]string{"more": "warmer than the tank: oil passes " + pt.Block, "less": "colder than the tank: nothing passes"}[more]
	case pt.Dim == units.Temperature:
		out.Words = diff + " " + map[string]string{"more": "warmer", "less": "colder"}[more] + " than the file says: put it there, every loss hangs on it"
	case m > 0 && r.SI/m >= 1.8:
		out.Words = units.Number(r.SI/m, 2) + " times the model"
	case m > 0:
		out.Words = fmt.Sprintf("%s %s (%s)", diff, more, units.Format((r.SI-m)/m, units.Percent, 2))
	default:
		out.Words = diff + " where nothing is expected"
	}
	return out
}

func differenceUnit(d units.Dim, system units.System) units.Unit {
	if d == units.Temperature {
		u, _ := units.ParseUnit("K", units.Temperature)
		return u
	}
	return units.Preferred(d, system)
}

// hint says where to look when no fault fits.
func (p *Plan) hint(rs []Reading) string {
	var say []string
	for _, r := range rs {
		pt, _ := p.point(r.Point)
		switch {
		case r.State == "stopped" && r.Off > 2 && pt.Dim == units.Pressure:
			say = append(say, "Pressure stands at "+pt.Place+" with the machine stopped: oil is trapped, or the gauge has an offset. Treat it as live.")
		case r.State == "stopped" && r.Off > 2 && pt.feed:
			say = append(say, "Power is drawn with the machine stopped: something else hangs on this feed, or a drive stays live.")
		case pt.feed && r.Off > 2 && r.Read < 0.6*r.Model && r.State != "stopped":
			say = append(say, "The power read is far below the model: one clamp may be reversed, or a phase missing.")
		}
	}
	if len(say) == 0 {
		say = append(say, "Check scaling and zero of the gauges, then whether the drawing, its settings and the duty are those of this machine.")
	}
	return strings.Join(say, " ")
}
