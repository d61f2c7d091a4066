package sheet

import (
	"context"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/dialog"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/test"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/audit"
	"barlitre/audit/figures"
	"barlitre/machines/units"
)

// bench is a frame without a frame: the context of the station, around a real
// document. What the document tells waits in a queue, as on the UI goroutine.
type bench struct {
	t       testing.TB
	app     fyne.App
	win     fyne.Window
	doc     *document.Document
	queue   chan document.Event
	posted  chan func() // of what is laid behind the window
	s       *Station
	clock   float64
	duty    int
	circuit int
	block   string
	picked  string
	view    station.View
	dark    bool
	comma   bool
	system  units.System
	said    []string
	failed  []error
	kept    []dialog.Dialog

	explained []audit.Figure
}

var _ station.Context = (*bench)(nil)

func newBench(t testing.TB, sample string, size fyne.Size) *bench {
	t.Helper()
	b := &bench{t: t, queue: make(chan document.Event, 1000), posted: make(chan func(), 1000), circuit: -1}
	post = func(f func()) { b.posted <- f }
	t.Cleanup(func() { post = fyne.Do })
	b.app = test.NewTempApp(t)
	b.app.Settings().SetTheme(widgets.Theme{})
	b.doc = document.New(document.Options{Notify: func(e document.Event) { b.queue <- e }})
	t.Cleanup(func() { _ = b.doc.Abandon() })
	if sample != "" {
		if err := b.doc.OpenSample(sample); err != nil {
			t.Fatal(err)
		}
	}
	b.win = b.app.NewWindow("")
	b.win.SetPadded(false)
	b.s = New(b).(*Station)
	b.win.SetContent(b.s.Content())
	b.win.Resize(size)
	b.s.Changed(station.Everything)
	if sample != "" {
		b.solved()
	}
	return b
}

// pump handles what the document has told so far, as the frame does.
func (b *bench) pump() {
	for {
		select {
		case e := <-b.queue:
			b.told(e)
		case f := <-b.posted:
			f()
		default:
			return
		}
	}
}

func (b *bench) told(e document.Event) {
	switch e.Kind {
	case document.Opened:
		b.circuit, b.block = -1, ""
		b.s.Changed(station.Everything)
	case document.Edited:
		b.s.Changed(station.Model)
	case document.Solving:
	default:
		b.s.Changed(station.Solution)
	}
}

// solved waits until the present revision is solved and told.
func (b *bench) solved() {
	b.t.Helper()
	b.until(func() bool {
		running, _, _ := b.doc.Solving()
		return !running && len(b.queue) == 0 && !b.laying()
	})
}

// warmed waits until the solution has its oil temperatures too: nothing else is to come then.
func (b *bench) warmed() {
	b.t.Helper()
	b.until(func() bool {
		running, _, _ := b.doc.Solving()
		s, _ := b.doc.Solution()
		return !running && s != nil && !s.Pending && len(b.queue) == 0 && !b.laying()
	})
}

// until takes events and what is posted until something holds.
func (b *bench) until(holds func() bool) {
	b.t.Helper()
	deadline := time.After(3 * time.Minute) // with the race detector on a busy machine
	for {
		if holds() {
			return
		}
		select {
		case f := <-b.posted:
			f()
		case e := <-b.queue:
			b.told(e)
		case <-time.After(5 * time.Millisecond):
		case <-deadline:
			b.t.Fatal("waited in vain for the solution")
		}
	}
}

func (b *bench) laying() bool { return b.s.editors[0].laying.busy || b.s.editors[1].laying.busy }

func (b *bench) Doc() *document.Document { return b.doc }
func (b *bench) Window() fyne.Window     { return b.win }
func (b *bench) Clock() float64          { return b.clock }
func (b *bench) SetClock(t float64) {
	b.clock = t
	b.s.Changed(station.Clock | station.Reading)
}
func (b *bench) Duty() int { return b.duty }
func (b *bench) SetDuty(i int) {
	b.duty, b.clock = i, 0
	b.s.Changed(station.Selection | station.Clock | station.Reading)
}
func (b *bench) Selected() (int, string) { return b.circuit, b.block }
func (b *bench) Select(circuit int, block string) {
	if circuit != b.circuit || block != b.block {
		b.circuit, b.block = circuit, block
		if f := b.doc.File(); circuit >= 0 && circuit < len(f.Circuits) && slices.Contains(f.Besides(), f.Circuits[circuit].Name) {
			b.picked = f.Circuits[circuit].Name
		}
		b.s.Changed(station.Selection)
	}
}
func (b *bench) Beside() string {
	names := b.doc.File().Besides()
	if len(names) > 0 && !slices.Contains(names, b.picked) {
		return names[0]
	}
	return b.picked
}
func (b *bench) View() *station.View { return &b.view }
func (b *bench) Pick(circuit string) {
	b.picked, b.circuit, b.block = circuit, -1, ""
	b.s.Changed(station.Solution | station.Selection)
}
func (b *bench) Solution() *audit.Solution { s, _ := b.doc.Solution(); return s.Beside(b.Beside()) }
func (b *bench) Report() *audit.Report {
	if s := b.Solution(); s != nil {
		return s.Report(b.system)
	}
	return nil
}
func (b *bench) System() units.System { return b.system }
func (b *bench) Text(si float64, d units.Dim, digits int) string {
	return b.Local(units.Format(si, units.Preferred(d, b.system), digits))
}
func (b *bench) Local(text string) string {
	if w := b.Words(); w != nil {
		return w(text)
	}
	return text
}
func (b *bench) Words() func(string) string {
	if !b.comma {
		return nil
	}
	return func(text string) string { return strings.ReplaceAll(text, ".", ",") }
}
func (b *bench) Palette() figures.Palette { return widgets.Theme{Dark: b.dark}.Palette() }
func (b *bench) Go(string)                {}
func (b *bench) Explain(f audit.Figure)   { b.explained = append(b.explained, f) }
func (b *bench) Keep(d dialog.Dialog)     { b.kept = append(b.kept, d) }
func (b *bench) Say(text string)          { b.said = append(b.said, text) }
func (b *bench) Fail(err error)           { b.failed = append(b.failed, err) }

// theme switches colours and scale.
func (b *bench) theme(dark bool, scale float32) {
	b.dark = dark
	b.app.Settings().SetTheme(widgets.Theme{Dark: dark, Scale: scale})
	b.s.Changed(station.Settings)
	b.win.Content().Refresh()
}

// picture writes what is on the window into the folder that BARLITRE_PICTURES names.
func (b *bench) picture(name string) { stationtest.Picture(b.t, b.win, name) }

// middle is where a block is on a sheet.
func (b *bench) middle(sheet int, block string) fyne.Position {
	b.t.Helper()
	for _, p := range b.s.editors[sheet].Parts() {
		if p.Name == block {
			return fyne.NewPos(float32(p.X+p.W/2), float32(p.Y+p.H/2))
		}
	}
	b.t.Fatalf("no block %s on sheet %d", block, sheet)
	return fyne.Position{}
}

func event(p fyne.Position, button desktop.MouseButton, mod fyne.KeyModifier) *desktop.MouseEvent {
	return &desktop.MouseEvent{PointEvent: fyne.PointEvent{Position: p}, Button: button, Modifier: mod}
}

// click clicks on a sheet as the window does.
func (b *bench) click(sheet int, p fyne.Position, mod fyne.KeyModifier) {
	e := b.s.editors[sheet]
	e.MouseDown(event(p, desktop.MouseButtonPrimary, mod))
	e.MouseUp(event(p, desktop.MouseButtonPrimary, mod))
	b.pump()
}

// drag drags on a sheet in steps.
func (b *bench) drag(sheet int, from, to fyne.Position, button desktop.MouseButton, mod fyne.KeyModifier) {
	b.drop(sheet, from, to, button, mod)
	b.pump()
}

// drop is drag that leaves what follows from it to the caller.
func (b *bench) drop(sheet int, from, to fyne.Position, button desktop.MouseButton, mod fyne.KeyModifier) {
	e := b.s.editors[sheet]
	e.MouseDown(event(from, button, mod))
	b.dragOn(sheet, from, to)
	e.MouseUp(event(to, button, mod))
	e.DragEnd()
}

func (b *bench) dragOn(sheet int, from, to fyne.Position) {
	const steps = 5
	last := from
	for i := 1; i <= steps; i++ {
		at := fyne.NewPos(from.X+(to.X-from.X)*float32(i)/steps, from.Y+(to.Y-from.Y)*float32(i)/steps)
		b.s.editors[sheet].Dragged(&fyne.DragEvent{PointEvent: fyne.PointEvent{Position: at}, Dragged: fyne.NewDelta(at.X-last.X, at.Y-last.Y)})
		last = at
	}
}

func (b *bench) key(sheet int, names ...fyne.KeyName) {
	for _, n := range names {
		b.s.editors[sheet].TypedKey(&fyne.KeyEvent{Name: n})
		b.pump()
	}
}

// field is the field of a parameter that the panel shows.
func (b *bench) field(key string) *numberRow {
	b.t.Helper()
	for _, r := range b.s.panel.rows {
		if n, ok := r.(*numberRow); ok && n.param.Key == key {
			return n
		}
	}
	b.t.Fatalf("the panel shows no field %s", key)
	return nil
}

func close(a, b, eps float64) bool { return math.Abs(a-b) <= eps }

// PickFile, PickPlace, Perform and SaveFirst are not asked for by sheets.
func (b *bench) PickFile(_, _ string, _ []string, _ func(path string)) { b.t.Error("asked for a file") }

func (b *bench) PickPlace(_, _ string, _ func(path string)) { b.t.Error("asked for a place") }

func (b *bench) Perform(title string, _ func(context.Context, document.Progress) error, _ func(error)) {
	b.t.Error("long work: " + title)
}

func (b *bench) SaveFirst(why string, _ func()) { b.t.Error("asked to save first: " + why) }
