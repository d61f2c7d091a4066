package audit

import (
	"fmt"
	"math"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording/channels"
	"barlitre/machines/units"
)

// scaled is a channel times a factor, with an offset added.
func (v *derivation) scaled() channels.Track {
	x := v.channelOf("column", v.dim, true)
	factor, offset := v.signed("factor", units.Ratio, 1), v.signed("offset", v.dim, 0)
	if !v.ok {
		return channels.Track{}
	}
	out := channels.Track{Values: make([]float64, len(x)), Formula: fmt.Sprintf("%.6g · %s", factor, v.f["column"].text())}
	if offset != 0 {
		out.Formula += fmt.Sprintf(" + %.6g %s", offset, units.Preferred(v.dim, units.SI).Label())
	}
	for i := range x {
		out.Values[i] = factor*x[i] + offset
	}
	return out
}

// constant is the same value at every row.
func (v *derivation) constant() channels.Track {
	if _, given := v.f["value"]; !given {
		v.bad(v.s, v.at, "value", "is missing; write a %s", v.dim.Name())
		v.ok = false
	}
	x := v.signed("value", v.dim, 0)
	out := channels.Track{Values: make([]float64, len(v.rec.Time)), Formula: fmt.Sprintf("%.6g %s throughout", x, units.Preferred(v.dim, units.SI).Label())}
	for i := range out.Values {
		out.Values[i] = x
	}
	return out
}

// power is a mechanical power over the speed; 0 where that is of standstill.
func (v *derivation) power(rotary bool) channels.Track {
	p := v.channelOf("power", units.Power, true)
	kind := duty.Linear
	if rotary {
		kind = duty.Rotary
	}
	speed := v.speed(duty.Speed.Dim(kind), duty.Position.Dim(kind))
	if v.ok && speed == nil {
		v.bad(v.s, v.at, "speed", "is missing; name the channel of the speed or of the position")
		v.ok = false
	}
	if !v.ok {
		return channels.Track{}
	}
	top := 0.0
	for _, x := range speed {
		top = math.Max(top, math.Abs(x))
	}
	out := channels.Track{Values: make([]float64, len(p)), Formula: fmt.Sprintf("P/v, 0 where |v| is below %.4g", duty.StandstillShare*top)}
	for i, x := range speed {
		if math.Abs(x) > duty.StandstillShare*top {
			out.Values[i] = p[i] / x
		}
	}
	return out
}

// signed reads a quantity of either sign, with a default.
func (v *derivation) signed(key string, d units.Dim, fallback float64) float64 {
	if _, given := v.f[key]; !given {
		return fallback
	}
	x, ok := v.optional(v.s, v.f, key, d)
	v.ok = v.ok && ok
	return x.SI
}
