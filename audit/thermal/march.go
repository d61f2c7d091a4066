package thermal

import (
	"errors"
	"fmt"
	"math"
	"sort"
)

// Plant is a machine with its oil, its cooler and the air around it. Prepare must have been called after each change.
type Plant struct {
	Body   Body
	Cooler Cooler
	Air    Air
	Loads  []Load
	Spans  []Span // of the week, in order, not overlapping; outside them the machine is off

	curves []*curves
}

// Prepare makes ready to march; the error says what is wrong with the plant.
func (p *Plant) Prepare() error {
	if err := p.Body.check(); err != nil {
		return err
	}
	at := 0.0
	for _, s := range p.Spans {
		if !(s.From >= at && s.To > s.From && s.To <= Week) || s.Load < 0 || s.Load >= len(p.Loads) {
			return fmt.Errorf("thermal: the running times of the week must follow each other within it, each with a load")
		}
		at = s.To
	}
	p.curves = make([]*curves, len(p.Loads))
	for i := range p.Loads {
		var err error
		if p.curves[i], err = newCurves(&p.Loads[i], p.Body, &p.Cooler); err != nil {
			return err
		}
	}
	return nil
}

// State is the temperature of the bodies [K].
type State struct{ Oil, Steel float64 }

// Energies are what a run booked [J]. Heat = Stored + Walls + Cooled.
type Energies struct {
	Heat   float64 // put into the oil by losses, and by the pump of an off-line loop
	Walls  float64 // to the air by the walls of tank and machine
	Cooled float64 // by the cooler
	Stored float64 // from the temperatures: C·(end − start)
	Drawn  float64 // from the supply by the machine
	Fan    float64 // by the fan or the pump of the cooling water
	Loop   float64 // by the pump of an off-line loop
}

// Gap returns what the balance of heat lacks, as a share of all that passed.
func (e Energies) Gap() float64 {
	gap := math.Abs(e.Heat - e.Stored - e.Walls - e.Cooled)
	if gap == 0 {
		return 0
	}
	return gap / (math.Abs(e.Heat) + math.Abs(e.Stored) + math.Abs(e.Walls) + math.Abs(e.Cooled))
}

// Course is a marched run.
type Course struct {
	T, Oil, Steel []float64 // s, K, K; Steel is Oil where there is one body
	Air           []float64 // K
	Energies
	On  float64 // s in which the machine ran
	Ran float64 // K, mean oil temperature while it ran; NaN when it did not
	End State
}

// Highest returns the highest oil temperature [K] and when it was [s].
func (c *Course) Highest() (theta, t float64) {
	theta = math.Inf(-1)
	for i, v := range c.Oil {
		if v > theta {
			theta, t = v, c.T[i]
		}
	}
	return theta, t
}

// At returns the oil temperature [K] at t [s], linear between the points kept.
func (c *Course) At(t float64) float64 {
	i := sort.SearchFloat64s(c.T, t)
	switch {
	case i == 0:
		return c.Oil[0]
	case i == len(c.T):
		return c.Oil[i-1]
	}
	return c.Oil[i-1] + (c.Oil[i]-c.Oil[i-1])*(t-c.T[i-1])/(c.T[i]-c.T[i-1])
}

// The unknowns of a march.
const (
	oil = iota
	steel
	heatIn
	toWalls
	toCooler
	drawn
	fan
	loop
	unknowns
)

type vector [unknowns]float64

// rates fills in the slopes of all unknowns; c is nil while the machine is off.
func (p *Plant) rates(t float64, y *vector, c *curves, f *vector) {
	b, theta := &p.Body, y[oil]
	air := p.Air.At(t)
	f[heatIn], f[toCooler], f[drawn], f[fan], f[loop] = 0, 0, 0, 0, 0
	if c != nil {
		at := c.within(theta)
		f[drawn] = c.drawn.Predict(at)
		share := p.Cooler.Share(theta)
		f[toCooler] = share * (c.rate.Predict(at)*(theta-p.Cooler.coolant(air)) + c.extra.Predict(at))
		f[fan] = p.Cooler.Fan
		if p.Cooler.Switched {
			f[fan] *= share
		}
		if p.Cooler.Place == OffLine {
			f[loop] = p.Cooler.LoopPower
		}
		f[heatIn] = c.heat.Predict(at) + f[loop]
	}
	f[toWalls] = b.Walls * (theta - air)
	over := 0.0
	if b.Steel > 0 {
		over = b.Coupling * (theta - y[steel])
		out := b.SteelWalls * (y[steel] - air)
		f[steel] = (over - out) / b.Steel
		f[toWalls] += out
	} else {
		f[steel] = 0
		f[toWalls] += b.SteelWalls * (theta - air)
	}
	f[oil] = (f[heatIn] - f[toWalls] - f[toCooler] - b.Steel*f[steel]) / b.Oil
}

// The method of Dormand and Prince, order 5 with an estimate of order 4 (J. Comp. Appl. Math. 6 (1980) 19).
var (
	nodes   = [7]float64{0, 1.0 / 5, 3.0 / 10, 4.0 / 5, 8.0 / 9, 1, 1}
	weights = [7][6]float64{
		{},
		{1.0 / 5},
		{3.0 / 40, 9.0 / 40},
		{44.0 / 45, -56.0 / 15, 32.0 / 9},
		{19372.0 / 6561, -25360.0 / 2187, 64448.0 / 6561, -212.0 / 729},
		{9017.0 / 3168, -355.0 / 33, 46732.0 / 5247, 49.0 / 176, -5103.0 / 18656},
		{35.0 / 384, 0, 500.0 / 1113, 125.0 / 192, -2187.0 / 6784, 11.0 / 84},
	}
	errorOf = [7]float64{71.0 / 57600, 0, -71.0 / 16695, 71.0 / 1920, -17253.0 / 339200, 22.0 / 525, -1.0 / 40}
)

const (
	stepError = 1e-5   // K that a step may be off by: after a week of a thousand steps still hundredths
	firstStep = 10.0   // s
	longest   = 1800.0 // s: for smooth curves, and so that no swing of the day is stepped over
	mostSteps = 200000
)

// ErrStiff says that a march was given up.
var ErrStiff = errors.New("thermal: the temperature changes too fast to be followed; check the heat capacity against the cooler")

// March follows the plant from a time of the week [s] to a later one, which may lie in later weeks, from a state on. Where until
// is not nil it ends before once until is true.
func (p *Plant) March(from, to float64, start State, until func(t float64, s State) bool) (*Course, error) {
	m := &march{Plant: p, c: &Course{}, t: from, until: until}
	if p.Body.Steel <= 0 {
		start.Steel = start.Oil
	}
	m.y[oil], m.y[steel] = start.Oil, start.Steel
	m.keep()
	for m.t < to && !m.ended {
		end, load := p.next(m.t)
		var c *curves
		if load >= 0 {
			c = p.curves[load]
		}
		end = math.Min(end, to)
		begun := m.t
		if err := m.stretch(end, c); err != nil {
			return m.c, err
		}
		if c != nil {
			m.c.On += m.t - begun
		}
	}
	m.c.Ran = m.sum / m.c.On
	y := &m.y
	m.c.End = State{y[oil], y[steel]}
	m.c.Energies = Energies{Heat: y[heatIn], Walls: y[toWalls], Cooled: y[toCooler], Drawn: y[drawn], Fan: y[fan], Loop: y[loop],
		Stored: p.Body.Oil*(y[oil]-start.Oil) + p.Body.Steel*(y[steel]-start.Steel)}
	return m.c, nil
}

// next returns the end of the stretch that t lies in, and its load, −1 while the machine is off.
func (p *Plant) next(t float64) (end float64, load int) {
	week := math.Floor(t/Week) * Week
	for _, s := range p.Spans { // edges are compared as they will be met, to the last digit
		switch {
		case t < week+s.From:
			return week + s.From, -1
		case t < week+s.To:
			return week + s.To, s.Load
		}
	}
	return week + Week, -1
}

type march struct {
	*Plant
	c     *Course
	t     float64
	y     vector
	h     float64
	sum   float64 // K·s while the machine ran
	steps int
	until func(float64, State) bool
	ended bool
}

func (m *march) keep() {
	c := m.c
	c.T, c.Oil, c.Steel, c.Air = append(c.T, m.t), append(c.Oil, m.y[oil]), append(c.Steel, m.y[steel]), append(c.Air, m.Air.At(m.t))
	if m.Body.Steel <= 0 {
		c.Steel[len(c.Steel)-1] = m.y[oil]
	}
}

// stretch goes on to end with one load.
func (m *march) stretch(end float64, c *curves) error {
	var k [7]vector
	m.h = firstStep
	m.rates(m.t, &m.y, c, &k[0])
	for m.t < end && !m.ended {
		if m.steps++; m.steps > mostSteps {
			return ErrStiff
		}
		h, last := math.Min(m.h, longest), false
		if m.t+h >= end-1e-9*h {
			h, last = end-m.t, true
		}
		y, off := m.step(h, c, &k)
		if off <= 1 {
			if c != nil {
				m.sum += h * (m.y[oil] + y[oil]) / 2
			}
			m.t, m.y = m.t+h, y
			if last {
				m.t = end
			}
			k[0] = k[6]
			m.keep()
			m.ended = m.until != nil && m.until(m.t, State{y[oil], y[steel]})
		}
		m.h = h * math.Max(0.2, math.Min(4, 0.9*math.Pow(math.Max(off, 1e-10), -0.2)))
	}
	return nil
}

// step tries a step of h and returns where it leads, and by how much of what is allowed it may be off.
func (m *march) step(h float64, c *curves, k *[7]vector) (y vector, off float64) {
	for s := 1; s < 7; s++ {
		y = m.y
		for j := range s {
			w := h * weights[s][j]
			for i := range y {
				y[i] += w * k[j][i]
			}
		}
		m.rates(m.t+nodes[s]*h, &y, c, &k[s])
	}
	for _, i := range []int{oil, steel} {
		e := 0.0
		for s := range k {
			e += errorOf[s] * k[s][i]
		}
		off = math.Max(off, math.Abs(h*e)/stepError)
	}
	return y, off
}
