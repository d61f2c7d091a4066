package frame

import (
	"context"
	"errors"
	"fmt"
	"sync/atomic"
	"time"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/container"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/document"
	"barlitre/app/station"
	"barlitre/app/widgets"
)

// Times of work that may be long: for so long the window waits, so that what is short is
// done when a click returns; after so long progress is shown.
var (
	waitsFor  = 100 * time.Millisecond
	shownFrom = 300 * time.Millisecond
)

// tellEvery is how often progress is shown.
const tellEvery = 100 * time.Millisecond

// long is work that may take long, on files or for them: it is done on another goroutine, with progress
// and Cancel in a box before the window, which stays alive.
type long struct {
	f     *Frame
	title string
	stop  context.CancelFunc
	ended bool
	box   *box
	bar   *widget.ProgressBar
	says  *widget.Label
	share atomic.Pointer[told] // last told, shown or not
}

// told is how far a file is, or without one the balance of the circuits.
type told struct {
	file        string
	done, total int64
}

// Perform does work and then goes on here. Until it has ended the menu and the keys wait.
func (f *Frame) Perform(title string, do func(ctx context.Context, tell document.Progress) error, then func(err error)) {
	ctx, stop := context.WithCancel(context.Background())
	l := &long{f: f, title: title, stop: stop}
	f.working = l
	ended, result := make(chan struct{}), error(nil)
	go func() {
		result = station.Guarded(func() error { return do(ctx, l.tell) })
		close(ended)
	}()
	finish := func() {
		if l.ended {
			return
		}
		l.ended = true
		stop()
		if f.working = nil; l.box != nil {
			l.box.d.Hide()
		}
		if !f.closed {
			then(result)
		}
	}
	select {
	case <-ended:
		finish()
		return
	case <-time.After(waitsFor):
	}
	go func() {
		select {
		case <-ended:
		case <-time.After(shownFrom - waitsFor):
			post(l.show)
			l.follow(ended)
		}
		post(finish)
	}()
}

// tell keeps how far the work is; it is called from any goroutine.
func (l *long) tell(file string, done, total int64) { l.share.Store(&told{file, done, total}) }

// follow shows how far the work is until it has ended.
func (l *long) follow(ended <-chan struct{}) {
	tick := time.NewTicker(tellEvery)
	defer tick.Stop()
	for {
		select {
		case <-ended:
			return
		case <-tick.C:
			post(l.fill)
		}
	}
}

// show opens the box.
func (l *long) show() {
	if l.ended || l.f.closed {
		return
	}
	l.bar = widgets.Name(widget.NewProgressBar(), "long.progress")
	l.says = widgets.Name(widget.NewLabel("…"), "long.says")
	l.says.Truncation = fyne.TextTruncateEllipsis
	l.box = l.f.ask(l.title, container.New(fixedWidth{420 * widgets.Scale()}, container.NewVBox(l.says, l.bar)), answer{verb: "Cancel", do: l.stop})
	l.fill()
}

// fill says how far the work is.
func (l *long) fill() {
	t := l.share.Load()
	if l.ended || l.box == nil || t == nil {
		return
	}
	l.says.SetText(l.f.Local(t.text()))
	if t.total > 0 {
		l.bar.SetValue(float64(t.done) / float64(t.total))
	}
}

// text says it.
func (t told) text() string {
	switch over := t.done >= t.total; {
	case t.file == "" && over && t.total > 0:
		return "The circuits are balanced; the pages are being drawn."
	case t.file == "":
		return "The circuits as they stand are being balanced first."
	case over:
		return t.file + " is read; what comes of it is worked out."
	}
	return fmt.Sprintf("%s, %s of %s", t.file, station.FileSize(t.done), station.FileSize(t.total))
}

// cancelled says so where an error is that, and what is there still.
func (f *Frame) cancelled(err error, stays string) bool {
	if !errors.Is(err, document.ErrCancelled) && !errors.Is(err, context.Canceled) {
		return false
	}
	f.Say("Cancelled. " + stays)
	return true
}
