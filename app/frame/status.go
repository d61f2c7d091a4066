package frame

import (
	"errors"
	"strings"
	"time"
	"unicode/utf8"

	"fyne.io/fyne/v2"
	"fyne.io/fyne/v2/widget"

	"barlitre/app/document"
	"barlitre/app/widgets"
)

// status is the line of short messages below the strip. A message goes when there was time
// to read it, and with the next action.
type status struct {
	*widget.Label
	said  time.Time
	count int // of messages so far
	fade  *time.Timer
}

func newStatus() *status {
	s := &status{Label: widgets.Name(widget.NewLabel(""), "frame.status")}
	s.Truncation = fyne.TextTruncateEllipsis
	return s
}

// How long a message stays: time to notice it, and to read it at leisure; what went wrong
// stays longer.
const (
	noticeTime   = 8 * time.Second
	readTime     = 80 * time.Millisecond // a letter
	failureTime  = time.Minute
	actionsApart = time.Second // a message that is younger is of the action itself
)

// readingTime is how long a message stays when nothing is done.
func readingTime(text string, failed bool) time.Duration {
	if failed {
		return failureTime
	}
	return noticeTime + time.Duration(utf8.RuneCountInString(text))*readTime
}

// show shows a message.
func (s *status) show(text string, failed bool) {
	s.Importance = widget.MediumImportance
	if failed {
		s.Importance = widget.DangerImportance
	}
	s.SetText(text)
	s.said = time.Now()
	s.count++
	if s.fade != nil {
		s.fade.Stop()
	}
	n, do := s.count, post
	s.fade = time.AfterFunc(readingTime(text, failed), func() {
		do(func() {
			if s.count == n {
				s.clear()
			}
		})
	})
}

func (s *status) clear() {
	if s.fade != nil {
		s.fade.Stop()
	}
	if s.Text != "" {
		s.SetText("")
	}
}

// acted takes a message away that is of an earlier action.
func (s *status) acted(now time.Time) {
	if now.Sub(s.said) >= actionsApart {
		s.clear()
	}
}

// Say shows a short message below the strip.
func (f *Frame) Say(text string) { f.status.show(text, false) }

// Fail shows what went wrong, where it cannot be missed.
func (f *Frame) Fail(err error) {
	if err == nil {
		return
	}
	text := err.Error()
	var fault *document.Fault
	if errors.As(err, &fault) {
		text = fault.Error()
	}
	f.status.show("⚠ "+strings.ReplaceAll(text, "\n", " "), true)
	f.tellFailure(text)
}
