package sheet

import (
	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/driver/desktop"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/widgets"
)

// Sizes of the small windows that ask for a text [units at scale 1].
const (
	askWidth  = 240
	noteWidth = 340
	noteRows  = 5
)

// ask asks for a line of text at the pointer. done takes it and tells whether it will do:
// if not, the field stays, to be mended. name is for scripts.
func (e *editor) ask(words, text, name string, done func(text string) bool) {
	e.askAt(e.popPlace(), words, text, name, done)
}

// askAt is ask at another place of the window.
func (e *editor) askAt(at fyne.Position, words, text, name string, done func(text string) bool) {
	var pop *widget.PopUp
	var field *keyed
	field = newKeyed(func(k fyne.KeyName) bool {
		switch k {
		case fyne.KeyReturn, fyne.KeyEnter:
			if !done(field.Text) {
				return true
			}
		case fyne.KeyEscape:
		default:
			return false
		}
		pop.Hide()
		e.focus()
		return true
	})
	field.SetText(text)
	widgets.Name(field, name)
	pop = widget.NewPopUp(container.NewVBox(widget.NewLabel(words), field), e.s.ctx.Window().Canvas())
	e.s.popAt(pop, at, fyne.NewSize(askWidth*widgets.Scale(), pop.MinSize().Height))
	e.s.ctx.Window().Canvas().Focus(field)
	field.TypedShortcut(&fyne.ShortcutSelectAll{})
}

// pages is a field for several lines of text: Enter begins a line, Ctrl+Enter ends it.
type pages struct {
	keyed
	end func()
}

// TypedShortcut takes Ctrl+Enter.
func (p *pages) TypedShortcut(s fyne.Shortcut) {
	if c, ok := s.(*desktop.CustomShortcut); ok && (c.KeyName == fyne.KeyReturn || c.KeyName == fyne.KeyEnter) {
		p.end()
		return
	}
	p.keyed.TypedShortcut(s)
}

// askLines asks for a text of several lines; done is as for ask.
func (e *editor) askLines(words, text, verb, name string, done func(text string) bool) {
	var pop *widget.PopUp
	field := &pages{}
	shut := func() {
		pop.Hide()
		e.focus()
	}
	field.key = func(k fyne.KeyName) bool {
		if k == fyne.KeyEscape {
			shut()
		}
		return k == fyne.KeyEscape
	}
	field.end = func() {
		if done(field.Text) {
			shut()
		}
	}
	field.MultiLine, field.Wrapping = true, fyne.TextWrapWord
	field.SetMinRowsVisible(noteRows)
	field.ExtendBaseWidget(field)
	field.SetText(text)
	widgets.Name(field, name)
	ok := widgets.Name(widgets.NewButton(verb+" (Ctrl+Enter)", field.end), name+".ok")
	pop = widget.NewPopUp(container.NewVBox(widget.NewLabel(words), field, ok), e.s.ctx.Window().Canvas())
	e.s.popAt(pop, e.popPlace(), fyne.NewSize(noteWidth*widgets.Scale(), pop.MinSize().Height))
	e.s.ctx.Window().Canvas().Focus(field)
}
