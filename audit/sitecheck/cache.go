package sitecheck

import "sync"

// Cache keeps plans by the fingerprint of their file: typing a reading solves nothing again. The zero value is
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
