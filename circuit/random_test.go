package circuit

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"

	"barlitre/circuit/duty"
)

type random struct {
	*rand.Rand
	text    strings.Builder
	decades float64
}

// about draws a number log-uniformly around x, over as many decades as the draw has.
func (r *random) about(x float64) float64 { return x * math.Pow(10, r.decades*(r.Float64()-0.5)) }

func (r *random) row(format string, args ...any) { fmt.Fprintf(&r.text, format+"\n", args...) }

// wish is what a random circuit shall be like. Pressure and size scale it; the draw
// does not depend on them.
type wish struct {
	pressure, size float64
	crossed        bool    // valves plumbed the other way
	decades        float64 // over which parameters spread
	actuators      int     // at most
	steps          bool    // some speeds and loads jump
}

var tame = wish{pressure: 1, size: 1, decades: 1, actuators: 2}

// generate draws a circuit of one supply and its actuators.
func generate(seed uint64, w wish) (text string, axes []duty.Axis, d *duty.Duty, oil Conditions) {
	r := &random{Rand: rand.New(rand.NewPCG(seed, 7)), decades: w.decades}
	p, s, crossed := w.pressure, w.size, w.crossed
	n := 1 + r.IntN(w.actuators)
	supply := r.IntN(3) // fixed, pressure, load sensing
	r.row("TK tank")
	r.row("M1 electric_motor; rated_power: %g kW; efficiency: 0.93", r.about(22)*p*s)
	pump := fmt.Sprintf("P1 pump; displacement: %g cm3/rev; drag: %g N m; case_share: %g", r.about(45)*s, 1.5*p*s, float64(r.IntN(3))/2)
	set := 100 + 150*r.Float64()
	switch supply {
	case 1:
		pump += fmt.Sprintf("; control: pressure; set_pressure: %g bar", set*0.85*p)
	case 2:
		pump += fmt.Sprintf("; control: load_sensing; margin: %g bar", 20*p)
	}
	r.row("%s", pump)
	r.row("RV1 relief; crack: %g bar; override: %g bar per 100 L/min", set*p, r.about(10)*p/s)
	r.row("F1 filter; nominal_flow: %g L/min; nominal_drop: %g bar", r.about(60)*s, p)
	r.row("- M1.shaft P1.shaft")
	r.row("- P1.S TK.T")
	r.row("- RV1.T TK.T")
	r.row("- F1.B TK.T")
	rail, ret := "- P1.P RV1.P", "- F1.A"
	times := []float64{0, 0.1, 1, 1.1, 2, 2.1, 3, 3.1, 4}
	if w.steps && r.IntN(2) == 0 {
		times = []float64{0, 0, 1, 1, 2, 2, 3, 3, 4}
	}
	d = points("random", 0.05, times)
	var signals []string
	for i := 1; i <= n; i++ {
		axis := fmt.Sprintf("a%d", i)
		v, c := fmt.Sprintf("V%d", i), fmt.Sprintf("C%d", i)
		centre := []string{"closed", "float", "closed"}[r.IntN(3)]
		rotary := r.IntN(3) == 0
		hold := "valve"
		if rotary || centre == "float" {
			hold = "brake"
		}
		r.row("%s valve; follows: %s; nominal_flow: %g L/min; nominal_drop: %g bar; centre: %s", v, axis, r.about(60)*s, 5*p, centre)
		top, load := 0.0, 0.0
		if rotary {
			disp := r.about(80)
			r.row("%s motor; axis: %s; hold: %s; displacement: %g cm3/rev; drag: %g N m; case_share: 0", c, axis, hold, disp*s, 1.5*p*s)
			top, load = r.about(30), r.about(0.5*disp)*p*s
			d.Tracks = append(d.Tracks, duty.Track{Of: axis, What: duty.Speed}, duty.Track{Of: axis, What: duty.Load})
			axes = append(axes, duty.Axis{Name: axis, Kind: duty.Rotary})
		} else {
			bore := math.Min(r.about(80), 1500)
			rod := bore * (0.2 + 0.6*r.Float64())
			k := math.Sqrt(s)
			r.row("%s cylinder; axis: %s; hold: %s; bore: %g mm; rod: %g mm; friction: %g N; viscous: %g N s/m; pressure_friction: %g", c, axis, hold, bore*k, rod*k, 800*p*s, 1500*p*s, 0.02*float64(r.IntN(2)))
			top, load = r.about(0.1), r.about(0.4*bore*bore*8)*p*s
			d.Tracks = append(d.Tracks, duty.Track{Of: axis, What: duty.Speed}, duty.Track{Of: axis, What: duty.Load})
			axes = append(axes, duty.Axis{Name: axis, Kind: duty.Linear})
		}
		v1, v2 := top*(0.3+r.Float64()), -top*(0.3+r.Float64())
		f1, f2 := load*(r.Float64()), load*(r.Float64()-0.15)
		if r.IntN(2) == 0 {
			v1, v2 = v2, v1
		}
		k := len(d.Tracks)
		d.Tracks[k-2].Values = []float64{0, v1, v1, 0, 0, v2, v2, 0, 0}
		d.Tracks[k-1].Values = []float64{f1, f1, f2, f2, f2, f1, f1, f2, f2}
		if r.IntN(2) == 0 && supply == 2 { // a pre-compensated section
			r.row("PC%d compensator; drop: %g bar; nominal_flow: %g L/min; nominal_drop: %g bar", i, 8*p, 60*s, p)
			rail += fmt.Sprintf(" PC%d.P", i)
			r.row("- PC%d.A %s.P", i, v)
			signals = append(signals, fmt.Sprintf("%s.LS PC%d.LS", v, i))
		} else {
			rail += " " + v + ".P"
			signals = append(signals, v+".LS")
		}
		ret += " " + v + ".T"
		portA, portB := v+".A", v+".B"
		if crossed {
			portA, portB = portB, portA
		}
		if r.IntN(2) == 0 {
			r.row("L%d line; length: %g m; diameter: %g mm", i, 0.0, 20*math.Sqrt(s))
			r.row("- %s L%d.A", portA, i)
			portA = fmt.Sprintf("L%d.B", i)
		}
		// make-up from tank on both sides, so that no side runs empty
		r.row("- %s %s.A MA%d.out", portA, c, i)
		r.row("- %s %s.B MB%d.out", portB, c, i)
		r.row("MA%d check; opens: 0 bar; nominal_flow: %g L/min; nominal_drop: %g bar", i, 100*s, 0.05*p)
		r.row("MB%d check; opens: 0 bar; nominal_flow: %g L/min; nominal_drop: %g bar", i, 100*s, 0.05*p)
		r.row("- MA%d.in MB%d.in TK.T", i, i)
	}
	if supply == 2 {
		// A chain of shuttles hands the highest signal to the pump.
		last := signals[0]
		for i, next := range signals[1:] {
			r.row("SH%d shuttle", i)
			r.row("- %s SH%d.X", last, i)
			r.row("- %s SH%d.Y", next, i)
			last = fmt.Sprintf("SH%d.A", i)
		}
		r.row("- %s P1.LS", last)
	} else {
		for _, sig := range signals {
			if strings.Contains(sig, "PC") {
				r.row("- %s", sig)
			}
		}
	}
	r.row("%s", rail)
	r.row("%s", ret)
	return r.text.String(), axes, d, Conditions{Density: 870 * p, Viscosity: 0.04 * p}
}
