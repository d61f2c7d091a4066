package circuit

import (
	"math"

	"barlitre/machines/units"
)

// driveWatch notes when a prime mover of limited torque cannot do what is asked.
type driveWatch struct {
	b                     *Block
	speed, torque         int // signals
	set, limit, grow      float64
	least                 float64 // below it the drive stalls
	top                   float64 // above it a load drives it faster than its governor
	steady                bool    // it is told one speed
	seconds, worst, tWor  float64 // held back by its limit; lowest speed and when
	stalls                bool
	tStall, fastest, tFas float64
	drag, brakes, tBrakes float64 // torque that turns an engine without fuel; highest that drove it, and when
	last                  bool
}

// standsStill is the share of its set speed below which a motor at its limit has stalled.
const standsStill = 1e-3

// drive watches a prime mover whose torque is limited.
func (w *Watch) drive(b *Block, speed, torque int) {
	if !limited(b) || commandsTorque(b) {
		return
	}
	d := driveWatch{b: b, speed: speed, torque: torque, set: w.value(b, "speed"), limit: w.value(b, "torque_limit"), worst: math.Inf(1), top: math.Inf(1),
		steady: b.Kind == kindEngine || (follows(b) == "" && b.Word("control") != "commanded")}
	d.least = standsStill * d.set
	if b.Kind == kindEngine {
		if d.limit == 0 {
			d.limit = w.value(b, "rated_power") / d.set
		}
		d.grow, d.least = w.value(b, "torque_rise"), w.value(b, "min_speed")
		d.top = d.set * (1 + w.value(b, "droop"))
		d.drag = w.value(b, "idle_share") * w.value(b, "rated_power") / (d.set * w.value(b, "slope"))
	}
	w.drives = append(w.drives, d)
}

func (d *driveWatch) take(s *Sample, dt float64) {
	v, T := math.Abs(s.Signals[d.speed]), math.Abs(s.Signals[d.torque])
	if T := -s.Signals[d.torque]; T > d.brakes {
		d.brakes, d.tBrakes = T, s.T
	}
	most := d.limit * (1 + d.grow*max(0, 1-v/d.set))
	held := !s.Stopped && T >= most*(1-1e-6) && (!d.steady || v < d.set*(1-1e-3))
	if held && d.last {
		d.seconds += dt
	}
	d.last = held
	if held && v < d.worst {
		d.worst, d.tWor = v, s.T
	}
	if held && v < d.least && !d.stalls {
		d.stalls, d.tStall = true, s.T
	}
	if v > d.top*(1+1e-3) && v > d.fastest {
		d.fastest, d.tFas = v, s.T
	}
}

// drivesHeld says which drives were asked for too much.
func (w *Watch) drivesHeld(f *findings) {
	for _, d := range w.drives {
		name := "motor"
		if d.b.Kind == kindEngine {
			name = "engine"
		}
		switch {
		case d.stalls:
			f.add(Warns, d.b, "torque_limit", d.tStall, "the %s stalls at %s: the machines on its shaft ask for more than its torque limit of %s. What follows shows only that it is too small: limit the power of its pumps or choose a larger %s", name, clock(d.tStall), show(d.limit, units.Torque), name)
		case d.seconds > 0:
			f.add(Warns, d.b, "torque_limit", d.tWor, "at its torque limit for %s a cycle, at worst it turns at %s at %s: the machines on its shaft ask for more than it gives", clock(d.seconds), show(d.worst, units.AngularSpeed), clock(d.tWor))
		}
		if d.fastest > 0 {
			f.add(Caution, d.b, "speed", d.tFas, "a load drives the engine at up to %s, above its set speed of %s: its drag alone does not hold it back; brake the load in the circuit", show(d.fastest, units.AngularSpeed), show(d.set, units.AngularSpeed))
		}
	}
}
