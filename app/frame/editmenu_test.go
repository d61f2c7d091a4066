package frame

import (
	"testing"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/station"
)

// drawn is a station that counts what the Edit menu asks of it.
type drawn struct {
	plain
	asked []station.Action
}

func (d *drawn) Act(a station.Action) { d.asked = append(d.asked, a) }

// Copy and paste belong to the field that has the focus, else to the station.
func TestEditMenuRoutes(t *testing.T) {
	field := widget.NewEntry()
	d := &drawn{plain: plain{name: "Circuit", box: container.NewStack(field)}}
	b := (&bench{t: t}).open(func(station.Context) station.Station { return d })
	item := func(label string) *fyne.MenuItem {
		for _, m := range b.menu.main.Items {
			for _, it := range m.Items {
				if it.Label == label {
					return it
				}
			}
		}
		t.Fatalf("no menu item %q", label)
		return nil
	}
	b.app.Clipboard().SetContent("170 bar")
	b.win.Canvas().Focus(field)
	item("Paste").Action()
	if field.Text != "170 bar" || len(d.asked) != 0 {
		t.Errorf("the field has %q, the station was asked %v", field.Text, d.asked)
	}
	b.win.Canvas().Unfocus()
	item("Paste").Action()
	item("Duplicate").Action()
	if len(d.asked) != 2 || d.asked[0] != station.Paste || d.asked[1] != station.Duplicate {
		t.Errorf("without a field the station was asked %v", d.asked)
	}
	dialog := b.ask("Question", widget.NewLabel(""), answer{verb: "Close"})
	item("Duplicate").Action()
	if dialog.d.Hide(); len(d.asked) != 2 {
		t.Errorf("while a dialog is open the station was asked %v", d.asked)
	}
}
