package audit

import (
	"math"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Measurement compares a channel measured at a measuring point with what the balance
// finds there, at the rows of the duty. A difference is measured less computed. NMBE and
// CVRMSE are those of ASHRAE Guideline 14 with p = 1 (from memory),
//
//	NMBE = Σ d/((n − 1)·m), CV(RMSE) = √(Σ d²/(n − 1))/m, m the mean measured
//
// and NaN for fewer than two rows or a mean of nothing.
type Measurement struct {
	Point              string // as the duty names it: "X1.pressure", or of an electric motor "M1.power"
	Dim                units.Dim
	Rows               int
	Measured, Computed float64 // means, SI
	Difference         float64 // mean, SI
	NMBE, CVRMSE       float64 // shares
	Largest, At        float64 // largest difference by size, SI; when, s
}

// MeasuredSignal names the signal that a measured track is compared with.
func MeasuredSignal(tr duty.Track) string {
	switch tr.What {
	case duty.MeasuredFlow:
		return tr.Of + ".A.q"
	case duty.MeasuredPower:
		return tr.Of + ".electric"
	}
	return tr.Of + ".P.p"
}

// meters is the circuit.Receiver that compares measured channels.
type meters struct {
	t      []float64 // of the series
	row    []bool    // by time step: it stands at a row of the duty
	k      int       // time step to come
	shift  float64   // of the cycle it belongs to, s
	meters []meter
}

type meter struct {
	name     string
	dim      units.Dim
	signal   int
	measured []float64 // by time step

	n                       int
	sum, found, diff, least float64 // least: sum of squares
	largest, at             float64
}

// newMeters finds the measured tracks of a duty whose points a circuit has, nil if none.
func newMeters(c *circuit.Compiled, s *duty.Series) *meters {
	m := &meters{t: s.T}
	signal := map[string]int{}
	for i, x := range c.Signals() {
		signal[x.Name] = i
	}
	for _, tr := range s.Duty.Tracks {
		if i, ok := signal[MeasuredSignal(tr)]; ok && tr.What.Measured() {
			m.meters = append(m.meters, meter{name: tr.Of + "." + tr.What.String(), dim: tr.What.Dim(duty.Linear), signal: i,
				measured: s.Commands[duty.Control{Block: tr.Of, What: tr.What}]})
		}
	}
	if len(m.meters) == 0 {
		return nil
	}
	m.row = make([]bool, len(s.T))
	rows := s.Duty.Time
	for k, j := 0, 0; k < len(s.T); k++ {
		for j < len(rows) && rows[j] < s.T[k] {
			j++
		}
		m.row[k] = j < len(rows) && rows[j] == s.T[k]
	}
	return m
}

// Sample takes a time step of the series; instants that a run puts between are passed over.
func (m *meters) Sample(s *circuit.Sample) error {
	if m.k == len(m.t) { // the next cycle of a period
		m.k = 0
		m.shift += m.t[len(m.t)-1] - m.t[0]
	}
	at := m.t[m.k] + m.shift
	if math.Abs(s.T-at) > 1e-9*math.Max(1, math.Abs(at)) {
		return nil
	}
	if m.row[m.k] && !s.Unbalanced {
		for i := range m.meters {
			m.meters[i].take(m.meters[i].measured[m.k], s.Signals[m.meters[i].signal], s.T)
		}
	}
	m.k++
	return nil
}

func (m *meter) take(measured, found, t float64) {
	d := measured - found
	m.n++
	m.sum, m.found, m.diff, m.least = m.sum+measured, m.found+found, m.diff+d, m.least+d*d
	if math.Abs(d) > math.Abs(m.largest) {
		m.largest, m.at = d, t
	}
}

// results returns the comparisons, in the order of the duty's tracks.
func (m *meters) results() []Measurement {
	if m == nil {
		return nil
	}
	var out []Measurement
	for _, x := range m.meters {
		n := float64(x.n)
		r := Measurement{Point: x.name, Dim: x.dim, Rows: x.n, Measured: x.sum / n, Computed: x.found / n, Difference: x.diff / n,
			NMBE: math.NaN(), CVRMSE: math.NaN(), Largest: x.largest, At: x.at}
		if mean := r.Measured; x.n > 1 && mean != 0 {
			r.NMBE, r.CVRMSE = x.diff/((n-1)*mean), math.Sqrt(x.least/(n-1))/math.Abs(mean)
		}
		out = append(out, r)
	}
	return out
}

// measuredTracks are the measured courses of a duty under the names of the signals that
// they are compared with.
func measuredTracks(d *duty.Duty, m *meters) []Track {
	if m == nil {
		return nil
	}
	var out []Track
	for _, tr := range d.Tracks {
		if tr.What.Measured() {
			out = append(out, Track{Name: MeasuredSignal(tr), Title: "measured", Dim: tr.What.Dim(duty.Linear), T: d.Time, V: tr.Values})
		}
	}
	return out
}

// measuredTable sets what was measured beside what is computed.
func measuredTable(p printer, ms []Measurement) Table {
	t := Table{Title: "Measured against computed",
		Head: []string{"", "measured, mean", "computed, mean", "difference, mean", "NMBE", "CV(RMSE)", "largest difference", "at"}}
	for _, m := range ms {
		t.add(false, m.Point, p.in(m.Measured, m.Dim, 4), p.in(m.Computed, m.Dim, 4), p.in(m.Difference, m.Dim, 3),
			shareOr(p, m.NMBE), shareOr(p, m.CVRMSE), p.in(m.Largest, m.Dim, 3), p.seconds(m.At))
	}
	t.Note = "Difference: measured less computed, at the rows of the duty. NMBE and CV(RMSE) as ASHRAE Guideline 14 defines them, with p = 1 (from memory)."
	return t
}

func shareOr(p printer, x float64) string {
	if !known(x) {
		return "n/a"
	}
	return p.share(x)
}
