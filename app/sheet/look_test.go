package sheet

import (
	"testing"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
)

// whole checks that a sheet that was fitted shows every block of its circuit, none cut off.
func (b *bench) whole() {
	b.t.Helper()
	for i, e := range b.s.editors {
		if !b.s.sheetShown(i) {
			continue
		}
		w, h := e.room()
		seen := map[string]bool{}
		for _, x := range e.boxes {
			seen[x.id] = true
			x0, y0 := e.x+x.x*e.zoom, e.y+x.y*e.zoom
			if x0 < 0 || y0 < 0 || x0+x.w*e.zoom > w || y0+x.h*e.zoom > h {
				b.t.Errorf("%s of %s is cut off", x.id, e.name)
			}
		}
		for j := range e.drawn.Blocks {
			if id := e.drawn.Blocks[j].ID; !seen[id] {
				b.t.Errorf("%s of %s is not drawn", id, e.name)
			}
		}
	}
}

// The pages are drawn in every size and colour; what they show is looked at in the
// pictures, which are written when BARLITRE_PICTURES names a folder.
func TestPages(t *testing.T) {
	b := newBench(t, "baling-press.yaml", fyne.NewSize(1190, 590))
	b.win.Resize(fyne.NewSize(1200, 590))
	b.SetClock(23)
	b.picture("circuit-light")
	b.whole()
	b.Select(0, "RV1")
	b.picture("relief-light")
	b.Select(0, "V1")
	b.theme(true, 1)
	b.picture("valve-dark")
	b.s.setEnergy(true)
	b.Select(1, "P1")
	b.picture("cycle-dark")
	b.theme(false, 1)
	b.s.setWide(true)
	b.picture("wide-light")
	b.whole()
	b.s.setWide(false)
	b.s.setEnergy(false)
	b.win.Resize(fyne.NewSize(930, 480))
	b.s.Changed(station.Everything)
	b.picture("small-folded")
	b.s.togglePanel()
	b.picture("small-open")
	b.theme(false, 2)
	b.win.Resize(fyne.NewSize(1200, 590))
	b.picture("scale-200")
	b.s.setWide(true)
	b.picture("scale-200-wide")
	b.whole()
}

func TestFaultyPage(t *testing.T) {
	b := newBench(t, "quayside-winch.yaml", fyne.NewSize(1200, 590))
	b.SetClock(20)
	b.picture("winch-light")
	for i := range b.doc.File().Circuits[0].Blocks {
		if block := &b.doc.File().Circuits[0].Blocks[i]; block.Kind == "relief" {
			b.Select(0, block.ID)
			break
		}
	}
	for _, r := range b.s.panel.rows {
		if n, ok := r.(*numberRow); ok {
			n.field.SetText("2000 bar, or so")
			n.field.OnSubmitted(n.field.Text)
			n.toggle()
			break
		}
	}
	b.theme(false, 1)
	b.picture("refused-light")
	b.theme(true, 1)
	b.picture("refused-dark")
}

func TestEmptyPage(t *testing.T) {
	b := newBench(t, "", fyne.NewSize(1200, 590))
	b.picture("empty")
	if got := b.s.editors[0].DumpText(); got != "empty" {
		t.Errorf("an empty audit shows %q", got)
	}
}
