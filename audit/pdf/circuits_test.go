package pdf

import (
	"context"
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// circuitPages lays a solution out, checks every page and returns those of the circuits
// as drawn, none of which may have anything outside its margins.
func circuitPages(t *testing.T, name string, s *audit.Solution, opt Options) []*pen.Recorder {
	t.Helper()
	opt.Without = []Section{Decision, Basis, Duty, Heat, Money, Parameters, Findings, Method}
	pages := lay(t, name, s, opt)
	out := pages.pages[pageOf(t, pages, Circuits) : pageOf(t, pages, Energy)+1]
	for n, p := range out {
		for _, q := range p.Shapes() {
			lo, hi := q.Bounds()
			if q.Kind == "circle" {
				lo, hi = disc(q)
			}
			if lo.X < side-0.2 || hi.X > side+fullW+0.2 || lo.Y < 8 || hi.Y > pageH-8 {
				t.Errorf("%s, page %d of the circuits: a %s from %.1f to %.1f is outside the margins", name, n+1, q.Kind, lo, hi)
			}
		}
	}
	ids := map[string]int{}
	for _, p := range out {
		for _, b := range p.Boxes() {
			if b.Bold {
				ids[b.Text]++
			}
		}
	}
	need := map[string]int{}
	for _, c := range s.Circuits {
		for _, b := range c.Circuit.Blocks {
			need[b.ID]++
		}
	}
	for id, n := range need {
		if ids[id] < n {
			t.Errorf("%s: block %s stands %d times in the drawings, want %d", name, id, ids[id], n)
		}
	}
	return out
}

// pageOf finds the page on which a section begins, from 0.
func pageOf(t *testing.T, pages *recorders, section Section) int {
	t.Helper()
	for n, p := range pages.pages {
		for _, b := range p.Boxes() {
			if b.Text == string(section) && b.Size == (&sheet{}).head(1).size {
				return n
			}
		}
	}
	t.Fatalf("no page begins section %q", section)
	return 0
}

// disc returns the box about a circle.
func disc(q pen.Shape) (lo, hi pen.Pt) {
	c, r := q.Points[0], q.Points[1].X-q.Points[0].X
	return pen.Pt{X: c.X - r, Y: c.Y - r}, pen.Pt{X: c.X + r, Y: c.Y + r}
}

func sample(t *testing.T, name string) *audit.Solution {
	t.Helper()
	f, found := audit.Read("../../samples/" + name + ".yaml")
	if f == nil {
		t.Fatalf("%s: %v", name, found)
	}
	return solve(t, f)
}

// smallest is the least size of a text in the drawings of the samples [mm]: rows that
// are too long for their room are squeezed, as numbers in Pa and m³/s are.
var smallest = map[units.System]float64{units.Metric: 2, units.US: 1.8, units.SI: 1.5}

// Both circuits of a sample stand on one page, large enough to read.
func TestCircuitsShareAPage(t *testing.T) {
	for _, name := range []string{"baling-press", "quayside-winch"} {
		s := sample(t, name)
		for _, system := range []units.System{units.Metric, units.US, units.SI} {
			pages := circuitPages(t, fmt.Sprint(name, " ", system), s, Options{System: system})
			text := ""
			for _, b := range pages[0].Boxes() {
				text += b.Text + "|"
				if b.Size < smallest[system] {
					t.Errorf("%s: %q is %.2f mm high", name, b.Text, b.Size)
				}
			}
			for _, want := range []string{s.Circuits[0].Circuit.Name + "|", s.Circuits[1].Circuit.Name + "|", symbols, "of heat|", "pilot|", "drain|"} {
				if !strings.Contains(text, want) {
					t.Errorf("%s, %v: the page of the circuits lacks %q", name, system, want)
				}
			}
			if n := strings.Count(text, "of heat|"); n != 1 {
				t.Errorf("%s: %d legends", name, n)
			}
		}
	}
}

// Discs of all circuits have areas in proportion to the energies of the balances,
// added up here, with one factor for all.
func TestDrawnDiscsHaveOneScale(t *testing.T) {
	s := sample(t, "baling-press")
	pages := circuitPages(t, "discs", s, Options{})
	heat := figures.Light.Heat
	var areas, energies []float64
	for _, q := range pages[0].Shapes() {
		if q.Kind == "circle" && q.Fill.R == heat.R && q.Fill.G == heat.G && q.Fill.B == heat.B && q.Fill.A < 255 {
			lo, hi := disc(q)
			areas = append(areas, (hi.X-lo.X)*(hi.X-lo.X))
		}
	}
	areas = areas[1:] // the first is that of the legend
	for _, c := range s.Circuits {
		of := map[string]float64{}
		for _, row := range c.Duties[0].Balance.Losses {
			if c.Circuit.Block(row.Block) != nil { // fans and loop pumps are not drawn
				of[row.Block] += row.Energy.Total()
			}
		}
		for _, j := range of {
			energies = append(energies, j)
		}
	}
	slices.Sort(areas)
	slices.Sort(energies)
	energies = energies[len(energies)-len(areas):] // the least have no disc
	if len(areas) < 10 {
		t.Fatalf("%d discs", len(areas))
	}
	factor := areas[len(areas)-1] / energies[len(energies)-1]
	for i, a := range areas {
		if want := factor * energies[i]; math.Abs(a-want) > 1e-6*areas[len(areas)-1] {
			t.Errorf("disc %d has area %.6g, its heat of %.4g J asks for %.6g", i, a, energies[i], want)
		}
	}
}

// run makes a run of one supply channel from a course of power.
func run(t, v []float64) *audit.DutyRun {
	b := &audit.Balance{}
	for i := range v {
		if v[i] > b.PeakSupply {
			b.PeakSupply, b.PeakSupplyAt = v[i], t[i]
		}
	}
	return &audit.DutyRun{Duty: &duty.Duty{Time: t}, Balance: b, Plot: &audit.Plot{
		Channels: []circuit.Channel{{Role: circuit.Supply}}, Powers: []audit.Track{{T: t, V: v}}}}
}

func TestInstantThatIsDrawn(t *testing.T) {
	for _, c := range []struct {
		what string
		t, v []float64
		want float64
	}{
		{"a stretch beats a peak", []float64{0, 2, 2, 4, 4, 8, 8, 9}, []float64{1, 100, 1, 1, 97, 96, 1, 1}, 6},
		{"the longest of two", []float64{0, 1, 2, 2, 3, 3, 6, 6}, []float64{100, 100, 100, 1, 1, 99, 99, 1}, 4.5},
		{"a stretch up to the end", []float64{0, 5, 5, 9}, []float64{1, 1, 50, 50}, 7},
		{"before a fall in a step", []float64{0, 3, 3, 9}, []float64{1, 100, 1, 1}, math.Nextafter(3, 0)},
		{"a peak in a ramp", []float64{0, 3, 9}, []float64{1, 100, 1}, 3},
		{"no power at all", []float64{0, 4}, []float64{0, 0}, 2},
		{"power only returned", []float64{0, 4}, []float64{-3, -3}, 0},
	} {
		if got := middleOfMost(run(c.t, c.v)); got != c.want {
			t.Errorf("%s: drawn at %v s, want %v s", c.what, got, c.want)
		}
	}
	s := solve(t, read(t))
	at := mostDrawn(s)
	for _, d := range s.Circuits[0].Duties {
		if at.of != s.Circuits[0] || drawnAt(at.of.Duties[at.duty].Plot, at.t) < nearMost*d.Balance.PeakSupply {
			t.Errorf("at %v s of duty %d less is drawn than the %v W of %s", at.t, at.duty, d.Balance.PeakSupply, d.Duty.Name)
		}
	}
}

// What the text says of the instant is what the run says.
func TestDrawnPowerIsThatOfTheRun(t *testing.T) {
	s := sample(t, "quayside-winch")
	text := ""
	for _, b := range circuitPages(t, "winch", s, Options{})[0].Boxes() {
		text += b.Text + " "
	}
	b := s.Circuits[0].Duties[0].Balance
	kW, _ := units.ParseUnit("kW", units.Power)
	kJ, _ := units.ParseUnit("kJ", units.Energy)
	lost := 0.0
	for _, row := range b.Losses {
		if s.Circuits[0].Circuit.Block(row.Block) != nil { // fans and loop pumps are not drawn
			lost += row.Energy.Total()
		}
	}
	if b.CoolingDrawn().Total() <= 0 {
		t.Fatal("no fan runs: the case tells nothing of it")
	}
	for _, want := range []string{units.Number(kW.FromSI(b.PeakSupply), 4) + "\u202fkW", "blocks turn " + units.Number(kJ.FromSI(lost), 4) + "\u202fkJ into heat",
		"the cooling " + units.Number(kJ.FromSI(b.CoolingDrawn().Total()), 4) + "\u202fkJ besides",
		"(lower) of duty “handling”", "Returns "} {
		if !strings.Contains(text, want) {
			t.Errorf("the circuits lack %q in %q", want, text)
		}
	}
}

// A circuit that cannot be solved is drawn all the same, and says so.
func TestUnsolvedCircuitIsDrawn(t *testing.T) {
	f := read(t)
	delete(f.Circuits[0].Block("P1").Values, "displacement")
	s := solve(t, f)
	if at := mostDrawn(s); at.of != s.Circuits[1] {
		t.Errorf("drawn at the instant of %v, want that of the first circuit solved", at.of)
	}
	told := func(name string, s *audit.Solution) (n int) {
		for _, p := range circuitPages(t, name, s, Options{}) {
			for _, b := range p.Boxes() {
				n += strings.Count(b.Text, "it is drawn without results")
			}
		}
		return n
	}
	if n := told("as found unsolved", s); n != 1 {
		t.Errorf("%d circuits say that they have no results, want 1", n)
	}
	for i := range f.Circuits {
		delete(f.Circuits[i].Block("P1").Values, "displacement")
	}
	if n := told("none solved", solve(t, f)); n != len(f.Circuits) {
		t.Errorf("%d circuits say that they have no results, want %d", n, len(f.Circuits))
	}
	f.Duties = nil
	if n := told("no duty", solve(t, f)); n != len(f.Circuits) {
		t.Errorf("without a duty %d circuits say that they have no results, want %d", n, len(f.Circuits))
	}
	f.Circuits = nil
	circuitPages(t, "no circuit", solve(t, f), Options{})
}

// Sixty blocks in one line of filters, solved, and a name over several lines.
func TestLargeCircuitIsDrawn(t *testing.T) {
	f := read(t)
	c := f.Circuits[0].Circuit
	c.Name = strings.Repeat("As found with a long name ", 12)
	last := circuit.PortRef{Block: "F1", Port: "A"}
	from := &c.Lines[len(c.Lines)-1]
	if len(from.Ports) != 2 || from.Ports[1] != last {
		t.Fatalf("the last line is %v", from.Ports)
	}
	for i := len(c.Blocks); i < 60; i++ {
		b := *c.Block("F1")
		b.ID = fmt.Sprintf("FILTER%d", i)
		c.Blocks = append(c.Blocks, b)
		from.Ports = []circuit.PortRef{from.Ports[0], {Block: b.ID, Port: "A"}}
		c.Lines = append(c.Lines, circuit.Line{Ports: []circuit.PortRef{{Block: b.ID, Port: "B"}, last}})
		from = &c.Lines[len(c.Lines)-1]
	}
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	if s.Circuits[0].Duties[0].Balance == nil {
		t.Fatalf("the large circuit is not solved: %v", s.Circuits[0].Findings)
	}
	told, small := 0, map[string]float64{}
	for _, p := range circuitPages(t, "60 blocks", s, Options{}) {
		for _, b := range p.Boxes() {
			told += strings.Count(b.Text, "Drawn smaller")
			if b.Bold {
				small[b.Text] = b.Size
			}
		}
	}
	// The first circuit, one line of filters, is wider than can be read; the others stay readable.
	if told != 1 || small["FILTER59"] > 1.2 || small["PC1"] < 1.6 || small["FILTER59"] == 0 {
		t.Errorf("%d circuits are said to be smaller; names are %.2f and %.2f mm high", told, small["FILTER59"], small["PC1"])
	}
}

// A duty that does not run in the year is not drawn, however much it draws; that which runs is,
// and the text says so. One that alone is solved is drawn all the same.
func TestDutyOfTheYearIsDrawn(t *testing.T) {
	f := read(t)
	drawn := f.Duties[mostDrawn(solve(t, f)).duty].Name
	if len(f.Duties) < 2 {
		t.Fatal("the case needs two duties")
	}
	for _, d := range f.Duties {
		hours := "0 h"
		if d.Name != drawn {
			hours = "100 h"
		}
		if err := f.SetDuty(d.Name, "hours", hours); err != nil {
			t.Fatal(err)
		}
	}
	s := solve(t, f)
	at := mostDrawn(s)
	if got := f.Duties[at.duty].Name; got == drawn || f.Duties[at.duty].Hours == 0 {
		t.Errorf("duty %q is drawn, which has no hours", got)
	}
	if v := BusiestView(s); v.Duty != at.duty {
		t.Errorf("the sheets show duty %d, the report %d", v.Duty, at.duty)
	}
	text := ""
	for _, b := range circuitPages(t, "duty of the year", s, Options{})[0].Boxes() {
		text += b.Text + " "
	}
	if !strings.Contains(text, "in the year") {
		t.Errorf("the circuits do not say why this duty: %q", text)
	}
	for _, c := range s.Circuits {
		c.Duties[at.duty].Balance = nil
	}
	if again := mostDrawn(s); again.of == nil || again.duty == at.duty {
		t.Error("a duty that could not be solved is drawn, or none")
	}
}
