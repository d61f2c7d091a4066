package audit

import (
	"math"
)

// WarmthResult says how warm the oil of a circuit gets. Fault says why it is not known, and then there is nothing else.
type WarmthResult struct {
	Fault string `json:"fault,omitempty"`

	Wanted  Number `json:"oil_wanted_K"`
	Alarm   Number `json:"alarm_K"`
	Running Number `json:"oil_mean_while_running_K"` // of the week that repeats itself
	Highest Number `json:"oil_highest_K"`            // of an ordinary week
	HotDay  Number `json:"oil_highest_hot_day_K"`
	Ready   Number `json:"winter_start_to_working_viscosity_s"` // null when it is not reached
	Tau     Number `json:"time_constant_s"`                     // with what the cooler takes

	Cooler    string             `json:"cooler"`       // none, air or water
	Place     string             `json:"cooler_place"` // return, case drain, flushing or off-line
	Drawn     string             `json:"cooler_drawn_as,omitempty"`
	Installed Number             `json:"installed_W_per_K"`
	Needed    []CoolerNeedResult `json:"needed"`
	Checks    []HeatCheckResult  `json:"checks"`

	DrawnSo     Number `json:"kWh_drawn_with_oil_so_warm"` // by the machine without its cooling
	DrawnStated Number `json:"kWh_drawn_at_stated_oil"`    // the same at the temperature of the energy balance
}

// CoolerNeedResult is the cooler that keeps the oil at the temperature wanted in one case.
type CoolerNeedResult struct {
	Case     string `json:"case"`
	Coolant  Number `json:"coolant_K"`
	Heat     Number `json:"heat_to_take_W"`
	Rate     Number `json:"W_per_K"` // null where no cooler does
	Entering Number `json:"oil_entering_K"`
	Flow     Number `json:"oil_flow_m3_s"`
	Fault    string `json:"fault,omitempty"`
}

// HeatCheckResult is one row of the check matrix.
type HeatCheckResult struct {
	Case    string `json:"case"`
	Passed  bool   `json:"passed"`
	Highest Number `json:"oil_highest_K"` // null without an end, or where a time is asked for
	Seconds Number `json:"seconds"`       // to the alarm, or to working viscosity
	Text    string `json:"text"`
}

// warmthResult is nil where the file says nothing of tank and cooler.
func (s *Solution) warmthResult(h *HeatStudy) *WarmthResult {
	if h == nil {
		return nil
	}
	if h.Fault != "" {
		nan := Number(math.NaN())
		return &WarmthResult{Fault: h.Fault, Wanted: nan, Alarm: nan, Running: nan, Highest: nan, HotDay: nan, Ready: nan, Tau: nan, Installed: nan,
			Needed: []CoolerNeedResult{}, Checks: []HeatCheckResult{}, DrawnSo: nan, DrawnStated: nan}
	}
	highest, _ := h.Week.Highest()
	hot, _ := h.Hot.Highest()
	found, stated := h.AtFound(s.Oil)
	r := &WarmthResult{Wanted: Number(h.Wanted), Alarm: Number(h.Alarm), Running: Number(h.Week.Ran), Highest: Number(highest), HotDay: Number(hot),
		Ready: Number(h.Ready), Tau: Number(h.Plant.Body.TimeConstant(h.takes())), Cooler: h.Section.Word("cooler"), Place: h.Section.Word("cooler_place"),
		Drawn: h.Section.Drawn.Block, Installed: Number(h.Rate()), Needed: []CoolerNeedResult{}, Checks: []HeatCheckResult{},
		DrawnSo: Number(found / kWh), DrawnStated: Number(stated / kWh)}
	for _, n := range h.Needs {
		rate := n.Asked()
		if n.Fault != "" {
			rate = math.NaN()
		}
		r.Needed = append(r.Needed, CoolerNeedResult{n.Case, Number(n.Coolant), Number(n.Heat), Number(rate), Number(n.Entering), Number(n.Flow), n.Fault})
	}
	for _, c := range h.Checks {
		r.Checks = append(r.Checks, HeatCheckResult{c.Case, c.Passed, Number(c.Highest), Number(c.Time), c.Text})
	}
	return r
}
