package audit

import (
	"math"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// YearResult is the year of a circuit: every duty times its cycles a year.
type YearResult struct {
	Complete      bool             `json:"complete"`       // every duty with hours was solved
	MissingDuties []string         `json:"missing_duties"` // those that were not
	Hours         float64          `json:"hours"`
	Duties        []YearDutyResult `json:"duties"`

	Drawn        float64      `json:"kWh_drawn"`
	Returned     float64      `json:"kWh_returned"`
	Fuel         float64      `json:"kWh_fuel"` // part of kWh_drawn that engines burn
	FuelLitres   float64      `json:"fuel_L"`
	WorkPositive float64      `json:"kWh_work_positive"`
	WorkNegative float64      `json:"kWh_work_negative"`
	Stored       float64      `json:"kWh_stored"`
	HeatToOil    float64      `json:"kWh_heat_to_oil"`
	Losses       []YearLoss   `json:"losses"`
	States       StatesResult `json:"states"`
	Calendar     []YearState  `json:"calendar"` // hours and energy by state of the calendar; they add up to 8760 h and kWh_drawn; empty without one

	MeanHeat Number `json:"mean_heat_to_oil_W"` // over the running hours
	Cooler   Number `json:"cooler_W_per_K"`     // for that, between entering oil and entering air
	Oil      Number `json:"oil_K"`
	Air      Number `json:"air_K"`

	EnergyCost     Number `json:"energy_cost"`
	Credit         Number `json:"credit_for_returned"`
	CreditReturned bool   `json:"returned_is_credited"`
	PricePerKWh    Number `json:"price_per_kWh"`
	Currency       string `json:"currency"`
	CO2            Number `json:"co2_kg"`
	CO2PerKWh      Number `json:"co2_kg_per_kWh"`
	CO2Year        string `json:"co2_year"`
	CO2Basis       string `json:"co2_basis"`
}

// YearDutyResult is one duty of the year.
type YearDutyResult struct {
	Name        string      `json:"name"`
	Hours       float64     `json:"hours"`
	State       string      `json:"state"` // of the calendar: work, idle, hold; "" for hours of its own
	Cycles      float64     `json:"cycles"`
	Repeats     bool        `json:"repeats"`
	Drawn       float64     `json:"kWh_drawn"`
	MeanSupply  float64     `json:"mean_drawn_W"`
	Demand      float64     `json:"demand_15min_W"`
	DemandBasis DemandBasis `json:"demand_basis"`
	MeanHeat    float64     `json:"mean_heat_to_oil_W"`
	Cooler      Number      `json:"cooler_W_per_K"`
}

// YearLoss is one loss over the year.
type YearLoss struct {
	Block   string       `json:"block"`
	Kind    string       `json:"kind"`
	Sink    circuit.Sink `json:"sink"`
	KWh     float64      `json:"kWh"`
	Driving float64      `json:"kWh_while_load_drives"`
}

// StateResult is the time and the energy drawn in one state of the machine.
type StateResult struct {
	Hours     float64 `json:"hours"`
	Drawn     float64 `json:"kWh_drawn"`
	MeanDrawn float64 `json:"mean_drawn_W"`
}

// YearState is one state of the calendar over a year.
type YearState struct {
	State  string   `json:"state"` // work, idle, hold, off, or "own hours"
	Duties []string `json:"duties"`
	StateResult
}

// StatesResult splits the year by what the axes do: working, holding, idle and off add up to it;
// load_drives is part of working. Off is 0 without a calendar.
type StatesResult struct {
	Working StateResult `json:"working"`
	Holding StateResult `json:"holding"`
	Idle    StateResult `json:"idle"`
	Off     StateResult `json:"off"`
	Driving StateResult `json:"load_drives"`
}

const kWh = units.KilowattHour

func (s *Solution) yearResult(c *CircuitRun) YearResult {
	y, t := c.Year, s.Tariff
	r := YearResult{
		Complete: y.Complete, MissingDuties: append([]string{}, y.Missing...), Hours: y.Hours / units.Hour,
		Duties: []YearDutyResult{}, Losses: []YearLoss{},
		Drawn: y.Drawn.Total() / kWh, Returned: y.Returned.Total() / kWh,
		Fuel: y.Fuel.Total() / kWh, FuelLitres: t.Fuel.Volume(y.Fuel.Total()) / units.Litre,
		WorkPositive: y.WorkPositive().Total() / kWh, WorkNegative: y.WorkNegative().Total() / kWh,
		Stored: y.Stored.Total() / kWh, HeatToOil: y.HeatToOil().Total() / kWh,
		States: StatesResult{
			state(y.Seconds.Working, y.Drawn.Working), state(y.Seconds.Holding, y.Drawn.Holding),
			state(y.Seconds.Idle, y.Drawn.Idle), state(y.Seconds.Off, y.Drawn.Off), state(y.Seconds.Driving, y.Drawn.Driving)},
		MeanHeat: Number(c.Heat.Year.Mean), Cooler: Number(c.Heat.Year.Cooler), Oil: Number(s.Oil), Air: Number(s.Air),
		EnergyCost: Number(c.Money.Drawn), Credit: Number(c.Money.Credit), CreditReturned: t.CreditReturned,
		PricePerKWh: Number(t.Price * kWh), Currency: t.Currency,
		CO2: Number(c.Money.CO2), CO2PerKWh: Number(t.CO2 * kWh),
	}
	if !math.IsNaN(t.CO2) {
		r.CO2Year, r.CO2Basis = t.CO2Year, t.CO2Basis
	}
	r.Calendar = []YearState{}
	if s.File.Calendar != nil && s.File.Calendar.Hours != nil {
		for _, x := range y.states(s.File.Calendar) {
			r.Calendar = append(r.Calendar, YearState{x.Key, append([]string{}, x.Duties...), state(x.Seconds, x.Drawn.Total())})
		}
	}
	for _, d := range y.Duties {
		r.Duties = append(r.Duties, c.yearDutyResult(d))
	}
	for _, l := range y.Losses {
		r.Losses = append(r.Losses, YearLoss{l.Block, l.Kind, l.Sink, l.Energy.Total() / kWh, l.Energy.Driving / kWh})
	}
	return r
}

func state(seconds, drawn float64) StateResult {
	return StateResult{seconds / units.Hour, drawn / kWh, ratio(drawn, seconds)}
}

func (c *CircuitRun) yearDutyResult(d YearDuty) YearDutyResult {
	r := YearDutyResult{Name: d.Duty, Cycles: d.Cycles, Repeats: d.Repeats, Hours: d.Hours / units.Hour, State: string(d.State),
		Drawn: d.Drawn / kWh, MeanSupply: ratio(d.Drawn, d.Hours)}
	for _, run := range c.Duties {
		if run.Duty.Name == d.Duty && run.Balance != nil {
			r.Demand, r.DemandBasis = run.Balance.Demand.Mean, run.Balance.Demand.Basis
		}
	}
	for _, h := range c.Heat.Duties {
		if h.Duty == d.Duty {
			r.MeanHeat, r.Cooler = h.Mean, Number(h.Cooler)
		}
	}
	return r
}

// ComparisonResult sets a proposal beside the circuit as found. Positive saved
// figures mean that the proposal takes less.
type ComparisonResult struct {
	Base        string   `json:"base"`
	Proposal    string   `json:"proposal"`
	Missing     string   `json:"missing"` // why there are no figures, or ""
	SameDuty    bool     `json:"same_duty"`
	Differences []string `json:"differences"`
	Oil         Number   `json:"oil_K"` // of both

	Drawn      PairResult `json:"kWh_drawn"`
	Returned   PairResult `json:"kWh_returned"`
	Saved      Number     `json:"kWh_saved"`
	SavedShare Number     `json:"saved_share"`
	SavedSo    Number     `json:"kWh_saved_with_oil_so_warm"` // of both circuits; null where it is not known
	MeanHeat   PairResult `json:"mean_heat_to_oil_W"`
	Cooler     PairResult `json:"cooler_W_per_K"`
	SavedHeat  Number     `json:"heat_saved_W"`

	Currency    string      `json:"currency"`
	MoneyDrawn  Number      `json:"money_saved_on_drawn"`
	MoneyCredit Number      `json:"money_from_returned"`
	MoneySaved  Number      `json:"money_saved"`
	Cost        RangeResult `json:"retrofit_cost"`
	Payback     RangeResult `json:"payback_years"`
	PaybackText string      `json:"payback_text"`
	CO2Saved    Number      `json:"co2_kg_saved"`

	Shortfall []ShortfallPairResult `json:"shortfall"`
	Published PublishedResult       `json:"published"`
}

// PairResult is a figure of both circuits.
type PairResult struct {
	Base     Number `json:"base"`
	Proposal Number `json:"proposal"`
}

// RangeResult is a figure by three views.
type RangeResult struct {
	Low    Number `json:"low"`
	Likely Number `json:"likely"`
	High   Number `json:"high"`
}

// ShortfallPairResult is what an axis lacks in both circuits.
type ShortfallPairResult struct {
	Duty     string          `json:"duty"`
	Axis     string          `json:"axis"`
	Base     ShortfallResult `json:"base"`
	Proposal ShortfallResult `json:"proposal"`
}

// PublishedResult sets the saving beside published ones.
type PublishedResult struct {
	Text        string `json:"text"`
	Outside     bool   `json:"outside"`
	Explanation string `json:"explanation"`
}

func (s *Solution) savedSo(c *Comparison) Number {
	if o, ok := s.oilSaving(c); ok {
		return Number(o.Saved / kWh)
	}
	return Number(math.NaN())
}

func (s *Solution) comparisonResult(c *Comparison) ComparisonResult {
	b, p := c.Base, c.Proposal
	pair := func(x, y float64) PairResult {
		if c.Missing != "" {
			x, y = math.NaN(), math.NaN()
		}
		return PairResult{Number(x), Number(y)}
	}
	cost := p.Cost
	if !cost.Given {
		cost = CostRange{Low: math.NaN(), Likely: math.NaN(), High: math.NaN()}
	}
	r := ComparisonResult{
		Base: b.Circuit.Name, Proposal: p.Circuit.Name, Missing: c.Missing, SameDuty: c.SameDuty(),
		Differences: append([]string{}, c.Differences...), Oil: Number(s.Oil),
		Drawn:    pair(b.Year.Drawn.Total()/kWh, p.Year.Drawn.Total()/kWh),
		Returned: pair(b.Year.Returned.Total()/kWh, p.Year.Returned.Total()/kWh),
		Saved:    Number(c.SavedDrawn / kWh), SavedShare: Number(c.SavedShare),
		MeanHeat: pair(b.Heat.Year.Mean, p.Heat.Year.Mean), Cooler: pair(b.Heat.Year.Cooler, p.Heat.Year.Cooler),
		SavedSo: s.savedSo(c), SavedHeat: Number(c.SavedHeat), Currency: s.Tariff.Currency,
		MoneyDrawn: Number(c.MoneyDrawn), MoneyCredit: Number(c.MoneyCredit), MoneySaved: Number(c.MoneySaved),
		Cost:        RangeResult{Number(cost.Low), Number(cost.Likely), Number(cost.High)},
		Payback:     RangeResult{Number(c.Payback.Low), Number(c.Payback.Likely), Number(c.Payback.High)},
		PaybackText: c.Payback.String(), CO2Saved: Number(c.CO2Saved), Shortfall: []ShortfallPairResult{},
		Published: PublishedResult{c.Published.Text, c.Published.Outside, c.Published.Explanation},
	}
	for _, x := range c.Shortfalls {
		x.Base.Axis, x.Proposal.Axis = x.Axis, x.Axis
		r.Shortfall = append(r.Shortfall, ShortfallPairResult{x.Duty, x.Axis, shortfallResult(x.Base), shortfallResult(x.Proposal)})
	}
	return r
}
