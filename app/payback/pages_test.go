package payback

import (
	"strings"
	"testing"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/test"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
	"barlitre/app/station/stationtest"
	"barlitre/app/widgets"
	"barlitre/audit"
)

// open shows a page of the station over a changed sample, and waits for the advice.
func open(t *testing.T, name string, page int, w, h float32, change func(f *audit.File) error) (*stationtest.Context, *Payback) {
	t.Helper()
	c := stationtest.New(t, name)
	if change != nil {
		if err := c.Document.Edit("Change", change); err != nil {
			t.Fatal(err)
		}
		c.Wait()
	}
	p := New(c).(*Payback)
	c.Show(p, w, h)
	test.Tap(p.pages.all[page].button)
	waitForAdvice(t, c)
	p.Changed(station.Advice)
	c.Settle(w, h)
	return c, p
}

func waitForAdvice(t *testing.T, c *stationtest.Context) {
	t.Helper()
	for end := time.Now().Add(60 * time.Second); ; time.Sleep(5 * time.Millisecond) {
		if _, current := c.Document.Advice(); current {
			return
		}
		if time.Now().After(end) {
			t.Fatal("no advice in 60 s")
		}
	}
}

// words is all text in the window.
func words(c *stationtest.Context) string {
	var out []string
	var walk func(o fyne.CanvasObject)
	walk = func(o fyne.CanvasObject) {
		switch x := o.(type) {
		case *widget.Label:
			if x.Visible() {
				out = append(out, x.Text)
			}
		case *widgets.Text:
			if x.Visible() {
				out = append(out, x.DumpText())
			}
		case *fyne.Container:
			for _, o := range x.Objects {
				walk(o)
			}
		case *container.Scroll:
			walk(x.Content)
		}
	}
	walk(c.Win.Content())
	return strings.Join(out, "\n")
}

func faulty(f *audit.File) error {
	if err := f.Set("As found/RV1.crack", "200 bar"); err != nil {
		return err
	}
	return f.Set("As found/P1.wear", "3")
}

func TestFixFirstPage(t *testing.T) {
	c, _ := open(t, "quayside-winch.yaml", 1, 1180, 560, faulty)
	text := words(c)
	for _, want := range []string{"2 faults were found", "RV1: relief at or below compensator", "P1: worn pump", "Worth: ", "▲ A relief valve protects", "can be had without it"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not on the page:\n%s", want, text)
		}
	}
	c.Look("fixfirst")
	before := len(c.Document.File().Circuits)
	test.Tap(widgets.Named("fixfirst.add").(*widgets.Button))
	if n := len(c.Document.File().Circuits); n != before+1 {
		t.Errorf("%d circuits, before %d", n, before)
	}
}

func TestSiteCheckPage(t *testing.T) {
	c, _ := open(t, "quayside-winch.yaml", 2, 1180, 560, func(f *audit.File) error {
		for _, r := range [][3]string{{"idling", "M1.power", "25 kW"}, {"idling", "P1.pressure", "188 bar"}, {"working", "P1.pressure", "185 bar"}} {
			if err := f.SetReading(r[0], r[1], r[2]); err != nil {
				return err
			}
		}
		return nil
	})
	text := words(c)
	for _, want := range []string{"Most likely: RV1 set below the compensator of P1", "times the model", "Live work"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is not on the page:\n%s", want, text)
		}
	}
	c.Look("sitecheck")
}
