package audit

// ServiceResult is one service of a cylinder-switched machine beside another machine that does the same. Three numbers
// are for low, likely and high idle and switching losses.
type ServiceResult struct {
	Block        string    `json:"block"`
	Cylinders    float64   `json:"cylinders"`
	OverYear     bool      `json:"over_year"` // else over one cycle
	EventsOfOne  Number    `json:"events_of_one_valve"`
	Endurance    Number    `json:"endurance_events"`
	Life         Number    `json:"years_to_endurance"`
	BusyS        Number    `json:"at_work_s"`
	LowFlowS     Number    `json:"below_low_flow_limit_s"`
	MeanPressure Number    `json:"mean_pressure_Pa"`
	FlowStep     Number    `json:"flow_step_m3_s"`
	Beside       string    `json:"compared_with"`
	IdleLoss     [3]Number `json:"idle_loss_Pa"`
	EventEnergy  [3]Number `json:"event_energy_J"`
	MeanLoss     [3]Number `json:"mean_loss_W"`
	OtherLoss    Number    `json:"mean_loss_of_the_other_W"`
	GoneAt       Number    `json:"advantage_gone_at_idle_loss_Pa"` // below 0 there is none; null when no cylinder idles
}

func serviceResults(c *CircuitRun) []ServiceResult {
	var out []ServiceResult
	for _, s := range c.Services {
		r := ServiceResult{Block: s.Block, Cylinders: s.Law.N, OverYear: s.Year, EventsOfOne: Number(s.Events), Endurance: Number(s.Endures), Life: Number(s.Life),
			BusyS: Number(s.Busy), LowFlowS: Number(s.Low), MeanPressure: Number(s.Beside.MeanPressure()), FlowStep: Number(s.Law.Step(s.Beside.MeanSpeed())),
			Beside: s.Other, OtherLoss: Number(s.Beside.LostOther / s.Beside.Seconds), GoneAt: Number(s.Beside.Gone())}
		for i, e := range s.Idle {
			r.IdleLoss[i], r.EventEnergy[i], r.MeanLoss[i] = Number(e.Loss), Number(e.Event), Number(s.MeanLost[i])
		}
		out = append(out, r)
	}
	return out
}
