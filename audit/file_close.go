package audit

import (
	"fmt"
	"math"
	"slices"

	"barlitre/circuit/duty"
	"barlitre/circuit/recording"
	"barlitre/machines/units"
)

// CloseStrokes makes an axis end where it began by scaling its way back: the strokes of
// phases, or the speeds of points, below zero; where points give positions, what they go back.
func (f *File) CloseStrokes(dutyName, axis string) error {
	i, err := f.dutyNamed(dutyName)
	if err != nil {
		return err
	}
	d := f.Duties[i]
	drift, way, known := StrokeDrift(d, axis)
	back := (way - drift) / 2
	speed, position := d.Track(axis, duty.Speed), d.Track(axis, duty.Position)
	switch {
	case f.Sources[i].File != "":
		return fmt.Errorf("duty %q is taken from %s; change it there", dutyName, f.Sources[i].File)
	case !f.isAxis(axis) || !known:
		return fmt.Errorf("duty %q gives neither speed nor position of axis %s that could be scaled", dutyName, axis)
	case math.Abs(drift) <= 1e-9*way:
		return nil
	case back <= 1e-9*way || back+drift <= 0:
		return fmt.Errorf("duty %q: axis %s does not go back, so there is nothing to scale; add its return", dutyName, axis)
	}
	if f.Stages[i] != nil {
		return f.closeStages(i, axis, (back+drift)/back)
	}
	if speed == nil {
		return f.setColumn(i, axis, duty.Position, position.Values, closedWay(position.Values, (back+drift)/back))
	}
	return f.setColumn(i, axis, duty.Speed, speed.Values, closedSpeeds(d, axis, speed.Values))
}

// closedWay scales every step back of positions.
func closedWay(values []float64, scale float64) []float64 {
	out := slices.Clone(values)
	for r := 1; r < len(values); r++ {
		step := values[r] - values[r-1]
		if step < 0 {
			step *= scale
		}
		out[r] = out[r-1] + step
	}
	out[len(out)-1] = values[0]
	return out
}

// closeStages scales the strokes of the phases that go back.
func (f *File) closeStages(i int, axis string, scale float64) error {
	d, name := f.Duties[i], f.Duties[i].Name
	k := f.Axes[slices.IndexFunc(f.Axes, func(a duty.Axis) bool { return a.Name == axis })].Kind
	u := units.Preferred(StageDim("stroke", k), units.Metric)
	for p := range f.Stages[i] {
		if s := strokeWithin(d, axis, d.Phases[p].From, d.Phases[p].From+f.Stages[i][p].Lasts); s < -1e-12 {
			if err := f.SetStage(name, p, axis+".stroke", units.FileText(tidy(u, s*scale), u)); err != nil {
				return err
			}
		}
	}
	return nil
}

// strokeWithin is the way of an axis between two times, which are rows of its table.
func strokeWithin(d *duty.Duty, axis string, from, to float64) float64 {
	v, s := d.Track(axis, duty.Speed).Values, 0.0
	for r := 1; r < len(d.Time); r++ {
		a, b := math.Max(from, d.Time[r-1]), math.Min(to, d.Time[r])
		if h := d.Time[r] - d.Time[r-1]; b > a {
			at := func(t float64) float64 { return v[r-1] + (v[r]-v[r-1])*(t-d.Time[r-1])/h }
			s += (b - a) * (at(a) + at(b)) / 2
		}
	}
	return s
}

// closedSpeeds scales the speeds below zero. A speed that changes its sign between two rows
// shifts its zero with them, so the scale is found by halving.
func closedSpeeds(d *duty.Duty, axis string, values []float64) []float64 {
	scaled := func(k float64) []float64 {
		out := slices.Clone(values)
		for r, v := range out {
			if v < 0 {
				out[r] = k * v
			}
		}
		return out
	}
	drift := func(k float64) float64 {
		t := &duty.Duty{Time: d.Time, Tracks: []duty.Track{{Of: axis, What: duty.Speed, Values: scaled(k)}}}
		x, _, _ := StrokeDrift(t, axis)
		return x
	}
	low, high := 0.0, 1.0
	for drift(high) > 0 && high < 1e6 {
		high *= 2
	}
	for range 200 {
		if mid := (low + high) / 2; drift(mid) > 0 {
			low = mid
		} else {
			high = mid
		}
	}
	return scaled(high)
}

// setColumn writes what changed in a track of points.
func (f *File) setColumn(i int, axis string, what duty.What, old, new []float64) error {
	heads, columns, err := f.Table(f.Duties[i].Name)
	if err != nil {
		return err
	}
	k := f.Axes[slices.IndexFunc(f.Axes, func(a duty.Axis) bool { return a.Name == axis })].Kind
	u := units.Preferred(what.Dim(k), units.Metric)
	for c, head := range heads {
		if name, _, _ := recording.SplitHead(head); name != axis+"."+what.String() {
			continue
		}
		for r, v := range new {
			if v != old[r] {
				columns[c][r] = units.FileText(tidy(u, v), u)
			}
		}
	}
	return f.SetTable(f.Duties[i].Name, heads, columns)
}
