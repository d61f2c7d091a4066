package audit

import (
	"barlitre/circuit"
	"math"

	"barlitre/audit/thermal"
	"barlitre/machines/units"
)

// CoolerNeed is the cooler that keeps the oil at the temperature wanted.
type CoolerNeed struct {
	Case string // of load and air
	Load int
	Air  float64 // K, entering
	thermal.Need
	Fault string // why none does, or ""
}

// Asked is the capacity that is asked for [W/K]: heat over the difference of the entering temperatures as they are printed, and
// what the march over the parts of the flow asks for where that is more.
func (n *CoolerNeed) Asked() float64 {
	if d := n.Entering - n.Coolant; n.Rate > 0 && d > 0 {
		return math.Max(n.Rate, n.Heat/d)
	}
	return n.Rate
}

// needs sizes the cooler for an ordinary day, and for the duty that asks for the largest cooler in the hottest hour. Walls are credited.
func (h *HeatStudy) needs() ([]CoolerNeed, error) {
	var out []CoolerNeed
	for _, c := range []CoolerNeed{
		{Case: "mix, ordinary day", Load: Mix, Air: h.Plant.Air.Mean},
		{Case: "mix, hottest hour", Load: Mix, Air: h.HotDay + h.Plant.Air.Swing},
		{Case: "heaviest duty, hottest hour", Load: h.heaviest(), Air: h.HotDay + h.Plant.Air.Swing},
	} {
		n, err := h.Plant.Need(c.Load, h.Wanted, c.Air, true)
		if err != nil {
			c.Fault = err.Error()
		}
		c.Need = n
		switch {
		case c.Fault == "" && n.Flow <= 0 && n.Heat > 0:
			c.Fault = "no oil flows there: a cooler in this place cools nothing"
		case c.Fault == "" && math.IsInf(n.Rate, 1):
			c.Fault = "too little oil flows there to carry so much heat: choose another place, or an off-line loop"
		}
		out = append(out, c)
	}
	return out, nil
}

// heaviest is the duty that asks for the largest cooler; where no cooler in its place is enough for any, the worst one.
func (h *HeatStudy) heaviest() int {
	load, most := h.Hottest, -1.0
	for i := 1; i < len(h.Loads); i++ {
		n, err := h.Plant.Need(i, h.Wanted, h.HotDay+h.Plant.Air.Swing, true)
		if err == nil && n.Flow > 0 && !math.IsInf(n.Rate, 1) && n.Rate > most {
			load, most = i, n.Rate
		}
	}
	return load
}

// Dry names the duties in which no oil passes the cooler: nothing is cooled while they go on.
func (h *HeatStudy) Dry() []string {
	if h.Plant.Cooler.None() {
		return nil
	}
	var out []string
	for i := 1; i < len(h.Loads); i++ {
		if n, _ := h.Plant.Need(i, h.Wanted, h.Plant.Air.Mean, true); n.Flow <= 0 && n.Put > 0 {
			out = append(out, h.Loads[i].Name)
		}
	}
	return out
}

// HeatCheck is one case that a cooler must stand.
type HeatCheck struct {
	Case    string
	Highest float64 // K, of the oil; +Inf when it has no end; NaN where the case asks for a time
	Time    float64 // s to the alarm or to readiness; NaN when it does not come, or is not asked for
	Passed  bool
	Text    string // what it means
	// AboveAlarm says that the oil comes to the alarm; of a fault Time says it.
	AboveAlarm bool
	Fault      bool // a fault of the machine, which no cooler need stand: the time to the alarm is what counts
}

// checks works out the cases.
func (h *HeatStudy) checks() ([]HeatCheck, error) {
	top := func(c *thermal.Course) float64 { v, _ := c.Highest(); return v }
	out := []HeatCheck{h.below("ordinary day, mix of duties", top(h.Week)), h.below("hot day, mix of duties", top(h.Hot))}
	for _, x := range []struct {
		name  string
		scale float64
	}{
		{"hot day, worst duty all shift", 1}, {"hot day, worst duty, cooler fouled", 1 / h.Fouling},
	} {
		p := h.With(h.Hottest, h.HotDay)
		p.Cooler.Scale *= x.scale
		c, err := Periodic(p)
		if err != nil {
			return nil, err
		}
		out = append(out, h.below(x.name, top(c)))
	}
	return append(out, h.fanOff(), h.reliefBlows(), h.winter()), nil
}

func (h *HeatStudy) below(name string, theta float64) HeatCheck {
	c := HeatCheck{Case: name, Highest: theta, Time: math.NaN(), Passed: theta <= h.Wanted+0.05}
	switch {
	case c.Passed:
		c.Text = "at or below the temperature wanted"
	case theta < h.Alarm:
		c.Text = "above the temperature wanted, below the alarm"
	default:
		c.Text, c.AboveAlarm = "above the alarm", true
	}
	return c
}

// worstCheck is the case without a fault in which the oil comes highest above the temperature wanted; nil where none does.
func (h *HeatStudy) worstCheck() *HeatCheck {
	var worst *HeatCheck
	for i := range h.Checks {
		k := &h.Checks[i]
		if !k.Passed && !k.Fault && !math.IsNaN(k.Highest) && (worst == nil || k.Highest > worst.Highest) {
			worst = k
		}
	}
	return worst
}

// alarmLevel tells a machine that comes to the alarm by its own days, the first two cases, from
// one that does so in a case harder than they are.
func (h *HeatStudy) alarmLevel() circuit.Level {
	if h.Checks[0].AboveAlarm || h.Checks[1].AboveAlarm {
		return circuit.Warns
	}
	return circuit.Caution
}

// faultHours is how long a fault is followed.
const faultHours = 24 * units.Hour

// fanOff is the hot day with one fan less, from the warmest moment of the week on.
func (h *HeatStudy) fanOff() HeatCheck {
	c := HeatCheck{Case: "hot day, one fan off", Fault: true, Time: math.NaN(), Highest: math.NaN()}
	switch {
	case h.Plant.Cooler.None():
		c.Text, c.Passed = "there is no cooler", true
		return c
	case h.Section.Word("cooler") == waterCooler:
		c.Case = "hot day, cooling water off"
	}
	p := h.With(h.Hottest, h.HotDay)
	share := 0.0
	if h.Section.Word("cooler") == airCooler {
		share = float64(h.Fans-1) / float64(max(1, h.Fans))
	}
	if p.Cooler.Scale *= share; share == 0 {
		p.Cooler.Rate, p.Cooler.Points = 0, nil
	}
	return h.toAlarm(c, p)
}

// reliefBlows turns the highest shaft power into heat, which the return line carries.
func (h *HeatStudy) reliefBlows() HeatCheck {
	c := HeatCheck{Case: "relief valve takes all the power", Fault: true, Time: math.NaN(), Highest: math.NaN()}
	p := h.With(Mix, h.HotDay)
	flow := 0.0
	for _, l := range h.Loads {
		for _, at := range l.At {
			for _, b := range at.Lines[thermal.ReturnLine] {
				flow = math.Max(flow, b.Flow)
			}
		}
	}
	at := thermal.Point{Theta: h.Wanted, Heat: h.Peak}
	if flow > 0 {
		at.Lines[thermal.ReturnLine] = thermal.Line{{Share: 1, Flow: flow, Heat: h.Peak}}
	}
	p.Loads = []thermal.Load{{Name: c.Case, At: []thermal.Point{at}}}
	p.Spans = []thermal.Span{{From: 0, To: thermal.Week}} // whatever the machine does
	return h.toAlarm(c, p)
}

// toAlarm follows a plant with a fault from the warmest moment of a hot week on, without a pause.
func (h *HeatStudy) toAlarm(c HeatCheck, p thermal.Plant) HeatCheck {
	load := 0
	if len(p.Spans) > 0 {
		load = p.Spans[0].Load
	}
	p.Spans = []thermal.Span{{From: 0, To: thermal.Week, Load: load}}
	if err := p.Prepare(); err != nil {
		c.Text = err.Error()
		return c
	}
	theta, t := h.Hot.Highest()
	if theta >= h.Alarm {
		c.Time, c.Highest, c.Text = 0, theta, "a hot day alone brings the alarm"
		return c
	}
	run, err := p.March(t, t+faultHours, thermal.State{Oil: theta, Steel: theta}, func(_ float64, s thermal.State) bool { return s.Oil >= h.Alarm })
	if err != nil {
		c.Text = err.Error()
		return c
	}
	if n := len(run.T) - 1; run.Oil[n] >= h.Alarm {
		c.Time = 0
		if n > 0 {
			c.Time = run.T[n-1] - t + (run.T[n]-run.T[n-1])*(h.Alarm-run.Oil[n-1])/(run.Oil[n]-run.Oil[n-1])
		}
		c.Highest, c.Text = p.Steady(load, p.Air.Highest()), "time until the alarm, from the warmest moment of a hot day on"
		return c
	}
	c.Highest, _ = run.Highest()
	c.Passed, c.Text = true, "the alarm is not reached within a day"
	return c
}

// winter is the start on the coldest morning.
func (h *HeatStudy) winter() HeatCheck {
	c := HeatCheck{Case: "winter start, to working viscosity", Highest: math.NaN(), Time: h.Ready, Passed: !math.IsNaN(h.Ready)}
	switch {
	case h.Oil.Oil.Nu40 <= 0:
		c.Text = "the viscosity in the cold is not known; give the grade of the oil"
	case !c.Passed:
		c.Text = "not reached: the oil stays thick; see the thermostat, or warm it before work"
	default:
		c.Text = "with the duties in their mix from the first minute"
	}
	return c
}

// TankCase is the same machine with another tank.
type TankCase struct {
	Volume, Tau float64 // m³, s with what the cooler takes
	Highest     float64 // K, hot day
	Swing       float64 // K between the warmest and the coldest oil while a week repeats itself
	Rate        float64 // W/K needed for the hottest duty in the hottest hour
}

// tanks tries other volumes; the walls grow with the surface of a tank of the same shape.
func (h *HeatStudy) tanks() ([]TankCase, error) {
	var out []TankCase
	for _, k := range []float64{0.5, 1, 2, 4} {
		p := h.Resized(h.With(Mix, h.HotDay), k)
		c, err := Periodic(p)
		if err != nil {
			return nil, err
		}
		if err := p.Prepare(); err != nil {
			return nil, err
		}
		n, _ := p.Need(h.heaviest(), h.Wanted, h.HotDay+p.Air.Swing, true)
		top, _ := c.Highest()
		low := top
		for _, v := range c.Oil {
			low = math.Min(low, v)
		}
		out = append(out, TankCase{Volume: k * h.Section.number("tank_volume", &h.Oil), Tau: p.Body.TimeConstant(h.takes()), Highest: top, Swing: top - low, Rate: n.Rate})
	}
	return out, nil
}

// Resized is a plant whose tank has k times the oil: its walls grow by k^(2/3), as those of a tank of the same shape.
func (h *HeatStudy) Resized(p thermal.Plant, k float64) thermal.Plant {
	oil := h.Section.number("tank_volume", &h.Oil) * rhoC(&h.Oil)
	p.Body.Oil += (k - 1) * oil
	p.Body.Walls *= math.Pow(k, 2.0/3)
	return p
}
