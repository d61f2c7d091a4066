package intake

import (
	"context"
	"slices"
	"strings"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/audit"
	"barlitre/audit/whole"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/cycles"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// post runs a function on the UI goroutine, background one on another; tests wait for both.
var (
	post       = fyne.Do
	background = func(f func()) { go f() }
)

// Inline does all work of pages where it is asked for, for tests. It returns what ends that.
func Inline() (restore func()) {
	p, b := post, background
	post, background = func(f func()) { f() }, func(f func()) { f() }
	return func() { post, background = p, b }
}

// job is what is being done off the UI goroutine; a later one ends it.
type job struct {
	number      int
	stop        context.CancelFunc
	says        string // what is being done, "" = nothing
	share       float64
	failed      string // what did not work
	interrupted bool
}

func (j *job) cancel() {
	if j.stop != nil {
		j.stop()
	}
	j.number++
	j.stop, j.says = nil, ""
}

// start begins a job: do runs elsewhere and returns what is to be done with its result here.
func (p *Page) start(says string, do func(ctx context.Context, share func(float64)) func()) {
	p.job.cancel()
	ctx, stop := context.WithCancel(context.Background())
	j := &p.job
	j.stop, j.says, j.share, j.failed, j.interrupted = stop, says, 0, "", false
	number := j.number
	mine := func(f func()) {
		post(func() {
			if j.number == number {
				f()
			}
		})
	}
	p.refresh()
	background(func() {
		then := do(ctx, func(x float64) { mine(func() { j.share = x; p.head.fill() }) })
		mine(func() {
			stop()
			j.stop, j.says = nil, ""
			then()
		})
	})
}

// interrupt ends what is being done, by the user.
func (p *Page) interrupt() {
	p.job.cancel()
	p.job.interrupted = true
	p.refresh()
}

// tellEvery is how often progress is shown.
const tellEvery = 100 * time.Millisecond

// read reads the logger at hand by its recipe, and those that are not read yet, then works the tracks out.
func (p *Page) read() {
	p.src().kept = nil
	p.readAll()
}

// readAll reads what is not read yet, and sets the other loggers beside the first.
func (p *Page) readAll() {
	p.rec, p.out = nil, outcome{}
	if len(p.blocking()) > 0 {
		p.job.cancel()
		p.job.failed = ""
		p.refresh()
		return
	}
	list := make([]source, len(p.sources))
	for i, s := range p.sources {
		list[i] = *s
	}
	p.start("Reading "+p.src().file.Name, func(ctx context.Context, share func(float64)) func() {
		rec, err := readSources(ctx, list, share)
		return func() { p.wasRead(list, rec, err) }
	})
}

func (p *Page) wasRead(list []source, rec *logger.Recording, err error) {
	for i, s := range p.sources {
		s.kept, s.also = list[i].kept, list[i].also
	}
	if err != nil {
		p.job.failed = whole.Plain(err).Error()
		p.refresh()
		return
	}
	p.rec = rec
	p.suggest(rec)
	p.derive()
}

// suggest adds the tracks that names and quantities make likely, but none that was there or
// was taken out.
func (p *Page) suggest(rec *logger.Recording) {
	if p.again != "" {
		return
	}
	m := p.machine()
	m.Axes = p.allAxes()
	s := logged.Suggest(rec.Series, m)
	for _, t := range s.Tracks {
		if p.known[t.Name] {
			continue
		}
		p.known[t.Name] = true
		p.tracks = append(p.tracks, t)
		of, _, _ := strings.Cut(t.Name, ".")
		for _, a := range s.Axes {
			if _, have := p.kind(of); a.Name == of && !have {
				p.axes = append(p.axes, a)
			}
		}
	}
}

// cloned is a recipe that shares nothing with another.
func cloned(r logger.Recipe) logger.Recipe {
	r.Channels = slices.Clone(r.Channels)
	choices := map[string]string{}
	for k, v := range r.Choices {
		choices[k] = v
	}
	if r.Choices = choices; len(choices) == 0 {
		r.Choices = nil
	}
	return r
}

// machine is what the audit tells of the machine that was logged.
func (p *Page) machine() logged.Machine {
	f := p.ctx.Doc().File()
	m := logged.Machine{Axes: f.Axes, Points: map[string]duty.What{}, Sizes: map[string]map[string]string{}}
	for _, c := range f.Circuits {
		for i := range c.Blocks {
			b := &c.Blocks[i]
			for _, w := range circuit.TracksOf(b) {
				if w.Measured() {
					m.Points[b.ID] = w
				}
			}
			axis := b.Word("axis")
			if axis == "" || m.Sizes[axis] != nil {
				continue
			}
			m.Sizes[axis] = map[string]string{}
			for _, key := range []string{"bore", "rod", "displacement", "gear"} {
				if v, ok := b.Values[key]; ok {
					m.Sizes[axis][key] = v.Text
				}
			}
		}
	}
	return m
}

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
	out.works = logged.Works(out.shown)
	if ctx.Err() != nil {
		return out
	}
	if out.found, err = logged.Cycles(out.whole); err != nil {
		out.none = err.Error()
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

// inUnit turns values for a plot.
func inUnit(v []float64, u units.Unit) []float64 {
	out := make([]float64, len(v))
	for i, x := range v {
		out[i] = u.FromSI(x)
	}
	return out
}
