package widgets

import (
	"image/color"
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// Field is an entry for one value. What is typed is handed over on Enter and when
// the focus leaves; Escape brings the old value back; a value that is refused stays,
// marked, with the reason under it, and nothing is lost.
type Field struct {
	widget.Entry
	Commit func(text string) error // nil error = taken
	Note   *Text                   // where a refusal is said; may be nil
	value  string                  // what the model has
	hint   string
	bad    bool
}

// NewField makes a field that shows value.
func NewField(value string, commit func(string) error) *Field {
	f := &Field{Commit: commit, value: value}
	f.ExtendBaseWidget(f)
	f.Wrapping = fyne.TextWrapOff
	f.Scroll = container.ScrollNone
	f.Text = value
	f.OnSubmitted = func(string) { f.commit() }
	return f
}

// SetValue brings the model's value in, unless the user is in the middle of another.
func (f *Field) SetValue(value, hint string) {
	f.hint = hint
	if value == f.value && !f.bad && f.Text == value {
		f.say("")
		return
	}
	changed := f.value != value
	f.value = value
	if changed || (!f.bad && f.Text != value) {
		f.bad = false
		f.SetText(value)
		f.say("")
	}
}

func (f *Field) say(text string) {
	if f.Note == nil {
		return
	}
	if text == "" {
		text = f.hint
	}
	f.Note.Importance = widget.LowImportance
	if f.bad {
		f.Note.Importance = widget.DangerImportance
	}
	f.Note.SetText(text)
}

func (f *Field) commit() {
	text := strings.TrimSpace(f.Text)
	if text == f.value && !f.bad {
		return
	}
	if f.Commit == nil {
		return
	}
	if err := f.Commit(text); err != nil {
		f.bad = true
		f.say("⚠ " + err.Error())
		return
	}
	f.bad = false
	f.say("")
}

// Typing reports whether the field holds text that was not handed over yet.
func (f *Field) Typing() bool { return f.Text != f.value }

// Bad reports whether what stands in the field was refused.
func (f *Field) Bad() bool { return f.bad }

// FocusGained scrolls it into sight.
func (f *Field) FocusGained() {
	f.Entry.FocusGained()
	reveal(f)
}

// FocusLost hands the value over.
func (f *Field) FocusLost() {
	f.Entry.FocusLost()
	f.commit()
}

// TypedKey takes Escape for itself.
func (f *Field) TypedKey(k *fyne.KeyEvent) {
	if k.Name == fyne.KeyEscape {
		f.bad = false
		f.SetText(f.value)
		f.say("")
		return
	}
	if !passHelp(f, k) {
		f.Entry.TypedKey(k)
	}
}

// CreateRenderer is for the toolkit. A text longer than the field scrolls with the
// cursor; a bar under it would cover the text.
func (f *Field) CreateRenderer() fyne.WidgetRenderer {
	r := f.Entry.CreateRenderer()
	for _, o := range r.Objects() {
		container.NewThemeOverride(o, barless{})
	}
	return r
}

// barless is the theme in force with scroll bars that take no room.
type barless struct{}

func (barless) Color(n fyne.ThemeColorName, v fyne.ThemeVariant) color.Color {
	if n == theme.ColorNameScrollBar || n == theme.ColorNameScrollBarBackground || n == theme.ColorNameShadow {
		return color.Transparent
	}
	return fyne.CurrentApp().Settings().Theme().Color(n, v)
}
func (barless) Font(s fyne.TextStyle) fyne.Resource {
	return fyne.CurrentApp().Settings().Theme().Font(s)
}
func (barless) Icon(n fyne.ThemeIconName) fyne.Resource {
	return fyne.CurrentApp().Settings().Theme().Icon(n)
}
func (barless) Size(n fyne.ThemeSizeName) float32 {
	return fyne.CurrentApp().Settings().Theme().Size(n)
}

// Cursor is that of text.
func (f *Field) Cursor() desktop.Cursor { return desktop.TextCursor }

// Card is a piece of paper with a title: the ground of every panel.
func Card(title string, content fyne.CanvasObject) fyne.CanvasObject {
	head := widget.NewLabelWithStyle(title, fyne.TextAlignLeading, fyne.TextStyle{Bold: true})
	return container.NewBorder(head, nil, nil, nil, content)
}

// Spaced puts room of the grid's step around an object.
func Spaced(o fyne.CanvasObject) fyne.CanvasObject {
	return container.New(layoutPad{theme.Padding() * 2}, o)
}

type layoutPad struct{ by float32 }

func (l layoutPad) Layout(objects []fyne.CanvasObject, size fyne.Size) {
	for _, o := range objects {
		o.Move(fyne.NewPos(l.by, l.by))
		o.Resize(size.SubtractWidthHeight(2*l.by, 2*l.by))
	}
}

func (l layoutPad) MinSize(objects []fyne.CanvasObject) fyne.Size {
	m := fyne.Size{}
	for _, o := range objects {
		m = m.Max(o.MinSize())
	}
	return m.AddWidthHeight(2*l.by, 2*l.by)
}
