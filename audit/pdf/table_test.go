package pdf

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/audit/pen"
	"barlitre/machines/units"
)

func freshSheet() (*sheet, *recorders) {
	r := &recorders{}
	s := newSheet(r, 1, furniture{})
	s.newPage()
	return s, r
}

func TestTableGoesOverPages(t *testing.T) {
	s, r := freshSheet()
	tab := table{title: "Long", cols: []column{{"name", false}, {"amount", true}}, note: "a note"}
	for i := range 150 {
		tab.rows = append(tab.rows, row{cells: []string{fmt.Sprintf("row %d", i), fmt.Sprintf("%d kJ", i)}})
	}
	s.table(tab)
	s.table(tab)
	last := -1
	for n, p := range r.pages {
		heads, rows, right := 0, 0, map[float64]bool{}
		for _, b := range p.Boxes() {
			if b.Text == "amount" {
				heads++
			}
			if strings.HasPrefix(b.Text, "row ") {
				rows++
				var i int
				fmt.Sscanf(b.Text, "row %d", &i)
				if i != (last+1)%150 {
					t.Errorf("row %d follows row %d", i, last)
				}
				last = i
			}
			if strings.HasSuffix(b.Text, " kJ") {
				right[math.Round(100*(b.X+b.W))/100] = true
			}
		}
		if heads == 0 || rows < together {
			t.Errorf("page %d: %d heads, %d rows", n+1, heads, rows)
		}
		if len(right) != 1 {
			t.Errorf("page %d: numbers end at %v", n+1, right)
		}
		checkPage(t, fmt.Sprint("page ", n+1), p)
	}
	if last != 149 {
		t.Errorf("the last row is %d", last)
	}
}

// A heading is never the last thing on a page.
func TestHeadingStaysWithItsTable(t *testing.T) {
	for at := top; at < bottom; at += 2.7 {
		s, r := freshSheet()
		s.y = at
		s.heading(2, "HEAD", 20)
		s.table(table{title: "TITLE", cols: []column{{"a", false}}, rows: []row{{cells: []string{"FIRST"}}}})
		for _, p := range r.pages {
			text := p.String()
			if strings.Contains(text, "HEAD") != strings.Contains(text, "FIRST") || strings.Contains(text, "TITLE") != strings.Contains(text, "FIRST") {
				t.Errorf("from %.1f mm down the heading is parted from its table", at)
			}
		}
	}
}

func TestShare(t *testing.T) {
	for _, c := range []struct {
		name        string
		least, most []float64
		all         float64
		want        []float64
	}{
		{"room to spare is shared evenly", []float64{10, 10}, []float64{20, 30}, 70, []float64{30, 40}},
		{"narrow stays whole", []float64{5, 5}, []float64{10, 400}, 100, []float64{10, 90}},
		{"too narrow for all", []float64{60, 40}, []float64{60, 40}, 50, []float64{30, 20}},
	} {
		got := share(c.least, c.most, c.all)
		for i := range got {
			if math.Abs(got[i]-c.want[i]) > 1e-6 {
				t.Errorf("%s: %v, want %v", c.name, got, c.want)
			}
		}
	}
}

func TestWrap(t *testing.T) {
	st := style{size: 3}
	for _, text := range []string{"", "one", "a b c d e f g h i j k l m n o p q r s t u v w x y z", strings.Repeat("x", 300),
		"12\u202f345\u202fkWh a year and then some", "path/to/some/very/long/file/name/that/never/ends/and/goes/on.yaml", "a\nb\n\nc"} {
		for _, width := range []float64{0.5, 4, 12, 60} {
			lines := st.wrap(text, width)
			for _, l := range lines {
				if n := len([]rune(l)); st.width(l) > width && n > 1 {
					t.Errorf("%q is %.1f wide, room %.1f", l, st.width(l), width)
				}
			}
			squeeze := func(s string) string { return strings.NewReplacer(" ", "", "\n", "").Replace(s) }
			if got := squeeze(strings.Join(lines, "")); got != squeeze(pen.Clean(text)) {
				t.Errorf("wrapped %q gives %q", text, got)
			}
		}
	}
	if got := st.wrap("about 12\u202f345\u202fkWh", st.width("about 12\u202f345")); len(got) != 2 || got[1] != "12\u202f345\u202fkWh" {
		t.Errorf("a number is parted from its unit: %q", got)
	}
}

// The loss steps of a year hold all of its energy, whatever is gathered.
func TestLossStepsAddUp(t *testing.T) {
	s := solve(t, read(t))
	kWh, _ := units.ParseUnit("kWh", units.Energy)
	for i, c := range newLayout(s, Options{}).lossSteps()[0].Circuits {
		sum := c.Returned + c.WorkPositive + c.Stored - c.WorkNegative
		heat := 0.0
		for _, step := range c.Steps {
			sum += step.Value
			if step.Heat {
				heat += step.Value
			}
		}
		y := s.Circuits[i].Year
		if want := kWh.FromSI(y.Drawn.Total()); math.Abs(sum-want) > 1e-6*want {
			t.Errorf("%s: steps hold %g kWh of %g", c.Title, sum, want)
		}
		if want := kWh.FromSI(y.HeatToOil().Total()); math.Abs(heat-want) > 1e-6*want {
			t.Errorf("%s: steps heat the oil by %g kWh, the year by %g", c.Title, heat, want)
		}
	}
}

// The power drawn that is plotted, summed over time, is the energy of the balance.
func TestCoursesHoldTheEnergy(t *testing.T) {
	s := solve(t, read(t))
	l := newLayout(s, Options{System: units.SI})
	for i, c := range l.courses(0) {
		for n, want := range []float64{s.Circuits[i].Duties[0].Balance.SupplyIn.Total() - s.Circuits[i].Duties[0].Balance.Returned.Total(),
			s.Circuits[i].Duties[0].Balance.HeatToOil().Total()} {
			line, sum := c.lanes[n].Series[0], 0.0
			for k := 1; k < len(line.X); k++ {
				sum += (line.X[k] - line.X[k-1]) * (line.Y[k] + line.Y[k-1]) / 2
			}
			if math.Abs(sum-want) > 1e-6*want {
				t.Errorf("%s, %s: the course holds %g J, the balance %g", c.name, c.lanes[n].Title, sum, want)
			}
		}
	}
}
