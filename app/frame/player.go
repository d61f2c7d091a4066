package frame

import (
	"math"
	"strconv"
	"time"

	"fyne.io/fyne/v2"
)

// player lets the clock run. As fitted, a cycle takes its own time, but no less than 8 s
// and no more than a minute; with a factor the clock runs so many times as fast as time.
type player struct {
	f      *Frame
	quit   chan struct{}
	factor float64 // 0 = fitted
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

const framePeriod = 33 * time.Millisecond

func (p *player) running() bool { return p.quit != nil }

func (p *player) start() {
	from, to := p.f.span()
	if to <= from {
		return
	}
	quit := make(chan struct{})
	p.quit = quit
	p.f.strip.play.SetText("Pause")
	go func() {
		tick := time.NewTicker(framePeriod)
		defer tick.Stop()
		last := time.Now()
		for {
			select {
			case <-quit:
				return
			case <-tick.C:
			}
			now := time.Now()
			dt := now.Sub(last).Seconds()
			last = now
			fyne.DoAndWait(func() { // a slow screen drops steps instead of piling them up
				if p.quit != quit {
					return
				}
				from, to := p.f.span()
				t := p.f.clock + dt*p.rate()
				if to > from && t >= to {
					t = from + math.Mod(t-from, to-from)
				}
				p.f.SetClock(t)
			})
		}
	}()
}

func (p *player) stop() {
	if p.quit != nil {
		close(p.quit)
		p.quit = nil
		p.f.strip.play.SetText("Play")
	}
}
