package intake

import (
	"context"
	"slices"
	"strings"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/audit/whole"
	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
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

// inUnit turns values for a plot.
func inUnit(v []float64, u units.Unit) []float64 {
	out := make([]float64, len(v))
	for i, x := range v {
		out[i] = u.FromSI(x)
	}
	return out
}
