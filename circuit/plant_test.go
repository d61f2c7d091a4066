package circuit

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"strings"

	"barlitre/circuit/duty"
)

// plant is a random circuit as it grows from its supply to its consumers. All numbers
// that a user enters spread log-uniformly over three decades about a usual one, but
// diameters and pressures over two (areas over four), and shares between their limits;
// loads have both signs, speeds and loads may jump.
type plant struct {
	random
	most     int // blocks at most
	blocks   int // so far
	count    map[string]int
	pressure float64  // bar, about what the supply gives
	flow     float64  // L/min, about what the supply gives
	rails    []string // what hangs on the supply
	returns  []string // what hangs on the common return
	tank     []string
	signals  []string // load signals
	sensing  bool     // the pump wants them
	highest  []string // pilots that want the highest of them
	readable []string // ports where a pressure may be read
	lines    [][]string
	step     bool // speeds and loads jump
	axes     []duty.Axis
	tracks   []duty.Track
	times    []float64
}

// grow draws a sound circuit of at most so many blocks, and what it shall do.
func grow(seed uint64) (text string, axes []duty.Axis, d *duty.Duty) {
	p := &plant{random: random{Rand: rand.New(rand.NewPCG(seed, 23)), decades: 3}, count: map[string]int{}}
	p.most = 3 + p.IntN(36)
	p.step = p.IntN(2) == 0
	p.times = []float64{0, 0.1, 1, 1.1, 2, 2.1, 3, 3.1, 4}
	if p.step {
		p.times = []float64{0, 0, 1, 1, 2, 2, 3, 3, 4}
	}
	p.block("TK", "tank")
	if p.most >= 12 && p.IntN(6) == 0 {
		p.closedLoop()
	} else {
		p.supply()
		p.consumers()
		p.back()
		p.lead()
	}
	p.measure()
	if len(p.tank) > 0 {
		p.join(append([]string{"TK1.T"}, p.tank...)...)
	}
	p.write()
	d = points("random", 0.5, p.times, p.tracks...)
	return p.text.String(), p.axes, d
}

// block adds a block and returns its id, the prefix and a number.
func (p *plant) block(prefix, kind string, params ...string) string {
	p.count[prefix]++
	p.blocks++
	id := fmt.Sprintf("%s%d", prefix, p.count[prefix])
	p.row("%s", strings.Join(append([]string{id + " " + kind}, params...), "; "))
	return id
}

// join puts ports on one line; ports of one call may hold several, with blanks between.
func (p *plant) join(ports ...string) {
	p.lines = append(p.lines, strings.Fields(strings.Join(ports, " ")))
}

// write writes each line once, with all that was ever joined to it.
func (p *plant) write() {
	line := map[string]int{}
	for i, ports := range p.lines {
		for _, port := range ports {
			old, known := line[port]
			if !known || old == i {
				line[port] = i
				continue
			}
			for _, o := range p.lines[old] {
				if line[o] == old {
					line[o] = i
					p.lines[i] = append(p.lines[i], o)
				}
			}
			p.lines[old] = nil
		}
	}
	for _, ports := range p.lines {
		slices.Sort(ports)
		if ports = slices.Compact(ports); len(ports) > 1 {
			p.row("- %s", strings.Join(ports, " "))
		}
	}
}

// room reports whether so many blocks more may be drawn.
func (p *plant) room(n int) bool {
	if p.sensing { // and a shuttle valve for each section
		n += len(p.signals)
	}
	return p.blocks+n <= p.most
}

// one reports a chance of one in n.
func (p *plant) one(n int) bool { return p.IntN(n) == 0 }

// num writes a parameter that spreads over three decades about x.
func (p *plant) num(key string, x float64, unit string) string {
	return fmt.Sprintf("%s: %.4g %s", key, p.about(x), unit)
}

// two writes a parameter that spreads over two decades about x.
func (p *plant) two(key string, x float64, unit string) string {
	return fmt.Sprintf("%s: %.4g %s", key, p.within(x), unit)
}

// bar writes a pressure that spreads over two decades about x, as far as the catalog takes it.
func (p *plant) bar(key string, x float64) string {
	most := map[string]float64{"crack": 1000, "set_pressure": 1000, "setting": 1000, "set": 1000, "bypass": 50}[key]
	if most == 0 {
		most = 100
	}
	return fmt.Sprintf("%s: %.4g bar", key, min(p.within(x), most))
}

func (p *plant) within(x float64) float64 {
	r := random{Rand: p.Rand, decades: 2}
	return r.about(x)
}

// share writes a parameter between two limits.
func (p *plant) share(key string, lo, hi float64) string {
	return fmt.Sprintf("%s: %.4g", key, lo+(hi-lo)*p.Float64())
}

// word writes one of some choices; an empty one leaves it out.
func (p *plant) word(key string, choices ...string) string {
	return key + ": " + choices[p.IntN(len(choices))]
}

// back is the common return: filter and cooler, each with or without bypass.
func (p *plant) back() {
	at := p.returns
	if len(at) == 0 {
		return
	}
	for _, kind := range []string{"filter", "cooler"} {
		if p.room(1) && p.one(2) {
			params := []string{p.num("nominal_flow", 60, "L/min"), p.bar("nominal_drop", 1)}
			if p.one(2) {
				params = append(params, p.bar("bypass", 2))
			}
			id := p.block("F", kind, params...)
			p.join(append(at, id+".A")...)
			at = []string{id + ".B"}
		}
	}
	p.tank = append(p.tank, at...)
}

// lead hands the highest load signal on by a chain of shuttle valves.
func (p *plant) lead() {
	if !p.sensing && len(p.highest) == 0 {
		return
	}
	if len(p.signals) == 0 {
		p.tank = append(p.tank, p.highest...)
		return
	}
	last := p.signals[0]
	for _, next := range p.signals[1:] {
		id := p.block("SH", "shuttle")
		p.join(last, id+".X")
		p.join(next, id+".Y")
		last = id + ".A"
	}
	p.join(append([]string{last}, p.highest...)...)
}

// measure reads pressures here and there.
func (p *plant) measure() {
	for p.room(1) && len(p.readable) > 0 && p.one(2) {
		i := p.IntN(len(p.readable))
		p.join(p.readable[i], p.block("X", "pressure_point")+".P")
		p.readable = append(p.readable[:i], p.readable[i+1:]...)
	}
}
