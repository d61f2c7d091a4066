package audit

import (
	"context"
	"errors"
	"fmt"
	"io"
	"runtime"
	"slices"
	"sync"

	"barlitre/circuit"
	"barlitre/circuit/duty"
)

// Options of Solve; the zero value is good.
type Options struct {
	// Progress is told how far the work is, one call at a time, from goroutines of Solve.
	Progress func(done, total int)
	// CSV opens the file that takes every time step of one circuit and duty; nil = none
	// are written. It is called from goroutines of Solve, with the name TableName makes.
	CSV func(name string) (io.WriteCloser, error)
	// Before is the solution of the audit as it was, nil without one: see SolveEnergy.
	Before *Solution
}

// Solution is a solved audit file: every circuit over every duty, and what follows.
type Solution struct {
	File        *File
	Conditions  circuit.Conditions
	Tariff      Tariff
	Oil, Air    float64 // K
	Circuits    []*CircuitRun
	Comparisons []*Comparison
	// Pending says that oil temperatures are still to be worked out, by Warm.
	Pending bool
}

// CircuitRun is one circuit over all duties.
type CircuitRun struct {
	Circuit  *circuit.Circuit
	Proposal bool      // else as found
	Cost     CostRange // of the retrofit
	Duties   []*DutyRun
	Findings []circuit.Finding
	Year     *Year
	Heat     *Heat
	Money    YearCost
	Services []*Service // of cylinder-switched machines
	Warmth   *HeatStudy // how warm its oil gets; nil where the file says nothing of tank and cooler
	// Extrapolated is the share of the energy of a machine at states outside its measured points, by block.
	Extrapolated map[string]float64

	noted    []circuit.Finding // by the runs; Findings has what follows from them as well
	fanShare float64           // of its power that a fan switched by the thermostat is booked with
}

// DutyRun is one circuit over one duty.
type DutyRun struct {
	Duty        *duty.Duty
	Balance     *Balance // nil when the circuit could not be solved
	Cycles      int      // averaged: the cycles after which a circuit that remembers repeats itself
	Certificate circuit.Certificate
	Peak        circuit.Peak
	Shortfalls  []circuit.Shortfall
	Gates       []circuit.Gate // of drives, motors and held axes
	Measured    []Measurement
	Plot        *Plot
	Operating   map[string][]Operating // states of the displacement machines, by block
	Exchanges   []Exchange             // between machines on one shaft
	Services    []ServiceRun
	Throughput  map[string]Throughput // of machines and drives, by block, over all its cycles

	machine *Balance // Balance and Plot without what the cooling draws
	courses *Plot
}

// Solve runs every circuit of the file over every duty and draws up the balances, and then works out how warm the oil gets.
// A circuit that cannot be solved keeps its findings, and the others are solved all
// the same. The error is that of the context, of the oil, or of a CSV file.
func Solve(ctx context.Context, f *File, opt Options) (*Solution, error) {
	s, err := SolveEnergy(ctx, f, opt)
	if err != nil {
		return nil, err
	}
	return s.Warm(ctx)
}

// SolveEnergy is Solve without the oil temperatures, for who wants to see the energy first; where they are still to be worked
// out, the solution is Pending, and Warm does it. Until then a fan switched by a thermostat is booked with the share of its power
// that it had in opt.Before, with nothing where there is none.
func SolveEnergy(ctx context.Context, f *File, opt Options) (*Solution, error) {
	s, err := newSolution(f)
	if err != nil {
		return nil, err
	}
	p := &progress{tell: opt.Progress, total: progressParts * len(f.Circuits) * len(f.Duties)}
	laid := &layouts{}
	err = s.onAll(ctx, func(ctx context.Context, i int, c *CircuitRun) error {
		j := &job{solution: s, run: c, number: i + 1, progress: p, layouts: laid, csv: opt.CSV}
		if err := j.solve(ctx); err != nil {
			return err
		}
		c.noted = c.Findings
		s.expectCooling(c, opt.Before)
		return nil
	})
	if err != nil {
		return nil, err
	}
	s.Pending = slices.ContainsFunc(s.Circuits, func(c *CircuitRun) bool { _, ok := s.heatSectionOf(c); return ok })
	s.conclude()
	return s, nil
}

// onAll does something for all circuits at the same time. When one fails, the others give up.
func (s *Solution) onAll(ctx context.Context, do func(ctx context.Context, i int, c *CircuitRun) error) error {
	ctx, cancel := context.WithCancel(ctx)
	defer cancel()
	errs := make([]error, len(s.Circuits))
	room := make(chan struct{}, runtime.GOMAXPROCS(0))
	var wg sync.WaitGroup
	for i, c := range s.Circuits {
		wg.Add(1)
		go func() {
			defer wg.Done()
			room <- struct{}{}
			defer func() { <-room }()
			if errs[i] = do(ctx, i, c); errs[i] != nil {
				cancel()
			}
		}()
	}
	wg.Wait()
	return firstError(errs)
}

// conclude draws the years and what follows from them.
func (s *Solution) conclude() {
	for _, c := range s.Circuits {
		c.Year = year(c.Duties, s.File.Calendar, s.File.standbyOf(s.File.Circuit(c.Circuit.Name)))
		c.Heat = heatOf(c.Duties, c.Year, s.Oil, s.Air)
		c.Money = s.Tariff.YearCost(c.Year)
		c.Services = c.services()
		c.Findings = append(c.noted[:len(c.noted):len(c.noted)], c.remarks()...)
		c.Findings = append(c.Findings, s.warmthRemarks(c)...)
		c.Findings = append(c.Findings, s.fuelRemarks(c)...)
		c.Findings = append(c.Findings, s.extrapolations(c)...)
		c.Findings = append(c.Findings, c.serviceRemarks()...)
		c.Findings = append(c.Findings, circuitCautions(c)...)
	}
	s.Comparisons = s.compare()
}

// firstError prefers the error that made the others give up.
func firstError(errs []error) error {
	var first error
	for _, err := range errs {
		if err != nil && (first == nil || errors.Is(first, context.Canceled)) {
			first = err
		}
	}
	return first
}

// job solves one circuit.
type job struct {
	solution *Solution
	run      *CircuitRun
	number   int
	progress *progress
	layouts  *layouts
	csv      func(string) (io.WriteCloser, error)
}

func (j *job) solve(ctx context.Context) error {
	f, r := j.solution.File, j.run
	for _, d := range f.Duties {
		r.Duties = append(r.Duties, &DutyRun{Duty: d})
	}
	for _, found := range f.Findings() {
		if found.Circuit == r.Circuit.Name {
			j.note("", []circuit.Finding{found})
		}
	}
	if stopped := j.guard("", func() { j.note("", f.checkCircuit(r.Circuit)) }); stopped ||
		circuit.AnyStops(r.Findings) {
		j.progress.add(progressParts * len(f.Duties))
		return nil
	}
	for i, d := range r.Duties {
		var err error
		j.guard(d.Duty.Name, func() { err = j.solveDuty(ctx, d, i+1) })
		if err != nil {
			return err
		}
	}
	return nil
}

// guard keeps an error of the program in one circuit from ending the others: it
// becomes a finding that stops.
func (j *job) guard(dutyName string, do func()) (stopped bool) {
	defer func() {
		if v := recover(); v != nil {
			stopped = true
			j.note(dutyName, []circuit.Finding{{Level: circuit.Stops,
				Text: fmt.Sprintf("the program met an error of its own (%v); please report it with this file", v)}})
		}
	}()
	do()
	return false
}

// note keeps findings, each once, with circuit and duties filled in.
func (j *job) note(dutyName string, fs []circuit.Finding) {
	for _, f := range fs {
		if f.Circuit == "" {
			f.Circuit = j.run.Circuit.Name
		}
		if f.Duty == "" {
			f.Duty = dutyName
		}
		if o := j.alike(f); o == nil {
			j.run.Findings = append(j.run.Findings, f)
		} else if o.Duty != "" && f.Duty != "" {
			o.ShowsIn(f.Duty)
		}
	}
}

// alike is what was noted already in the same words of the same block, or nil.
func (j *job) alike(f circuit.Finding) *circuit.Finding {
	for i := range j.run.Findings {
		if o := &j.run.Findings[i]; o.Text == f.Text && o.Block == f.Block && o.Level == f.Level {
			return o
		}
	}
	return nil
}

// solveDuty runs the circuit over one duty; the error is that of the context or of a CSV file.
func (j *job) solveDuty(ctx context.Context, r *DutyRun, number int) error {
	if err := ctx.Err(); err != nil {
		return err
	}
	c, found := circuit.Compile(j.run.Circuit, j.solution.File.Axes, r.Duty)
	j.note(r.Duty.Name, found)
	if c == nil {
		j.progress.add(progressParts)
		return nil
	}
	params, series := c.Defaults(), j.layouts.series(c, r.Duty)
	steps := len(series.T)
	ledger := NewLedger(c.Channels(), ShaftSignals(j.run.Circuit, c.Signals()), steps)
	watch, plot := c.NewWatch(params, series), newRecorder(c.Signals(), c.Channels(), steps)
	counter := &stepCounter{progress: j.progress, of: steps, open: c.HasSlowStates() && r.Duty.Repeats}
	operation, passage := newOperation(j.run.Circuit, c.Signals()), newPassage(j.run.Circuit, c.Signals(), c.Channels())
	receivers := circuit.Receivers{ledger, watch, plot, counter, operation, passage}
	if c.HasSlowStates() { // a period may be several cycles: the plot keeps the first of them
		receivers[2] = &until{plot, series.T[steps-1]}
	}
	compared := newMeters(c, series)
	if compared != nil {
		receivers = append(receivers, compared)
	}
	passed, used := newExchanges(c), newServices(c, j.solution.Conditions)
	if len(passed.groups) > 0 {
		receivers = append(receivers, passed)
	}
	if len(used.runs) > 0 {
		receivers = append(receivers, used)
	}
	table, err := j.openTable(c, r, number)
	if err != nil {
		return err
	}
	if table != nil {
		receivers = append(receivers, table)
	}
	cycles, cert, err := 1, circuit.Certificate{}, error(nil)
	if r.Duty.Repeats {
		cycles, _, cert, err = circuit.RunPeriodic(ctx, c, params, series, j.solution.Conditions, counter, receivers)
	} else {
		_, cert, err = circuit.RunParallel(ctx, c, params, series, j.solution.Conditions, 0, receivers)
	}
	if errors.Is(err, circuit.ErrNoPeriod) {
		j.note(r.Duty.Name, []circuit.Finding{{Level: circuit.Warns, Text: err.Error()}})
		err = nil
	}
	if table != nil {
		if failed := table.close(); failed != nil {
			return failed
		}
	}
	if ctx.Err() != nil {
		return ctx.Err()
	}
	j.progress.add(progressParts - counter.passed)
	if err != nil {
		j.note(r.Duty.Name, []circuit.Finding{{Level: circuit.Stops, Text: err.Error()}})
		return nil
	}
	r.Certificate, r.Plot = cert, plot.done()
	r.Cycles = cycles
	r.Peak, r.Shortfalls, r.Gates = watch.PeakPressure(), watch.Shortfalls(cycles), watch.Gates()
	r.Operating, r.Throughput = operation.all(), passage.all()
	r.Measured, r.Plot.Measured = compared.results(), measuredTracks(r.Duty, compared)
	r.Exchanges, r.Services = passed.list(cycles), used.list(watch.SwitchedUses(cycles), cycles)
	r.Balance = ledger.Balance(r.Duty.Repeats).average(cycles)
	r.machine, r.courses = r.Balance, r.Plot
	j.note(r.Duty.Name, watch.Findings())
	return nil
}
