package intake

import (
	"slices"

	"barlitre/app/widgets"
)

// choice is a list whose choices are not the user's while the page is filled.
type choice struct {
	*widgets.Select
	words  []string // as the recipe has them
	labels []string
}

// newChoice makes a list of words; labels are what is shown of them, nil for the words.
func (p *Page) newChoice(name string, words, labels []string, take func(word string)) *choice {
	c := &choice{words: words, labels: labels}
	if labels == nil {
		c.labels = words
	}
	c.Select = widgets.Name(widgets.NewSelect(c.labels, nil), name)
	c.OnChanged = func(string) {
		if i := c.SelectedIndex(); !p.loading && i >= 0 {
			take(c.words[i])
		}
	}
	return c
}

// set shows a word of the recipe.
func (c *choice) set(word string) {
	if i := slices.Index(c.words, word); i >= 0 {
		if c.SelectedIndex() != i {
			c.SetSelectedIndex(i)
		}
	} else if c.Selected != "" {
		c.ClearSelected()
	}
}

// offer changes what can be chosen.
func (c *choice) offer(words, labels []string) {
	if labels == nil {
		labels = words
	}
	if !slices.Equal(c.words, words) || !slices.Equal(c.labels, labels) {
		c.words, c.labels = words, labels
		c.SetOptions(labels)
	}
}
