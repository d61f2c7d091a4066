package document

import (
	"bytes"
	"context"
	"errors"
	"path/filepath"
	"strings"
	"sync"
	"time"

	"barlitre/audit"
	"barlitre/audit/fixfirst"
	"barlitre/audit/sitecheck"
	"barlitre/circuit"
)

// Options of New.
type Options struct {
	Config        string           // folder for the recovery list and the recent files, made when needed; "" = neither is kept, and no autosave
	Now           func() time.Time // the clock; time.Now when nil
	AutosaveAfter time.Duration    // from an edit to its autosave; 3 s when 0
	Notify        func(Event)      // called from any goroutine; nil = nobody is told
}

const (
	autosaveAfter = 3 * time.Second // what a crash may cost; common practice is longer, a file is small
	mergeWithin   = time.Second     // steps of one drag follow each other faster
)

// Document is the open audit. It always has a File; a new one has the empty audit.
type Document struct {
	opt   Options
	solve solver

	// Locks are taken in this order. files and editing may be held for long; mu not.
	files   sync.Mutex // one file action at a time; guards session
	editing sync.Mutex // one change of the text at a time
	mu      sync.Mutex // guards all below but session

	now     state
	saved   []byte // text on disk, or that an untitled audit began with
	past    history
	checked []circuit.Finding // of now, nil when not asked for yet
	opened  int               // revision that the present audit began with
	closed  bool

	solution *audit.Solution
	solved   int   // revision of solution
	failure  error // of the present revision
	ticket   int   // number of the last request to solve
	wanted   int   // ticket that has no answer yet, 0 = none
	ready    bool  // the edit behind wanted was told; it may be solved
	stop     context.CancelFunc
	done     int
	total    int
	warming  bool // the oil temperatures of solution are being worked out
	advice   adviser
	faults   faults

	session *session // nil when nothing unsaved is kept

	wake, touched chan struct{}
	quit          chan struct{}
	running       sync.WaitGroup
}

// state is one revision. Nothing in it is changed in place.
type state struct {
	file     *audit.File
	text     []byte // of file
	revision int
	origin
}

// origin says where an audit comes from: a file, a sample, a starter, or nowhere.
type origin struct {
	Path    string `json:"path,omitempty"`
	Sample  string `json:"sample,omitempty"`
	Starter string `json:"starter,omitempty"`
}

var errClosed = errors.New("the document is closed")

// New makes a document with the empty audit, which is not solved. End it with Close
// or Abandon.
func New(opt Options) *Document { return newDocument(opt, audit.SolveEnergy) }

func newDocument(opt Options, solve solver) *Document {
	if opt.Now == nil {
		opt.Now = time.Now
	}
	if opt.AutosaveAfter <= 0 {
		opt.AutosaveAfter = autosaveAfter
	}
	d := &Document{opt: opt, solve: solve, stop: func() {}, wake: make(chan struct{}, 1), touched: make(chan struct{}, 1), quit: make(chan struct{}),
		advice: adviser{prices: &fixfirst.Cache{}, plans: &sitecheck.Cache{}}}
	f, _ := audit.Parse([]byte(emptyText), nil, "")
	d.now = state{file: f, text: []byte(emptyText), revision: 1}
	d.saved, d.opened = d.now.text, 1
	d.running.Add(2)
	go d.solveAll()
	go d.autosaveAll()
	return d
}

// Close ends the document and waits for its goroutines. What is not saved stays in
// the autosave, to be recovered; the error is that of writing it. A second Close does
// nothing.
func (d *Document) Close() error { return d.end(false) }

// Abandon is Close after the user chose not to save: the autosave goes as well.
func (d *Document) Abandon() error { return d.end(true) }

func (d *Document) end(giveUp bool) error {
	d.mu.Lock()
	again := d.closed
	d.closed, d.wanted = true, 0
	d.stop()
	d.stopAdvice()
	d.mu.Unlock()
	if again {
		return nil
	}
	close(d.quit)
	d.running.Wait()
	d.files.Lock()
	defer d.files.Unlock()
	if giveUp || !d.Dirty() {
		err := d.session.drop()
		d.session = nil
		return err
	}
	if d.opt.Config == "" {
		return nil
	}
	err := d.keep(d.snapshot())
	d.session.release()
	d.session = nil
	return err
}

func (d *Document) snapshot() state {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.now
}

// File returns the present audit file, never nil. It is only to be read; Edit
// replaces it.
func (d *Document) File() *audit.File { return d.snapshot().file }

// Revision returns the number of the present revision, from 1.
func (d *Document) Revision() int { return d.snapshot().revision }

// Path returns the absolute path of the audit, or "" when it has no file yet.
func (d *Document) Path() string { return d.snapshot().Path }

// Dirty reports whether the text differs from that on disk; in an audit without a
// file, from that which it began with.
func (d *Document) Dirty() bool {
	d.mu.Lock()
	defer d.mu.Unlock()
	return d.dirty()
}

func (d *Document) dirty() bool { return d.saved == nil || !bytes.Equal(d.now.text, d.saved) }

// Title returns the name for the title of a window, with a star when Dirty:
// "press.yaml*".
func (d *Document) Title() string {
	d.mu.Lock()
	defer d.mu.Unlock()
	name := d.now.name()
	if d.dirty() {
		name += "*"
	}
	return name
}

func (o origin) name() string {
	switch {
	case o.Path != "":
		return filepath.Base(o.Path)
	case o.Sample != "":
		return strings.TrimSuffix(o.Sample, fileExt) + " (sample)"
	case o.Starter != "":
		return strings.TrimSuffix(o.Starter, fileExt) + " (starter)"
	}
	return "untitled"
}

// Findings lists what there is to say of the present revision: what is wrong with
// the file and the drawings, and once it is solved (Current) what the runs found. A
// list on screen that should not flicker is drawn anew after Solved and SolveFailed.
func (d *Document) Findings() []circuit.Finding {
	d.mu.Lock()
	now, out := d.now, d.checked
	var s *audit.Solution
	if d.current() {
		s = d.solution
	}
	d.mu.Unlock()
	if out == nil {
		out = checkFile(now.file)
		d.mu.Lock()
		if d.now.file == now.file {
			d.checked = out
		}
		d.mu.Unlock()
	}
	out = append([]circuit.Finding{}, out...)
	if s == nil {
		return out
	}
	for _, c := range s.Circuits {
		for _, f := range c.Findings {
			if !hasFinding(out, f) {
				out = append(out, f)
			}
		}
	}
	return out
}

// checkFile never returns nil.
func checkFile(f *audit.File) []circuit.Finding {
	out := []circuit.Finding{}
	if err := guarded(func() error { out = append(out, f.Check()...); return nil }); err != nil {
		out = append(out, circuit.Finding{Level: circuit.Stops, Text: err.Error()})
	}
	return out
}

// hasFinding takes one that names no duty for one of every duty.
func hasFinding(list []circuit.Finding, f circuit.Finding) bool {
	for _, o := range list {
		if o.Text == f.Text && o.Block == f.Block && o.Circuit == f.Circuit && (o.Duty == f.Duty || o.Duty == "" || f.Duty == "") {
			return true
		}
	}
	return false
}
