package fixfirst

import "barlitre/audit"

// Result is a ladder as JSON; keys as those of audit.Result.
type Result struct {
	Circuit  string        `json:"circuit"`
	Currency string        `json:"currency"`
	Steps    []StepResult  `json:"steps"`
	AsFound  YearResult    `json:"as_found"`
	Cured    YearResult    `json:"cured"`
	Splits   []SplitResult `json:"splits"`
}

// StepResult is a step of a ladder.
type StepResult struct {
	Rule     string       `json:"rule"`
	Class    Class        `json:"class"`
	Effort   string       `json:"effort"`
	Habit    bool         `json:"habit"`
	Block    string       `json:"block,omitempty"`
	Param    string       `json:"parameter,omitempty"`
	Duty     string       `json:"duty,omitempty"`
	Time     float64      `json:"t_s,omitempty"`
	Text     string       `json:"text"`
	Evidence []Quantity   `json:"evidence"`
	Do       string       `json:"do"`
	Caution  string       `json:"caution,omitempty"`
	Basis    string       `json:"basis"`
	Cure     []string     `json:"cure"` // as the price was computed
	Alone    SavingResult `json:"alone"`
	InOrder  SavingResult `json:"in_order"`
	Note     string       `json:"note,omitempty"`
}

// SavingResult is a saving of a year.
type SavingResult struct {
	Energy audit.Number `json:"kWh"`
	Money  audit.Number `json:"money"`
	CO2    audit.Number `json:"co2_kg"`
	Heat   audit.Number `json:"mean_heat_to_oil_W"`
}

// YearResult is a year of the circuit as found.
type YearResult struct {
	Drawn audit.Number `json:"kWh_drawn"`
	Money audit.Number `json:"money"`
	CO2   audit.Number `json:"co2_kg"`
	Heat  audit.Number `json:"mean_heat_to_oil_W"`
}

// SplitResult is a Split.
type SplitResult struct {
	Proposal     string                 `json:"proposal"`
	Whole        SavingResult           `json:"whole"`
	Classes      map[Class]SavingResult `json:"classes"`
	Architecture SavingResult           `json:"architecture"`
	Besides      SavingResult           `json:"switched_off_besides"`
	Payback      audit.RangeResult      `json:"payback_years_by_what_it_adds"`
}

const kWh = 3.6e6 // J

func savingResult(s Saving) SavingResult {
	return SavingResult{audit.Number(s.Energy / kWh), audit.Number(s.Money), audit.Number(s.CO2), audit.Number(s.Heat)}
}

func yearResult(y Year) YearResult {
	return YearResult{audit.Number(y.Drawn / kWh), audit.Number(y.Money), audit.Number(y.CO2), audit.Number(y.Heat)}
}

// Result lists a ladder for JSON.
func (l *Ladder) Result() Result {
	r := Result{Circuit: l.Circuit, Currency: l.Currency, Steps: []StepResult{}, AsFound: yearResult(l.AsFound), Cured: yearResult(l.Cured), Splits: []SplitResult{}}
	for _, x := range l.Steps {
		s := StepResult{Rule: x.Rule, Class: x.Class, Effort: x.Effort.String(), Habit: x.Habit, Block: x.Block, Param: x.Param, Duty: x.Duty, Time: x.Time, Text: x.Text,
			Evidence: x.Evidence, Do: x.Do, Caution: x.Caution, Basis: x.Basis, Cure: []string{}, Alone: savingResult(x.Alone), InOrder: savingResult(x.InOrder), Note: x.Note()}
		for _, e := range x.Cure {
			s.Cure = append(s.Cure, e.String())
		}
		r.Steps = append(r.Steps, s)
	}
	for _, s := range l.Splits {
		x := SplitResult{Proposal: s.Proposal, Whole: savingResult(s.Whole), Classes: map[Class]SavingResult{}, Architecture: savingResult(s.Architecture), Besides: savingResult(s.Besides),
			Payback: audit.RangeResult{Low: audit.Number(s.Payback.Low), Likely: audit.Number(s.Payback.Likely), High: audit.Number(s.Payback.High)}}
		for _, c := range Classes() {
			x.Classes[c] = savingResult(s.Class[c])
		}
		r.Splits = append(r.Splits, x)
	}
	return r
}
