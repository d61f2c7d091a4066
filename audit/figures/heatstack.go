package figures

import (
	"slices"

	"barlitre/audit"
	"barlitre/circuit"
	"barlitre/machines/units"
)

// blockHeat is the heat that one block puts into the oil.
type blockHeat struct {
	name string
	v    []float64 // W, at the times of the lane
	mean float64   // W
}

// smallHeat is the share of a circuit's heat below which blocks are shown together, and
// noHeat that below which all of them are left out.
const (
	smallHeat = 0.005
	noHeat    = 0.001
)

// HeatLane stacks the heat that a circuit puts into the oil over one cycle by block, in
// unit u: the blocks with the most heat each by itself, the largest lowest, the others
// and what is small together, with at most `most` ≥ 1 layers. Means are of the energy balance, which sees
// every time step; the course of a long run is thinned (audit.Plot). write prints a power [W].
func HeatLane(c *audit.CircuitRun, run *audit.DutyRun, most int, u units.Unit, write func(watt float64) string) StackLane {
	lane := StackLane{Title: c.Circuit.Name}
	if run.Plot == nil || run.Balance == nil || run.Balance.Cycle <= 0 {
		return lane
	}
	x, blocks := heatByBlock(c.Circuit, run)
	slices.SortStableFunc(blocks, func(a, b blockHeat) int {
		switch {
		case a.mean > b.mean:
			return -1
		case a.mean < b.mean:
			return 1
		}
		return 0
	})
	mean := run.Balance.HeatToOil().Total() / run.Balance.Cycle
	lane.X, lane.Mean, lane.MeanNote = x, u.FromSI(mean), write(mean)
	n := 0 // blocks that stand by themselves
	for n < len(blocks) && n < most && blocks[n].mean >= smallHeat*mean {
		n++
	}
	if n == most && len(blocks) > most {
		n--
	}
	if rest := blocks[n:]; len(rest) > 1 {
		blocks = append(blocks[:n:n], gatheredHeat(rest))
	}
	if last := len(blocks) - 1; last > 0 && blocks[last].mean < noHeat*mean {
		blocks = blocks[:last]
	}
	for _, b := range blocks {
		for i := range b.v {
			b.v[i] = u.FromSI(b.v[i])
		}
		lane.Layers = append(lane.Layers, Layer{Name: b.name, Note: write(b.mean), Y: b.v})
	}
	return lane
}

func gatheredHeat(blocks []blockHeat) blockHeat {
	sum := blockHeat{name: "others", v: make([]float64, len(blocks[0].v))}
	for _, b := range blocks {
		sum.mean += b.mean
		for i, v := range b.v {
			sum.v[i] += v
		}
	}
	return sum
}

// heatByBlock returns the course of the heat of every block that has any, at the times
// of the track with most of them.
func heatByBlock(c *circuit.Circuit, run *audit.DutyRun) (x []float64, out []blockHeat) {
	p := run.Plot
	warm := func(i int) bool {
		return p.Channels[i].Role == circuit.Loss && p.Channels[i].Sink == circuit.ToOil
	}
	for i := range p.Powers {
		if warm(i) && len(p.Powers[i].T) > len(x) {
			x = p.Powers[i].T
		}
	}
	at := map[string]int{}
	for i := range p.Powers {
		if !warm(i) {
			continue
		}
		id := p.Channels[i].Block
		k, known := at[id]
		if !known {
			k = len(out)
			at[id] = k
			out = append(out, blockHeat{name: titled(c, id), v: make([]float64, len(x)), mean: meanHeat(run.Balance, id)})
		}
		track, same := &p.Powers[i], slices.Equal(p.Powers[i].T, x)
		for j := range x {
			if same {
				out[k].v[j] += track.V[j] // at a step both values
			} else {
				out[k].v[j] += track.At(x[j])
			}
		}
	}
	return x, slices.DeleteFunc(out, func(b blockHeat) bool { return b.mean <= 0 })
}

func meanHeat(b *audit.Balance, block string) float64 {
	e := 0.0
	for _, l := range b.Losses {
		if l.Block == block && l.Sink == circuit.ToOil {
			e += l.Energy.Total()
		}
	}
	return e / b.Cycle
}

// titled names a block with what it is: "RV1 relief valve".
func titled(c *circuit.Circuit, id string) string {
	if b := c.Block(id); b != nil {
		if k := circuit.KindNamed(b.Kind); k != nil {
			return id + " " + k.Title
		}
	}
	return id
}
