package frame

import (
	"image/color"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/canvas"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/test"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/machines/units"
)

// plain is a station that counts what it is told.
type plain struct {
	name string
	told []station.What
	box  *fyne.Container
}

func (p *plain) Name() string               { return p.name }
func (p *plain) Content() fyne.CanvasObject { return p.box }
func (p *plain) Changed(w station.What)     { p.told = append(p.told, w) }
func (p *plain) Mend() bool                 { return p.name == "Duty" }
func (p *plain) Help() string               { return "help of " + p.name }

// bench is a frame under test with the queue of its UI goroutine.
type bench struct {
	*Frame
	t     *testing.T
	queue chan func()
	pages []*plain
}

func newBench(t *testing.T) *bench {
	b := &bench{t: t}
	var make []func(station.Context) station.Station
	for _, name := range []string{"Circuit", "Duty", "Energy"} {
		p := &plain{name: name, box: container.NewStack(canvas.NewRectangle(color.Transparent))}
		b.pages = append(b.pages, p)
		make = append(make, func(station.Context) station.Station { return p })
	}
	return b.open(make...)
}

// open makes the frame with its stations.
func (b *bench) open(stations ...func(station.Context) station.Station) *bench {
	b.t.Helper()
	b.queue = make(chan func(), 1000)
	old := post
	post = func(do func()) { b.queue <- do }
	waits := waitsFor
	waitsFor = 20 * time.Second // a busy machine makes nothing long
	b.Frame = New(test.NewTempApp(b.t), document.Options{Config: b.t.TempDir()}, stations...)
	b.t.Cleanup(func() {
		b.doc.Abandon()
		post, waitsFor = old, waits
	})
	return b
}

// drain runs what waits in the queue.
func (b *bench) drain() {
	for {
		select {
		case do := <-b.queue:
			do()
		default:
			return
		}
	}
}

// until runs the queue until done says so.
func (b *bench) until(what string, done func() bool) {
	b.t.Helper()
	deadline := time.After(20 * time.Second)
	for !done() {
		select {
		case do := <-b.queue:
			do()
		case <-deadline:
			b.t.Fatalf("waited in vain until %s", what)
		}
	}
}

func (b *bench) solved() {
	b.t.Helper()
	b.until("solved", func() bool {
		return b.solution != nil && b.Frame.solved == b.doc.Revision() && b.doc.Current() && !b.busy() && !b.solution.Pending
	})
}

func (b *bench) busy() bool { running, _, _ := b.doc.Solving(); return running }

func (b *bench) verdictText() string {
	b.capture("verdict")
	var out []string
	for _, p := range b.verdict.Parts() {
		out = append(out, p.Name+"="+p.Text)
	}
	return strings.Join(out, "\n")
}

// capture draws the window; with BARLITRE_PICTURES set it is kept there.
func (b *bench) capture(name string) { stationtest.Picture(b.t, b.win, name) }

func TestVerdictFollowsAnEdit(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	before := b.verdictText()
	for _, want := range []string{"energy=", "saving=", "heat=", "cooler=", "payback=", "state=up to date"} {
		if !strings.Contains(before, want) {
			t.Errorf("no %q in the verdict line:\n%s", want, before)
		}
	}
	row := b.Report().Decisions[0].Rows[0]
	if !strings.Contains(before, row.After.Text) {
		t.Errorf("the verdict line does not show %s:\n%s", row.After.Text, before)
	}
	if err := b.doc.Set("As found/RV1.crack", "200 bar"); err != nil {
		t.Fatal(err)
	}
	b.until("edited", func() bool { return !b.doc.Current() || b.busy() || len(b.queue) == 0 })
	b.solved()
	if after := b.verdictText(); after == before {
		t.Errorf("the verdict line did not follow:\n%s", after)
	}
	if !strings.HasSuffix(b.win.Title(), "* - Barlitre") {
		t.Errorf("title %q does not show the change", b.win.Title())
	}
}

// A narrow window drops the cooler and the heat before the payback, and nothing runs into the state.
func TestFieldsDropByWeight(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	for _, c := range []struct {
		width float32
		want  string
	}{{1200, "energy saving heat cooler payback"}, {820, "energy saving heat payback"}, {640, "energy saving payback"}} {
		b.win.Resize(fyne.NewSize(c.width, 560))
		var names []string
		state, end := 0.0, 0.0
		for _, p := range b.verdictPartsNow() {
			if p.Name == "state" {
				state = p.X
				continue
			}
			names, end = append(names, p.Name), p.X+p.W
		}
		if got := strings.Join(names, " "); got != c.want || end > state {
			t.Errorf("%g wide: %s, to %g of %g", c.width, got, end, state)
		}
	}
}

func (b *bench) verdictPartsNow() []widgets.Part {
	b.verdictText()
	return b.verdict.Parts()
}

func TestClock(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	b.capture("strip")
	from, to := b.span()
	b.SetClock(to + 100)
	if b.clock != to {
		t.Errorf("clock at %g, the duty ends at %g", b.clock, to)
	}
	b.strip.figure.TypedKey(&fyne.KeyEvent{Name: fyne.KeyHome})
	b.strip.figure.TypedKey(&fyne.KeyEvent{Name: fyne.KeyRight})
	if want := from + (to-from)/100; b.clock < want-1e-9 || b.clock > want+1e-9 {
		t.Errorf("clock at %g after one step, want %g", b.clock, want)
	}
	got := b.pages[0].told
	if len(got) == 0 || !got[len(got)-1].Has(station.Clock) {
		t.Errorf("the station was not told of the clock: %v", got)
	}
	b.strip.figure.to(float32(6+b.strip.area.XAt((from+to)/2)) * widgets.Scale())
	if mid := (from + to) / 2; b.clock < mid-0.2 || b.clock > mid+0.2 {
		t.Errorf("clock at %g after a click in the middle", b.clock)
	}
}

// A station that is not shown is told everything at once when it is.
func TestStationsAreToldWhenShown(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	if n := len(b.pages[1].told); n != 0 {
		t.Errorf("a hidden station was told %d times", n)
	}
	b.Go("Duty")
	if got := b.pages[1].told; len(got) != 1 || !got[0].Has(station.Solution|station.Model) {
		t.Errorf("the station was told %v", got)
	}
	if o := b.body.Objects; len(o) != 1 || o[0] != b.pages[1].box || !b.pages[1].box.Visible() {
		t.Error("the wrong station is shown")
	}
	if text := b.rail.items[1].DumpText(); text != "Duty (to mend) (shown)" {
		t.Errorf("rail says %q", text)
	}
}

func TestLocal(t *testing.T) {
	b := newBench(t)
	b.settings.comma = true
	if got := b.Local("1.5 bar at 0.25 s. V1.P"); got != "1,5 bar at 0,25 s. V1.P" {
		t.Errorf("%q", got)
	}
	b.settings.system = units.US
	if got := b.Text(160e5, units.Pressure, 4); !strings.Contains(got, "psi") || !strings.HasPrefix(got, "2321") {
		t.Errorf("%q", got)
	}
}

func TestUnsavedChangesAreAskedAbout(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	if err := b.doc.Set("As found/RV1.crack", "210 bar"); err != nil {
		t.Fatal(err)
	}
	left := false
	b.leave(func() { left = true })
	if left || b.win.Canvas().Overlays().Top() == nil {
		t.Fatal("left without asking")
	}
	test.Tap(widgets.Named("ask.cancel").(*boxButton))
	if left || !b.doc.Dirty() {
		t.Error("cancel did not stay")
	}
	dir := t.TempDir()
	t.Setenv(saveDirVariable, dir)
	b.leave(func() { left = true })
	test.Tap(widgets.Named("ask.save").(*boxButton))
	if !left || b.doc.Dirty() {
		t.Error("save did not save and go on")
	}
	if _, err := os.Stat(filepath.Join(dir, "audit.yaml")); err != nil {
		t.Error(err)
	}
}

func TestLooks(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	for _, dark := range []bool{false, true} {
		for _, scale := range []float32{1, 1.5} {
			b.settings.dark, b.settings.scale = dark, scale
			b.applySettings()
			b.win.Resize(fyne.NewSize(1280, 800))
			name := map[bool]string{false: "light", true: "dark"}[dark]
			b.capture("frame-" + name + "-" + map[float32]string{1: "100", 1.5: "150"}[scale])
			if len(b.verdictPartsNow()) < 3 {
				t.Errorf("%s %g: hardly anything in the verdict line", name, scale)
			}
		}
	}
}

// The state says "up to date" no sooner than the stations were told of the result.
func TestUpToDateWhenTold(t *testing.T) {
	b := newBench(t)
	b.Open("")
	b.solved()
	if err := b.doc.Set("As found/RV1.crack", "200 bar"); err != nil {
		t.Fatal(err)
	}
	told := 0
	for deadline := time.Now().Add(20 * time.Second); !b.doc.Current() || b.busy(); time.Sleep(time.Millisecond) {
		if time.Now().After(deadline) {
			t.Fatal("not solved")
		}
	}
	if text, good := b.stateText(); good {
		t.Errorf("the state says %q before the stations were told", text)
	}
	b.drain()
	b.solved() // the oil temperature too
	for _, w := range b.pages[0].told {
		if w.Has(station.Solution) {
			told++
		}
	}
	if text, good := b.stateText(); !good || told < 2 {
		t.Errorf("the state says %q, the station heard of %d results", text, told)
	}
}
