package fixfirst

import (
	"context"
	"fmt"
	"math"
	"runtime"
	"slices"
	"sort"
	"sync"

	"barlitre/audit"
	"barlitre/machines/units"
)

// Step is a finding with its price.
type Step struct {
	*Finding
	Cure     Cure    // that was priced
	Taken    Cure    // that was priced after those above it
	Alone    Saving  // cured alone
	InOrder  Saving  // cured after those above it
	Without  Year    // with it cured alone
	Before   Year    // with those above it cured
	After    Year    // with it cured as well
	Regained float64 // s a cycle by which axes fell short, and do no more when it is cured alone
	Unpriced string  // why there is no price, "" where there is one
}

// Ladder is what to fix first in one circuit as found, in order, and what is left of it.
type Ladder struct {
	Circuit  string
	Currency string // "" where no price is known
	Steps    []*Step
	AsFound  Year // before
	Cured    Year // with all cures: the circuit as found that a proposal is to beat
	Class    map[Class]Saving
	Splits   []Split // by proposal
	Lacks    float64 // s a cycle by which axes fall short as found, and do no more with all cures
	Edits    Cure    // all cures that were priced, in order
}

// Year is a year of a circuit.
type Year struct {
	Drawn, Money, CO2, Heat float64 // J, money, kg, W
}

func yearOf(o outcome) Year { return Year{o.drawn, o.money, o.co2, o.heat} }

// Split says what of the saving of a proposal is the cures', and what its own:
//
//	whole = settings + repair + stop-start + architecture
type Split struct {
	Proposal     string
	Whole        Saving // as found against the proposal, as the verdict has it
	Class        map[Class]Saving
	Architecture Saving        // as found with its faults cured, against the proposal
	Year         Year          // of the proposal
	Payback      audit.Payback // of its cost by what it adds
	// Besides is what the proposal would draw less if it were switched off in the same hours; it is in no other figure.
	Besides Saving
}

// Options of Climb; the zero value is good.
type Options struct {
	Cache    *Cache
	System   units.System
	Progress func(done, total int) // from any goroutine, one call at a time
}

// All climbs for every circuit as found of a solution.
func All(ctx context.Context, s *audit.Solution, opt Options) ([]*Ladder, error) {
	if opt.Cache == nil {
		opt.Cache = &Cache{}
	}
	var out []*Ladder
	for _, run := range s.Circuits {
		if run.Proposal {
			continue
		}
		l, err := Climb(ctx, s, run, opt)
		if err != nil {
			return nil, err
		}
		out = append(out, l)
	}
	return out, nil
}

// Climb prices what is found in a circuit: every finding cured alone, at the same time on all processors, then one after
// the other in order. The error is that of the context.
func Climb(ctx context.Context, s *audit.Solution, run *audit.CircuitRun, opt Options) (*Ladder, error) {
	if opt.Cache == nil {
		opt.Cache = &Cache{}
	}
	base := outcomeOf(run)
	l := &Ladder{Circuit: run.Circuit.Name, Currency: s.Tariff.Currency, AsFound: yearOf(base), Class: map[Class]Saving{}}
	for _, f := range Detect(s, run, opt.System) {
		l.Steps = append(l.Steps, &Step{Finding: f, Alone: unknown, InOrder: unknown})
	}
	if math.IsNaN(base.money) {
		l.Currency = ""
	}
	if base.fault != "" && len(l.Steps) > 0 {
		for _, x := range l.Steps {
			x.Unpriced = base.fault
		}
		l.Cured = l.AsFound
		return l, nil
	}
	meter := &meter{tell: opt.Progress, total: 2 * len(l.Steps)}
	if err := l.alone(ctx, s.File, base, opt.Cache, meter); err != nil {
		return nil, err
	}
	l.sort()
	last, err := l.inOrder(ctx, s.File, base, opt.Cache, meter)
	if err != nil {
		return nil, err
	}
	l.Cured, l.Lacks = yearOf(last), base.short-last.short
	for _, c := range s.Comparisons {
		if c.Base == run && c.Missing == "" {
			l.Splits = append(l.Splits, l.split(c, base, last))
		}
	}
	return l, nil
}

// meter passes progress on, one call at a time.
type meter struct {
	mu          sync.Mutex
	tell        func(done, total int)
	done, total int
}

func (m *meter) add() {
	m.mu.Lock()
	defer m.mu.Unlock()
	m.done++
	if m.tell != nil {
		m.tell(m.done, m.total)
	}
}

func (l *Ladder) alone(ctx context.Context, f *audit.File, base outcome, cache *Cache, m *meter) error {
	room := make(chan struct{}, runtime.GOMAXPROCS(0))
	errs := make([]error, len(l.Steps))
	var wg sync.WaitGroup
	for i, x := range l.Steps {
		wg.Add(1)
		go func() {
			defer wg.Done()
			room <- struct{}{}
			defer func() { <-room }()
			defer m.add()
			errs[i] = guarded(x, func() error {
				_, edits, o, why, err := cache.choose(ctx, f, base, x.Finding, true)
				if err == nil && why == "" {
					x.Cure, x.Alone, x.Without, x.Regained = edits, less(base, o), yearOf(o), base.short-o.short
				}
				x.Unpriced = why
				return err
			})
		}()
	}
	wg.Wait()
	for _, err := range errs {
		if err != nil {
			return err
		}
	}
	return nil
}

// guarded keeps an error of the program in one price from ending the others.
func guarded(x *Step, do func() error) (err error) {
	defer func() {
		if v := recover(); v != nil {
			x.Unpriced = fmt.Sprintf("the program met an error of its own (%v); please report it with this file", v)
		}
	}()
	return do()
}

// sort brings the steps into the order of doing: what costs nothing first, then service, then parts; within each the
// largest saving alone first; what has no price last.
func (l *Ladder) sort() {
	sort.SliceStable(l.Steps, func(i, j int) bool {
		a, b := l.Steps[i], l.Steps[j]
		switch {
		case (a.Unpriced == "") != (b.Unpriced == ""):
			return a.Unpriced == ""
		case a.Effort != b.Effort:
			return a.Effort < b.Effort
		}
		return a.Alone.Energy > b.Alone.Energy
	})
}

func (l *Ladder) inOrder(ctx context.Context, f *audit.File, last outcome, cache *Cache, m *meter) (outcome, error) {
	for _, x := range l.Steps {
		m.add()
		if x.Unpriced != "" {
			continue
		}
		var g *audit.File
		var edits Cure
		var o outcome
		err := guarded(x, func() (err error) {
			var why string
			if g, edits, o, why, err = cache.choose(ctx, f, last, x.Finding, false); err == nil && why != "" {
				x.Unpriced = "after those above it: " + why
			}
			return err
		})
		if err != nil {
			return last, err
		}
		if x.Unpriced != "" {
			continue
		}
		x.Taken, x.InOrder, x.Before, x.After = edits, less(last, o), yearOf(last), yearOf(o)
		l.Class[x.Class] = l.Class[x.Class].Plus(x.InOrder)
		l.Edits = append(l.Edits, edits...)
		f, last = g, o
	}
	return last, nil
}

func (l *Ladder) split(c *audit.Comparison, base, cured outcome) Split {
	p := outcomeOf(c.Proposal)
	s := Split{Proposal: c.Proposal.Circuit.Name, Whole: less(base, p), Class: l.Class, Architecture: less(cured, p), Year: yearOf(p)}
	s.Payback = audit.SimplePayback(c.Proposal.Cost, s.Architecture.Money)
	for _, x := range l.Steps {
		if !x.Habit || x.Unpriced != "" {
			continue
		}
		y := c.Proposal.Year
		if i := slices.IndexFunc(y.Duties, func(d audit.YearDuty) bool { return d.Duty == x.Duty }); i >= 0 && y.Drawn.Total() > 0 {
			e := y.Duties[i].Drawn
			if y.Duties[i].State != "" { // by the calendar these hours become hours off
				e = max(0, e-y.Standby*y.Duties[i].Hours)
			}
			s.Besides.Energy += e
			s.Besides.Money += p.money * e / y.Drawn.Total()
			s.Besides.CO2 += p.co2 * e / y.Drawn.Total()
		}
	}
	return s
}

// leastLack [s] of motion a cycle missing makes two years no longer those of the same work.
const leastLack = 1e-2

// Note says what the price does not, in words; "" where it says all.
func (x *Step) Note() string {
	switch {
	case x.Unpriced != "":
		return "No price: " + x.Unpriced + "."
	case x.Regained > leastLack:
		return fmt.Sprintf("No saving can be told: the machine as found delivers less (%s a cycle missing), and with this cured it makes those motions again.", seconds(x.Regained))
	case x.Alone.Energy <= 0 && x.InOrder.Energy > 0:
		return "Alone it saves nothing, for what is gained here is lost at the faults above it; with those cured it does."
	case x.Alone.Energy <= 0:
		return "It saves no energy; it is done for the life and the safety of the machine."
	case x.InOrder.Energy < 0.02*x.Alone.Energy:
		return "After those above it nothing is left for it to save."
	}
	return ""
}

// Faults counts the steps that are faults, not habits.
func (l *Ladder) Faults() int {
	n := 0
	for _, x := range l.Steps {
		if !x.Habit {
			n++
		}
	}
	return n
}

// Faultless are the edits that cure what is a fault, habits left as they are.
func (l *Ladder) Faultless() Cure {
	var out Cure
	for _, x := range l.Steps {
		if !x.Habit && x.Unpriced == "" {
			out = append(out, x.Taken...)
		}
	}
	return out
}

// Restored is the machine with what is a fault set or repaired to what it should be, and the names of those faults. No part
// is exchanged for one of another size: what is read at the machine that stands there is compared with it.
func (l *Ladder) Restored() (edits Cure, names []string) {
	for _, x := range l.Steps {
		if !x.Habit && !x.Resizes() && x.Unpriced == "" {
			edits, names = append(edits, x.Taken...), append(names, x.Name())
		}
	}
	return edits, names
}

// priced reports whether a step of a class has a price, or with "" any step.
func (l *Ladder) priced(c Class) bool {
	return slices.ContainsFunc(l.Steps, func(x *Step) bool { return x.Unpriced == "" && (c == "" || x.Class == c) })
}

// unpriced reports whether there are steps of a class, or with "" of any, and none has a price: then a saving of 0 would be no result.
func (l *Ladder) unpriced(c Class) bool {
	return !l.priced(c) && slices.ContainsFunc(l.Steps, func(x *Step) bool { return c == "" || x.Class == c })
}

// withoutPrice is how many steps have no price.
func (l *Ladder) withoutPrice() int {
	n := 0
	for _, x := range l.Steps {
		if x.Unpriced != "" {
			n++
		}
	}
	return n
}

// Total is what all priced cures save together.
func (l *Ladder) Total() Saving {
	var sum Saving
	for _, x := range l.Steps {
		if x.Unpriced == "" {
			sum = sum.Plus(x.InOrder)
		}
	}
	return sum
}
