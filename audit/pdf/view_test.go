package pdf

import (
	"bytes"
	"context"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// solved reads and solves a sample.
func solvedSample(t *testing.T, path string) *audit.Solution {
	t.Helper()
	f, _ := audit.Read(path)
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// onRecorders draws the sheets of a view where they can be looked at.
func onRecorders(t *testing.T, f *audit.File, s *audit.Solution, v View) []*pen.Recorder {
	t.Helper()
	b, err := newBoards(f, s, v, Options{Date: day})
	if err != nil {
		t.Fatal(err)
	}
	pages := &recorders{}
	b.print(pages)
	return pages.pages
}

// TestSheetsKeepToTheirFrame: on both papers everything lies within the frame, nothing of
// the circuit or legend in the title block, and every block is named.
func TestSheetsKeepToTheirFrame(t *testing.T) {
	paths, _ := filepath.Glob("../../samples/*.yaml")
	starters, _ := filepath.Glob("../../samples/starters/*.yaml")
	if len(paths) == 0 || len(starters) == 0 {
		t.Fatal("no samples")
	}
	for _, path := range append(paths, starters...) {
		s := solvedSample(t, path)
		for _, on := range Papers {
			v := BusiestView(s)
			v.Paper = on
			pages := onRecorders(t, s.File, s, v)
			if len(pages) != len(s.Circuits) {
				t.Fatalf("%s: %d pages for %d circuits", path, len(pages), len(s.Circuits))
			}
			for i, p := range pages {
				where := fmt.Sprintf("%s, %s, sheet %d", filepath.Base(path), on.Name, i+1)
				withinFrame(t, where, on, p)
				for _, b := range s.Circuits[i].Circuit.Blocks {
					if !slices.ContainsFunc(p.Boxes(), func(x pen.Box) bool { return x.Bold && x.Text == b.ID }) {
						t.Errorf("%s: %s is not named", where, b.ID)
					}
				}
			}
		}
	}
}

// blockShapes are drawn first: the frame, ten cells and the edge of the title block.
const blockShapes = 11

func withinFrame(t *testing.T, where string, on Paper, p *pen.Recorder) {
	t.Helper()
	if p.Skipped() > 0 {
		t.Errorf("%s: %d things not drawn", where, p.Skipped())
	}
	blockX, blockY := on.W-frameOther-blockWidth, on.H-frameOther-blockHeight
	texts := p.Boxes()
	own := slices.IndexFunc(texts, func(b pen.Box) bool { return b.Text == "Legal owner" })
	last := slices.IndexFunc(texts, func(b pen.Box) bool { return strings.HasPrefix(b.Text, "Estimate") })
	if own != 0 || last < 20 {
		t.Fatalf("%s: title block at %d to %d", where, own, last)
	}
	for i, b := range texts {
		inside := b.X >= frameLeft-0.01 && b.X+b.W <= on.W-frameOther+0.01 && b.Y >= frameOther-0.01 && b.Y+b.H <= on.H-frameOther+0.01
		inBlock := b.X+b.W > blockX+0.01 && b.Y+b.H > blockY+0.01
		if !inside || b.Cut || (i > last && inBlock) {
			t.Errorf("%s: %q at %.1f %.1f, %.1f × %.1f", where, b.Text, b.X, b.Y, b.W, b.H)
		}
	}
	for i, q := range p.Shapes() {
		lo, hi := q.Bounds()
		if q.Kind == "circle" {
			lo, hi = disc(q)
		}
		if lo.X < frameLeft-0.3 || hi.X > on.W-frameOther+0.3 || lo.Y < frameOther-0.3 || hi.Y > on.H-frameOther+0.3 {
			t.Errorf("%s: a %s from %.1f to %.1f leaves the frame", where, q.Kind, lo, hi)
		}
		if i > blockShapes && hi.X > blockX+0.1 && hi.Y > blockY+0.1 {
			t.Errorf("%s: a %s from %.1f to %.1f lies in the title block", where, q.Kind, lo, hi)
		}
	}
}

// TestSheetIsTheOneSeen: a page says what the sheet says at that instant by those signs,
// word for word.
func TestSheetIsTheOneSeen(t *testing.T) {
	s := solvedSample(t, "../../samples/baling-press.yaml")
	words := func(p *pen.Recorder) []string {
		var out []string
		for _, b := range p.Boxes() {
			out = append(out, b.Text)
		}
		return out
	}
	for _, v := range []View{{At: 20, Circuits: []string{"As found"}}, {At: 21, Cycle: true, Circuits: []string{"As found"}},
		{At: 20, Hide: figures.Numbers | figures.Discs, Circuits: []string{"As found"}}} {
		run := s.Circuits[0].Duties[0]
		state := figures.StateAt(run, v.At)
		if v.Cycle {
			state = figures.OverCycle(run, v.At)
		}
		window := pen.NewRecorder()
		figures.NewSheet(s.Circuits[0].Circuit).Labelled(s.Circuits[0].Duties...).Draw(window, 0, 0, 5, state,
			figures.SheetOptions{Palette: figures.Dark, Scales: figures.ScalesOf(run), Hide: v.Hide})
		want := words(window)
		all := words(onRecorders(t, s.File, s, v)[0])
		at := slices.IndexFunc(all, func(x string) bool { return strings.HasPrefix(x, "Estimate") }) + 1
		if got := all[at : at+len(want)]; !slices.Equal(got, want) {
			t.Errorf("%+v: the page says\n%v\nthe sheet\n%v", v, got, want)
		}
		if hidden := strings.Contains(strings.Join(want, " "), "bar ·"); hidden == (v.Hide != 0) {
			t.Errorf("%+v: pressures of lines shown: %v", v, hidden)
		}
	}
}

// TestTitleBlock: what the file says stands in the block; what it does not say is left to
// be written by hand.
func TestTitleBlock(t *testing.T) {
	s := solvedSample(t, "../../samples/baling-press.yaml")
	f := s.File
	for target, text := range map[string]string{"report.owner": "Works North", "report.number": "HD-0017", "report.revision": "B", "site.date": "2024-02-03"} {
		if err := f.Put(target, text); err != nil {
			t.Fatal(err)
		}
	}
	pages := onRecorders(t, f, s, BusiestView(s))
	for i, p := range pages {
		var all []string
		for _, b := range p.Boxes() {
			all = append(all, b.Text)
		}
		for _, want := range []string{"Works North", "HD-0017", "B", "2024-02-03", f.Title, fmt.Sprintf("%d/2", i+1), f.Site.Author, "Approved by",
			f.Circuits[i].Name + " (" + string(f.Circuits[i].Role) + ")"} {
			if !slices.Contains(all, want) {
				t.Errorf("sheet %d: %q is not in its title block: %v", i+1, want, all[:24])
			}
		}
	}
}

// TestSheetsWithoutResults: what is not solved is drawn all the same, and says so; marks
// of findings are drawn; a view of what is not there is refused.
func TestSheetsWithoutResults(t *testing.T) {
	s := solvedSample(t, "../../samples/baling-press.yaml")
	plain := onRecorders(t, s.File, nil, View{})[0]
	if !strings.Contains(plain.String(), "Drawn without results.") || strings.Contains(plain.String(), "L/min\"") && strings.Contains(plain.String(), "bar ·") {
		t.Error("a circuit that is not solved shows results, or does not say that it has none")
	}
	v := BusiestView(s)
	before := len(onRecorders(t, s.File, s, v)[0].Shapes())
	v.Marks = map[string]map[string]circuit.Level{"As found": {"RV1": circuit.Warns}}
	if after := len(onRecorders(t, s.File, s, v)[0].Shapes()); after <= before {
		t.Error("a finding has no mark on paper")
	}
	for _, bad := range []View{{Circuits: []string{"none"}}, {Duty: 7}, {Duty: -1}} {
		var buf bytes.Buffer
		if err := WriteSheets(&buf, s.File, s, bad, Options{Date: day}); err == nil || buf.Len() > 0 {
			t.Errorf("%+v: %v, %d bytes written", bad, err, buf.Len())
		}
	}
	if err := Write(&bytes.Buffer{}, s, Options{Date: day, Sheets: &View{Duty: 7}}); err == nil {
		t.Error("a report with a sheet of a duty that is not there")
	}
}

var mediaBox = regexp.MustCompile(`/MediaBox \[0 0 ([0-9.]+) ([0-9.]+)\]`)

// TestPaperSizes: ISO 216 has A4 at 210 × 297 mm and A3 at 297 × 420 mm.
func TestPaperSizes(t *testing.T) {
	s := solvedSample(t, "../../samples/baling-press.yaml")
	for i, want := range [][2]float64{{297, 210}, {420, 297}} {
		var buf bytes.Buffer
		if err := WriteSheets(&buf, s.File, s, View{Paper: Papers[i], At: 20}, Options{Date: day}); err != nil {
			t.Fatal(err)
		}
		boxes := mediaBox.FindAllSubmatch(buf.Bytes(), -1)
		if len(boxes) < 2 {
			t.Fatalf("%s: %d pages", Papers[i].Name, len(boxes))
		}
		first := boxes[0] // that of the first page; the last is the size of pages that have none
		for k, mm := range want {
			pt, _ := strconv.ParseFloat(string(first[k+1]), 64)
			if math.Abs(pt/72*25.4-mm) > 0.1 {
				t.Errorf("%s: side %d is %.1f mm", Papers[i].Name, k, pt/72*25.4)
			}
		}
		if dir := os.Getenv("BARLITRE_PICTURES"); dir != "" {
			os.WriteFile(filepath.Join(dir, "sheets-"+Papers[i].Name+".pdf"), buf.Bytes(), 0o644)
		}
	}
}

// TestReportWithSheets: the sheets follow the cautions, are listed with their page, and
// the pages of the report count them.
func TestReportWithSheets(t *testing.T) {
	s := solvedSample(t, "../../samples/baling-press.yaml")
	v := BusiestView(s)
	count := func(opt Options) (pages int, starts map[Section]int, all string) {
		var last []*pen.Recorder
		starts, err := Pages(s, opt, func(w, h float64) pen.Pen {
			if opt.Sheets == nil && w > h {
				t.Error("a lying page without sheets")
			}
			last = append(last, pen.NewRecorder())
			return last[len(last)-1]
		})
		if err != nil {
			t.Fatal(err)
		}
		var text []string
		for _, p := range last {
			for _, b := range p.Boxes() {
				text = append(text, b.Text)
			}
		}
		return len(last), starts, strings.Join(text, "|")
	}
	without, _, _ := count(Options{Date: day})
	with, starts, text := count(Options{Date: day, Sheets: &v})
	if with != without+2 || starts[Sheets] != without+1 {
		t.Errorf("%d pages, with sheets %d, which begin on %d", without, with, starts[Sheets])
	}
	for _, want := range []string{fmt.Sprintf("page %d of %d", with, with), fmt.Sprintf("page 1 of %d", with), "2/2", fmt.Sprintf("Circuit\u00a0sheets\u00a0%d", without+1)} {
		if !strings.Contains(text, want) {
			t.Errorf("no page says %q", want)
		}
	}
}

// A sheet is printed with the decimal sign of its reader, but for the title block.
func TestPrintedDecimalSign(t *testing.T) {
	s := solvedSample(t, "../../samples/baling-press.yaml")
	v := BusiestView(s)
	number := regexp.MustCompile(`\d\.\d`)
	texts := func() (in, out int) {
		for _, page := range onRecorders(t, s.File, s, v) {
			for _, b := range page.Boxes() {
				switch {
				case !number.MatchString(b.Text):
				case b.X > A4.W-frameOther-blockWidth && b.Y > A4.H-frameOther-blockHeight:
					in++
				default:
					out++
				}
			}
		}
		return in, out
	}
	block, points := texts()
	if points == 0 {
		t.Fatal("no number with a decimal point on the sheets")
	}
	v.Local = units.DecimalComma
	if in, out := texts(); in != block || out != 0 {
		t.Errorf("with a comma %d points in the title block, were %d; %d elsewhere", in, block, out)
	}
}
