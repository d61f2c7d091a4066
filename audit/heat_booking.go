package audit

import (
	"fmt"
	"slices"

	"barlitre/circuit"
)

// Names of what the cooling draws, in balances and tables.
const (
	coolingBlock = "Cooling"
	fanKind      = "fan or water pump"
	loopKind     = "pump of the off-line loop"
)

// alternator is the efficiency with which an engine makes the electricity of a fan (assumed, common practice, no source).
const alternator = 0.6

// bookCooling books with each of its duties what the cooling of a circuit draws while it runs [W].
func (c *CircuitRun) bookCooling(fan, loop float64) {
	for _, d := range c.Duties {
		if d.machine != nil {
			b, k := *d.machine, *d.courses
			b.Losses = slices.Clip(b.Losses)
			k.Channels, k.Powers = slices.Clip(k.Channels), slices.Clip(k.Powers)
			d.Balance, d.Plot = &b, &k
			d.addCooling(fan, loop, c.fuelOf(d.machine))
		}
	}
}

// fuelOf returns how much fuel power a machine off the mains burns for each watt that its cooling draws, 0 on the mains.
func (c *CircuitRun) fuelOf(b *Balance) float64 {
	if !b.offMains() {
		return 0
	}
	for i := range c.Circuit.Blocks {
		k := circuit.KindNamed(c.Circuit.Blocks[i].Kind)
		if c.Circuit.Blocks[i].Kind == "engine" && k != nil {
			if v, _, ok := k.Value(&c.Circuit.Blocks[i], "slope"); ok {
				return v.SI / alternator
			}
		}
	}
	return 0
}

// addCooling books the powers [W] of fan and loop pump over the cycle, whatever the machine does meanwhile. What the loop pump
// draws warms the oil. With fuel > 0 an engine burns that many watts for each; what it loses on the way goes to the air.
func (d *DutyRun) addCooling(fan, loop, fuel float64) {
	if fuel <= 0 {
		d.cool(fanKind, circuit.ToAir, fan, false)
		d.cool(loopKind, circuit.ToOil, loop, false)
		return
	}
	d.cool(fanKind, circuit.ToAir, fan*fuel+loop*(fuel-1), true)
	d.cool(loopKind, circuit.ToOil, loop, true)
}

func (d *DutyRun) cool(kind string, sink circuit.Sink, power float64, burnt bool) {
	if power <= 0 {
		return
	}
	b := d.Balance
	e := b.Seconds.Times(power)
	b.Losses = append(b.Losses, LossRow{Block: coolingBlock, Kind: kind, Sink: sink, Energy: e})
	b.SupplyIn = b.SupplyIn.Plus(e)
	b.PeakSupply += power
	supply := "supply"
	if burnt {
		b.Fuel = b.Fuel.Plus(e)
		supply = "fuel"
	} else {
		b.Demand.Mean += power
	}
	d.Plot.constant(circuit.Channel{Role: circuit.Loss, Block: coolingBlock, Kind: kind, Sink: sink}, power)
	d.Plot.constant(circuit.Channel{Role: circuit.Supply, Block: coolingBlock, Kind: supply}, power)
}

// constant adds a power that does not change.
func (k *Plot) constant(ch circuit.Channel, power float64) {
	if k == nil || len(k.Powers) == 0 || len(k.Powers[0].T) == 0 {
		return
	}
	t := k.Powers[0].T
	p := k.Powers[0]
	p.Name, p.Title, p.T, p.V, p.Steps = ch.Block, ch.Kind, []float64{t[0], t[len(t)-1]}, []float64{power, power}, nil
	k.Channels = append(k.Channels[:len(k.Channels):len(k.Channels)], ch)
	k.Powers = append(k.Powers, p)
}

// coolingCalculation opens what fan or loop pump draw.
func (s *Solution) coolingCalculation(p printer, c *CircuitRun, duty int, kind string) Calculation {
	section, _ := s.heatSectionOf(c)
	cooler, ok := s.coolerOf(section)
	energy := ""
	formula := "E = P · time"
	if duty == WholeYear {
		formula = joined([]string{formula, yearFormula})
		energy = s.lossOfYear(p, c, coolingBlock, kind)
	} else if duty >= 0 && duty < len(c.Duties) {
		energy = s.lossOfCycle(p, c, duty, coolingBlock, kind)
	}
	if energy == "" || !ok {
		return Calculation{}
	}
	power, key := c.fanShare*cooler.Fan, "fan_power"
	if kind == loopKind {
		power, key = cooler.LoopPower, "loop_power"
	}
	numbers := fmt.Sprintf("P = %s in the mean while the machine runs; %s, %s", p.power(power), HeatKeyNamed(key).Title, originNote(section, key))
	if f := c.fuelOfYear(); f > 0 {
		numbers += fmt.Sprintf("; an engine burns %s for each watt", p.count(f))
	}
	if kind == fanKind && cooler.Switched {
		numbers += "; it runs as far as the thermostat is open, in the week that repeats itself"
	}
	return Calculation{formula, joined([]string{numbers, energy}), "section heat of " + fromFile + "; power of the cooling booked beside that of the circuit"}
}

// fuelOfYear is fuelOf of the first duty that was solved.
func (c *CircuitRun) fuelOfYear() float64 {
	for _, d := range c.Duties {
		if d.Balance != nil {
			return c.fuelOf(d.Balance)
		}
	}
	return 0
}
