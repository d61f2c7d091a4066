package frame

import (
	"context"
	"fmt"
	"path/filepath"
	"strings"
	"unicode"
	"unicode/utf8"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/driver/desktop"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/machines/units"
	"barlitre/samples"
)

// firstSample is what the window opens with.
const firstSample = "baling-press.yaml"

// menus keeps the items that change.
type menus struct {
	main          *fyne.MainMenu
	undo, redo    *fyne.MenuItem
	recent, save  *fyne.MenuItem
	settingsItems []settingItem
	said          string
}

// settingItem is a menu item that is checked while a setting has its value.
type settingItem struct {
	item *fyne.MenuItem
	on   func() bool
}

func (f *Frame) buildMenu() {
	key := func(name fyne.KeyName, more fyne.KeyModifier) fyne.Shortcut {
		return &desktop.CustomShortcut{KeyName: name, Modifier: fyne.KeyModifierShortcutDefault | more}
	}
	item := func(text string, s fyne.Shortcut, do func()) *fyne.MenuItem {
		m := fyne.NewMenuItem(text, func() {
			if !f.asking() { // a dialog wants its answer first
				do()
			}
		})
		m.Shortcut = s
		return m
	}
	m := &f.menu
	start := fyne.NewMenuItem("New", nil)
	start.ChildMenu = fyne.NewMenu("", item("Empty circuit", key(fyne.KeyN, 0), func() { f.leave(f.openEmpty) }), fyne.NewMenuItemSeparator())
	for _, s := range samples.Starters() {
		start.ChildMenu.Items = append(start.ChildMenu.Items, item(s.Title, nil, func() { f.leave(func() { f.openStarter(s) }) }))
	}
	start.ChildMenu.Items = append(start.ChildMenu.Items, fyne.NewMenuItemSeparator())
	for _, name := range samples.Names() {
		start.ChildMenu.Items = append(start.ChildMenu.Items, item(sampleTitle(name), nil, func() { f.leave(func() { f.openSample(name) }) }))
	}
	m.recent = fyne.NewMenuItem("Open recent", nil)
	m.recent.ChildMenu = fyne.NewMenu("")
	m.save = item("Save", key(fyne.KeyS, 0), func() { f.save(nil) })
	m.undo = item("Undo", &fyne.ShortcutUndo{}, func() { f.undoOr(&fyne.ShortcutUndo{}, "Undone", f.doc.UndoWith) })
	m.redo = item("Redo", &fyne.ShortcutRedo{}, func() { f.undoOr(&fyne.ShortcutRedo{}, "Done again", f.doc.RedoWith) })
	quit := item("Quit", key(fyne.KeyQ, 0), f.quit)
	quit.IsQuit = true
	file := fyne.NewMenu("File", start,
		item("Open…", key(fyne.KeyO, 0), func() { f.leave(f.askOpen) }), m.recent, fyne.NewMenuItemSeparator(),
		item("Duty from a recording…", key(fyne.KeyI, 0), func() { f.recordings(station.Recordings.PickRecording) }), fyne.NewMenuItemSeparator(),
		m.save, item("Save as…", key(fyne.KeyS, fyne.KeyModifierShift), func() { f.saveAs(nil) }), f.printItems(), fyne.NewMenuItemSeparator(), quit)
	edit := fyne.NewMenu("Edit", append([]*fyne.MenuItem{m.undo, m.redo, fyne.NewMenuItemSeparator()}, f.editItems()...)...)
	job := fyne.NewMenu("Job")
	for i, s := range f.stations {
		job.Items = append(job.Items, item(s.Name(), key(stationKey(i), 0), func() { f.show(i) }))
	}
	view := fyne.NewMenu("View")
	setting := func(text string, on func() bool, change func()) {
		it := item(text, nil, func() {
			change()
			f.applySettings()
		})
		m.settingsItems = append(m.settingsItems, settingItem{it, on})
		view.Items = append(view.Items, it)
	}
	setting("Light", func() bool { return !f.settings.dark }, func() { f.settings.dark = false })
	setting("Dark", func() bool { return f.settings.dark }, func() { f.settings.dark = true })
	view.Items = append(view.Items, fyne.NewMenuItemSeparator())
	for _, k := range []float32{1, 1.25, 1.5, 2} {
		setting(fmt.Sprintf("Scale %.0f %%", 100*k), func() bool { return f.settings.scale == k }, func() { f.settings.scale = k })
	}
	view.Items = append(view.Items, fyne.NewMenuItemSeparator())
	for _, u := range []struct {
		text   string
		system units.System
	}{{"Metric units", units.Metric}, {"US units", units.US}, {"SI units", units.SI}} {
		setting(u.text, func() bool { return f.settings.system == u.system }, func() { f.settings.system = u.system })
	}
	view.Items = append(view.Items, fyne.NewMenuItemSeparator())
	setting("Decimal comma", func() bool { return f.settings.comma }, func() { f.settings.comma = !f.settings.comma })
	help := fyne.NewMenu("Help", item("This station (F1)", nil, f.help), item("About Barlitre", nil, f.about))
	m.main = fyne.NewMainMenu(file, edit, job, view, help)
	m.update(f)
	f.win.SetMainMenu(m.main)
}

func sampleTitle(name string) string {
	switch name {
	case "baling-press.yaml":
		return "Scrap-baling press: throttled, against a pump-controlled ram"
	case "handling-machine.yaml":
		return "Handling machine: load sensing, against a pump for each motion"
	case "quayside-winch.yaml":
		return "Quayside winch: valve and counterbalance, against a closed circuit"
	case "ramp-carrier.yaml":
		return "Wheel-driven carrier: throttled, against a closed circuit, starting on a slope"
	case "transfer-station.yaml":
		return "Transfer station: load sensing, against switched cylinders with three services on one shaft"
	}
	name = strings.ReplaceAll(strings.TrimSuffix(name, filepath.Ext(name)), "-", " ")
	return strings.ToUpper(name[:1]) + name[1:]
}

// update brings names, checks and the list of recent files up to date.
func (m *menus) update(f *Frame) {
	m.undo.Label, m.undo.Disabled = "Undo", f.doc.UndoName() == ""
	if n := f.doc.UndoName(); n != "" {
		m.undo.Label = "Undo: " + n
	}
	m.redo.Label, m.redo.Disabled = "Redo", f.doc.RedoName() == ""
	if n := f.doc.RedoName(); n != "" {
		m.redo.Label = "Redo: " + n
	}
	for _, s := range m.settingsItems {
		s.item.Checked = s.on()
	}
	recent := f.doc.Recent()
	said := fmt.Sprint(m.undo.Label, m.redo.Label, recent, f.settings)
	if said == m.said {
		return // a refresh of the menu closes it
	}
	m.said = said
	m.recent.ChildMenu.Items = nil
	for _, path := range recent {
		m.recent.ChildMenu.Items = append(m.recent.ChildMenu.Items, fyne.NewMenuItem(filepath.Base(path)+"  ("+filepath.Dir(path)+")", func() {
			if !f.asking() {
				f.leave(func() { f.open(path) })
			}
		}))
	}
	m.recent.Disabled = len(recent) == 0
	if m.main != nil {
		m.main.Refresh()
	}
}

// undoOr undoes text in a field that has the focus, else the last edit.
func (f *Frame) undoOr(s fyne.Shortcut, said string, do func(context.Context, document.Progress) (string, bool)) {
	if e, ok := f.win.Canvas().Focused().(fyne.Shortcutable); ok {
		if t, isText := e.(interface{ SelectedText() string }); isText && t != nil && f.typing() {
			e.TypedShortcut(s)
			return
		}
	}
	if f.asking() {
		return
	}
	told := func(name string, ok bool) {
		if ok {
			f.Say(said + ": " + lowerFirst(name))
		}
	}
	if !f.doc.HasRecordings() {
		told(do(context.Background(), nil))
		return
	}
	var name string
	f.Perform("Reading the recording again", func(ctx context.Context, tell document.Progress) error {
		var ok bool
		if name, ok = do(ctx, tell); !ok && ctx.Err() != nil {
			return document.ErrCancelled
		}
		return nil
	}, func(err error) {
		if !f.cancelled(err, "The audit stays as it was.") {
			told(name, name != "")
		}
	})
}

// lowerFirst makes the name of an edit fit behind a colon.
func lowerFirst(text string) string {
	r, n := utf8.DecodeRuneInString(text)
	return string(unicode.ToLower(r)) + text[n:]
}

// typing reports whether the field with the focus holds text that is not in the model yet.
func (f *Frame) typing() bool {
	field, ok := f.win.Canvas().Focused().(interface{ Typing() bool })
	return ok && field.Typing()
}

// shortcuts are keys beside the menu.
func (f *Frame) shortcuts() {
	f.win.Canvas().SetOnTypedKey(func(k *fyne.KeyEvent) {
		switch k.Name {
		case fyne.KeyF1:
			if !f.asking() {
				f.help()
			}
		case fyne.KeyEscape:
			if !f.escape() {
				f.player.stop()
			}
		}
	})
	f.win.Canvas().SetOnTypedRune(func(r rune) { // comes here when nothing has the keys
		if r == '/' {
			f.act(station.AddBlock)
		}
	})
	f.win.Canvas().AddShortcut(&desktop.CustomShortcut{KeyName: fyne.KeyZ, Modifier: fyne.KeyModifierShortcutDefault | fyne.KeyModifierShift}, func(fyne.Shortcut) {
		f.undoOr(&fyne.ShortcutRedo{}, "Done again", f.doc.RedoWith)
	})
}

// applySettings brings a changed setting to everything that is drawn.
func (f *Frame) applySettings() {
	f.settings.write(f.app.Preferences())
	f.app.Settings().SetTheme(f.theme())
	f.changed(station.Settings)
	f.win.Content().Refresh()
}
