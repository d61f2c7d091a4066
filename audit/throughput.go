package audit

import (
	"math"

	"barlitre/circuit"
)

// Throughput is what passes a machine or drive over a cycle: what enters it on either side, what leaves it, and how long
// it works. In − Out is what it loses while it runs; a start is not in it.
type Throughput struct {
	In, Out float64 // J
	Running float64 // s, with power or a loss
	Part    float64 // s of it below PartLoad of its rated power; NaN where it has none
}

// PartLoad is the share of the rated power below which a drive counts as being at part load (our choice).
const PartLoad = 0.3

// countedSide names the signal that tells the power at one side of a machine or drive; sign is 1 where power that enters
// there is positive. It is not ok for a block whose throughput does not count.
func countedSide(b *circuit.Block) (signal string, sign float64, ok bool) {
	switch b.Passes() {
	case circuit.PumpShaft, circuit.HydraulicMotor:
		return "shaft", 1, true
	case circuit.PrimeMover:
		return "shaft", -1, true
	case circuit.Inverter:
		return "electric", 1, true
	}
	return "", 0, false
}

// passage is the circuit.Receiver that sums up throughputs.
type passage struct {
	*integrals
	through []passing
}

type passing struct {
	block       string
	signal      int
	sign, rated float64
	losses      []int // channels
}

// passingFigures are integrated for each: the powers in and out, that it runs, and that it runs at part load.
const passingFigures = 4

func newPassage(c *circuit.Circuit, signals []circuit.Signal, channels []circuit.Channel) *passage {
	out := &passage{}
	for i := range c.Blocks {
		b := &c.Blocks[i]
		counted, sign, ok := countedSide(b)
		if !ok {
			continue
		}
		p := passing{block: b.ID, signal: -1, sign: sign, rated: math.NaN()}
		if v, given := b.Values["rated_power"]; given {
			p.rated = v.SI
		}
		for k, s := range signals {
			if s.Block == b.ID && s.What == counted && s.Port == "" {
				p.signal = k
			}
		}
		for k, ch := range channels {
			if ch.Role == circuit.Loss && ch.Block == b.ID && ch.Kind != "gearbox" { // which lies beyond its shaft
				p.losses = append(p.losses, k)
			}
		}
		if p.signal >= 0 {
			out.through = append(out.through, p)
		}
	}
	out.integrals = newIntegrals(passingFigures*len(out.through), func(s *circuit.Sample, to []float64) {
		for i := range out.through {
			now := out.through[i].at(s)
			copy(to[passingFigures*i:], now[:])
		}
	})
	return out
}

// at returns the powers that enter and leave, and 1 while it runs, and 1 while it does so at part load.
func (p *passing) at(s *circuit.Sample) (now [passingFigures]float64) {
	loss, one := 0.0, p.sign*s.Signals[p.signal]
	for _, k := range p.losses {
		loss += s.Power[k]
	}
	if p.sign < 0 { // what enters at its other side
		one = loss - one
	}
	other := one - loss
	now[0] = max(one, 0) + max(-other, 0)
	now[1] = max(-one, 0) + max(other, 0)
	if now[0] > 0 {
		now[2] = 1
	}
	if now[0] > 0 && now[1] < PartLoad*p.rated {
		now[3] = 1
	}
	return now
}

// all lists the throughputs by block.
func (o *passage) all() map[string]Throughput {
	out := map[string]Throughput{}
	for i, p := range o.through {
		sum := o.sum[passingFigures*i:]
		x := Throughput{In: sum[0], Out: sum[1], Running: sum[2], Part: sum[3]}
		if math.IsNaN(p.rated) {
			x.Part = math.NaN()
		}
		out[p.block] = x
	}
	return out
}
