package circuit

import (
	"context"
	"maps"
	"math/rand/v2"
	"slices"
	"testing"
	"time"

	"barlitre/circuit/duty"
)

// scramble edits a plant at random: drops, moves, joins and swaps what is drawn, and
// puts numbers anywhere.
func scramble(r *rand.Rand, c *Circuit, d *duty.Duty) {
	block := func() *Block { return &c.Blocks[r.IntN(len(c.Blocks))] }
	port := func() PortRef {
		b := block()
		ports := KindNamed(b.Kind).Ports
		return PortRef{b.ID, ports[r.IntN(len(ports))].Name}
	}
	for n := 1 + r.IntN(4); n > 0 && len(c.Blocks) > 1 && len(c.Lines) > 0; n-- {
		l := &c.Lines[r.IntN(len(c.Lines))]
		switch r.IntN(8) {
		case 0:
			l.Ports[r.IntN(len(l.Ports))] = port()
		case 1:
			l.Ports = append(l.Ports, port())
		case 2:
			c.Lines = append(c.Lines, Line{Ports: []PortRef{port(), port()}})
		case 3:
			i := r.IntN(len(c.Blocks))
			c.Blocks = append(c.Blocks[:i], c.Blocks[i+1:]...)
		case 4:
			block().Kind = catalog[r.IntN(len(catalog))].Name
		case 5:
			b := block()
			keys := slices.Sorted(maps.Keys(b.Values)) // so that a seed says all
			if len(keys) > 0 {
				key := keys[r.IntN(len(keys))]
				v := b.Values[key]
				v.SI *= []float64{0, -1, 1e-9, 1e-3, 1e3, 1e9}[r.IntN(6)]
				b.Values[key] = v
			}
		case 6:
			b := block()
			for _, p := range KindNamed(b.Kind).Params {
				if p.Type == Choice && len(p.Choices) > 0 && r.IntN(2) == 0 {
					b.Words[p.Key] = Word{Text: p.Choices[r.IntN(len(p.Choices))]}
				}
			}
		case 7:
			tr := &d.Tracks[r.IntN(max(1, len(d.Tracks)))]
			tr.Values[r.IntN(len(tr.Values))] *= []float64{0, -1, 1e-6, 1e6}[r.IntN(4)]
		}
	}
}

// Any drawing is refused in words that name a block or a port, or it is run: each step
// balanced or marked, and none that is balanced is wrong in its flows or energy.
func FuzzCircuit(f *testing.F) {
	for seed := uint64(0); seed < 40; seed++ {
		f.Add(seed, seed*7)
	}
	f.Fuzz(func(t *testing.T, seed, edits uint64) {
		text, axes, d := grow(seed)
		if len(d.Tracks) == 0 {
			return
		}
		c := build(t, text)
		scramble(rand.New(rand.NewPCG(edits, 53)), c, d)
		k, found := Compile(c, axes, d)
		if k == nil {
			for _, n := range found {
				if n.Text == "" || (n.Level == Stops && n.Block == "" && n.Parameter == "" && n.Duty == "" && !namesAny(c, n.Text)) {
					t.Fatalf("refused without a name: %+v\n%s", n, text)
				}
			}
			if !AnyStops(found) {
				t.Fatalf("refused without a reason: %v\n%s", found, text)
			}
			return
		}
		s := k.Series(d)
		j := newJudge(k, s, trialOil)
		j.laws = nil // numbers may be out of all measure
		steps := 0
		ctx, stop := context.WithTimeout(context.Background(), 3*time.Second)
		defer stop()
		_, cert, err := Run(ctx, k, k.Defaults(), s, trialOil, State{}, receiveAll{j, func(*Sample) { steps++ }})
		if steps == 0 || (err == nil && cert.Steps < steps) || cert.Unbalanced > cert.Steps {
			t.Fatalf("%d steps handed over, %+v, %v\n%s", steps, cert, err, text)
		}
		if v := j.verdict(); v != nil {
			t.Fatalf("seed %d, edits %d: %v\n%s", seed, edits, v, text)
		}
		_ = k.NewWatch(k.Defaults(), s).Findings()
	})
}

type receiveAll struct {
	Receiver
	also func(*Sample)
}

func (r receiveAll) Sample(x *Sample) error {
	r.also(x)
	return r.Receiver.Sample(x)
}

// namesAny reports whether a text names a port of a line.
func namesAny(c *Circuit, text string) bool {
	for _, l := range c.Lines {
		for _, p := range l.Ports {
			if named([]Finding{{Level: Stops, Text: text}}, p.Block, "") {
				return true
			}
		}
	}
	return false
}
