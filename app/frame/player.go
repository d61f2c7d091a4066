package frame

import (
	"math"
	"strconv"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/app/station"
)

// player lets the clock run. As fitted, a cycle takes its own time, but no less than 8 s
// and no more than a minute; with a factor the clock runs so many times as fast as time.
type player struct {
	f      *Frame
	run    *fyne.Animation // nil = it stands
	last   time.Time       // of the last step
	read   time.Time       // when values were last written anew
	factor float64         // 0 = fitted
}

// speeds are the factors to choose from.
var speeds = []float64{0, 0.1, 0.25, 0.5, 1, 2, 5, 10, 100}

// speedText is a factor as chosen: "fitted", "0.25 ×".
func speedText(factor float64) string {
	if factor == 0 {
		return "fitted"
	}
	return strconv.FormatFloat(factor, 'g', -1, 64) + "\u202f×"
}

// rate is how far the clock runs in a second [s].
func (p *player) rate() float64 {
	if p.factor > 0 {
		return p.factor
	}
	from, to := p.f.span()
	return (to - from) / math.Max(8, math.Min(60, to-from))
}

// readingPeriod is how often values are written anew while the clock runs: digits that
// change faster cannot be read.
const readingPeriod = 100 * time.Millisecond

func (p *player) running() bool { return p.run != nil }

func (p *player) start() {
	if from, to := p.f.span(); to <= from || p.running() {
		return
	}
	p.last, p.read = time.Now(), time.Time{}
	// The toolkit calls an animation before each frame that it draws, up to 60 times a
	// second; a slow screen gets fewer frames, and the clock is right all the same.
	p.run = &fyne.Animation{Duration: time.Hour, RepeatCount: fyne.AnimationRepeatForever, Curve: fyne.AnimationLinear,
		Tick: func(float32) { p.step(time.Now()) }}
	p.f.strip.play.SetText("Pause")
	p.run.Start()
}

// step moves the clock to where it is by now.
func (p *player) step(now time.Time) {
	if !p.running() {
		return
	}
	dt := now.Sub(p.last).Seconds()
	p.last = now
	from, to := p.f.span()
	t := p.f.clock + dt*p.rate()
	if to > from && t >= to {
		t = from + math.Mod(t-from, to-from)
	}
	tell := station.Clock
	if now.Sub(p.read) >= readingPeriod {
		p.read = now
		tell |= station.Reading
	}
	p.f.moveClock(t, tell)
}

func (p *player) stop() {
	if p.running() {
		p.run.Stop()
		p.run = nil
		p.f.strip.play.SetText("Play")
		p.f.changed(station.Reading)
	}
}
