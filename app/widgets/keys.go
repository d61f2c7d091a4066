package widgets

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"
)

// PassKey hands a key on to the window, which sees none while a widget has the focus.
func PassKey(o fyne.CanvasObject, k *fyne.KeyEvent) {
	if c := fyne.CurrentApp().Driver().CanvasForObject(o); c != nil && c.OnTypedKey() != nil {
		c.OnTypedKey()(k)
	}
}

// passHelp hands F1 on and reports whether the key was that.
func passHelp(o fyne.CanvasObject, k *fyne.KeyEvent) bool {
	if k.Name != fyne.KeyF1 {
		return false
	}
	PassKey(o, k)
	return true
}

// passOn hands F1 and Escape on, of widgets that have no use for either.
func passOn(o fyne.CanvasObject, k *fyne.KeyEvent) bool {
	if k.Name == fyne.KeyEscape {
		PassKey(o, k)
		return true
	}
	return passHelp(o, k)
}

// Button is a button that leaves F1 to the window.
type Button struct{ widget.Button }

// NewButton makes a button.
func NewButton(text string, do func()) *Button {
	b := &Button{}
	b.Text, b.OnTapped = text, do
	b.ExtendBaseWidget(b)
	return b
}

// FocusGained scrolls it into sight.
func (b *Button) FocusGained() {
	b.Button.FocusGained()
	reveal(b)
}

// TypedKey presses by Space.
func (b *Button) TypedKey(k *fyne.KeyEvent) {
	if !passOn(b, k) {
		b.Button.TypedKey(k)
	}
}

// DumpText is for scripts.
func (b *Button) DumpText() string { return b.Text }

// Check is a check box that leaves F1 to the window.
type Check struct{ widget.Check }

// NewCheck makes a check box.
func NewCheck(text string, changed func(bool)) *Check {
	c := &Check{}
	c.Text, c.OnChanged = text, changed
	c.ExtendBaseWidget(c)
	return c
}

// FocusGained scrolls it into sight.
func (c *Check) FocusGained() {
	c.Check.FocusGained()
	reveal(c)
}

// TypedKey leaves F1 to the window.
func (c *Check) TypedKey(k *fyne.KeyEvent) {
	if !passOn(c, k) {
		c.Check.TypedKey(k)
	}
}

// DumpText is for scripts.
func (c *Check) DumpText() string {
	if c.Checked {
		return c.Text + "=true"
	}
	return c.Text + "=false"
}

// Slider is a slider that leaves F1 to the window.
type Slider struct{ widget.Slider }

// NewSlider makes a slider from low to high in steps.
func NewSlider(low, high, step float64, changed func(float64)) *Slider {
	s := &Slider{}
	s.Min, s.Max, s.Step, s.OnChanged = low, high, step, changed
	s.Orientation = widget.Horizontal
	s.ExtendBaseWidget(s)
	return s
}

// FocusGained scrolls it into sight.
func (s *Slider) FocusGained() {
	s.Slider.FocusGained()
	reveal(s)
}

// TypedKey leaves F1 to the window.
func (s *Slider) TypedKey(k *fyne.KeyEvent) {
	if !passHelp(s, k) {
		s.Slider.TypedKey(k)
	}
}

// Select is a choice that leaves F1 to the window.
type Select struct{ widget.Select }

// NewSelect makes a choice.
func NewSelect(options []string, changed func(string)) *Select {
	s := &Select{}
	s.Options, s.OnChanged = options, changed
	s.PlaceHolder = "Choose"
	s.ExtendBaseWidget(s)
	return s
}

// FocusGained scrolls it into sight.
func (s *Select) FocusGained() {
	s.Select.FocusGained()
	reveal(s)
}

// TypedKey leaves F1 to the window.
func (s *Select) TypedKey(k *fyne.KeyEvent) {
	if !passOn(s, k) {
		s.Select.TypedKey(k)
	}
}

// DumpText is for scripts.
func (s *Select) DumpText() string { return s.Selected }
