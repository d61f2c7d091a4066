package audit

import (
	"context"
	"fmt"
	"math"
	"slices"

	"barlitre/audit/thermal"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// HeatStudy is how warm the oil of a circuit gets, with the tank, cooler, air and shifts of the file.
type HeatStudy struct {
	Fault   string // why nothing could be worked out, or ""
	Section HeatSection
	Heating // loads and limits; what a window changes on the fly is the Plant

	Plant thermal.Plant   // as found: the mix of the duties in every shift, the air of an ordinary day
	Week  *thermal.Course // the week that repeats itself
	Hot   *thermal.Course // the same at the air of the hottest day
	Start *thermal.Course // the first two days of a cold start on a winter morning
	Ready float64         // s from that start to working viscosity; NaN when it is not reached in a day

	Needs  []CoolerNeed
	Checks []HeatCheck
	Tanks  []TankCase
	Cycles []CycleRipple

	Points int     // temperatures that the circuit was solved at
	Missed float64 // share by which the table missed the circuit solved where it led to, before that was added
	Few    string  // why not more, or ""
}

// Heating is what a study rests on.
type Heating struct {
	Loads   []thermal.Load // the mix, then each duty
	Hottest int            // load that makes the oil hottest
	Peak    float64        // W, highest shaft power of all duties: the heat when a relief valve takes all
	Oil     circuit.Conditions
	Grade   string // of the oil, as the file has it

	Wanted, Alarm, WinterStart, HotDay, WorkViscosity, Fouling float64
	Fans                                                       int
	Hours                                                      float64 // s a year
}

// Mix is the load of a machine that does its duties in the mix of the year.
const Mix = 0

// studyHeat makes the study; the error is that of the context.
func studyHeat(ctx context.Context, s *Solution, r *CircuitRun, section HeatSection) (*HeatStudy, error) {
	h := &HeatStudy{Section: section, Ready: math.NaN()}
	if h.Fault = h.missing(s); h.Fault != "" {
		return h, nil
	}
	h.Heating = heatingOf(s, r, section)
	t, err := newHeatTable(ctx, s, r, h.WinterStart)
	if err != nil {
		return nil, err
	}
	fault := h.take(s, t)
	if fault == nil {
		err = t.refine(ctx, func() ([]float64, error) {
			if fault = h.take(s, t); fault != nil {
				return nil, fault
			}
			return h.leadsTo()
		})
		if err != nil {
			return nil, err
		}
	}
	if fault == nil {
		fault = h.take(s, t)
	}
	if fault == nil {
		fault = h.follow()
	}
	h.Missed, h.Few = t.Misses, t.Few
	if len(t.loads) > 0 {
		h.Points = len(t.loads[0].At)
	}
	if fault != nil {
		h.Fault, h.Week = fault.Error(), nil
		return h, nil
	}
	h.ripples(r)
	return h, nil
}

// missing says what the file does not give, or "".
func (h *HeatStudy) missing(s *Solution) string {
	sec := h.Section
	_, volume := sec.Values["tank_volume"]
	cooled := sec.Word("cooler") != noCooler
	_, water := sec.Values["water_temperature"]
	_, loop := sec.Values["loop_flow"]
	switch {
	case !volume:
		return "heat: no oil temperature can be worked out without the oil in the tank; give it (tank_volume)"
	case math.IsNaN(s.Air):
		return "heat: no oil temperature can be worked out without the temperature of the air; give air: {temperature: ...}"
	case cooled && sec.stated() == 0:
		return "heat: the cooler has no capacity; give it (cooler_rate), or capacity by flow (cooler_points), or no cooler (cooler: none)"
	case sec.Word("cooler") == waterCooler && !water:
		return "heat: a water cooler needs the temperature at which the water enters (water_temperature)"
	case sec.Word("cooler_place") == placeOffLine && !loop:
		return "heat: an off-line cooler needs the flow of the pump of its loop (loop_flow)"
	}
	return ""
}

func heatingOf(s *Solution, r *CircuitRun, sec HeatSection) Heating {
	n := func(key string) float64 { return sec.number(key, &s.Conditions) }
	h := Heating{Oil: s.Conditions, Grade: s.File.Oil.Grade, Wanted: n("wanted"), Alarm: n("alarm"), WinterStart: n("winter_start"), HotDay: n("hot_day"),
		WorkViscosity: n("work_viscosity"), Fouling: n("fouling"), Fans: int(n("fans"))}
	for _, d := range r.Duties {
		if d.Balance != nil {
			h.Peak = math.Max(h.Peak, d.Balance.PeakShaft)
			h.Hours += d.Duty.Hours
		}
	}
	return h
}

// take makes the plant from what the table knows so far.
func (h *HeatStudy) take(s *Solution, t *heatTable) error {
	shares, all := make([]float64, len(t.duties)), 0.0
	for i, d := range t.duties {
		shares[i] = d.Duty.Hours
		all += d.Duty.Hours
	}
	for i := range shares {
		if shares[i] /= all; all == 0 {
			shares[i] = 1 / float64(len(shares))
		}
	}
	mix, err := thermal.Mix("the duties in the mix of the year", t.loads, shares)
	if err != nil {
		return err
	}
	h.Loads = append([]thermal.Load{mix}, t.loads...)
	h.Plant = h.plant(s.Air)
	if err := h.byCalendar(s.File.Calendar, t); err != nil {
		return err
	}
	if err := h.Plant.Prepare(); err != nil {
		return err
	}
	h.worst()
	return nil
}

// byCalendar lets the machine run as the calendar says: in breaks the duties that stand for them, in the shifts all others
// and what is left of those, so that the week has the hours of the mix.
func (h *HeatStudy) byCalendar(c *Calendar, t *heatTable) error {
	if spans := c.spans(Mix, Mix); len(spans) == 0 {
		return nil
	} else {
		h.Plant.Spans = spans
	}
	in, out := make([]float64, len(t.duties)), make([]float64, len(t.duties))
	allIn, allOut := 0.0, 0.0
	for i, d := range t.duties {
		out[i] = c.InBreak(d.Duty.Name, d.Duty.Hours, c.Hours)
		in[i] = math.Max(0, d.Duty.Hours-out[i])
		allIn, allOut = allIn+in[i], allOut+out[i]
	}
	if !(allIn > 0 && allOut > 0) {
		return nil
	}
	for i := range in {
		in[i], out[i] = in[i]/allIn, out[i]/allOut
	}
	shifts, err := thermal.Mix("the duties in the mix of the shifts", t.loads, in)
	if err != nil {
		return err
	}
	breaks, err := thermal.Mix("the duties in the mix of the breaks", t.loads, out)
	if err != nil {
		return err
	}
	n := len(h.Loads)
	h.Plant.Loads = append(slices.Clone(h.Loads), shifts, breaks)
	h.Plant.Spans = c.spans(n, n+1)
	return nil
}

// worst finds the duty that makes the oil hottest on a hot day; among those that know no end the one with the most heat.
func (h *HeatStudy) worst() {
	top, most := math.Inf(-1), 0.0
	for i := 1; i < len(h.Loads); i++ {
		theta := h.Plant.Steady(i, h.HotDay)
		w, err := h.Loads[i].HeatAt(h.Wanted)
		if err == nil && (theta > top || theta == top && w > most) {
			top, most, h.Hottest = theta, w, i
		}
	}
}

// plant is the machine as the section has it.
func (h *HeatStudy) plant(air float64) thermal.Plant {
	sec := h.Section
	n := func(key string) float64 { return sec.number(key, &h.Oil) }
	or0 := func(key string) float64 {
		if v := n(key); !math.IsNaN(v) {
			return v
		}
		return 0
	}
	rho := rhoC(&h.Oil)
	wall := n("wall_coefficient")
	b := thermal.Body{RhoC: rho, Oil: n("tank_volume") * rho, Walls: wall * n("tank_area"), SteelWalls: wall * n("steel_area")}
	if steel := n("steel_mass") * thermal.SteelHeat; or0("steel_coupling") > 0 && steel > 0 {
		b.Steel, b.Coupling = steel, n("steel_coupling")
	} else {
		b.Oil += steel
	}
	c := thermal.Cooler{Place: placeOf(sec.Word("cooler_place")), Opens: or0("thermostat_opens"), Full: or0("thermostat_full"),
		LoopFlow: or0("loop_flow"), Scale: 1}
	if sec.Word("cooler") != noCooler {
		c.Rate, c.RateFlow, c.Points = sec.Values["cooler_rate"].SI, or0("cooler_flow"), sec.Points
		c.Fan, c.Switched = or0("fan_power"), sec.Word("fan") == fanByThermostat && or0("thermostat_opens") > 0
		if sec.Word("cooler") == waterCooler {
			c.Water = n("water_temperature")
		} else {
			c.Scale = math.Max(0.1, 1-0.1*n("altitude")/1000)
		}
		if c.Place == thermal.OffLine {
			c.LoopPower = n("loop_power")
		}
	}
	shifts := thermal.Shifts{Start: n("shift_start"), Hours: n("shift_hours"), Days: int(n("shift_days"))}
	return thermal.Plant{Body: b, Cooler: c, Air: thermal.Air{Mean: air, Swing: n("air_swing"), Warmest: warmestHour},
		Loads: h.Loads, Spans: shifts.Spans(Mix)}
}

// warmestHour is when the air is warmest, 15:00 (common practice).
const warmestHour = 15 * units.Hour

func placeOf(word string) thermal.Place {
	switch word {
	case placeDrain:
		return thermal.CaseDrain
	case placeFlushing:
		return thermal.Flushing
	case placeOffLine:
		return thermal.OffLine
	}
	return thermal.ReturnLine
}

// leadsTo returns the temperatures that the answers hang on.
func (h *HeatStudy) leadsTo() ([]float64, error) {
	week, err := h.Plant.Periodic()
	if err != nil {
		return nil, err
	}
	top, _ := week.Highest()
	return []float64{week.Ran, top}, nil
}

// With returns the plant with other loads and another mean of the air; with the mix it does what it does.
func (h *HeatStudy) With(load int, air float64) thermal.Plant {
	p := h.Plant
	if p.Air.Mean = air; load == Mix {
		return p
	}
	p.Spans = nil
	for _, s := range h.Plant.Spans {
		s.Load = load
		p.Spans = append(p.Spans, s)
	}
	return p
}

// Periodic follows a plant over the week that repeats itself.
func Periodic(p thermal.Plant) (*thermal.Course, error) {
	if err := p.Prepare(); err != nil {
		return nil, err
	}
	return p.Periodic()
}

// ColdStart follows a plant from a start with all at one temperature, for some time without a pause.
func ColdStart(p thermal.Plant, theta, seconds float64) (*thermal.Course, error) {
	p.Spans = []thermal.Span{{From: 0, To: thermal.Week, Load: Mix}}
	p.Air = thermal.Air{Mean: theta}
	if err := p.Prepare(); err != nil {
		return nil, err
	}
	return p.March(0, seconds, thermal.State{Oil: theta, Steel: theta}, nil)
}

// startFor is how long a start is followed.
const startFor = 12 * units.Hour

// follow fills in the courses and what is read from them.
func (h *HeatStudy) follow() error {
	var err error
	if h.Week, err = h.Plant.Periodic(); err != nil {
		return err
	}
	if h.Hot, err = Periodic(h.With(Mix, h.HotDay)); err != nil {
		return err
	}
	if h.Start, err = ColdStart(h.Plant, h.WinterStart, startFor); err != nil {
		return err
	}
	h.Ready = h.readyAt(h.Start)
	if h.Needs, err = h.needs(); err != nil {
		return err
	}
	if h.Checks, err = h.checks(); err != nil {
		return err
	}
	h.Tanks, err = h.tanks()
	return err
}

// describe says in words how the table was made.
func (h *HeatStudy) describe() string {
	text := fmt.Sprintf("solved at %d oil temperatures", h.Points)
	if h.Few != "" {
		text += " (" + h.Few + ")"
	}
	return text
}
