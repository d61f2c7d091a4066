package heat

import (
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
)

// The curves follow the sliders, the audit does not until it is told to; the request sheet is written as page and as table.
func TestSlidersAndSheet(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	top := func() float64 { return slices.Max(h.curves.plot.Lanes[1].Series[0].Y) }
	before, revision := top(), c.Document.Revision()
	slider := widgets.Named("heat.slider.cooler").(*widgets.Slider)
	slider.SetValue(0)
	if hot := top(); hot < before+20 || c.Document.Revision() != revision || !strings.Contains(h.curves.note.DumpText(), "On trial") {
		t.Errorf("without cooler %.1f °C after %.1f °C, %q", hot, before, h.curves.note.DumpText())
	}
	h.curves.back.OnTapped()
	if got := top(); got != before {
		t.Errorf("back at %.2f °C, was %.2f °C", got, before)
	}
	widgets.Named("heat.slider.tank").(*widgets.Slider).SetValue(1)
	h.curves.put()
	c.Wait()
	h.Changed(station.Model | station.Solution)
	if got := c.Document.File().Heat.Values["tank_volume"]; got.SI < 0.799 || got.SI > 0.801 {
		t.Errorf("the tank holds %s", got.Text)
	}
	widgets.Named("heat.group").(*widgets.Select).SetSelected("Limits")
	typeInto(t, c, "heat.field.wanted", "52")
	if got := c.Document.File().Heat.Values["wanted"].Text; got != "52 C" {
		t.Errorf("wanted is %q", got)
	}
	c.Wait()
	dir := t.TempDir()
	t.Setenv(station.SaveDirVariable, dir)
	h.saveRequest()
	h.writeRequest(filepath.Join(dir, "asked-cooler.csv"))
	for _, ending := range []string{".pdf", ".csv"} {
		found, _ := filepath.Glob(filepath.Join(dir, "*-cooler"+ending))
		if len(found) != 1 {
			t.Errorf("no sheet as %s: %v %v", ending, c.Failed, c.Said)
			continue
		}
		if info, err := os.Stat(found[0]); err != nil || info.Size() < 1000 {
			t.Errorf("%s is nearly empty", found[0])
		}
	}
}

// While the oil temperatures are worked out anew none of the audit before is shown, and all keeps its place; then they come.
func TestTemperaturesFollow(t *testing.T) {
	c := stationtest.New(t, press)
	h := shown(t, c)
	rows := len(h.rows)
	for i := range 20 {
		if err := c.Document.Set("As found/RV1.crack", []string{"231 bar", "230 bar"}[i%2]); err != nil {
			t.Fatal(err)
		}
		for !c.Document.Current() {
			time.Sleep(time.Millisecond)
		}
		// The window shows one solution at a time, whatever comes in meanwhile.
		if c.Held, _ = c.Document.Solution(); !c.Held.Pending {
			continue // they were there already
		}
		h.Changed(station.Model | station.Solution)
		for _, r := range h.warmth.Rows() {
			for _, cell := range r.Cells {
				if cell.Text != "…" {
					t.Errorf("while they are worked out %s is %q", r.Name, cell.Text)
				}
			}
		}
		if len(h.curves.plot.Lanes) > 0 || !h.request.Disabled() || !h.curves.body.Visible() {
			t.Error("while they are worked out there are curves, or a sheet, or nothing keeps its place")
		}
		h.curves.back.OnTapped() // nothing to go back to, and no fall
		c.Wait()
		c.Held = nil
		h.Changed(station.Solution)
		if len(h.rows) != rows || len(h.curves.plot.Lanes) == 0 || h.request.Disabled() {
			t.Errorf("%d rows, %d lanes", len(h.rows), len(h.curves.plot.Lanes))
		}
		return
	}
	t.Error("the temperatures were never seen to follow")
}
