package circuit

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// NameOf is what a word of a parameter is called on screen and paper: a choice in terms of the trade, the name of an
// axis or a file as it is.
func (p *Param) NameOf(word string) string {
	if p.Type != Choice {
		return word
	}
	if name, ok := p.Called[word]; ok {
		return name
	}
	return strings.ReplaceAll(word, "_", " ")
}

// InText names a parameter within a finding: see WithWord.
func (p *Param) InText() string { return WithWord(p.Title, p.Key) }

// choicesInText names the choices of a parameter as InText names parameters.
func (p *Param) choicesInText() []string {
	var out []string
	for _, c := range p.Choices {
		out = append(out, WithWord(p.NameOf(c), c))
	}
	return out
}

// WithWord names a thing within a text that is read beside the window as well as beside the file: what it is called, and
// in brackets the word of the file where the name does not tell that.
func WithWord(title, word string) string {
	called := InSentence(title)
	if strings.EqualFold(title, word) {
		return called
	}
	return called + " (" + word + ")"
}

// InSentence makes a title part of a sentence; an abbreviation stays as it is.
func InSentence(title string) string {
	first, n := utf8.DecodeRuneInString(title)
	if second, _ := utf8.DecodeRuneInString(title[n:]); unicode.IsUpper(second) {
		return title
	}
	return string(unicode.ToLower(first)) + title[n:]
}
