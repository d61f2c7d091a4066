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

func (p *Param) choiceNames() []string {
	var out []string
	for _, c := range p.Choices {
		out = append(out, p.NameOf(c))
	}
	return out
}

// InText names a parameter within a finding, which is read beside its field as well as beside its file: its title, and
// in brackets its key where the title does not tell it.
func (p *Param) InText() string {
	title := InSentence(p.Title)
	if strings.EqualFold(p.Title, p.Key) {
		return title
	}
	return title + " (" + p.Key + ")"
}

// InSentence makes a title part of a sentence; an abbreviation stays as it is.
func InSentence(title string) string {
	first, n := utf8.DecodeRuneInString(title)
	if second, _ := utf8.DecodeRuneInString(title[n:]); unicode.IsUpper(second) {
		return title
	}
	return string(unicode.ToLower(first)) + title[n:]
}
