package intake

import (
	"context"
	"slices"
	"strings"

	"barlitre/audit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/cycles"
	"barlitre/circuit/recording/logger"
)

// outcome is what the tracks come to.
type outcome struct {
	whole  *duty.Duty // of all rows; nil before there is any
	shown  *duty.Duty // of the part
	says   map[string]string
	faults map[string]string // by track
	works  []logged.Moved    // of the part
	rates  []logged.Rated
	found  *cycles.Result
	none   string // why no cycles were looked for
}

// derive works the tracks out, and what they tell.
func (p *Page) derive() {
	if p.rec == nil {
		p.refresh()
		return
	}
	base, taking := p.ctx.Doc().File(), p.taking()
	part := p.part
	p.start("Working the tracks out", func(ctx context.Context, _ func(float64)) func() {
		p.work.Lock()
		defer p.work.Unlock()
		out := outcome{}
		if ctx.Err() == nil {
			out = workOut(ctx, base, taking, part)
		}
		return func() {
			p.out = out
			p.refresh()
		}
	})
}

// taking is how the duty would be made; its part is left to the caller.
func (p *Page) taking() audit.Taking {
	used := map[string]bool{}
	for _, t := range p.tracks {
		of, _, _ := strings.Cut(t.Name, ".")
		used[of] = true
	}
	t := audit.Taking{Tracks: slices.Clone(p.tracks)}
	t.File, t.More, t.Kept, t.Also = p.takenFrom()
	for _, a := range p.axes {
		if used[a.Name] {
			t.Axes = append(t.Axes, a)
		}
	}
	return t
}

// tryName is what the duty is called while it is tried out.
const tryName = "\u2026"

func workOut(ctx context.Context, base *audit.File, t audit.Taking, part logged.Part) (out outcome) {
	t.Duty = tryName
	out.says, out.faults = map[string]string{}, map[string]string{}
	f, err := tried(base, t)
	if err != nil { // each alone, to find the faulty ones
		all := t.Tracks
		t.Tracks = nil
		for _, x := range all {
			one := t
			one.Tracks = []logged.Track{x}
			if ctx.Err() != nil {
				return out
			}
			if _, err := tried(base, one); err != nil {
				out.faults[x.Name] = faultOf(x.Name, err)
				continue
			}
			t.Tracks = append(t.Tracks, x)
		}
		if f, err = tried(base, t); err != nil {
			out.none = err.Error()
			return out
		}
	}
	i := len(f.Duties) - 1
	out.whole = f.Duties[i]
	for _, x := range f.Imports[i].Derived {
		out.says[x.Track] = x.Formula
	}
	shown := *out.whole
	shown.Tracks = slices.Clone(shown.Tracks)
	if err := part.Cut(&shown); err != nil {
		out.none = err.Error()
	}
	shown.Repeats = shown.Repeats || cyclic(part)
	out.shown = &shown
	if ctx.Err() != nil {
		return out
	}
	all := logged.Works(out.whole)
	if out.works = all; !part.Whole() {
		out.works = logged.Works(out.shown)
	}
	if out.found, err = logged.Cycles(ctx, out.whole, all); err != nil {
		out.none = err.Error()
	}
	if ctx.Err() != nil {
		return out
	}
	means := slices.ContainsFunc(t.Kept.Recording().Recipe.Channels, func(c logger.Channel) bool { return c.Kind == logger.Mean })
	out.rates = logged.Rates(out.shown, means) // of the part that the duty is made of
	return out
}

// tried is the audit with the duty in it.
func tried(base *audit.File, t audit.Taking) (*audit.File, error) {
	f := *base
	err := f.TakeIn(t)
	return &f, err
}

// faultOf is an error without what the page says already.
func faultOf(track string, err error) string {
	text := err.Error()
	for _, x := range []string{"duty \"" + tryName + "\"", "derived", "columns", track} {
		for _, sep := range []string{", ", ": "} {
			text = strings.TrimPrefix(text, x+sep)
		}
	}
	return text
}
