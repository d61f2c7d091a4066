package cycles

import (
	"math"
	"math/rand"
	"testing"
)

// press is a recording of a press at so many rows a second: rest, strokes out and back with a
// stand under pressure between them and a pause after them, rest.
type press struct {
	lead, pause, tail float64 // s
	cycles            int
	jitter, noise     float64 // shares: of every time, of every value
	cutFirst, cutLast float64 // s that are missing at both ends of the recording
	stopsAfter        float64 // s of one more cycle, in which the machine then stands; 0 = none
}

const pressStep = 0.05

// made returns the recording, and where its cycles start.
func (p press) made() (in Input, starts []float64) {
	r := rand.New(rand.NewSource(11))
	var v, level []float64
	left := math.Inf(1) // s until the machine stands
	add := func(seconds, speed, pressure float64) {
		n := int(seconds*(1+p.jitter*(2*r.Float64()-1))/pressStep + 0.5)
		for i := range n {
			u := float64(i) / float64(n)
			shape := math.Min(1, 8*math.Min(u, 1-u))
			if left -= pressStep; left < 0 {
				shape, pressure = 0, 5
			}
			v = append(v, speed*shape*(1+p.noise*r.NormFloat64()))
			level = append(level, pressure*(1+p.noise*r.NormFloat64()))
		}
	}
	cycle := func() {
		add(4, 0.1, 60)
		add(2, 0, 60)
		add(3, -0.13, 20)
		add(p.pause, 0, 5)
	}
	add(p.lead, 0, 5)
	for range p.cycles {
		starts = append(starts, pressStep*float64(len(v)))
		cycle()
	}
	if p.stopsAfter > 0 {
		left = p.stopsAfter
		cycle()
	}
	add(p.tail, 0, 5)
	a, b := int(p.cutFirst/pressStep), len(v)-int(p.cutLast/pressStep)
	in.Motion, in.Level = [][]float64{v[a:b]}, [][]float64{level[a:b]}
	for i := a; i < b; i++ {
		in.T = append(in.T, pressStep*float64(i))
	}
	return in, starts
}

// Every whole cycle of a recording is found, the first and the last as well, at its start to
// 3 % of the period; one of which a part is missing is not.
func TestWholeCyclesAreFound(t *testing.T) {
	for name, c := range map[string]struct {
		press
		first, n int // the first that is whole, and how many are
	}{
		"rest, long pauses":                {press{lead: 10, pause: 8, tail: 3, cycles: 8}, 0, 8},
		"rest, short pauses":               {press{lead: 10, pause: 0.5, tail: 3, cycles: 8}, 0, 8},
		"rest, pauses longer than work":    {press{lead: 3, pause: 20, tail: 20, cycles: 8}, 0, 8},
		"a long rest at both ends":         {press{lead: 200, pause: 8, tail: 300, cycles: 8}, 0, 8},
		"three cycles":                     {press{lead: 5, pause: 6, tail: 5, cycles: 3}, 0, 3},
		"no two alike, noise":              {press{lead: 10, pause: 8, tail: 4, cycles: 30, jitter: 0.05, noise: 0.02}, 0, 30},
		"no rest before":                   {press{pause: 8, tail: 3, cycles: 8}, 0, 8},
		"begins in the stroke out":         {press{lead: 10, pause: 8, tail: 3, cycles: 8, cutFirst: 12}, 1, 7},
		"begins late in the stroke out":    {press{lead: 10, pause: 8, tail: 3, cycles: 8, cutFirst: 13.3}, 1, 7},
		"begins in the stroke back":        {press{lead: 10, pause: 8, tail: 3, cycles: 8, cutFirst: 17.5}, 1, 7},
		"ends in the stroke out":           {press{lead: 10, pause: 8, cycles: 8, cutLast: 14.5}, 0, 7},
		"ends in the stroke back":          {press{lead: 10, pause: 8, cycles: 8, cutLast: 9.5}, 0, 7},
		"ends in the pause":                {press{lead: 10, pause: 8, cycles: 8, cutLast: 4}, 0, 7},
		"ends with the pause":              {press{lead: 10, pause: 8, cycles: 8}, 0, 8},
		"both ends are cut":                {press{lead: 10, pause: 8, cycles: 8, cutFirst: 12, cutLast: 9.5}, 1, 6},
		"stops for good in the stroke out": {press{lead: 10, pause: 8, tail: 60, cycles: 8, stopsAfter: 2.5}, 0, 8},
		"stops for good under pressure":    {press{lead: 10, pause: 8, tail: 60, cycles: 8, stopsAfter: 5}, 0, 8},
	} {
		in, starts := c.made()
		r, err := Find(in, Options{})
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Cycles) != c.n {
			t.Errorf("%s: %d cycles of %.3g s, made with %d whole ones: %v", name, len(r.Cycles), r.Period, c.n, r.Cycles)
			continue
		}
		for i, x := range r.Cycles {
			if off := math.Abs(x.From - starts[c.first+i]); off > 0.03*r.Period {
				t.Errorf("%s: cycle %d starts at %.4g s, made at %.4g s", name, i+1, x.From, starts[c.first+i])
			}
		}
	}
}
