package circuit

import (
	"math"

	"barlitre/machines/units"
)

// Origin says where a value comes from.
type Origin string

// The origins a value may have. A value that nobody typed is a default and
// carries the origin that the catalog states for it.
const (
	Measured  Origin = "measured"
	NamePlate Origin = "name plate"
	DataSheet Origin = "data sheet"
	Assumed   Origin = "assumed"
	NotStated Origin = ""
)

// Origins lists the words a file may use.
var Origins = []Origin{Measured, NamePlate, DataSheet, Assumed}

// Value is one number of a block as somebody gave it.
type Value struct {
	SI        float64
	Text      string     // as written, "160 bar"
	Unit      units.Unit // the unit it was written in
	Origin    Origin
	Low, High float64 // SI; NaN when not given
	Note      string
	Line      int // in the file, from 1; 0 when not from a file
}

// derived makes a default that follows from other parameters, written in the usual unit.
func derived(p *Param, si float64, o Origin, source string) Value {
	u := units.Preferred(p.Dim, units.Metric)
	return Value{SI: si, Text: units.Format(si, u, 4), Unit: u, Origin: o, Low: math.NaN(), High: math.NaN(), Note: source}
}

// Given makes a value from a number in SI.
func Given(si float64) Value { return Value{SI: si, Low: math.NaN(), High: math.NaN()} }
