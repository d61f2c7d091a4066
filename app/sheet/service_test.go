package sheet

import (
	"strings"
	"testing"

	"fyne.io/fyne/v2"
)

// A selected service shows its efficiency beside another machine, with the idle loss at which its advantage is gone; a
// motor on the same sheet does not.
func TestServicePanel(t *testing.T) {
	b := newBench(t, "transfer-station.yaml", fyne.NewSize(1190, 590))
	b.win.Resize(fyne.NewSize(1400, 900))
	b.SetClock(14)
	b.picture("station-light")
	b.whole()
	b.Select(1, "")
	b.s.setWide(true)
	b.picture("services-wide")
	b.s.setWide(false)
	b.Select(1, "M1")
	v := b.s.panel.service
	if v.content.Visible() {
		t.Error("an electric motor shows the figure of a service")
	}
	b.Select(1, "S1")
	if !v.content.Visible() {
		t.Fatal("the service shows no figure")
	}
	if text := v.verdict.Text; !strings.Contains(text, "gone at an idle loss of") || !strings.Contains(v.shown.Head, "S1 at its mean") {
		t.Errorf("%q, %q", v.shown.Head, text)
	}
	b.s.panel.scroll.ScrollToBottom()
	b.picture("service-light")
	b.theme(true, 1)
	b.s.panel.scroll.ScrollToBottom()
	b.picture("service-dark")
}

func TestCarrierPage(t *testing.T) {
	b := newBench(t, "ramp-carrier.yaml", fyne.NewSize(1190, 590))
	b.win.Resize(fyne.NewSize(1400, 900))
	b.SetClock(4)
	b.picture("carrier-light")
	b.whole()
}
