package widgets

import (
	"strings"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/theme"
	"fyne.io/fyne/v2/widget"
)

// Text is a text over as many lines as it takes. The label of the toolkit breaks a line at a narrow no-break space as at any
// other, and so takes a number apart from its unit; this one breaks before the number.
type Text struct {
	widget.Label
	whole string
	wide  float32
	drawn drawn // of what is shown
}

// drawn is what changes the looks of a text besides its words.
type drawn struct {
	importance widget.Importance
	size       float32
}

// Wrapped is an empty text under a name for scripts; "" = none.
func Wrapped(name string) *Text {
	t := &Text{}
	t.Wrapping = fyne.TextWrapWord
	t.ExtendBaseWidget(t)
	if name != "" {
		Name(t, name)
	}
	return t
}

// SetText shows another text, or the same in another importance or size.
func (t *Text) SetText(text string) {
	size, _ := t.size()
	now := drawn{t.Importance, size}
	if text == t.whole && now == t.drawn {
		return
	}
	t.whole, t.drawn = text, now
	t.Label.SetText(t.broken())
}

// Resize breaks the lines anew where the width is another.
func (t *Text) Resize(size fyne.Size) {
	if size.Width != t.wide {
		t.wide = size.Width
		if text := t.broken(); text != t.Text {
			t.Label.SetText(text)
		}
	}
	t.Label.Resize(size)
}

// DumpText is the text without line breaks of ours, for scripts.
func (t *Text) DumpText() string { return t.whole }

// broken is the text with line breaks where else a number would lose its unit.
func (t *Text) broken() string {
	size, padding := t.size()
	room := t.wide - 2*padding
	if room <= 0 {
		return t.whole
	}
	return unbroken(t.whole, func(line string) bool { return fyne.MeasureText(line, size, t.TextStyle).Width <= room })
}

// size is that of the letters, with the room left and right of them.
func (t *Text) size() (letters, padding float32) {
	th, name := t.Theme(), t.SizeName
	if name == "" {
		name = theme.SizeNameText
	}
	return th.Size(name), th.Size(theme.SizeNameInnerPadding)
}

// bound are the spaces at which no line may break.
const bound = "\u202f\u00a0"

// unbroken puts a line break before a word that is held together by bound spaces and would be broken at one of them: where
// less than all of it fits the line.
func unbroken(text string, fits func(line string) bool) string {
	if !strings.ContainsAny(text, bound) {
		return text
	}
	var out strings.Builder
	for i, paragraph := range strings.Split(text, "\n") {
		if i > 0 {
			out.WriteByte('\n')
		}
		line := ""
		for k, word := range strings.Split(paragraph, " ") {
			switch longer := line + " " + word; {
			case k == 0:
				line = word
				out.WriteString(word)
				continue
			case fits(longer):
				line = longer
				out.WriteString(" " + word)
				continue
			}
			space := " "
			if at := strings.IndexAny(word, bound); at > 0 && fits(line+" "+word[:at]) {
				space = "\n"
			}
			line = word
			out.WriteString(space + word)
		}
	}
	return out.String()
}
