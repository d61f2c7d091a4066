package sitecheck

import (
	"crypto/sha256"
	"fmt"
	"sync"

	"barlitre/audit"
	"barlitre/machines/units"
)

// Cache keeps plans by the text of their file, readings left out: typing one solves nothing again. The zero value is
// good, nil keeps nothing.
type Cache struct {
	mu    sync.Mutex
	plans map[[32]byte]*Plan
	order [][32]byte
}

// cachedPlans is how many are kept.
const cachedPlans = 16

func (c *Cache) get(k [32]byte) *Plan {
	if c == nil {
		return nil
	}
	c.mu.Lock()
	defer c.mu.Unlock()
	return c.plans[k]
}

func (c *Cache) put(k [32]byte, p *Plan) {
	if c == nil {
		return
	}
	c.mu.Lock()
	defer c.mu.Unlock()
	if c.plans == nil {
		c.plans = map[[32]byte]*Plan{}
	}
	if c.plans[k] == nil {
		c.order = append(c.order, k)
	}
	c.plans[k] = p
	if len(c.order) > cachedPlans {
		delete(c.plans, c.order[0])
		c.order = c.order[1:]
	}
}

// keyOf is the print of a file without its readings.
func keyOf(f *audit.File, name string, system units.System) [32]byte {
	g := f.Clone()
	for _, r := range f.Readings {
		if err := g.SetReading(r.State, r.Point, ""); err != nil {
			break // it stays in the print
		}
	}
	text := g.Bytes()
	if len(f.Readings) == 0 {
		text = append(text, "site_check: {}\n"...)
	}
	for _, s := range f.Sources {
		text = append(append(text, s.File...), s.SHA256...)
	}
	return sha256.Sum256(append(text, fmt.Sprint("\x00", name, system)...))
}
