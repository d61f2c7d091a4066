package logged

import (
	"slices"

	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

// Law is a way to make a track.
type Law struct {
	Word     string // as files name it
	Says     string // what it does
	Channels []Channel
	Numbers  []Number
	gives    []duty.What
	only     []duty.AxisKind // empty = both
}

// Channel is one that a law needs.
type Channel struct {
	Key, Name string
	Dim       units.Dim
	Optional  bool
}

// Number is one that a law needs.
type Number struct {
	Key, Name string
	Dim       units.Dim
	Default   string // what holds when it is not given; "" = it must be
}

// The laws, as files name them.
const (
	AsMeasured = "as measured" // the channel is the track; files list it under columns
	Scaled     = "factor and offset"
	Turned     = "sign turned"
	OfPosition = "speed of position"
	OfFlow     = "speed of flow"
	Chambers   = "chamber pressures"
	OfMotor    = "motor pressures"
	OfPower    = "power over speed"
	Constant   = "constant"
)

// Laws lists the ways to make a track of an axis of a kind, or of a block, the likely first.
func Laws(what duty.What, kind duty.AxisKind) (out []Law) {
	dim := what.Dim(kind)
	speed, position := duty.Speed.Dim(kind), duty.Position.Dim(kind)
	moves := []Channel{{"speed", "for friction: speed", speed, true}, {"position", "or position", position, true}}
	sides := []Channel{{"a", "pressure at A", units.Pressure, false}, {"b", "pressure at B", units.Pressure, true}}
	smoothed := Number{"window", "smoothed over", units.Time, "10 rows, 0.05\u202fs at least"}
	none := "none"
	displacement := Number{"displacement", "displacement", units.DisplacementPerRev, ""}
	gear := Number{"gear", "gear, motor over axis", units.Ratio, "1"}
	swallows := []Number{{"bore", "bore", units.Length, ""}}
	if kind == duty.Rotary {
		swallows = []Number{displacement, gear}
	}
	whole := []Channel{{"column", "channel", dim, false}}
	for _, l := range []Law{
		{Word: AsMeasured, Says: "The channel is the track.", Channels: whole},
		{Word: OfPosition, Says: "The slope of the position, by parabolas of least squares over a window of time.", gives: []duty.What{duty.Speed},
			Channels: []Channel{{"position", "position", position, false}}, Numbers: []Number{smoothed}},
		{Word: OfFlow, Says: "The flow into side A over what it fills: area of the bore, or displacement and gear.", gives: []duty.What{duty.Speed},
			Channels: []Channel{{"flow", "flow into A", units.Flow, false}}, Numbers: append(swallows, Number{"volumetric", "volumetric efficiency", units.Ratio, "100\u202f%"})},
		{Word: Chambers, Says: "What the pressures push with, less friction and the stated mass, which the circuit adds again.", gives: []duty.What{duty.Load}, only: []duty.AxisKind{duty.Linear},
			Channels: append(sides, moves...), Numbers: []Number{{"bore", "bore", units.Length, ""}, {"rod", "rod", units.Length, none}, {"friction", "friction", units.Force, none},
				{"viscous", "viscous friction", units.ViscousFriction, none}, {"mass", "moved mass", units.Mass, none}, smoothed}},
		{Word: OfMotor, Says: "The torque of the motor at the axis, less losses and the stated inertia.", gives: []duty.What{duty.Load}, only: []duty.AxisKind{duty.Rotary},
			Channels: append(sides, moves...), Numbers: []Number{displacement, gear, {"efficiency", "hydraulic-mechanical efficiency", units.Ratio, "100\u202f%"}, {"inertia", "moment of inertia", units.Inertia, none}, smoothed}},
		{Word: OfPower, Says: "The mechanical power over the speed; 0 where the axis stands.", gives: []duty.What{duty.Load},
			Channels: []Channel{{"power", "power", units.Power, false}, {"speed", "speed", speed, true}, {"position", "or position", position, true}}, Numbers: []Number{smoothed}},
		{Word: Turned, Says: "The channel with its sign turned.", Channels: whole},
		{Word: Scaled, Says: "The channel times a factor, and an offset added.", Channels: whole,
			Numbers: []Number{{"factor", "factor", units.Ratio, "1"}, {"offset", "offset", dim, none}}},
		{Word: Constant, Says: "The same value at every row.", gives: []duty.What{duty.Speed, duty.Load, duty.Command, duty.SetPressure, duty.SetFlow}, Numbers: []Number{{"value", "value", dim, ""}}},
	} {
		if (l.gives == nil || slices.Contains(l.gives, what)) && (l.only == nil || slices.Contains(l.only, kind)) {
			out = append(out, l)
		}
	}
	return out
}

// LawOf finds a law by its word; "" is AsMeasured.
func LawOf(word string, what duty.What, kind duty.AxisKind) (Law, bool) {
	if word == "" {
		word = AsMeasured
	}
	for _, l := range Laws(what, kind) {
		if l.Word == word {
			return l, true
		}
	}
	return Law{}, false
}
