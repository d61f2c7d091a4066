package frame

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/station"
)

// editItems are the items of the Edit menu that act on what is selected. Keys without a
// modifier stand in their words only: the station takes them.
func (f *Frame) editItems() []*fyne.MenuItem {
	var out []*fyne.MenuItem
	add := func(text string, key fyne.Shortcut, do func()) {
		m := fyne.NewMenuItem(text, do)
		m.Shortcut = key
		out = append(out, m)
	}
	add("Add block (/)", nil, func() { f.act(station.AddBlock) })
	clip := fyne.CurrentApp().Clipboard()
	cut, copied, paste := &fyne.ShortcutCut{Clipboard: clip}, &fyne.ShortcutCopy{Clipboard: clip}, &fyne.ShortcutPaste{Clipboard: clip}
	add("Cut", cut, func() { f.fieldOr(cut, station.Cut) })
	add("Copy", copied, func() { f.fieldOr(copied, station.Copy) })
	add("Paste", paste, func() { f.fieldOr(paste, station.Paste) })
	out = append(out, fyne.NewMenuItemSeparator())
	double := &desktop.CustomShortcut{KeyName: fyne.KeyD, Modifier: fyne.KeyModifierShortcutDefault}
	add("Duplicate", double, func() { f.act(station.Duplicate) })
	add("Delete (Del)", nil, func() { f.act(station.Delete) })
	add("Rotate (R)", nil, func() { f.act(station.Rotate) })
	add("Mirror (M)", nil, func() { f.act(station.Mirror) })
	add("Rename (F2)", nil, func() { f.act(station.Rename) })
	out = append(out, fyne.NewMenuItemSeparator())
	all := &fyne.ShortcutSelectAll{}
	add("Select all", all, func() { f.fieldOr(all, station.SelectAll) })
	add("Connect by keys (C)", nil, func() { f.act(station.Connect) })
	add("Straighten line (S)", nil, func() { f.act(station.Straighten) })
	group := &desktop.CustomShortcut{KeyName: fyne.KeyG, Modifier: fyne.KeyModifierShortcutDefault}
	add("Group with a label", group, func() { f.act(station.Group) })
	add("Add note (N)", nil, func() { f.act(station.AddNote) })
	add("Zoom to selection (Z)", nil, func() { f.act(station.FitSelection) })
	return out
}

// fieldOr gives a shortcut to the field or table that has the focus, else acts on the
// selection: the menu gets the keys before a field does.
func (f *Frame) fieldOr(s fyne.Shortcut, a station.Action) {
	if field, ok := f.win.Canvas().Focused().(fyne.Shortcutable); ok {
		field.TypedShortcut(s)
		return
	}
	f.act(a)
}

// act asks the station that is shown.
func (f *Frame) act(a station.Action) {
	if d, ok := f.stations[f.current].(station.Drawing); ok && !f.asking() {
		d.Act(a)
	}
}
