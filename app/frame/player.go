package frame

import (
	"math"
	"time"

	"fyne.io/fyne/v2"
)

// player lets the clock run: a cycle in its own time, but in no less than 8 s and
// no more than a minute.
type player struct {
	f    *Frame
	quit chan struct{}
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
	speed := (to - from) / math.Max(8, math.Min(60, to-from))
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
				t := p.f.clock + dt*speed
				if t >= to {
					t = from
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
