package audit

import (
	"encoding/json"
	"fmt"
	"io"
	"math"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// ResultFormat is the first entry of a result file.
const ResultFormat = "barlitre-result/1"

// Number is a number of a result file that may be absent: NaN and infinities are
// written as null, and null is read as NaN.
type Number float64

// MarshalJSON writes null for what JSON has no number for.
func (n Number) MarshalJSON() ([]byte, error) {
	if f := float64(n); !math.IsNaN(f) && !math.IsInf(f, 0) {
		return json.Marshal(f)
	}
	return []byte("null"), nil
}

// UnmarshalJSON reads null as NaN.
func (n *Number) UnmarshalJSON(data []byte) error {
	if string(data) == "null" {
		*n = Number(math.NaN())
		return nil
	}
	return json.Unmarshal(data, (*float64)(n))
}

// Result is a solved audit as JSON. Keys name their unit: J, W, s, K, Pa, m3_s, N are
// SI; kWh, years, hours say so; money is in the currency named beside it. A number
// that is not known is null. For every duty of a circuit
//
//	supply_in − returned = work_positive + work_negative + stored + sum of losses
type Result struct {
	Format      string             `json:"format"`
	Title       string             `json:"title"`
	Circuits    []CircuitResult    `json:"circuits"`
	Comparisons []ComparisonResult `json:"comparisons"`
	Recordings  []RecordingResult  `json:"recordings,omitempty"` // that duties were taken from
	LimitsOfUse []string           `json:"limits_of_use"`
	// FixFirst is what package fixfirst finds in the circuits as found, where it was asked.
	FixFirst []any `json:"fix_first,omitempty"`
}

// CircuitResult is one circuit of a result file.
type CircuitResult struct {
	Name     string            `json:"name"`
	Duties   []DutyResult      `json:"duties"` // those that were solved
	Year     YearResult        `json:"year"`
	Services []ServiceResult   `json:"services,omitempty"`        // of cylinder-switched machines
	Warmth   *WarmthResult     `json:"oil_temperature,omitempty"` // where the file says of tank and cooler
	Findings []circuit.Finding `json:"findings"`
}

// DutyResult is one circuit over one cycle of a duty.
type DutyResult struct {
	Name           string            `json:"name"`
	HoursPerYear   float64           `json:"hours_per_year"`
	CyclesAveraged int               `json:"cycles_averaged"`
	CycleS         float64           `json:"cycle_s"`
	TimeSteps      int               `json:"time_steps"`
	Energy         EnergyResult      `json:"energy_J"`
	Closure        float64           `json:"closure_relative"`
	Peak           PeakResult        `json:"peak"`
	Shortfall      []ShortfallResult `json:"shortfall"`
	Gates          []GateResult      `json:"gates"`
	Measured       []MeasuredResult  `json:"measured"`
	Certificate    CertificateResult `json:"certificate"`
}

// EnergyResult is the energy balance of a cycle [J].
type EnergyResult struct {
	SupplyIn     float64      `json:"supply_in"`
	Returned     float64      `json:"returned"`
	WorkPositive float64      `json:"work_positive"`
	WorkNegative float64      `json:"work_negative"`
	Work         []WorkResult `json:"work"`   // by axis, adds up to the two above
	Stored       float64      `json:"stored"` // end minus start
	HeatToOil    float64      `json:"heat_to_oil"`
	Losses       []LossResult `json:"losses"`
	// Passed between machines over a shaft they share; it stays in the circuit and is no term of the balance.
	Passed float64 `json:"passed_through_shafts,omitempty"`
}

// WorkResult is the work of one axis over a cycle.
type WorkResult struct {
	Axis     string  `json:"axis"`
	Positive float64 `json:"J_positive"`
	Negative float64 `json:"J_negative"`
}

// LossResult is one loss of a cycle.
type LossResult struct {
	Block string       `json:"block"`
	Kind  string       `json:"kind"`
	Sink  circuit.Sink `json:"sink"`
	J     float64      `json:"J"`
}

// PeakResult holds the extremes of a cycle. The shaft power is the sum over the prime movers.
type PeakResult struct {
	Pressure      Number `json:"pressure_Pa"`
	At            string `json:"at"`
	T             Number `json:"t_s"`
	UpperEstimate bool   `json:"upper_estimate"`
	Shaft         Number `json:"shaft_W"`
	Supply        Number `json:"supply_W"`
}

// ShortfallResult is what an axis could not do; the stroke of a rotary axis is in rad.
type ShortfallResult struct {
	Axis       string `json:"axis"`
	Seconds    Number `json:"seconds"`
	LostStroke Number `json:"lost_stroke_m"`
}

// GateResult sets what a cycle asks of a block against what it stands, both in the unit named.
type GateResult struct {
	Block     string `json:"block"`
	Name      string `json:"name"`
	Parameter string `json:"parameter"`
	Value     Number `json:"value"`
	Limit     Number `json:"limit"` // null where none is given
	Unit      string `json:"unit"`
	T         Number `json:"t_s"`
	Passed    bool   `json:"passed"`
	Reason    string `json:"reason"`
}

// MeasuredResult compares a measured channel with what is computed, at the rows of the
// duty; see Measurement. Differences are measured less computed. Pa, m³/s or W by the point.
type MeasuredResult struct {
	Point      string `json:"point"`
	Rows       int    `json:"rows"`
	Measured   Number `json:"measured_mean"`
	Computed   Number `json:"computed_mean"`
	Difference Number `json:"difference_mean"`
	NMBE       Number `json:"nmbe"`
	CVRMSE     Number `json:"cv_rmse"`
	Largest    Number `json:"largest_difference"`
	At         Number `json:"largest_difference_at_s"`
}

// CertificateResult says how well the time steps are balanced.
type CertificateResult struct {
	UnbalancedSteps int    `json:"unbalanced_steps"`
	WorstFlow       Number `json:"worst_flow_m3_s"`
	WorstForce      Number `json:"worst_force_N"`
	FallbackSteps   int    `json:"fallback_steps"`
}

// Write writes the result as indented JSON.
func (r *Result) Write(w io.Writer) error {
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	e.SetEscapeHTML(false)
	if err := e.Encode(r); err != nil {
		return fmt.Errorf("write result: %w", err)
	}
	return nil
}

// Result returns the solution as it goes into a result file.
func (s *Solution) Result() *Result {
	r := &Result{Format: ResultFormat, Title: s.File.Title, Circuits: []CircuitResult{}, Comparisons: []ComparisonResult{},
		Recordings: s.File.recordingResults()}
	for _, c := range s.Circuits {
		cr := CircuitResult{Name: c.Circuit.Name, Duties: []DutyResult{}, Year: s.yearResult(c),
			Services: serviceResults(c), Warmth: s.warmthResult(c.Warmth), Findings: append([]circuit.Finding{}, c.Findings...)}
		for _, d := range c.Duties {
			if d.Balance != nil {
				cr.Duties = append(cr.Duties, dutyResult(d))
			}
		}
		r.Circuits = append(r.Circuits, cr)
	}
	for _, c := range s.Comparisons {
		r.Comparisons = append(r.Comparisons, s.comparisonResult(c))
	}
	for _, l := range limits {
		r.LimitsOfUse = append(r.LimitsOfUse, l.Topic+": "+l.Text)
	}
	return r
}

func dutyResult(d *DutyRun) DutyResult {
	b, c := d.Balance, d.Certificate
	out := DutyResult{
		Name: d.Duty.Name, HoursPerYear: d.Duty.Hours / units.Hour, CyclesAveraged: max(d.Cycles, 1), CycleS: b.Cycle, TimeSteps: b.Steps,
		Energy: EnergyResult{SupplyIn: b.SupplyIn.Total(), Returned: b.Returned.Total(),
			WorkPositive: b.WorkPositive().Total(), WorkNegative: b.WorkNegative().Total(),
			Stored: b.StoredEnergy().Total(), HeatToOil: b.HeatToOil().Total(), Work: []WorkResult{}, Losses: []LossResult{}, Passed: d.Exchanged()},
		Closure: b.Closure(),
		Peak: PeakResult{Pressure: Number(d.Peak.Value), At: d.Peak.At, T: Number(d.Peak.T), UpperEstimate: d.Peak.UpperEstimate,
			Shaft: Number(b.PeakShaft), Supply: Number(b.PeakSupply)},
		Shortfall:   []ShortfallResult{},
		Gates:       []GateResult{},
		Measured:    []MeasuredResult{},
		Certificate: CertificateResult{c.Unbalanced, Number(c.Worst), Number(c.Force), c.Fallbacks},
	}
	for _, w := range b.Work {
		out.Energy.Work = append(out.Energy.Work, WorkResult{w.Axis, w.Positive.Total(), w.Negative.Total()})
	}
	for _, l := range b.Losses {
		out.Energy.Losses = append(out.Energy.Losses, LossResult{l.Block, l.Kind, l.Sink, l.Energy.Total()})
	}
	for _, g := range d.Gates {
		out.Gates = append(out.Gates, GateResult{g.Block, g.Name, g.Parameter, Number(g.Unit.FromSI(g.Value)), Number(g.Unit.FromSI(g.Limit)),
			g.Unit.Symbol, Number(g.T), g.Passed, g.Reason})
	}
	for _, m := range d.Measured {
		out.Measured = append(out.Measured, MeasuredResult{m.Point, m.Rows, Number(m.Measured), Number(m.Computed), Number(m.Difference),
			Number(m.NMBE), Number(m.CVRMSE), Number(m.Largest), Number(m.At)})
	}
	for _, s := range d.Shortfalls {
		out.Shortfall = append(out.Shortfall, shortfallResult(s))
	}
	return out
}

func shortfallResult(s circuit.Shortfall) ShortfallResult {
	return ShortfallResult{s.Axis, Number(s.Seconds), Number(s.LostStroke)}
}
