package energy

import (
	"math"
	"strings"
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/machines/units"
	"barlitre/samples"
)

func shown(t *testing.T, name string) (*stationtest.Frame, *Station) {
	t.Helper()
	data, err := samples.Read(name)
	if err != nil {
		t.Fatal(err)
	}
	f := stationtest.Open(t, New, string(data), nil)
	return f, f.Station.(*Station)
}

func part(t *testing.T, parts []widgets.Part, name string) widgets.Part {
	t.Helper()
	var names []string
	for _, p := range parts {
		if p.Name == name {
			return p
		}
		names = append(names, p.Name)
	}
	t.Fatalf("no part %q among %v", name, names)
	return widgets.Part{}
}

// clickStep clicks a row of the figure as a mouse does.
func clickStep(t *testing.T, s *Station, name string) {
	t.Helper()
	p := part(t, s.steps.Parts(), name)
	at := fyne.NewPos(float32(p.X+p.W/2), float32(p.Y+p.H/2))
	s.steps.MouseUp(&desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: at}, Button: desktop.MouseButtonPrimary})
}

// selectRow goes to a row as the keyboard does, from one above it.
func selectRow(t *testing.T, f *stationtest.Frame, s *Station, name string) {
	t.Helper()
	for i, l := range s.lines {
		if l.row != nil && s.tableRow(i).Name == name {
			s.table.Select(i-1, 0)
			f.Win.Canvas().Focus(s.table)
			s.table.TypedKey(&fyne.KeyEvent{Name: fyne.KeyDown})
			return
		}
	}
	t.Fatalf("no row %q", name)
}

// TestStepOpensTheReportsDigits clicks steps of both circuits: the calculation has the
// energy as the tables of the report print it.
func TestStepOpensTheReportsDigits(t *testing.T) {
	f, s := shown(t, "baling-press.yaml")
	r := f.Report()
	for _, c := range []struct{ step, circuit, row string }{
		{"1.RV1: relief spill", r.Circuits[0].Name, "RV1: relief spill"},
		{"1.V1: metering P-A", r.Circuits[0].Name, "V1: metering P-A"},
		{"1.drawn from the supply", r.Circuits[0].Name, "drawn from the supply"},
		{"2.work against loads", r.Circuits[1].Name, "work against loads"},
		{"2.drawn from the supply", r.Circuits[1].Name, "drawn from the supply"},
	} {
		clickStep(t, s, c.step)
		cells := reportRow(t, r, c.circuit, c.row)
		dump := s.calc.DumpText()
		if !strings.Contains(dump, "Calculation: "+c.circuit+", "+c.row) || !strings.Contains(s.calc.value.DumpText(), cells[2]) || !strings.Contains(s.calc.numbers.DumpText(), cells[2]) {
			t.Errorf("%s: %q lacks %q", c.step, dump, cells[2])
		}
		if row, _ := s.table.Selection(); row < 0 || s.lines[row].row.Name != c.row || s.circuitName(s.lines[row].circuit) != c.circuit {
			t.Errorf("%s: row %d of the table is marked", c.step, row)
		}
	}
	clickStep(t, s, "2.U1: converter")
	if f.Circuit != 1 || f.Block != "U1" {
		t.Errorf("the block at hand is %q of circuit %d", f.Block, f.Circuit)
	}
	relief := s.shown.LossCalculation(0, 0, "RV1", "relief spill", units.Metric)
	clickStep(t, s, "1.RV1: relief spill")
	if s.calc.formula.DumpText() != relief.Formula || s.calc.numbers.DumpText() != relief.Numbers || !strings.Contains(s.calc.source.DumpText(), relief.Source) {
		t.Errorf("the calculation of the relief valve is %q", s.calc.DumpText())
	}
}

// reportRow finds a row of a cycle of the first duty in the report.
func reportRow(t *testing.T, r *audit.Report, circuit, row string) []string {
	t.Helper()
	for _, c := range r.Circuits {
		for _, x := range c.Duties[0].Losses.Rows {
			if c.Name == circuit && x.Cells[0] == row {
				return x.Cells
			}
		}
	}
	t.Fatalf("the report has no row %s of %s", row, circuit)
	return nil
}

// TestTableHasTheReportsDigits goes through the table with the keyboard.
func TestTableHasTheReportsDigits(t *testing.T) {
	f, s := shown(t, "quayside-winch.yaml")
	r := f.Report()
	column := map[string]int{"cycle": 2, "driving": 4, "holding": 5, "idle": 6}
	for i, l := range s.lines {
		if l.row == nil {
			continue
		}
		cells := reportRow(t, r, s.circuitName(l.circuit), l.row.Name)
		got := s.tableRow(i).Cells
		for c, col := range s.columns() {
			if n, ok := column[col.Name]; ok && got[c]+"\u202fkJ" != cells[n] {
				t.Errorf("%s, %s: %q, the report prints %q", l.row.Name, col.Name, got[c], cells[n])
			}
		}
		selectRow(t, f, s, s.tableRow(i).Name)
		if !strings.Contains(s.calc.numbers.DumpText(), cells[2]) {
			t.Errorf("%s: the calculation %q lacks %q", l.row.Name, s.calc.numbers.DumpText(), cells[2])
		}
	}
}

// TestYear switches to the year: the digits are those of the report's table of the year.
func TestYear(t *testing.T) {
	f, s := shown(t, "quayside-winch.yaml")
	s.scope.SetSelected(wholeYear)
	r := f.Report()
	for i, l := range s.lines {
		if l.row == nil {
			continue
		}
		var want []string
		for _, x := range r.Circuits[l.circuit].Losses.Rows {
			if x.Cells[0] == l.row.Name {
				want = x.Cells
			}
		}
		got := s.tableRow(i).Cells
		if got[2]+"\u202fkWh" != want[2] || got[4]+"\u202fEUR" != want[4] {
			t.Errorf("%s: %v, the report prints %v", l.row.Name, got, want)
		}
		e := l.row.Energy
		if sum := e.Working + e.Holding + e.Idle; math.Abs(sum-e.Total()) > 1e-9*math.Abs(e.Total()) {
			t.Errorf("%s: the states add up to %g, not %g", l.row.Name, sum, e.Total())
		}
	}
	clickStep(t, s, "1.drawn from the supply")
	for _, want := range []string{"handling: ", "waiting, motor running: ", "E_cycle · hours / cycle"} {
		if !strings.Contains(s.calc.DumpText(), want) {
			t.Errorf("the year's calculation lacks %q: %s", want, s.calc.DumpText())
		}
	}
	s.scope.SetSelectedIndex(1)
	if f.At != 1 || s.year || !strings.Contains(s.calc.title.DumpText(), "drawn from the supply") {
		t.Errorf("duty %d, year %v, %q", f.At, s.year, s.calc.title.DumpText())
	}
}

// TestOneScale measures the bars as they are drawn: in both circuits one kilojoule has
// the same width.
func TestOneScale(t *testing.T) {
	f, s := shown(t, "baling-press.yaml")
	rec := pen.NewRecorder()
	regions := s.drawn.figure.Draw(rec, 500, s.drawn.figure.Height(), figures.Light)
	var widths []float64
	for _, r := range regions {
		if r.Kind != figures.KindSupply {
			continue
		}
		for _, shape := range rec.Shapes() {
			if lo, hi := shape.Bounds(); shape.Fill == figures.Light.Pale && lo.Y >= r.Y-1 && hi.Y <= r.Y+r.H+1 {
				widths = append(widths, hi.X-lo.X)
			}
		}
	}
	if len(widths) != 2 {
		t.Fatalf("%d bars of supply, want one a circuit", len(widths))
	}
	a, b := f.Solution().Circuits[0].Duties[0].Balance, f.Solution().Circuits[1].Duties[0].Balance
	want := b.SupplyIn.Total() / a.SupplyIn.Total()
	if got := widths[1] / widths[0]; math.Abs(got-want) > 1e-6 {
		t.Errorf("the bars are as 1 : %g, the energies as 1 : %g", got, want)
	}
}

func TestGatheredStep(t *testing.T) {
	_, s := shown(t, "baling-press.yaml")
	clickStep(t, s, "1.other losses to the oil")
	if !strings.Contains(s.calc.formula.DumpText(), "Σ") || !strings.Contains(s.calc.numbers.DumpText(), "F1: filter  1.762\u202fkJ") {
		t.Errorf("gathered losses: %q", s.calc.DumpText())
	}
	if row, _ := s.table.Selection(); row >= 0 {
		t.Errorf("row %d is marked for several losses", row)
	}
}

func TestFigureOpens(t *testing.T) {
	f, s := shown(t, "baling-press.yaml")
	for _, fig := range f.Report().Circuits[1].Duties[0].Figures {
		s.Explain(fig)
		if !strings.Contains(s.calc.title.DumpText(), f.Report().Circuits[1].Name) && fig.Name != "cycle" || s.calc.value.DumpText() != fig.Text || s.calc.numbers.DumpText() != fig.Calculation.Numbers {
			t.Errorf("%s: %q", fig.Name, s.calc.DumpText())
		}
	}
	want := f.Report().Circuits[0].Duties[0].Figures[1]
	s.figures.Table.Tapped(1, 1)
	if s.calc.value.DumpText() != want.Text || !strings.Contains(s.calc.title.DumpText(), "As found, "+want.Name) {
		t.Errorf("a click on %s opens %q", want.Name, s.calc.DumpText())
	}
}

// TestFollowsEdits changes a value: what is open stays open, with new digits.
func TestFollowsEdits(t *testing.T) {
	f, s := shown(t, "baling-press.yaml")
	clickStep(t, s, "1.RV1: relief spill")
	before := s.calc.value.DumpText()
	if err := f.Document.Set(f.Solution().Circuits[0].Circuit.Name+"/RV1.crack", "200 bar"); err != nil {
		t.Fatal(err)
	}
	f.Edited()
	if s.calc.value.DumpText() == before || !strings.Contains(s.calc.title.DumpText(), "RV1: relief spill") || !strings.Contains(s.calc.numbers.DumpText(), "pc = 200 bar") {
		t.Errorf("after the edit: %q", s.calc.DumpText())
	}
}

func TestLocalAndUnits(t *testing.T) {
	f, s := shown(t, "baling-press.yaml")
	f.Comma = true
	f.Station.Changed(station.Settings)
	f.Win.Canvas().Capture() // the figure names its parts when it is drawn
	clickStep(t, s, "1.RV1: relief spill")
	if !strings.Contains(s.calc.value.DumpText(), "74,96\u202fkJ") || !strings.Contains(part(t, s.steps.Parts(), "1.RV1: relief spill").Text, "74,96") {
		t.Errorf("with a comma: %q", s.calc.value.DumpText())
	}
	f.Comma, f.Units = false, units.SI
	f.Station.Changed(station.Settings)
	if !strings.Contains(s.calc.value.DumpText(), "74\u202f960\u202fJ") {
		t.Errorf("in SI: %q", s.calc.value.DumpText())
	}
}

func TestEmptyStates(t *testing.T) {
	head := "format: barlitre/1\noil: {temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}\naxes: {ram: linear}\n"
	bench := "circuits: [{name: Bench, pump_at_rest: keep, blocks: {T1: {kind: tank}}, lines: []}]\n"
	points := "duties: [{name: a, points: {t: [0 s, 1 s], ram.speed: [0 m/s, 0 m/s], ram.load: [0 N, 0 N]}}]\n"
	for _, c := range []struct{ text, want string }{
		{head + "duties: []\ncircuits: []\n", "no circuit"},
		{head + "duties: []\n" + bench, "no duty"},
		{head + points + strings.Replace(bench, "tank", "tanc", 1), "could be solved"},
	} {
		f := stationtest.Open(t, New, c.text, nil)
		s := f.Station.(*Station)
		if s.filled.Visible() || !strings.Contains(s.empty.Text, c.want) {
			t.Errorf("%q, want %q", s.empty.Text, c.want)
		}
		if f.Station.Mend() {
			t.Error("an empty audit has no balance to mend")
		}
	}
}

func TestFitsSmallWindows(t *testing.T) {
	f, s := shown(t, "quayside-winch.yaml")
	if m := s.Content().MinSize(); m.Width > 900 || m.Height > 480 {
		t.Errorf("the least size is %v", m)
	}
	f.Theme(false, 2)
	if m := s.Content().MinSize(); m.Width > 1800 || m.Height > 960 {
		t.Errorf("at twice the scale the least size is %v", m)
	}
}

// TestLooks checks what scripts find, and writes pictures when asked to.
func TestLooks(t *testing.T) {
	f, s := shown(t, "baling-press.yaml")
	clickStep(t, s, "1.RV1: relief spill")
	f.Picture("energy-light", 1190, 590)
	dump := f.Dump()
	for _, want := range []string{"energy.scope\t", "energy.steps\t", "energy.steps/2.drawn from the supply\t", "energy.table\t", "energy.table/As found/RV1: relief spill.cycle\t", "energy.calculation\t"} {
		if !strings.Contains(dump, want) {
			t.Errorf("the dump lacks %q:\n%s", want, dump)
		}
	}
	f.Theme(true, 1)
	f.Picture("energy-dark", 1190, 590)
	f.Picture("energy-dark-small", 930, 480)
	s.scope.SetSelected(wholeYear)
	f.Picture("energy-dark-year", 1190, 590)
	f.Theme(false, 1.5)
	f.Picture("energy-light-150", 1190, 590)
	f, _ = shown(t, "quayside-winch.yaml")
	f.Picture("energy-winch", 1190, 590)
	f.Picture("energy-winch-tall", 1500, 1300)
}
