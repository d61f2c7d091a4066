package pdf

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"math"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"
	"unicode/utf16"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/circuit"
	"barlitre/machines/units"
)

var day = time.Date(2024, 5, 6, 12, 0, 0, 0, time.UTC)

// read reads the invented press; change may rewrite its text first.
func read(t *testing.T, change ...string) *audit.File {
	t.Helper()
	f, found := audit.Read(filepath.Join("testdata", "press.yaml"))
	if f == nil || circuit.AnyStops(found) {
		t.Fatalf("press.yaml: %v", found)
	}
	if len(change) > 0 {
		text := strings.NewReplacer(change...).Replace(string(f.Bytes()))
		if text == string(f.Bytes()) {
			t.Fatalf("nothing changed by %q", change)
		}
		if f, found = audit.Parse([]byte(text), nil, "press.yaml"); f == nil {
			t.Fatalf("changed press.yaml: %v", found)
		}
	}
	return f
}

func solve(t *testing.T, f *audit.File) *audit.Solution {
	t.Helper()
	s, err := audit.Solve(context.Background(), f, audit.Options{})
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// shown matches what the PDF library writes for a piece of text: big-endian UTF-16
// in parentheses.
var shown = regexp.MustCompile(`(?s) Td \(((?:[^\\)]|\\.)*)\) Tj ET`)

// texts returns every piece of text in an uncompressed document.
func texts(data []byte) []string {
	var out []string
	for _, m := range shown.FindAllSubmatch(data, -1) {
		raw := regexp.MustCompile(`(?s)\\(.)`).ReplaceAllFunc(m[1], func(b []byte) []byte {
			if b[1] == 'r' {
				return []byte{'\r'}
			}
			return b[1:]
		})
		var u []uint16
		for i := 0; i+1 < len(raw); i += 2 {
			u = append(u, uint16(raw[i])<<8|uint16(raw[i+1]))
		}
		out = append(out, string(utf16.Decode(u)))
	}
	return out
}

func plain(t *testing.T, s *audit.Solution, opt Options) []byte {
	t.Helper()
	var buf bytes.Buffer
	if err := write(&buf, s, opt, false); err != nil {
		t.Fatal(err)
	}
	return buf.Bytes()
}

// The figures of the decision stand in the document as the report prints them, each
// in one piece, and its sentences word for word.
func TestDocumentHoldsTheDecision(t *testing.T) {
	for _, system := range []units.System{units.Metric, units.US, units.SI} {
		s := solve(t, read(t))
		r := s.Report(system)
		pieces := texts(plain(t, s, Options{System: system, Date: day}))
		have := map[string]bool{}
		for _, p := range pieces {
			have[p] = true
		}
		flow := strings.Join(pieces, " ")
		n := 0
		for _, d := range r.Decisions {
			for _, row := range d.Rows {
				n += 3
				cells := []string{row.Name, row.Before.Text, row.After.Text}
				if row.Change.Text != "" {
					cells = append(cells, row.Change.Text)
				}
				if want := "|" + strings.Join(cells, "|") + "|"; !strings.Contains(strings.Join(pieces, "|"), want) {
					t.Errorf("%s: no row %q in the document", d.Proposal, want)
				}
			}
			for _, f := range d.Outcome {
				if n++; !have[f.Text] {
					t.Errorf("%s, %s: %q is not in the document", d.Proposal, f.Name, f.Text)
				}
			}
			for _, sentence := range append([]string{d.Verdict, r.Assumptions[0]}, d.Warnings...) {
				if !strings.Contains(flow, sentence) {
					t.Errorf("%s: the document lacks %q", d.Proposal, sentence)
				}
			}
		}
		if n < 50 {
			t.Errorf("only %d figures compared", n)
		}
		for _, c := range r.Cautions {
			if !strings.Contains(flow, strings.TrimSpace(c.Text)) {
				t.Errorf("the document lacks the caution %q", c.Text)
			}
		}
		last := regexp.MustCompile(`page (\d+) of (\d+)`).FindAllStringSubmatch(flow, -1)
		if m := last[len(last)-1]; m[1] != m[2] || fmt.Sprint(len(last)) != m[1] {
			t.Errorf("%d pages, the last says %q", len(last), m[0])
		}
	}
}

// Energy a year in the result file, written in kWh to four digits, is what the
// document shows: the two outputs cannot drift apart.
func TestDocumentAgreesWithResultFile(t *testing.T) {
	s := solve(t, read(t))
	flow := strings.Join(texts(plain(t, s, Options{Date: day})), "|")
	for _, c := range s.Result().Circuits {
		text := units.Number(float64(c.Year.Drawn), 4) + "\u202fkWh"
		if !strings.Contains(flow, text) {
			t.Errorf("%s: %q is not in the document", c.Name, text)
		}
	}
}

func TestSameInputSameBytes(t *testing.T) {
	var a, b bytes.Buffer
	for _, w := range []*bytes.Buffer{&a, &b} {
		if err := Write(w, solve(t, read(t)), Options{Date: day}); err != nil {
			t.Fatal(err)
		}
	}
	if !bytes.Equal(a.Bytes(), b.Bytes()) {
		t.Error("the same audit gives other bytes")
	}
	if !bytes.HasPrefix(a.Bytes(), []byte("%PDF-")) {
		t.Error("not a PDF")
	}
}

type brokenWriter struct{ after int }

var errFull = errors.New("disk full")

func (w *brokenWriter) Write(p []byte) (int, error) {
	if w.after -= len(p); w.after < 0 {
		return 0, errFull
	}
	return len(p), nil
}

func TestErrorsAreReturned(t *testing.T) {
	s := solve(t, read(t))
	for _, after := range []int{0, 1000} {
		if err := Write(&brokenWriter{after}, s, Options{Date: day}); !errors.Is(err, errFull) {
			t.Errorf("writer full after %d bytes: error %v", after, err)
		}
	}
	if Write(io.Discard, nil, Options{}) == nil || Write(io.Discard, &audit.Solution{}, Options{}) == nil {
		t.Error("no solved audit, no error")
	}
}

func TestSectionsCanBeLeftOut(t *testing.T) {
	s := solve(t, read(t))
	l := newLayout(s, Options{Date: day, Without: Sections()})
	l.choose()
	pages := &recorders{}
	l.print(pages)
	all := everything(pages)
	for _, section := range Sections() {
		if strings.Contains(all, string(section)) {
			t.Errorf("section %q was left out and is there", section)
		}
	}
	if !strings.Contains(all, string(cautionPages)) || !strings.Contains(all, s.Report(units.Metric).Cautions[0].Topic) {
		t.Error("the cautions are missing")
	}
	advice := adviceOf(t, s)
	for _, section := range Sections() {
		advice.Without = []Section{section}
		rest := newLayout(s, advice)
		rest.choose()
		rest.print(&recorders{})
		if _, there := rest.starts[section]; there || len(rest.starts) != len(Sections()) {
			t.Errorf("without %q: sections %v", section, rest.starts)
		}
	}
}

func TestNamesOfTheCallerReplaceThoseOfTheFile(t *testing.T) {
	s := solve(t, read(t))
	flow := strings.Join(texts(plain(t, s, Options{Date: day, Site: "Other works", Author: "B. Other"})), "|")
	for text, want := range map[string]bool{"Other works": true, "Prepared by B. Other, date": true, "Invented customer": true,
		"Invented works": false, "A. Writer": false, "2024-05-06": true, "press.yaml": true, disclaimer: true} {
		if strings.Contains(flow, text) != want {
			t.Errorf("%q in the document: %v, want %v", text, !want, want)
		}
	}
}

// everything joins all texts of all pages.
func everything(r *recorders) string {
	var b strings.Builder
	for _, p := range r.pages {
		for _, box := range p.Boxes() {
			b.WriteString(box.Text + " ")
		}
	}
	return b.String()
}

// lay lays a solution out on recorders and checks every page: all text inside the
// margins, none on another, none cut, no page empty, none ending with a heading.
func lay(t *testing.T, name string, s *audit.Solution, opt Options) *recorders {
	t.Helper()
	opt.Date = day
	l := newLayout(s, opt)
	l.choose()
	pages := &recorders{}
	l.print(pages)
	for n, p := range pages.pages {
		checkPage(t, fmt.Sprintf("%s, page %d", name, n+1), p)
	}
	if want := fmt.Sprintf("page %d of %d", len(pages.pages), len(pages.pages)); !strings.Contains(everything(pages), want) {
		t.Errorf("%s: no page says %q", name, want)
	}
	if err := Write(io.Discard, s, opt); err != nil {
		t.Errorf("%s: %v", name, err)
	}
	return pages
}

func checkPage(t *testing.T, where string, p *pen.Recorder) {
	t.Helper()
	boxes := p.Boxes()
	if p.Skipped() > 0 {
		t.Errorf("%s: %d things not drawn", where, p.Skipped())
	}
	for i, b := range boxes {
		if !b.Inside(side, 8, fullW, pageH-16, 0.2) || b.Cut {
			t.Errorf("%s: %q at %.1f, %.1f is cut or outside the margins", where, b.Text, b.X, b.Y)
		}
		for _, o := range boxes[:i] {
			if strings.Trim(b.Text, "\u00a0 ") != "" && inked(b).Overlaps(inked(o), 0.15) {
				t.Errorf("%s: %q lies on %q", where, b.Text, o.Text)
			}
		}
	}
	var last pen.Box
	for _, b := range boxes {
		if b.Y+b.H < bottom+2 && b.Y+b.H > last.Y+last.H {
			last = b
		}
	}
	if last.Y+last.H < top+5 {
		t.Errorf("%s is empty", where)
	}
	heading := slices.ContainsFunc([]int{1, 2, 3}, func(level int) bool { return math.Abs(last.Size-(&sheet{}).head(level).size) < 1e-9 })
	if last.Bold && heading { // names of drawn blocks are bold as well, of other sizes
		t.Errorf("%s ends with the heading %q", where, last.Text)
	}
}

// inked takes off the blanks that keep room for bold words before a text, and the
// room that only accents and descenders of neighbouring lines share.
func inked(b pen.Box) pen.Box {
	if rest := strings.TrimLeft(b.Text, "\u00a0"); rest != b.Text && b.H > 0 {
		w := pen.TextWidth(rest, b.Size, b.Bold)
		b.X, b.W = b.X+b.W-w, w
	}
	return b
}
