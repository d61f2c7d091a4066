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

// stepCounter is the circuit.Receiver that turns time steps into progress.
type stepCounter struct {
	progress         *progress
	seen, of, passed int
}

// Sample counts one time step.
func (c *stepCounter) Sample(*circuit.Sample) error {
	c.seen++
	part := progressParts * c.seen / c.of
	c.progress.add(part - c.passed)
	c.passed = part
	return nil
}
