package audit

import (
	"fmt"
	"math"

	"gopkg.in/yaml.v3"

	"barlitre/circuit/duty"
	"barlitre/circuit/logged"
	"barlitre/circuit/recording/channels"
	"barlitre/circuit/recording/logger"
	"barlitre/machines/units"
)

// laws by which a track is derived.
var laws = []string{logged.OfPosition, logged.OfFlow, logged.Chambers, logged.OfMotor, logged.Turned, logged.Scaled, logged.OfPower, logged.Constant}

// derivation reads one derived track.
type derivation struct {
	*reader
	s   scope
	f   map[string]entry
	rec *logger.Recording
	at  *yaml.Node
	dim units.Dim // of the track
	ok  bool
}

// derived works tracks out from channels, each by its law.
func (r *reader) derived(s scope, d *duty.Duty, rec *logger.Recording, n *yaml.Node) (out []Derived) {
	in := s.in("derived")
	r.from.nextTurn()
	for _, e := range r.entries(s, n, "derived") {
		dim, ok := r.column(in, d, e.at, e.key)
		if !ok {
			continue
		}
		of := in.in(e.key)
		f := r.fields(of, e.value, "", "law", "column", "position", "speed", "flow", "a", "b", "bore", "rod", "friction", "viscous", "mass", "window",
			"displacement", "gear", "efficiency", "volumetric", "inertia", "factor", "offset", "power", "value")
		v := &derivation{r, of, f, rec, e.value, dim, true}
		before := len(r.found)
		key := fmt.Sprint(e.key, dim, flowText(e.value)) // the same words say another thing of another kind of axis
		tr, done := r.from.derivedTrack(key)
		if !done {
			tr = v.track()
		}
		if len(r.found) == before && v.ok {
			r.from.keepTrack(key, tr)
			r.keep(d, e.key, tr.Values)
			says := map[string]string{}
			for key, x := range f {
				says[key] = x.text()
			}
			out = append(out, Derived{e.key, tr.Formula, says})
		}
	}
	return out
}

func (v *derivation) track() channels.Track {
	law := v.word(v.s, v.f, "law", laws...)
	if law == "" {
		if _, given := v.f["law"]; !given {
			v.bad(v.s, v.at, "law", "is missing; write one of %q", laws)
		}
		v.ok = false
		return channels.Track{}
	}
	rotary := v.dim == units.AngularSpeed || v.dim == units.Torque
	switch law {
	case logged.Scaled:
		return v.scaled()
	case logged.Constant:
		return v.constant()
	}
	want := map[string][]units.Dim{logged.OfPosition: {units.Velocity, units.AngularSpeed}, logged.OfFlow: {units.Velocity, units.AngularSpeed}, logged.Chambers: {units.Force}, logged.OfMotor: {units.Torque}, logged.Turned: {v.dim}, logged.OfPower: {units.Force, units.Torque}}[law]
	if v.dim != want[0] && v.dim != want[len(want)-1] {
		v.bad(v.s, v.at, "law", "%q gives %s, this track is %s", law, article(want[0].Name()), article(v.dim.Name()))
		return channels.Track{}
	}
	switch law {
	case logged.OfPosition:
		return v.position(rotary)
	case logged.OfFlow:
		return v.flow(rotary)
	case logged.Chambers:
		return v.chambers()
	case logged.OfMotor:
		return v.motor()
	case logged.OfPower:
		return v.power(rotary)
	}
	x := v.channelOf("column", v.dim, true)
	out := channels.Track{Values: make([]float64, len(x)), Formula: "minus " + v.f["column"].text()}
	for i := range x {
		out.Values[i] = -x[i]
	}
	return out
}

func (e entry) text() string {
	if e.value == nil {
		return ""
	}
	return e.value.Value
}

// channelOf reads a channel named under a key; nil when it is not given or faulty.
func (v *derivation) channelOf(key string, d units.Dim, needed bool) []float64 {
	e, ok := v.f[key]
	if !ok {
		if needed {
			v.bad(v.s, v.at, key, "is missing; name the channel")
			v.ok = false
		}
		return nil
	}
	column, ok := v.scalar(v.s, e.value, key, "the name of a channel")
	if !ok {
		v.ok = false
		return nil
	}
	x := v.channel(v.s, v.rec, e.value, key, column, d)
	v.ok = v.ok && x != nil
	return x
}

// number reads a quantity, not below 0, with a default.
func (v *derivation) number(key string, d units.Dim, fallback float64, needed bool) float64 {
	x, ok := v.optional(v.s, v.f, key, d)
	switch _, given := v.f[key]; {
	case !given && needed:
		v.bad(v.s, v.at, key, "is missing; write %s", article(d.Name()))
		v.ok = false
	case !given:
		return fallback
	case !ok:
		v.ok = false
	case x.SI < 0 || needed && x.SI == 0:
		v.bad(v.s, v.f[key].value, key, "is %s, must be above 0", x.Text)
		v.ok = false
	}
	return x.SI
}

// window is how long the parabolas are that a slope is taken from: eleven rows, 50 ms at least.
func (v *derivation) window() float64 {
	return v.number("window", units.Time, math.Max(0.05, 10*v.rec.Interval), false)
}

func (v *derivation) position(rotary bool) channels.Track {
	d := units.Length
	if rotary {
		d = units.Angle
	}
	x, w := v.channelOf("position", d, true), v.window()
	if !v.ok {
		return channels.Track{}
	}
	return channels.SpeedOfPosition(v.rec.Time, x, w)
}

func (v *derivation) flow(rotary bool) channels.Track {
	q := v.channelOf("flow", units.Flow, true)
	share := v.number("volumetric", units.Ratio, 1, false)
	swallows := 0.0
	if rotary {
		swallows = v.number("displacement", units.DisplacementPerRev, 0, true) * v.number("gear", units.Ratio, 1, false)
	} else {
		bore := v.number("bore", units.Length, 0, true)
		swallows = math.Pi / 4 * bore * bore
	}
	if !v.ok {
		return channels.Track{}
	}
	return channels.SpeedOfFlow(q, swallows, share)
}

// speed returns the speed of the axis, of a channel of it or of its position; nil where none is named.
func (v *derivation) speed(s, x units.Dim) []float64 {
	if p := v.channelOf("position", x, false); p != nil {
		speed, _ := channels.Slope(v.rec.Time, p, v.window())
		return speed
	}
	return v.channelOf("speed", s, false)
}

func (v *derivation) chambers() channels.Track {
	bore, rod := v.number("bore", units.Length, 0, true), v.number("rod", units.Length, 0, false)
	if rod >= bore && v.ok {
		v.bad(v.s, v.at, "rod", "is as thick as the bore or thicker")
		v.ok = false
	}
	c := channels.Cylinder{A: math.Pi / 4 * bore * bore, B: math.Pi / 4 * (bore*bore - rod*rod),
		Friction: v.number("friction", units.Force, 0, false), Damping: v.number("viscous", units.ViscousFriction, 0, false), Mass: v.number("mass", units.Mass, 0, false)}
	a, b := v.channelOf("a", units.Pressure, true), v.channelOf("b", units.Pressure, false)
	speed, w := v.speed(units.Velocity, units.Length), v.window()
	if !v.ok {
		return channels.Track{}
	}
	return v.worked(c.Load(v.rec.Time, a, b, speed, w))
}

func (v *derivation) motor() channels.Track {
	m := channels.Motor{Displacement: v.number("displacement", units.DisplacementPerRev, 0, true), Gear: v.number("gear", units.Ratio, 1, false),
		Efficiency: v.number("efficiency", units.Ratio, 1, false), Inertia: v.number("inertia", units.Inertia, 0, false)}
	a, b := v.channelOf("a", units.Pressure, true), v.channelOf("b", units.Pressure, false)
	speed, w := v.speed(units.AngularSpeed, units.Angle), v.window()
	if m.Efficiency <= 0 || m.Efficiency > 1 {
		v.bad(v.s, v.at, "efficiency", "must lie above 0 and not above 1")
		v.ok = false
	}
	if !v.ok {
		return channels.Track{}
	}
	return v.worked(m.Load(v.rec.Time, a, b, speed, w))
}

func (v *derivation) worked(t channels.Track, err error) channels.Track {
	if err != nil {
		v.bad(v.s, v.at, "law", "%v", err)
		v.ok = false
	}
	return t
}
