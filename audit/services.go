package audit

import (
	"math"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// FlowBins is how many bins the flow of a service is sorted into, from none to that of all cylinders.
const FlowBins = 20

// ServiceRun is one service of a cylinder-switched machine over one cycle of a duty.
type ServiceRun struct {
	circuit.SwitchedUse
	Beside machines.Beside   // against the machine it is compared with
	Flows  [FlowBins]float64 // s by flow over that of all cylinders
}

// Service is one service over the year; over one cycle of the first duty where none has hours.
type Service struct {
	ServiceRun
	Year     bool
	Other    string  // what it is compared with
	Fitted   bool    // that is fitted to measured points
	Idle     [3]Ends // low, likely, high: idle loss and energy of a valve event
	Life     float64 // years until a valve has its endurance; NaN without a year
	Limit    float64 // its low-flow limit, fraction
	Endures  float64 // valve events
	Assumed  bool    // idle loss or energy of an event are assumed
	MeanLost [3]float64
	Gain     [3]float64 // W, mean advantage for low, likely and high losses
}

// Ends are the two losses that decide, Pa and J.
type Ends struct{ Loss, Event float64 }

// otherMachine is the machine that a service is compared with: one fitted to measured points of the block, else
// an axial piston machine of the best point of its family. Both have the displacement of the service.
func otherMachine(b *circuit.Block, d float64) (law machines.Displacement, name string, fitted bool) {
	if b.Fit != nil {
		return b.Fit.Law.Sized(d), "a swashplate machine fitted to the points of " + b.Word("points"), true
	}
	f, err := machines.FindFamily("axial piston")
	if err == nil {
		law, err = f.Displacement(d)
	}
	if err != nil {
		law = machines.NewDisplacement(d)
	}
	return law, "a swashplate machine of usual losses", false
}

// services is the receiver that compares services with another machine.
type services struct {
	interval
	runs []ServiceRun
	at   []serviceSignals
}

type serviceSignals struct {
	q, w, pP, pS int
	last         [3]float64
}

func newServices(c *circuit.Compiled, cond circuit.Conditions) *services {
	by := map[string]int{}
	for i, s := range c.Signals() {
		by[s.Name] = i
	}
	x := &services{}
	fluid := fluidOf(cond)
	for i := range c.Circuit().Blocks {
		b := &c.Circuit().Blocks[i]
		law, ok := circuit.SwitchedLaw(b)
		if !ok {
			continue
		}
		other, _, _ := otherMachine(b, law.D)
		x.runs = append(x.runs, ServiceRun{SwitchedUse: circuit.SwitchedUse{Block: b.ID}, Beside: machines.Beside{Switched: law, Other: other, Fluid: fluid}})
		x.at = append(x.at, serviceSignals{q: by[b.ID+".P.q"], w: by[b.ID+".w"], pP: by[b.ID+".P.p"], pS: by[b.ID+".S.p"]})
	}
	return x
}

// Sample takes one time step: half of the time since the step before counts for either.
func (x *services) Sample(s *circuit.Sample) error {
	dt := x.to(s.T)
	for i := range x.at {
		a := &x.at[i]
		now := [3]float64{-s.Signals[a.q], s.Signals[a.w], s.Signals[a.pP] - s.Signals[a.pS]}
		x.runs[i].add(a.last, dt/2)
		x.runs[i].add(now, dt/2)
		a.last = now
	}
	return nil
}

// add books a flow out of the service, speed and pressure difference.
func (r *ServiceRun) add(v [3]float64, dt float64) {
	if dt <= 0 {
		return
	}
	q, w, dp := v[0], v[1], v[2]
	r.Beside.Add(q, w, dp, dt)
	if share := math.Abs(q) / (r.Beside.Switched.D * math.Abs(w)); share > 1e-4 && !math.IsInf(share, 1) {
		r.Flows[min(FlowBins-1, int(share*FlowBins))] += dt
	}
}

// list returns what was added up, as the mean of the cycles, with what was watched.
func (x *services) list(uses []circuit.SwitchedUse, cycles int) []ServiceRun {
	k := 1 / float64(max(cycles, 1))
	var out []ServiceRun
	for _, r := range x.runs {
		for _, u := range uses {
			if u.Block == r.Block {
				r.SwitchedUse = u
			}
		}
		blank := machines.Beside{Switched: r.Beside.Switched, Other: r.Beside.Other, Fluid: r.Beside.Fluid}
		r.Beside = blank.Plus(r.Beside, k)
		for i := range r.Flows {
			r.Flows[i] *= k
		}
		out = append(out, r)
	}
	return out
}

// services sums the services of a circuit over the year.
func (c *CircuitRun) services() []*Service {
	var out []*Service
	for i := range c.Circuit.Blocks {
		if s := c.service(&c.Circuit.Blocks[i]); s != nil {
			out = append(out, s)
		}
	}
	return out
}

func (c *CircuitRun) service(b *circuit.Block) *Service {
	law, ok := circuit.SwitchedLaw(b)
	if !ok {
		return nil
	}
	s := &Service{Life: math.NaN()}
	first := true
	for _, d := range c.Duties {
		for _, r := range d.Services {
			if r.Block != b.ID {
				continue
			}
			n := d.cycles()
			if first || (!s.Year && known(n)) { // a year comes before a cycle
				s.ServiceRun = ServiceRun{SwitchedUse: circuit.SwitchedUse{Block: b.ID, Law: law}, Beside: machines.Beside{Switched: law, Other: r.Beside.Other, Fluid: r.Beside.Fluid}}
				s.Year = known(n)
			} else if !known(n) {
				continue
			}
			first = false
			if !s.Year {
				n = 1
			}
			s.plus(r, n)
		}
	}
	if first {
		return nil
	}
	s.rate(b)
	return s
}

func (s *Service) plus(r ServiceRun, n float64) {
	s.Beside = s.Beside.Plus(r.Beside, n)
	s.Events += n * r.Events
	s.Busy += n * r.Busy
	s.Low += n * r.Low
	for i := range s.Flows {
		s.Flows[i] += n * r.Flows[i]
	}
}

// rate says what the sums come to, for low, likely and high losses.
func (s *Service) rate(b *circuit.Block) {
	k := circuit.KindNamed(b.Kind)
	_, s.Other, s.Fitted = otherMachine(b, s.Law.D)
	idle, _, _ := k.Value(b, "idle_loss")
	event, _, _ := k.Value(b, "event_energy")
	s.Assumed = idle.Origin == circuit.Assumed || event.Origin == circuit.Assumed
	or := func(x, y float64) float64 {
		if known(x) {
			return x
		}
		return y
	}
	s.Idle = [3]Ends{{or(idle.Low, idle.SI), or(event.Low, event.SI)}, {idle.SI, event.SI}, {or(idle.High, idle.SI), or(event.High, event.SI)}}
	for i, e := range s.Idle {
		s.Gain[i] = s.Beside.Advantage(e.Loss, e.Event) / s.Beside.Seconds
		s.MeanLost[i] = s.Beside.LostOther/s.Beside.Seconds - s.Gain[i]
	}
	endures, _, _ := k.Value(b, "endurance")
	limit, _, _ := k.Value(b, "low_flow")
	s.Endures, s.Limit = endures.SI, limit.SI
	if s.Year && s.Events > 0 {
		s.Life = s.Endures / s.Events
	}
}

// EfficiencyCurve holds overall efficiencies over flow at one pressure and speed, NaN where there is none.
type EfficiencyCurve struct {
	Pressure, Speed float64 // Pa, rad/s
	Flow            []float64
	Switched        [3][]float64 // for low, likely and high idle and switching losses
	Other           []float64
}

// Curve returns the efficiencies at the mean pressure and speed of the flow that the service delivers or takes, as a
// pump. ok = false when it delivers none.
func (s *Service) Curve() (c EfficiencyCurve, ok bool) {
	c.Pressure, c.Speed = s.Beside.MeanPressure(), s.Beside.MeanSpeed()
	if !known(c.Pressure) || !known(c.Speed) || c.Pressure <= 0 || c.Speed <= 0 {
		return c, false
	}
	const n = 80
	law, other, f := s.Beside.Switched, s.Beside.Other, s.Beside.Fluid
	full := law.Flow(1, c.Speed, c.Pressure, f.Mu)
	if !(full > 0) {
		return c, false
	}
	for i := 1; i <= n; i++ {
		q := full * float64(i) / n
		c.Flow = append(c.Flow, q)
		for k, e := range s.Idle {
			m := law
			m.Idle, m.Switch = e.Loss, e.Event
			c.Switched[k] = append(c.Switched[k], ofPump(q*c.Pressure, m.Loss(m.FractionFor(q, c.Speed, c.Pressure, f.Mu), c.Speed, c.Pressure, f)))
		}
		e := other.SettingFor(q, c.Speed, c.Pressure, f)
		if e > 1 {
			e = math.NaN()
		}
		c.Other = append(c.Other, ofPump(q*c.Pressure, other.Loss(e, c.Speed, c.Pressure, f)))
	}
	return c, true
}

// ofPump is useful power over that and loss.
func ofPump(useful, lost float64) float64 { return useful / (useful + lost) }

// serviceRemarks are the findings on valve life and on an advantage that is none.
func (c *CircuitRun) serviceRemarks() []circuit.Finding {
	var out []circuit.Finding
	for _, s := range c.Services {
		b := c.Circuit.Block(s.Block)
		say := func(level circuit.Level, key, text string) {
			out = append(out, circuit.Finding{Level: level, Circuit: c.Circuit.Name, Block: s.Block, Parameter: key, Line: b.Line, Text: s.Block + ": " + text})
		}
		if s.Life < leastLife {
			say(circuit.Warns, "endurance", "each of its valves opens and closes "+times(s.Events)+" times a year and has its endurance of "+times(s.Endures)+" after "+units.Number(s.Life, 2)+" years")
		}
		switch {
		case s.Gain[1] < 0:
			say(circuit.Note, "idle_loss", "with its likely losses it loses more over this duty than "+s.Other+" of the same displacement would")
		case s.Gain[2] < 0:
			say(circuit.Note, "idle_loss", "with the high end of its idle and switching losses it loses more over this duty than "+s.Other+" of the same displacement would; the advantage is gone at an idle loss of "+barText(s.Beside.Gone()))
		}
	}
	return out
}

// leastLife [years] is how long a valve should last at least (our choice: a replacement within the usual payback).
const leastLife = 5.0

func times(n float64) string { return units.Number(n, 3) }

func barText(p float64) string {
	return units.Format(p, units.Preferred(units.Pressure, units.Metric), 3)
}
