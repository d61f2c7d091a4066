package pdf

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

func TestLayoutOfThePress(t *testing.T) {
	for _, system := range []units.System{units.Metric, units.US, units.SI} {
		pages := lay(t, fmt.Sprint("units ", system), solve(t, read(t)), Options{System: system})
		if n := len(pages.pages); n < 10 || n > 33 { // three circuits, each with a page of its machines
			t.Errorf("%d pages", n)
		}
	}
}

// A page for each decision: nothing of the one on the first page goes over to the second.
func TestDecisionFitsItsPage(t *testing.T) {
	pages := lay(t, "press", solve(t, read(t)), Options{})
	for n := range 2 {
		signed := 0
		for _, b := range pages.pages[n].Boxes() {
			if strings.HasPrefix(b.Text, "Accepted by") {
				signed++
			}
		}
		if signed != 1 {
			t.Errorf("page %d has %d places to accept, want one", n+1, signed)
		}
	}
}

// Whatever stands in names and notes, the pages stay in order.
func TestHostileNames(t *testing.T) {
	for name, text := range map[string]string{
		"long":      strings.Repeat("a very long name with many words ", 12),
		"one word":  strings.Repeat("Donaudampfschifffahrt", 20),
		"emoji":     "press 🏭🔥 \u200d👩‍🔧",
		"invalid":   "a\xff\xfeb \xc3",
		"controls":  "line\nfeed\ttab\x00\x1b[31m",
		"no glyphs": "液压机 \u0600\u0601",
		"brackets":  `(((\)\\ {nb} %s %d`,
	} {
		f := read(t)
		f.Title, f.Path = text, text
		f.Site = audit.Site{Name: text, Customer: text, Author: text, Date: text, Note: text, Currency: "EUR"}
		f.Price.Note = text
		for i := range f.Duties {
			f.Duties[i].Name = fmt.Sprint(text, i)
			for k := range f.Duties[i].Phases {
				f.Duties[i].Phases[k].Name = text
			}
		}
		for i := range f.Circuits {
			f.Circuits[i].Name, f.Circuits[i].Note = fmt.Sprint(text, i), text
			f.Circuits[i].Cost.Note = text
			for k := range f.Circuits[i].Blocks {
				for key, v := range f.Circuits[i].Blocks[k].Values {
					v.Note = text
					f.Circuits[i].Blocks[k].Values[key] = v
				}
			}
		}
		lay(t, name, solve(t, f), Options{Site: text, Author: text})
	}
}

func TestWithoutProposal(t *testing.T) {
	f := read(t)
	f.Circuits = f.Circuits[:1]
	pages := lay(t, "no proposal", solve(t, f), Options{})
	if !strings.Contains(everything(pages), "No proposal to decide on") {
		t.Error("the report does not say that there is no proposal")
	}
	f.Circuits = nil
	lay(t, "no circuit", solve(t, f), Options{})
}

// A circuit that cannot be solved is named with what keeps it from it.
func TestUnsolvedCircuit(t *testing.T) {
	f := read(t)
	delete(f.Circuits[1].Block("P1").Values, "displacement")
	s := solve(t, f)
	stops := ""
	for _, x := range s.Circuits[1].Findings {
		if x.Level == circuit.Stops {
			stops = x.Text
		}
	}
	pages := lay(t, "one unsolved", s, Options{})
	if all := everything(pages); stops == "" || !strings.Contains(all, "could not be solved") || !strings.Contains(all, strings.Fields(stops)[0]) {
		t.Errorf("the report does not give the finding %q", stops)
	}
	for i := range f.Circuits {
		delete(f.Circuits[i].Block("P1").Values, "displacement")
	}
	lay(t, "all unsolved", solve(t, f), Options{})
}

func TestWithoutPriceAirOrHours(t *testing.T) {
	f := read(t)
	f.HasPrice, f.HasCO2, f.HasAir = false, false, false
	lay(t, "no price", solve(t, f), Options{})
	for _, d := range f.Duties {
		d.Hours = 0
	}
	s := solve(t, f)
	lay(t, "no hours", s, Options{})
	for _, c := range newLayout(s, Options{}).lossSteps() {
		if got := c.Circuits[0].Subtitle; !strings.HasPrefix(got, "one cycle of") {
			t.Errorf("without hours the loss steps are %q", got)
		}
	}
	f.Duties = nil
	lay(t, "no duty", solve(t, f), Options{})
}

// A long file: 60 blocks with long notes and six proposals.
func TestManyBlocks(t *testing.T) {
	f := read(t)
	c := f.Circuits[0].Circuit
	for i := len(c.Blocks); i < 60; i++ {
		b := *c.Block("F1")
		b.ID = fmt.Sprintf("FILTER%d", i)
		c.Blocks = append(c.Blocks, b)
	}
	for len(f.Circuits) < 7 {
		e := f.Circuits[1]
		own := *e.Circuit
		own.Name = fmt.Sprintf("Proposal %d", len(f.Circuits))
		e.Circuit = &own
		f.Circuits = append(f.Circuits, e)
	}
	pages := lay(t, "many", solve(t, f), Options{})
	all := everything(pages)
	for i := 7; i < 60; i++ {
		if !strings.Contains(all, fmt.Sprintf("FILTER%d ", i)) {
			t.Errorf("block FILTER%d is not listed", i)
		}
	}
	if !strings.Contains(all, ", continued") {
		t.Error("no table went on over a page with its group named again")
	}
}

// Findings and warnings by the hundred, and a cell higher than a page.
func TestManyFindings(t *testing.T) {
	s := solve(t, read(t))
	long := strings.Repeat("word ", 4000)
	for i := range 300 {
		s.Circuits[0].Findings = append(s.Circuits[0].Findings, circuit.Finding{Level: circuit.Warns, Circuit: "As found", Text: fmt.Sprintf("finding number %d", i)})
	}
	s.Circuits[0].Findings = append(s.Circuits[0].Findings, circuit.Finding{Level: circuit.Warns, Text: long, Time: math.Inf(1)})
	for i := range 80 {
		s.Comparisons[0].Differences = append(s.Comparisons[0].Differences, fmt.Sprintf("difference number %d", i))
	}
	all := everything(lay(t, "many findings", s, Options{}))
	for i := range 300 {
		if !strings.Contains(all, fmt.Sprintf("finding number %d ", i)) {
			t.Errorf("finding %d is lost", i)
		}
	}
	for i := range 80 {
		if !strings.Contains(all, fmt.Sprintf("difference number %d ", i)) {
			t.Errorf("difference %d is lost", i)
		}
	}
	if n := strings.Count(all, "word"); n < 4000 {
		t.Errorf("%d of 4000 words of a long finding are printed", n)
	}
}
