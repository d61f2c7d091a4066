package machines

import (
	"fmt"
	"math"
	"regexp"
	"slices"
	"strings"

	"barlitre/machines/units"
)

// Column is a column of a table of measured points, as its file has it.
type Column struct {
	Name, Unit string
	Values     []float64
}

// Measured is what a table of measured points says.
type Measured struct {
	Points  []Point
	Motor   bool     // the machine gave power at its shaft
	Used    []string // "speed from rpm", a column each
	Ignored []string // names of columns that were not needed
}

// quantities of a table of points.
type pointQuantity int

const (
	pointSpeed pointQuantity = iota
	pointSetting
	pointDisplacement
	pointDP
	pointOutlet
	pointInlet
	pointFlow
	pointTorque
	pointPower
	pointViscosity
	pointNothing
)

var pointNames = [...]string{"speed", "setting", "displacement", "pressure difference", "outlet pressure", "inlet pressure", "flow", "torque", "shaft power", "viscosity"}

// pointDims are the dimensions that tell a column by its unit, with what it is then, unless its name says more.
var pointDims = []struct {
	dim units.Dim
	is  pointQuantity
}{
	{units.AngularSpeed, pointSpeed}, {units.DisplacementPerRev, pointDisplacement}, {units.Pressure, pointDP}, {units.Flow, pointFlow},
	{units.Torque, pointTorque}, {units.Power, pointPower}, {units.DynamicViscosity, pointViscosity},
}

// unitSpellings are units as column heads often write them, where "/" and blanks are out of place.
var unitSpellings = map[string]string{
	"lmin": "L/min", "lpm": "L/min", "l_min": "L/min", "m3s": "m3/s", "m3h": "m3/h", "cm3": "cm3/rev", "ccm": "cm3/rev", "cc": "cm3/rev", "cm3rev": "cm3/rev",
	"cm3u": "cm3/rev", "cm3/u": "cm3/rev", "m3rad": "m3/rad", "in3": "in3/rev", "in3rev": "in3/rev", "nm": "N m", "n m": "N m", "n.m": "N m", "n*m": "N m",
	"mpas": "mPa s", "min-1": "1/min", "1min": "1/min", "rads": "rad/s", "pct": "%", "percent": "%", "lbfin": "lbf in", "lbfft": "lbf ft", "umin": "rpm", "upm": "rpm",
}

// notMeasured are words in the names of columns that hold something else than what was measured.
var notMeasured = []string{"nominal", "set", "target", "rated", "ideal", "theoretical", "derived", "eta", "efficiency", "loss", "drain", "leak", "leakage", "case", "qd", "dr"}

var bracketUnit = regexp.MustCompile(`^(.*?)\s*[(\[]([^)\]]*)[)\]]$`)

// splitName finds the unit in a head such as "rpm", "dp_MPa", "Q out in L/min" or "n / rpm": candidates, best first.
func splitName(c Column) (units []string) {
	if c.Unit != "" {
		return []string{c.Unit}
	}
	if m := bracketUnit.FindStringSubmatch(c.Name); m != nil {
		return []string{m[2]}
	}
	for _, sep := range []string{" in ", " / ", "_", " "} {
		if i := strings.LastIndex(c.Name, sep); i > 0 {
			units = append(units, c.Name[i+len(sep):])
			if j := strings.LastIndex(c.Name[:i], sep); j > 0 && sep != " / " { // "Q_L_min"
				units = append(units, strings.ReplaceAll(c.Name[j+len(sep):], "_", "/"))
			}
		}
	}
	return append(units, c.Name)
}

// words of a name, in small letters.
func words(name string) []string {
	return strings.FieldsFunc(strings.ToLower(name), func(r rune) bool { return strings.ContainsRune(" _-/.()[],", r) })
}

// understand says what a column holds and in which unit.
func understand(c Column) (pointQuantity, units.Unit) {
	has := func(list ...string) bool {
		return slices.ContainsFunc(words(c.Name), func(w string) bool { return slices.Contains(list, w) })
	}
	if has(notMeasured...) {
		return pointNothing, units.Unit{}
	}
	for _, text := range splitName(c) {
		if known, ok := unitSpellings[strings.ToLower(strings.TrimSpace(text))]; ok {
			text = known
		}
		if u, ok := units.Find(text, units.Ratio); ok && text == "%" {
			if has("e", "x", "setting", "swash", "stroke", "displacement", "disp", "swivel") {
				return pointSetting, u
			}
			return pointNothing, u
		}
		for _, d := range pointDims {
			u, ok := units.Find(text, d.dim)
			if !ok {
				continue
			}
			switch {
			case has("dp", "deltap", "delta", "difference"):
			case d.is == pointDP && has("p2", "pout", "out", "outlet", "hp"):
				return pointOutlet, u
			case d.is == pointDP && has("p1", "pin", "in", "inlet", "suction", "lp"):
				return pointInlet, u
			}
			return d.is, u
		}
	}
	if has("e", "setting", "swash", "swivel") && c.Unit == "" {
		return pointSetting, units.Unit{Factor: 1}
	}
	return pointNothing, units.Unit{}
}

// ReadPoints makes points of the columns of a table. What a column holds is told by its unit, in the head between
// brackets or after its name ("dp_MPa"), and where that is not enough by its name:
//
//	speed; pressure difference, or outlet and inlet pressure; flow at the high-pressure side; torque, or shaft power;
//	displacement or setting, where it varies; dynamic viscosity, where it varies
//
// Quantities are those of ISO 4409, with the flow at the pressure of its port. full is the displacement at full setting
// [m³/rad]; 0 takes the largest in the table. lines are the lines of the rows in their file. The errors say what is
// missing.
func ReadPoints(columns []Column, lines []int32, full float64) (*Measured, float64, error) {
	r := &pointReader{si: map[pointQuantity][]float64{}, m: &Measured{}}
	for _, c := range columns {
		if err := r.take(c); err != nil {
			return nil, full, err
		}
	}
	if err := r.missing(full); err != nil {
		return nil, full, err
	}
	if v := r.si[pointDisplacement]; full == 0 && v != nil {
		full = slices.Max(v)
	}
	for i := range lines {
		p, err := r.point(i, full)
		if err != nil {
			return nil, full, fmt.Errorf("line %d: %w", lines[i], err)
		}
		p.Line = int(lines[i])
		r.m.Points = append(r.m.Points, p)
	}
	r.turn()
	return r.m, full, nil
}

type pointReader struct {
	si map[pointQuantity][]float64
	m  *Measured
}

// take keeps a column in SI.
func (r *pointReader) take(c Column) error {
	q, u := understand(c)
	if q == pointNothing {
		r.m.Ignored = append(r.m.Ignored, c.Name)
		return nil
	}
	if r.si[q] != nil {
		return fmt.Errorf("two columns give the %s, the second is %q; keep one", pointNames[q], c.Name)
	}
	si := make([]float64, len(c.Values))
	for i, x := range c.Values {
		si[i] = u.ToSI(x)
	}
	r.si[q] = si
	r.m.Used = append(r.m.Used, pointNames[q]+" from "+c.Name)
	return nil
}

// missing says which column is missing.
func (r *pointReader) missing(full float64) error {
	has := func(q pointQuantity) bool { return r.si[q] != nil }
	what := ""
	switch {
	case !has(pointSpeed):
		what = "speed, as in \"n [rpm]\""
	case !has(pointDP) && !has(pointOutlet):
		what = "pressure difference, as in \"dp [bar]\", or outlet pressure, as in \"p2 [bar]\""
	case !has(pointFlow):
		what = "flow, as in \"q [L/min]\""
	case !has(pointTorque) && !has(pointPower):
		what = "torque, as in \"T [N m]\""
	case full == 0 && !has(pointDisplacement):
		what = "displacement, as in \"V [cm3/rev]\", and none is given otherwise"
	default:
		return nil
	}
	return fmt.Errorf("no column gives the %s; the columns understood are: %s", what, strings.Join(append(slices.Clone(r.m.Used), "no more"), ", "))
}

// point makes the point of a row.
func (r *pointReader) point(i int, full float64) (Point, error) {
	get := func(q pointQuantity, none float64) float64 {
		if v := r.si[q]; v != nil {
			return v[i]
		}
		return none
	}
	p := Point{W: get(pointSpeed, 0), Q: get(pointFlow, 0), Mu: get(pointViscosity, 0), E: get(pointSetting, 1)}
	if v := r.si[pointDisplacement]; v != nil {
		p.E = v[i] / full
	}
	p.DP = get(pointDP, get(pointOutlet, 0)-get(pointInlet, 0))
	p.T = get(pointTorque, math.NaN())
	if math.IsNaN(p.T) {
		p.T = get(pointPower, 0) / p.W
	}
	switch {
	case p.W == 0:
		return p, fmt.Errorf("the speed is 0; a point must turn")
	case math.Abs(p.E) > 1.1:
		return p, fmt.Errorf("the setting is %s, above 110 %% of the displacement %s cm3/rev; correct the displacement", units.Format(p.E, units.Percent, 3),
			units.Number(full/units.CubicCentimetrePerRev, 4))
	}
	return p, nil
}

// turn gives points of a motor the signs of one: there more power goes in with the oil than comes out at the shaft.
func (r *pointReader) turn() {
	pump, motor := 0, 0
	for _, p := range r.m.Points {
		switch {
		case p.T < 0 || p.DP < 0:
			return // the signs are there already
		case p.T*p.W > p.Q*p.DP:
			pump++
		default:
			motor++
		}
	}
	if r.m.Motor = motor > pump; r.m.Motor {
		for i := range r.m.Points {
			r.m.Points[i].DP, r.m.Points[i].T = -r.m.Points[i].DP, -r.m.Points[i].T
		}
	}
}
