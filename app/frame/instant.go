package frame

import (
	"time"

	"barlitre/app/station"
	"barlitre/audit"
)

// instant is a duty and a time into it.
type instant struct {
	duty int
	at   float64 // s
}

// opening is where an audit is looked at first: in the duty that stands for the year, while
// most happens in it. Over long recordings it takes a while to find.
func opening(file *audit.File) instant {
	return busiest(file, file.DutiesByYear()[0])
}

// busiest is when most happens in a duty, so that the first picture of it shows that.
func busiest(file *audit.File, i int) instant {
	d := file.Duties[i]
	switch { // a faulty duty has findings, and no course
	case len(d.Time) == 0:
		return instant{i, 0}
	case len(d.Check()) > 0:
		return instant{i, d.Time[0]}
	}
	return instant{i, d.Busiest(file.Axes)}
}

// find has an instant of the audit that is open found behind the window. A short while is
// waited for it, so that what is short is set when find returns. Later the window goes there and
// shows it, unless another was gone to meanwhile, by the user or with another audit.
func (f *Frame) find(of func(*audit.File) instant) {
	f.gone++
	file, gone, found := f.doc.File(), f.gone, make(chan struct{})
	var to instant
	var fault error
	go func() {
		defer close(found)
		fault = station.Guarded(func() error { to = of(file); return nil })
	}()
	arrive := func() bool {
		if fault != nil {
			f.Fail(fault)
			return false
		}
		f.duty, f.clock = to.duty, to.at
		f.keepInRange()
		return true
	}
	select {
	case <-found:
		arrive()
		return
	case <-time.After(waitsFor):
	}
	do := post
	go func() {
		<-found
		do(func() {
			if !f.closed && f.gone == gone && (fault != nil || f.sameDuty(file, to.duty)) && arrive() {
				f.changed(station.Selection | station.Clock | station.Reading)
			}
		})
	}()
}

// sameDuty reports whether a duty of the audit as it was is still in its place after edits.
func (f *Frame) sameDuty(was *audit.File, i int) bool {
	now := f.doc.File()
	return now == was || i < len(now.Duties) && now.Duties[i].Name == was.Duties[i].Name
}
