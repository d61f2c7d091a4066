package intake

import (
	"strings"

	"barlitre/circuit/recording/logger"
)

// restructure changes how lines are cut into columns, and finds out anew what the columns
// then are; what was said of columns that keep their names stays.
func (p *Page) restructure(set func(r *logger.Recipe)) {
	old := p.src().recipe
	r := cloned(old)
	set(&r)
	fresh, ok := p.columnsOf(r)
	if ok {
		r.Time, r.Channels, r.Questions = fresh.Time, fresh.Channels, fresh.Questions
		if r.Separator == old.Separator {
			r.Time = old.Time
			r.Questions = nil
			for _, q := range old.Questions {
				if q.Field != "separator" {
					r.Questions = append(r.Questions, q)
				}
			}
			if !has(fresh, old.Time.Columns) {
				r.Time = fresh.Time
			}
		}
		for i, c := range r.Channels {
			if was := old.Channel(c.Column); was != nil {
				r.Channels[i] = *was
			}
		}
	}
	p.src().recipe = r
	p.read()
}

// has reports whether columns are among those of a recipe.
func has(r logger.Recipe, columns []string) bool {
	for _, name := range columns {
		found := r.Channel(name) != nil
		for _, c := range r.Time.Columns {
			found = found || c == name
		}
		if !found {
			return false
		}
	}
	return true
}

// columnsOf guesses what the columns are: the lines at the start, cut as the recipe says, are
// guessed as a file of their own.
func (p *Page) columnsOf(r logger.Recipe) (logger.Recipe, bool) {
	r.Time, r.Channels = logger.Time{Form: logger.Spaced, Interval: 1}, nil
	pre, err := p.src().file.Preview(r, max(r.First, r.Head, r.UnitsRow)+60)
	if err != nil {
		return r, false
	}
	var b strings.Builder
	write := func(cells []string) {
		for i, c := range cells {
			if i > 0 {
				b.WriteByte('\t')
			}
			b.WriteString(strings.ReplaceAll(c, "\t", " "))
		}
		b.WriteByte('\n')
	}
	for _, line := range []int{r.Head, r.UnitsRow} {
		if line > 0 && line <= len(pre.First) {
			write(pre.First[line-1].Cells)
		}
	}
	for _, row := range pre.First {
		if row.Line >= r.First {
			write(row.Cells)
		}
	}
	f, err := logger.OpenBytes(p.src().file.Name, []byte(b.String()))
	if err != nil {
		return r, false
	}
	return f.Guess(), true
}
