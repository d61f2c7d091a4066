package audit

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"barlitre/circuit"
	"barlitre/machines/units"
)

// SameWork is the share by which the work of two circuits may differ while they
// still count as doing the same duty. It leaves room for time steps that differ
// between the circuits (our choice, stated in the report).
const SameWork = 0.005

// Comparison sets a proposal beside the circuit as found. Energies are J a year,
// positive saved ones mean that the proposal takes less.
type Comparison struct {
	Base, Proposal *CircuitRun
	// Missing says why there are no figures, or is "". Figures are NaN then.
	Missing string

	SavedDrawn float64 // J a year, drawn from the supply
	SavedShare float64 // of what the base draws
	SavedHeat  float64 // W, mean heat to the oil over the running hours

	MoneyDrawn  float64 // money a year, for energy not drawn
	MoneyCredit float64 // money a year, more paid for returned energy; 0 unless credited
	MoneySaved  float64 // money a year, the sum of both
	Payback     Payback
	CO2Saved    float64 // kg a year; NaN without a factor

	Differences []string // why the two do not do the same duty, in words
	Shortfalls  []ShortfallPair
	Groups      []GroupRow // where the saving comes from
	Published   Published
}

// SameDuty reports whether both circuits gave every load the same work.
func (c *Comparison) SameDuty() bool { return len(c.Differences) == 0 }

// ShortfallPair sets what an axis lacks in both circuits side by side.
type ShortfallPair struct {
	Duty, Axis     string
	Base, Proposal circuit.Shortfall // zero where there is none
}

// GroupRow is where energy goes in both circuits [J a year].
type GroupRow struct {
	Name          string
	Before, After float64
}

// compare sets every proposal beside the first circuit as found.
func (s *Solution) compare() []*Comparison {
	var base *CircuitRun
	for _, c := range s.Circuits {
		if !c.Proposal {
			base = c
			break
		}
	}
	var out []*Comparison
	for _, c := range s.Circuits {
		if c.Proposal && base != nil {
			out = append(out, compareTwo(base, c))
		}
	}
	return out
}

func compareTwo(base, proposal *CircuitRun) *Comparison {
	nan := math.NaN()
	c := &Comparison{Base: base, Proposal: proposal, SavedDrawn: nan, SavedShare: nan, SavedHeat: nan,
		MoneyDrawn: nan, MoneyCredit: nan, MoneySaved: nan, CO2Saved: nan}
	c.Differences = differences(base, proposal)
	c.Shortfalls = shortfallPairs(base, proposal)
	if c.Missing = missing(base, proposal); c.Missing != "" {
		c.Payback = SimplePayback(proposal.Cost, nan)
		return c
	}
	b, p := base.Year, proposal.Year
	c.SavedDrawn = b.Drawn.Total() - p.Drawn.Total()
	if d := b.Drawn.Total(); d > 0 {
		c.SavedShare = c.SavedDrawn / d
	}
	c.SavedHeat = base.Heat.Year.Mean - proposal.Heat.Year.Mean
	c.MoneyDrawn = base.Money.Drawn - proposal.Money.Drawn
	c.MoneyCredit = proposal.Money.Credit - base.Money.Credit
	c.MoneySaved = c.MoneyDrawn + c.MoneyCredit
	c.CO2Saved = base.Money.CO2 - proposal.Money.CO2
	c.Payback = SimplePayback(proposal.Cost, c.MoneySaved)
	c.Groups = groupRows(base, proposal)
	c.Published = published(c)
	return c
}

// missing says what keeps two circuits from being compared over the year.
func missing(base, proposal *CircuitRun) string {
	for _, c := range []*CircuitRun{base, proposal} {
		if !c.Year.Complete {
			return fmt.Sprintf("%s could not be solved for %s; see its findings",
				c.Circuit.Name, strings.Join(c.Year.Missing, ", "))
		}
	}
	if base.Year.Hours == 0 {
		return "no duty has hours a year; give the hours of at least one duty"
	}
	return ""
}

// differences names every axis of every duty whose work differs by more than
// SameWork between two circuits that were both solved for it.
func differences(base, proposal *CircuitRun) []string {
	var out []string
	for i, b := range base.Duties {
		p := proposal.Duties[i]
		if b.Balance == nil || p.Balance == nil {
			continue
		}
		turned := turnover(b.Balance) + turnover(p.Balance)
		for _, name := range axisNames(b.Balance, p.Balance) {
			wb, wp := b.Balance.axis(name), p.Balance.axis(name)
			tell := func(what string, x, y float64) {
				if sameWork(x, y, turned) {
					return
				}
				out = append(out, fmt.Sprintf("not the same duty: in %s the %s on axis %s is %s a cycle with %s and %s with %s",
					b.Duty.Name, what, name, kilojoules(x), base.Circuit.Name, kilojoules(y), proposal.Circuit.Name))
			}
			tell("work against the load", wb.Positive.Total(), wp.Positive.Total())
			tell("work taken from the driving load", -wb.Negative.Total(), -wp.Negative.Total())
		}
	}
	return out
}

// sameWork compares two works; what is below a millionth of all work counts as none.
func sameWork(x, y, turned float64) bool {
	d := math.Abs(x - y)
	return d <= SameWork*math.Max(math.Abs(x), math.Abs(y)) || d <= 1e-6*turned
}

func turnover(b *Balance) float64 { return b.WorkPositive().Total() - b.WorkNegative().Total() }

func (b *Balance) axis(name string) WorkRow {
	for _, w := range b.Work {
		if w.Axis == name {
			return w
		}
	}
	return WorkRow{Axis: name}
}

func axisNames(bs ...*Balance) []string {
	var names []string
	for _, b := range bs {
		for _, w := range b.Work {
			if !slices.Contains(names, w.Axis) {
				names = append(names, w.Axis)
			}
		}
	}
	return names
}

func kilojoules(j float64) string {
	return units.Format(j, units.Preferred(units.Energy, units.Metric), 4)
}

func shortfallPairs(base, proposal *CircuitRun) []ShortfallPair {
	var out []ShortfallPair
	for i, b := range base.Duties {
		first := len(out)
		at := func(axis string) *ShortfallPair {
			for k := first; k < len(out); k++ {
				if out[k].Axis == axis {
					return &out[k]
				}
			}
			out = append(out, ShortfallPair{Duty: b.Duty.Name, Axis: axis})
			return &out[len(out)-1]
		}
		for _, s := range b.Shortfalls {
			at(s.Axis).Base = s
		}
		for _, s := range proposal.Duties[i].Shortfalls {
			at(s.Axis).Proposal = s
		}
	}
	return out
}
