package samples

import (
	"context"
	"fmt"
	"math"
	"os"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"barlitre/audit"
)

// quoted says where each row of the tables in README.md comes from: one figure a
// circuit, or one for the comparison.
var quoted = map[string]func(*audit.CircuitRun) float64{
	"energy drawn, MWh a year":                           func(c *audit.CircuitRun) float64 { return c.Year.Drawn.Total() / megawattHour },
	"energy returned to the mains, MWh a year":           func(c *audit.CircuitRun) float64 { return c.Year.Returned.Total() / megawattHour },
	"energy bill, EUR a year":                            func(c *audit.CircuitRun) float64 { return c.Money.Net() },
	"work against the load, % of the energy drawn":       func(c *audit.CircuitRun) float64 { return share(c, c.Year.WorkPositive().Total()) },
	"drawn while nothing moves, %":                       func(c *audit.CircuitRun) float64 { return share(c, c.Year.Drawn.Holding+c.Year.Drawn.Idle) },
	"over relief valves, %":                              lossOf("relief"),
	"in valves that throttle or brake, %":                lossOf("metering", "unloaded circulation", "braking of the load"),
	"in the counterbalance valve, %":                     lossOf("braking of the load"),
	"in compensators, %":                                 lossOf("compensator"),
	"in the brake resistor, %":                           lossOf("brake resistor"),
	"in pumps and hydraulic motors, %":                   machines,
	"in electric motor, converter and gearbox, %":        lossOf("electric motor", "converter", "brake resistor", "gearbox"),
	"mean power over a cycle of work, kW":                func(c *audit.CircuitRun) float64 { return mean(c, 0) / 1e3 },
	"mean power while waiting, kW":                       func(c *audit.CircuitRun) float64 { return mean(c, 1) / 1e3 },
	"highest power drawn, kW":                            func(c *audit.CircuitRun) float64 { return c.Duties[0].Balance.PeakSupply / 1e3 },
	"highest pressure, bar":                              func(c *audit.CircuitRun) float64 { return c.Duties[0].Peak.Value / 1e5 },
	"mean heat into the oil, kW":                         func(c *audit.CircuitRun) float64 { return c.Heat.Year.Mean / 1e3 },
	"in the combustion engine, %":                        lossOf("engine"),
	"given back by the load, % of the energy drawn":      func(c *audit.CircuitRun) float64 { return -share(c, c.Year.WorkNegative().Total()) },
	"passed between services over the shaft, kJ a cycle": func(c *audit.CircuitRun) float64 { return c.Duties[0].Exchanged() / 1e3 },
	"idle cylinders, %":                                  lossOf("idle cylinders"),
	"returned energy at the price of drawn, EUR a year":  func(c *audit.CircuitRun) float64 { return c.Year.Returned.Total() * 0.18 / kilowattHour },
}

var compared = map[string]func(*audit.Comparison) float64{
	"saved, MWh a year":           func(c *audit.Comparison) float64 { return c.SavedDrawn / megawattHour },
	"saved, % of the as found":    func(c *audit.Comparison) float64 { return 100 * c.SavedShare },
	"saved, EUR a year":           func(c *audit.Comparison) float64 { return c.MoneySaved },
	"payback, years":              func(c *audit.Comparison) float64 { return c.Payback.Likely },
	"payback at low cost, years":  func(c *audit.Comparison) float64 { return c.Payback.Low },
	"payback at high cost, years": func(c *audit.Comparison) float64 { return c.Payback.High },
}

const (
	kilowattHour = 3.6e6 // J
	megawattHour = 3.6e9
)

func share(c *audit.CircuitRun, energy float64) float64 { return 100 * energy / c.Year.Drawn.Total() }

func mean(c *audit.CircuitRun, duty int) float64 {
	b := c.Duties[duty].Balance
	return b.SupplyIn.Total() / b.Cycle
}

// lossOf returns the share of the losses whose kind begins with, or for a relief
// valve contains, one of the words.
func lossOf(kinds ...string) func(*audit.CircuitRun) float64 {
	return func(c *audit.CircuitRun) float64 {
		sum := 0.0
		for _, l := range c.Year.Losses {
			for _, k := range kinds {
				if strings.HasPrefix(l.Kind, k) || k == "relief" && strings.Contains(l.Kind, k) {
					sum += l.Energy.Total()
				}
			}
		}
		return share(c, sum)
	}
}

func machines(c *audit.CircuitRun) float64 {
	sum := 0.0
	for _, l := range c.Year.Losses {
		b := c.Circuit.Block(l.Block) // nil for what a node loses
		if b == nil || l.Kind != "slip" && l.Kind != "friction" && b.Kind != "switched_machine" {
			continue
		}
		if b.Kind == "pump" || b.Kind == "charge_pump" || b.Kind == "motor" || b.Kind == "switched_machine" {
			sum += l.Energy.Total()
		}
	}
	return share(c, sum)
}

// Every figure in the tables of README.md is that of the sample named in the
// heading above, to the last digit printed.
func TestReadmeTables(t *testing.T) {
	all, err := solved()
	if err != nil {
		t.Fatal(err)
	}
	var s *audit.Solution
	rows := 0
	for n, line := range readme(t) {
		if strings.HasPrefix(line, "## ") {
			s = nil
			for name := range all {
				if strings.Contains(line, name) {
					s = all[name]
				}
			}
			continue
		}
		cells := tableRow(line)
		if cells == nil {
			continue
		}
		if s == nil {
			t.Errorf("line %d: a table under no sample", n+1)
			continue
		}
		rows++
		for _, fault := range wrong(s, cells) {
			t.Errorf("line %d: %s", n+1, fault)
		}
	}
	if rows < 30 {
		t.Errorf("only %d rows were compared", rows)
	}
}

func wrong(s *audit.Solution, cells []string) []string {
	label, figures := cells[0], cells[1:]
	var want []float64
	if f := quoted[label]; f != nil {
		for _, c := range s.Circuits {
			want = append(want, f(c))
		}
	} else if f := compared[label]; f != nil {
		want = []float64{f(s.Comparisons[0])}
	}
	if len(want) != len(figures) {
		return []string{fmt.Sprintf("%q has %d figures, want %d", label, len(figures), len(want))}
	}
	var out []string
	for i, text := range figures {
		text = strings.ReplaceAll(text, ",", "") // thousands
		got, err := strconv.ParseFloat(text, 64)
		_, decimals, _ := strings.Cut(text, ".")
		room := 0.5*math.Pow(10, -float64(len(decimals))) + 1e-9
		if text == "0" {
			room = 0.005 // none at all, not a small one rounded away
		}
		if err != nil || math.Abs(got-want[i]) > room {
			out = append(out, fmt.Sprintf("%s: %s, computed %.6g", label, figures[i], want[i]))
		}
	}
	return out
}

var figure = regexp.MustCompile(`\d[\d.]*(?: to \d+)? ?(?:%|kW|kWh|MWh|EUR|bar|years?\b)`)

// Outside the tables the README quotes no figure but those published by others,
// which the audit prints as well.
func TestReadmeText(t *testing.T) {
	all, err := solved()
	if err != nil {
		t.Fatal(err)
	}
	published := all[Names()[0]].Comparisons[0].Published.Text
	for n, line := range readme(t) {
		if strings.HasPrefix(line, "|") {
			continue
		}
		for _, x := range figure.FindAllString(line, -1) {
			if !strings.Contains(published, x) {
				t.Errorf("line %d quotes %q, which no test reproduces", n+1, x)
			}
		}
	}
}

// What the README says in words of the savings must be so.
func TestReadmeClaims(t *testing.T) {
	all, err := solved()
	if err != nil {
		t.Fatal(err)
	}
	for name, above := range map[string]bool{"baling-press.yaml": true, "quayside-winch.yaml": false, "handling-machine.yaml": false,
		"ramp-carrier.yaml": false, "transfer-station.yaml": false} {
		c := all[name].Comparisons[0]
		if c.Published.Outside != above || !c.Published.Known {
			t.Errorf("%s: %s", name, c.Published.Text)
		}
	}
	press, winch := all["baling-press.yaml"].Circuits[0], all["quayside-winch.yaml"].Circuits[0]
	handling := all["handling-machine.yaml"]
	found, proposed := handling.Circuits[0], handling.Circuits[1]
	station, carrier := all["transfer-station.yaml"], all["ramp-carrier.yaml"]
	valves, still := "in valves that throttle or brake, %", "drawn while nothing moves, %"
	for _, claim := range []struct {
		words     string
		x, lo, hi float64
	}{
		{"more than half in relief and throttling valves", quoted["over relief valves, %"](press) + quoted[valves](press), 50, 100},
		{"more than a fifth while nothing moves", quoted[still](press), 20, 25},
		{"nearly half in valves", quoted[valves](winch), 42, 50},
		{"a third in pump and motor", machines(winch), 32, 35},
		{"two fifths in compensators, margin and counterbalance valve", quoted["in compensators, %"](found) + quoted[valves](found), 39, 44},
		{"the resistor is the largest loss", quoted["in the brake resistor, %"](proposed), largestOther(proposed, "brake resistor"), 100},
		{"a third in compensators and valve edges", quoted["in compensators, %"](station.Circuits[0]) + quoted[valves](station.Circuits[0]), 32, 35},
		{"nearly half is saved", compared["saved, % of the as found"](station.Comparisons[0]), 42, 50},
		{"most of the fuel never reaches the shaft", quoted["in the combustion engine, %"](carrier.Circuits[0]), 60, 100},
		{"gone far above the range assumed", lowestGone(station.Circuits[1]), 1.5, 100},
		{"nearly half is saved by the handling machine", compared["saved, % of the as found"](handling.Comparisons[0]), 45, 50},
		{"boiling in the return line", boils(t), 100, 1000},
	} {
		if !(claim.x >= claim.lo && claim.x <= claim.hi) {
			t.Errorf("%s: %.1f %%", claim.words, claim.x)
		}
	}
}

// boils is the oil temperature [°C] that the winch comes to while it waits on a hot day, with its cooler in the return line.
func boils(t *testing.T) float64 {
	data, err := Read("quayside-winch.yaml")
	if err != nil {
		t.Fatal(err)
	}
	f, _ := audit.Parse(data, nil, "quayside-winch.yaml")
	if err := f.Set("heat.cooler_place", "return"); err != nil {
		t.Fatal(err)
	}
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	h := s.Circuits[0].Warmth
	return min(h.Plant.Steady(2, h.HotDay)-273.15, 999)
}

// lowestGone is the lowest idle loss at which a service loses its advantage, over the high end of the range assumed.
func lowestGone(c *audit.CircuitRun) float64 {
	least := math.Inf(1)
	for _, s := range c.Services {
		least = math.Min(least, s.Beside.Gone()/s.Idle[2].Loss)
	}
	return least
}

// largestOther returns the largest loss of another kind, as a share.
func largestOther(c *audit.CircuitRun, kind string) float64 {
	most := 0.0
	for _, l := range c.Year.Losses {
		if l.Kind != kind {
			most = math.Max(most, share(c, l.Energy.Total()))
		}
	}
	return most
}

func readme(t *testing.T) []string {
	t.Helper()
	data, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	return strings.Split(string(data), "\n")
}

// tableRow splits a row of a table that holds figures; nil for any other line.
func tableRow(line string) []string {
	if !strings.HasPrefix(line, "|") || strings.HasPrefix(line, "|-") || strings.HasPrefix(line, "| |") {
		return nil
	}
	var cells []string
	for _, c := range strings.Split(strings.Trim(line, "|"), "|") {
		cells = append(cells, strings.TrimSpace(c))
	}
	return cells
}
