package audit

import (
	"sync"

	"barlitre/circuit"
)

// progressParts is how many parts a run over one duty is told in.
const progressParts = 100

// progress adds up the work of several goroutines.
type progress struct {
	mu          sync.Mutex
	tell        func(done, total int)
	done, total int
}

func (p *progress) add(n int) {
	if p.tell == nil || n == 0 {
		return
	}
	p.mu.Lock()
	defer p.mu.Unlock()
	p.done += n
	p.tell(p.done, p.total)
}

// stepCounter is the circuit.Receiver that turns time steps into progress. Where nobody
// knows how many there will be, it comes nearer to the whole and never there.
type stepCounter struct {
	progress         *progress
	seen, of, passed int
	next             int  // what seen must be for more progress to be told
	open             bool // there may be many more steps than of
}

// Sample counts one time step.
func (c *stepCounter) Sample(*circuit.Sample) error {
	c.count(1)
	return nil
}

// usualCycles is how many cycles pass by the middle of the progress of an open count.
const usualCycles = 4

func (c *stepCounter) count(n int) {
	if c.seen += n; c.seen < c.next {
		return
	}
	of := c.of
	if c.open {
		of = c.seen + usualCycles*c.of
	}
	part := min(progressParts, progressParts*c.seen/of)
	c.progress.add(part - c.passed)
	c.passed = part
	c.next = c.seen + (c.of+progressParts-1)/progressParts
}

// Part counts nothing: a part is counted when it is joined.
func (c *stepCounter) Part(from, to int, _ *circuit.Sample) circuit.Receiver {
	return stepsOfPart(to - from)
}

// Join counts the steps of a part.
func (c *stepCounter) Join(part circuit.Receiver) error {
	c.count(int(part.(stepsOfPart)))
	return nil
}

type stepsOfPart int

func (stepsOfPart) Sample(*circuit.Sample) error { return nil }
