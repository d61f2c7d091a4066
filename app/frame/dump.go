package frame

import (
	"bytes"
	"fmt"
	"os"
	"time"

	"fyne.io/fyne/v2"

	"barlitre/app/widgets"
)

// dumpVariable names the file that a text dump of the window is written to, for
// scripts: named widgets with their text and place, and the state of the document.
const dumpVariable = "BARLITRE_DUMP"

// dumper writes the dump a moment after the last change.
type dumper struct {
	f    *Frame
	path string
	quit chan struct{}
	last []byte
}

func newDumper(f *Frame) *dumper {
	d := &dumper{f: f, path: os.Getenv(dumpVariable)}
	if d.path == "" {
		return d
	}
	quit := make(chan struct{})
	d.quit = quit
	go func() {
		tick := time.NewTicker(20 * time.Millisecond)
		defer tick.Stop()
		for n := 0; ; n++ {
			select {
			case <-quit:
				return
			case <-tick.C:
				if _, err := os.Stat(d.path); err != nil || n%5 == 0 { // a script that takes the file away waits for the next one
					fyne.DoAndWait(d.write)
				}
			}
		}
	}()
	return d
}

func (d *dumper) write() {
	if d.f.closed {
		return
	}
	var b bytes.Buffer
	now, _ := d.f.doc.Solution()
	pending := now != nil && now.Pending
	fmt.Fprintf(&b, "frame.title\t%s\t0\t0\t0\t0\nframe.revision\t%d\t0\t0\t0\t0\nframe.solved\t%d\t0\t0\t0\t0\nframe.pending\t%t\t0\t0\t0\t0\nframe.clock\t%g\t0\t0\t0\t0\n",
		d.f.win.Title(), d.f.doc.Revision(), d.f.solved, pending, d.f.clock)
	widgets.Dump(&b, d.f.win.Canvas())
	if _, err := os.Stat(d.path); err == nil && bytes.Equal(b.Bytes(), d.last) {
		return
	}
	d.last = append(d.last[:0], b.Bytes()...)
	tmp := d.path + ".new"
	if os.WriteFile(tmp, b.Bytes(), 0o644) == nil {
		os.Rename(tmp, d.path)
	}
}

func (d *dumper) stop() {
	if d.quit != nil {
		close(d.quit)
		d.quit = nil
	}
}
