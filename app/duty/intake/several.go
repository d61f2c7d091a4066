package intake

import (
	"errors"
	"fmt"
	"path/filepath"
	"slices"

	"barlitre/audit"
	"barlitre/audit/whole"
	"barlitre/circuit/recording/logger"
)

// AtLoggers reports whether the page shows its loggers, to which files can be added.
func (p *Page) AtLoggers() bool { return len(p.sources) > 0 && p.at == loggersTab }

// Add adds files to what is being taken in, each where it belongs; see sorted. On an error
// nothing is added.
func (p *Page) Add(paths ...string) error {
	for _, path := range paths {
		if p.has(path) {
			return fmt.Errorf("%s is there already; choose another file", filepath.Base(path))
		}
	}
	list, err := sorted(p.sources, paths)
	if err != nil {
		return err
	}
	p.sources = list
	p.readAll()
	return nil
}

// sorted puts files to the loggers that they come from: one with the columns of a logger goes
// on there, in the order in which people count; any other is another logger, with the clock
// that is likely. What is given is not changed.
func sorted(have []*source, paths []string) (list []*source, err error) {
	paths = slices.Clone(paths)
	logger.InOrder(paths)
	for _, s := range have {
		copied := *s
		copied.paths = slices.Clone(s.paths)
		list = append(list, &copied)
	}
	for _, path := range slices.Compact(paths) {
		s, err := newSource(path)
		if err != nil {
			return nil, fmt.Errorf("%s cannot be opened: %w", filepath.Base(path), whole.Plain(err))
		}
		i := slices.IndexFunc(list, func(x *source) bool { return sameColumns(x.file.Guess(), s.recipe) })
		if i < 0 {
			list = append(list, s)
			continue
		}
		list[i].paths, list[i].kept = append(list[i].paths, path), nil
	}
	if len(list) == 0 {
		return nil, errors.New("there is no file to take in")
	}
	for i, s := range list {
		if i >= len(have) && i > 0 {
			s.clock = audit.LikelyClock(list[0].recipe, s.recipe)
		}
		if s.kept == nil {
			if s.file, err = logger.OpenFiles(s.paths...); err != nil {
				return nil, whole.Plain(err)
			}
		}
	}
	return list, nil
}

// sameColumns reports whether two files have the same columns in the same order.
func sameColumns(a, b logger.Recipe) bool {
	same := func(x, y logger.Channel) bool { return x.Column == y.Column }
	return slices.Equal(a.Time.Columns, b.Time.Columns) && slices.EqualFunc(a.Channels, b.Channels, same)
}
