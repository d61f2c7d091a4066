package duty

import (
	"fyne.io/fyne/v2"

	"barlitre/audit/figures"
	cycle "barlitre/circuit/duty"
)

// courses keeps the pyramids of the tracks that were shown last: an edit elsewhere leaves those of a recording as they are.
type courses struct {
	time  *float64 // first time stamp of the duty that they are of
	rows  int
	kept  map[*float64]*figures.Pyramid // by the first value of a track; nil for one that cannot be drawn
	later bool                          // they are being made
}

// atOnce is up to how many values pyramids are made while the page is filled; more are made beside it.
const atOnce = 200_000

// of returns the pyramids of tracks, nil where there is none yet; ready is called on the UI goroutine when they are there.
func (c *courses) of(d *cycle.Duty, tracks []track, ready func()) []*figures.Pyramid {
	if len(d.Time) == 0 {
		return make([]*figures.Pyramid, len(tracks))
	}
	if c.time != &d.Time[0] || c.rows != len(d.Time) {
		*c = courses{time: &d.Time[0], rows: len(d.Time), kept: map[*float64]*figures.Pyramid{}}
	}
	var missing [][]float64
	for _, t := range tracks {
		if len(t.values) > 0 {
			if _, has := c.kept[&t.values[0]]; !has {
				missing = append(missing, t.values)
			}
		}
	}
	if len(missing)*len(d.Time) <= atOnce {
		for _, v := range missing {
			c.kept[&v[0]] = figures.NewPyramid(d.Time, v)
		}
	} else if !c.later {
		c.later = true
		go c.make(d.Time, missing, ready)
	}
	out := make([]*figures.Pyramid, len(tracks))
	for i, t := range tracks {
		if len(t.values) > 0 {
			out[i] = c.kept[&t.values[0]]
		}
	}
	return out
}

// cannot reports whether a track is one that no pyramid can be made of.
func (c *courses) cannot(t track) bool {
	if len(t.values) == 0 {
		return false
	}
	p, has := c.kept[&t.values[0]]
	return has && p == nil
}

// make makes pyramids on a goroutine of its own.
func (c *courses) make(time []float64, values [][]float64, ready func()) {
	made := make([]*figures.Pyramid, len(values))
	for i, v := range values {
		made[i] = figures.NewPyramid(time, v)
	}
	fyne.Do(func() {
		if c.time != &time[0] || c.rows != len(time) {
			return // another duty is shown by now
		}
		for i, v := range values {
			c.kept[&v[0]] = made[i]
		}
		c.later = false
		ready()
	})
}
