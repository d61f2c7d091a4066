package report

import (
	"bytes"
	"compress/zlib"
	"encoding/csv"
	"encoding/json"
	"io"
	"math"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"time"
	"unicode/utf16"

	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/pdf"
	"barlitre/machines/units"
)

const press, winch = "baling-press.yaml", "quayside-winch.yaml"

// shown makes a station that does its work at once.
func shown(t *testing.T, sample string) (*stationtest.Context, *Report) {
	t.Helper()
	today = func() time.Time { return time.Date(2024, 5, 6, 12, 0, 0, 0, time.UTC) }
	t.Cleanup(func() { today = time.Now })
	c := stationtest.New(t, sample)
	r := New(c).(*Report)
	now := func(work func()) { work() }
	r.preview.start, r.saver.start = now, now
	c.Show(r, 1190, 590)
	return c, r
}

func press1(t *testing.T, name string) {
	t.Helper()
	b := widgets.Named(name).(*widgets.TipButton)
	if b.Disabled() {
		t.Fatalf("%s cannot be pressed", name)
	}
	test.Tap(b)
}

var (
	stream    = regexp.MustCompile(`(?s)stream\n(.*?)\nendstream`)
	shownText = regexp.MustCompile(`(?s) Td \(((?:[^\\)]|\\.)*)\) Tj ET`)
	escaped   = regexp.MustCompile(`(?s)\\(.)`)
)

// texts returns the pieces of text of a PDF.
func texts(t *testing.T, data []byte) string {
	t.Helper()
	var out []string
	for _, m := range stream.FindAllSubmatch(data, -1) {
		z, err := zlib.NewReader(bytes.NewReader(m[1]))
		if err != nil {
			continue
		}
		page, _ := io.ReadAll(z)
		for _, m := range shownText.FindAllSubmatch(page, -1) {
			raw := escaped.ReplaceAllFunc(m[1], func(b []byte) []byte {
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
	}
	return strings.Join(out, "|")
}

func TestSavePDFHoldsTheFigures(t *testing.T) {
	c, r := shown(t, press)
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	typed := widgets.Named("report.author").(*widgets.Field)
	c.Win.Canvas().Focus(typed)
	typed.SetText("Q. Writer")
	c.Win.Canvas().Unfocus()
	c.Wait()
	r.Changed(station.Model | station.Solution)
	r.sections[pdf.Parameters].SetChecked(false)
	press1(t, "report.pdf")
	data, err := os.ReadFile(filepath.Join(dir, "baling-press.pdf"))
	if err != nil || len(c.Failed) > 0 || len(c.Said) != 1 || !strings.Contains(c.Said[0], dir) {
		t.Fatalf("%v; failed %v, said %v", err, c.Failed, c.Said)
	}
	text := texts(t, data)
	n := 0
	for _, d := range c.Report().Decisions {
		for _, row := range d.Rows {
			for _, cell := range []string{row.Before.Text, row.After.Text} {
				if n++; !strings.Contains(text, "|"+cell+"|") {
					t.Errorf("%s: %q is not in the document", row.Name, cell)
				}
			}
		}
		for _, f := range d.Outcome {
			if n++; !strings.Contains(text, f.Text) {
				t.Errorf("%s: %q is not in the document", f.Name, f.Text)
			}
		}
	}
	if n < 20 || !strings.Contains(text, "Q. Writer") || strings.Contains(text, "|"+string(pdf.Parameters)+"|") || !strings.Contains(text, string(pdf.Heat)) {
		t.Errorf("%d figures; author or sections are not those chosen", n)
	}
	onlyFiles(t, dir, "baling-press.pdf")
}

// onlyFiles checks that nothing else is left behind.
func onlyFiles(t *testing.T, dir string, want ...string) {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	var got []string
	for _, e := range entries {
		got = append(got, e.Name())
	}
	if strings.Join(got, " ") != strings.Join(want, " ") {
		t.Errorf("the folder has %v, want %v", got, want)
	}
}

func TestSaveJSONAndCSV(t *testing.T) {
	c, _ := shown(t, winch)
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	press1(t, "report.json")
	press1(t, "report.csv")
	if len(c.Failed) > 0 {
		t.Fatal(c.Failed)
	}
	data, err := os.ReadFile(filepath.Join(dir, "quayside-winch.json"))
	if err != nil {
		t.Fatal(err)
	}
	var result audit.Result
	if err := json.Unmarshal(data, &result); err != nil {
		t.Fatal(err)
	}
	for i, run := range c.Solution().Circuits {
		for j, d := range run.Duties {
			if got := result.Circuits[i].Duties[j].Energy.SupplyIn; got != d.Balance.SupplyIn.Total() {
				t.Errorf("%s, %s: the file has %v J, the solution %v", run.Circuit.Name, d.Duty.Name, got, d.Balance.SupplyIn.Total())
			}
			f, err := os.Open(filepath.Join(dir, "quayside-winch-"+audit.TableName(i+1, run.Circuit.Name, j+1, d.Duty.Name)))
			if err != nil {
				t.Fatal(err)
			}
			rows, err := csv.NewReader(f).ReadAll()
			f.Close()
			if err != nil || len(rows) != d.Balance.Steps+1 && len(rows) < 3 || rows[0][0] != "t [s]" {
				t.Errorf("%s, %s: %d rows for %d time steps, %v", run.Circuit.Name, d.Duty.Name, len(rows), d.Balance.Steps, err)
			}
		}
	}
}

// A folder that is not there, or not to be written into, is said; nothing is lost and
// nothing is left behind, and an older file stays.
func TestFailuresAreSaid(t *testing.T) {
	c, _ := shown(t, press)
	dir := t.TempDir()
	gone := filepath.Join(dir, "gone")
	before := c.Document.Revision()
	t.Setenv(saveDirVariable, gone)
	for i, name := range []string{"report.pdf", "report.json", "report.csv"} {
		press1(t, name)
		if len(c.Failed) != i+1 {
			t.Fatalf("%s into a folder that is not there: failed %v, said %v", name, c.Failed, c.Said)
		}
		text := c.Failed[i].Error()
		for _, want := range []string{gone, "no such file", "nothing was written", "still open"} {
			if !strings.Contains(text, want) {
				t.Errorf("%s: %q lacks %q", name, text, want)
			}
		}
		if strings.Contains(text, ".barlitre-") {
			t.Errorf("%s names a temporary file: %s", name, text)
		}
	}
	if c.Document.Revision() != before || !c.Document.Current() {
		t.Error("the audit changed")
	}
	// a folder in the place of the file: the rename fails after the writing
	t.Setenv(saveDirVariable, dir)
	if err := os.MkdirAll(filepath.Join(dir, "baling-press.pdf", "x"), 0o755); err != nil {
		t.Fatal(err)
	}
	press1(t, "report.pdf")
	if len(c.Failed) != 4 {
		t.Errorf("said %v", c.Said)
	}
	onlyFiles(t, dir, "baling-press.pdf")
}

func TestCancel(t *testing.T) {
	c, r := shown(t, press)
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	r.saver.start = func(work func()) {
		if r.saver.working.Hidden || !r.saver.buttons[0].Disabled() {
			t.Error("no progress is shown, or a second save can be begun")
		}
		test.Tap(r.saver.cancel)
		work()
	}
	press1(t, "report.csv")
	if len(c.Said) != 1 || !strings.Contains(c.Said[0], "cancelled") || len(c.Failed) > 0 || r.saver.buttons[0].Disabled() {
		t.Errorf("said %v, failed %v", c.Said, c.Failed)
	}
	onlyFiles(t, dir)
}

// A result that is out of date is not what gets written.
func TestSaveIsOfThePresentAudit(t *testing.T) {
	c, _ := shown(t, press)
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	c.Document.CancelSolve()
	if err := c.Document.Set("energy.price", "0.2 EUR/kWh"); err != nil {
		t.Fatal(err)
	}
	press1(t, "report.json") // the new solution may be there or not
	data, err := os.ReadFile(filepath.Join(dir, "baling-press.json"))
	if err != nil {
		t.Fatal(err)
	}
	c.Wait()
	var want bytes.Buffer
	result := c.Solution().Result()
	advice, err := c.Document.AdviceOn(t.Context(), c.Solution(), units.Metric, nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range advice.Ladders {
		result.FixFirst = append(result.FixFirst, l.Result())
	}
	if err := result.Write(&want); err != nil {
		t.Fatal(err)
	}
	if a, b := strings.Split(string(data), "\n"), strings.Split(want.String(), "\n"); len(a) != len(b) {
		t.Errorf("the file has %d lines, the audit as it stands %d", len(a), len(b))
	} else {
		for i := range a {
			if !sameLine(a[i], b[i]) {
				t.Errorf("line %d: %s, want %s", i+1, a[i], b[i])
			}
		}
	}
}

// sameLine compares lines of results: to the byte, or as numbers to 1e-9, for the week of the oil is found by going on until
// it repeats itself, and where that begins hangs on what was solved before.
func sameLine(a, b string) bool {
	key, x, _ := strings.Cut(strings.TrimSuffix(a, ","), ": ")
	other, y, _ := strings.Cut(strings.TrimSuffix(b, ","), ": ")
	v, err := strconv.ParseFloat(x, 64)
	w, wrong := strconv.ParseFloat(y, 64)
	return a == b || key == other && err == nil && wrong == nil && math.Abs(v-w) <= 1e-9*math.Abs(w)
}

func TestPreview(t *testing.T) {
	c, r := shown(t, press)
	all := len(r.preview.pages.Objects)
	if all < 6 || !strings.Contains(r.preview.index.Text, "Money\u00a0") {
		t.Fatalf("%d pages, contents %q", all, r.preview.index.Text)
	}
	for _, s := range pdf.Sections() {
		r.sections[s].SetChecked(false)
	}
	if n := len(r.preview.pages.Objects); n >= all || strings.Contains(r.preview.index.Text, "Money") {
		t.Errorf("%d pages without all sections, %d with them; contents %q", n, all, r.preview.index.Text)
	}
	size := r.preview.pages.Objects[0].MinSize()
	press1(t, "report.larger")
	if got := r.preview.pages.Objects[0].MinSize(); got.Width <= size.Width {
		t.Errorf("larger is %v, was %v", got, size)
	}
	_ = c
}

// From an edit on until its pages stand there, it is said in words that those that are shown
// are of before; what is printed meanwhile is the audit as it stands.
func TestPreviewSaysThatItIsBehind(t *testing.T) {
	c, r := shown(t, press)
	said := func(want string, importance widget.Importance) {
		t.Helper()
		if h := r.preview.head; !strings.Contains(h.Text, want) || h.Importance != importance {
			t.Errorf("%q (%v), want %q", h.Text, h.Importance, want)
		}
	}
	said("drawn as they will print", widget.MediumImportance)
	var drawing []func()
	r.preview.start = func(work func()) { drawing = append(drawing, work) }
	if err := c.Document.Set("energy.price", "0.29 EUR/kWh"); err != nil {
		t.Fatal(err)
	}
	r.Changed(station.Model)
	said("Being laid out anew; the ", widget.WarningImportance)
	c.Look("report-behind")
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	press1(t, "report.pdf")
	if data, err := os.ReadFile(filepath.Join(dir, "baling-press.pdf")); err != nil || !strings.Contains(texts(t, data), "0.29") {
		t.Errorf("what was printed is of before: %v", err)
	}
	c.Wait()
	r.Changed(station.Solution)
	said("Being laid out anew; the ", widget.WarningImportance)
	if len(drawing) == 0 {
		t.Fatal("nothing is drawn")
	}
	for _, work := range drawing {
		work()
	}
	said("drawn as they will print", widget.MediumImportance)
	if err := c.Document.Set("energy.price", "0.31 EUR/kWh"); err != nil {
		t.Fatal(err)
	}
	if c.Document.CancelSolve(); c.Document.Current() {
		t.Fatal("solved before it could be cancelled")
	}
	r.Changed(station.Model | station.Solution)
	said("is not solved", widget.DangerImportance)
}

func TestTextsAreKept(t *testing.T) {
	c, r := shown(t, "")
	for name, text := range map[string]string{"report.title": "Press: hall 3", "report.customer": "Works", "report.site": "Hall 3", "report.author": "A. B."} {
		f := widgets.Named(name).(*widgets.Field)
		c.Win.Canvas().Focus(f)
		f.SetText(text)
		c.Win.Canvas().Unfocus()
		if f.Bad() {
			t.Errorf("%s: %s", name, f.Note.Text)
		}
	}
	f := c.Document.File()
	if f.Title != "Press: hall 3" || f.Site.Customer != "Works" || f.Site.Name != "Hall 3" || f.Site.Author != "A. B." {
		t.Errorf("the file has %q, %+v", f.Title, f.Site)
	}
	field := widgets.Named("report.customer").(*widgets.Field)
	c.Win.Canvas().Focus(field)
	field.SetText("")
	c.Win.Canvas().Unfocus()
	if c.Document.File().Site.Customer != "" {
		t.Error("a customer cannot be taken out")
	}
	_ = r
}

func TestPictures(t *testing.T) {
	for _, sample := range []string{press, winch, ""} {
		c, r := shown(t, sample)
		for _, dark := range []bool{false, true} {
			c.SetTheme(dark, 1)
			if !stationtest.Looking() {
				break
			}
			for size, wh := range map[string][2]float32{"large": {1190, 590}, "small": {930, 480}} {
				c.Show(r, wh[0], wh[1])
				c.Look("report-" + strings.TrimSuffix(sample, ".yaml") + "-" + size + map[bool]string{true: "-dark"}[dark])
			}
		}
		if sample == press {
			c.SetTheme(false, 1)
			press1(t, "report.larger")
			press1(t, "report.larger")
			c.Settle(1190, 590)
			c.Look("report-larger")
		}
		c.SetTheme(false, 2)
		c.Comma = true
		c.Show(r, 930, 480)
		c.Look("report-" + strings.TrimSuffix(sample, ".yaml") + "-scale2")
		if m := r.Content().MinSize(); m.Width > 900 || m.Height > 480 {
			t.Errorf("the least size is %v", m)
		}
	}
}
