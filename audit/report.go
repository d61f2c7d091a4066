package audit

import (
	"barlitre/circuit"
	"barlitre/machines/units"
)

// Report holds every figure and sentence that window, PDF or result file may show
// of a solved audit, ready to print. Whoever prints it decides nothing.
type Report struct {
	Title       string
	Site        Site
	System      units.System
	Decisions   []Decision
	Circuits    []CircuitPage
	Assumptions []string
	Recordings  Table // what the duties were taken from, what was found there and done; no rows without one
	Exclusions  []string
	Method      []Law
	Cautions    []CautionText
	Warmth      []Table           // how warm the oil gets, the cooler needed, checks; none where the file says nothing of tank and cooler
	Requests    []Request         // for a cooler, a circuit each
	Findings    []circuit.Finding // of all circuits, those that stop first; cautions are in Cautions
}

// Calculation opens a figure: the formula in symbols, the numbers in it, and where
// formula and numbers come from.
type Calculation struct{ Formula, Numbers, Source string }

// Figure is one number of the report. Value is in SI or in money and NaN when not
// known; Text is what is printed.
type Figure struct {
	Name        string
	Value       float64
	Text        string
	Calculation Calculation
}

// DecisionRow is a figure before and after, and what changes: positive = saved.
// Change is zero where a difference would say nothing.
type DecisionRow struct {
	Name                  string
	Before, After, Change Figure
}

// Decision is the page on one proposal.
type Decision struct {
	Base, Proposal string
	Verdict        string   // in one sentence
	Oil            string   // what the oil temperature found does to the saving, in a sentence or two; "" where it is not known
	Cooler         string   // what the coolers of Rows are for, and what the request sheet asks for
	Warnings       []string // what stands against the verdict, in words
	Rows           []DecisionRow
	Outcome        []Figure // saving, money, payback, CO2
	Source         Table    // where the saving comes from
	Shortfalls     Table
	Published      Published
}

// CircuitPage is the part of the report on one circuit.
type CircuitPage struct {
	Name, Role, Note string
	Solved           bool
	Duties           []DutyPage
	Year             []Figure
	Heat             []Figure
	Machines         []MachinePage // those with most loss first
	States           Table         // time and energy by state of the machine
	Calendar         Table         // by state of the calendar; empty without one
	Losses           Table         // over the year
	Services         Table         // of a cylinder-switched machine; empty without one
	Parameters       []ParameterRow
	Findings         []circuit.Finding
}

// DutyPage is one circuit over one cycle.
type DutyPage struct {
	Name    string
	Figures []Figure
	Losses  Table
	Gates   Table // what it asks of drives, motors and held axes; no rows where there is nothing to ask
	Work    Table // by axis; no rows for a single one
	// Measured channels against computed ones; no rows without measuring.
	Measured Table
}

// Table is a table of printed cells. The first column is text, the others are numbers.
type Table struct {
	Title string
	Head  []string
	Rows  []TableRow
	Note  string
	// Formula is what its numbers follow from, where one holds for all; "" else.
	Formula string
}

// TableRow is a row; Sum marks one that adds up those above.
type TableRow struct {
	Cells []string
	Sum   bool
}

func (t *Table) add(sum bool, cells ...string) { t.Rows = append(t.Rows, TableRow{cells, sum}) }

// Report lays out a solution for a family of units.
func (s *Solution) Report(system units.System) *Report {
	p := printer{system: system, currency: s.Tariff.Currency}
	r := &Report{Title: s.File.Title, Site: s.File.Site, System: system,
		Assumptions: s.assumptions(p), Exclusions: exclusions(), Method: s.method(), Cautions: s.Cautions(), Recordings: s.recordingsTable(p)}
	r.Warmth, r.Requests = s.heatTables(p), s.Requests(system)
	for _, c := range s.Comparisons {
		r.Decisions = append(r.Decisions, s.decision(p, c))
	}
	for _, c := range s.Circuits {
		r.Circuits = append(r.Circuits, s.circuitPage(p, c))
	}
	for _, level := range []circuit.Level{circuit.Stops, circuit.Warns, circuit.Note} {
		for _, c := range s.Circuits {
			for _, f := range c.Findings {
				if f.Level == level {
					r.Findings = append(r.Findings, f)
				}
			}
		}
	}
	return r
}

func (s *Solution) circuitPage(p printer, c *CircuitRun) CircuitPage {
	page := CircuitPage{Name: c.Circuit.Name, Note: c.Circuit.Note, Role: string(AsFound), Parameters: parameters(c.Circuit)}
	if c.Proposal {
		page.Role = string(Proposal)
	}
	for _, f := range c.Findings {
		if f.Level != circuit.Caution {
			page.Findings = append(page.Findings, f)
		}
	}
	for _, d := range c.Duties {
		if d.Balance != nil {
			page.Solved = true
			page.Duties = append(page.Duties, dutyPage(p, d))
		}
	}
	if page.Solved {
		page.Year = s.yearFigures(p, c)
		page.Heat = s.heatFigures(p, c)
		page.States, page.Calendar = stateTable(p, c.Year), s.calendarTable(p, c)
		page.Losses = s.yearLossTable(p, c)
		page.Services = serviceTable(p, c)
		page.Machines = s.machinePages(p, c)
	}
	return page
}
