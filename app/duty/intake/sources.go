package intake

import (
	"context"
	"fmt"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"time"

	"barlitre/audit"
	"barlitre/audit/whole"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/logger"
)

// source is one logger: its files in order of time, how they are read, and what came of it.
type source struct {
	paths  []string
	file   *logger.File
	recipe logger.Recipe
	kept   *audit.Kept // what the recipe read, nil before
	clock  audit.Clock // how a further logger is set beside the first
	also   audit.Also  // what came of that
}

func newSource(paths ...string) (*source, error) {
	file, err := logger.OpenFiles(paths...)
	if err != nil {
		return nil, err
	}
	return &source{paths: paths, file: file, recipe: file.Guess()}, nil
}

// sourcesOf opens the loggers of a duty that was made here; dir is where the audit is.
func sourcesOf(im *audit.Import, dir string) (out []*source, err error) {
	add := func(names []string, recipe logger.Recipe, clock audit.Clock) error {
		s := &source{recipe: recipe, clock: clock}
		for _, name := range names {
			s.paths = append(s.paths, filepath.Join(dir, filepath.FromSlash(name)))
		}
		if s.file, err = logger.OpenFiles(s.paths...); err != nil {
			return fmt.Errorf("%s cannot be opened: %w; put it back beside the audit file", strings.Join(names, ", "), whole.Plain(err))
		}
		out = append(out, s)
		return nil
	}
	if err := add(append([]string{im.File}, im.More...), im.Recipe, audit.Clock{}); err != nil {
		return nil, err
	}
	for _, a := range im.Also {
		if err := add(a.Files, a.Recipe, a.Clock); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// src is the logger at hand; an empty one where there is none.
func (p *Page) src() *source {
	if p.hand < len(p.sources) {
		return p.sources[p.hand]
	}
	return &source{}
}

// show takes another logger at hand.
func (p *Page) show(i int) {
	if i >= 0 && i < len(p.sources) {
		p.hand = i
		p.refresh()
	}
}

// fillWhich offers the loggers where there are several and the side at hand shows one.
func (p *Page) fillWhich() {
	show(p.ofLogger, len(p.sources) > 1 && p.at <= 1)
	var words, labels []string
	for i, s := range p.sources {
		words, labels = append(words, strconv.Itoa(i)), append(labels, fmt.Sprintf("%d: %s", i+1, s.file.Name))
	}
	p.loading = true
	p.which.offer(words, labels)
	p.which.set(strconv.Itoa(p.hand))
	p.loading = false
}

// owner finds the logger that a correction is of, and its key there.
func (p *Page) owner(key string) (*source, string) {
	for _, s := range p.sources[1:] {
		if s.kept == nil {
			continue
		}
		if own, ok := strings.CutPrefix(key, s.kept.Recording().Name+": "); ok {
			return s, own
		}
	}
	return p.sources[0], key
}

// readSources reads what is not read yet and sets all beside the first.
func readSources(ctx context.Context, list []source, share func(float64)) (*logger.Recording, error) {
	var before, all int64
	for _, s := range list {
		if s.kept == nil {
			all += s.file.Size
		}
	}
	told := time.Now()
	for i := range list {
		s := &list[i]
		if s.kept != nil {
			continue
		}
		rec, err := s.file.Import(ctx, unscaled(s.recipe), func(done, _ int64) {
			if now := time.Now(); now.Sub(told) > tellEvery && all > 0 {
				told = now
				share(min(1, float64(before+done)/float64(all)))
			}
		})
		if err != nil {
			return nil, err
		}
		s.kept = audit.Keep(rec)
		before += s.file.Size
	}
	rec := list[0].kept.Recording()
	for i := range list[1:] {
		s := &list[i+1]
		s.also = audit.Also{Clock: s.clock}
		out, err := s.also.Attach(rec, s.kept.Recording())
		if err != nil {
			return nil, fmt.Errorf("%s: %w", s.file.Name, err)
		}
		rec = out
	}
	return rec, ctx.Err()
}

// takenFrom names the recordings while the duty is tried out: files of one name are told apart.
func (p *Page) takenFrom() (file string, more []string, kept *audit.Kept, also []audit.TakenAlso) {
	for i, s := range p.sources {
		var names []string
		for k, path := range s.paths {
			names = append(names, fmt.Sprintf("%d/%d/%s", i, k, filepath.Base(path)))
		}
		if i == 0 {
			file, more, kept = names[0], names[1:], s.kept
			continue
		}
		also = append(also, audit.TakenAlso{Also: audit.Also{Files: names, Clock: s.clock}, Kept: s.kept})
	}
	return file, more, kept, also
}

// placed lets a duty be made of recordings that lie beside the audit under these names. Where a
// channel is told apart by the name of its recording, that changes with it.
func placed(t *audit.Taking, names [][]string) {
	t.File, t.More = names[0][0], names[0][1:]
	t.Tracks, t.Also = slices.Clone(t.Tracks), slices.Clone(t.Also)
	for i := range t.Also {
		a, rec := &t.Also[i], *t.Also[i].Kept.Recording()
		a.Files = names[i+1]
		was := rec.Name
		if rec.Name = logger.NameOf(a.Files); rec.Name == was {
			continue
		}
		a.Kept = audit.Keep(&rec)
		for k, x := range t.Tracks {
			says := map[string]string{}
			for key, text := range x.Says {
				if own, ok := strings.CutSuffix(text, logger.Of(was)); ok && rec.Find(own) != nil {
					text = own + logger.Of(rec.Name)
				}
				says[key] = text
			}
			t.Tracks[k] = logged.Track{Name: x.Name, Law: x.Law, Says: says}
		}
	}
}
