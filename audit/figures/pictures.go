package figures

import (
	"math"
	"sync"

	"barlitre/audit"
	"barlitre/audit/pen"
	"barlitre/machines/units"
)

// Picture is a figure that a block of a solved circuit offers. It may take a quarter of a second to draw, on any goroutine.
type Picture struct {
	Name   string                  // for a choice among several
	Height func(w float64) float64 // at which it looks well [figure units]
	Draw   func(p pen.Pen, w, h float64, pal Palette)
}

// PicturesOf lists the pictures of a block of a solved circuit, the one that shows most of its energy first.
func PicturesOf(s *audit.Solution, c *audit.CircuitRun, block string, sys units.System) []Picture {
	return machinePictures(s, c, block, sys)
}

// Names of the pictures of displacement machines.
const (
	overSpeed   = "Efficiency over speed"
	overSetting = "Efficiency over setting"
	fitLeaves   = "What the fit leaves"
)

// machinePictures are the maps of a displacement machine, over what it varies, and what the fit of its points leaves.
func machinePictures(s *audit.Solution, c *audit.CircuitRun, block string, sys units.System) []Picture {
	full, all := 0.0, 0.0
	for _, d := range c.Duties {
		for _, x := range d.Operating[block] {
			all += x.Energy
			if math.Abs(math.Abs(x.E)-1) <= sameSetting {
				full += x.Energy
			}
		}
	}
	b := c.Circuit.Block(block)
	if all == 0 || b == nil {
		return nil
	}
	of := sync.OnceValue(func() *audit.MachineMap { return s.MachineMap(c, block) })
	speed := mapPicture(overSpeed, of, func(m *audit.MachineMap) EfficiencyMap { return MapOverSpeed(m, 0, sys) })
	setting := mapPicture(overSetting, of, func(m *audit.MachineMap) EfficiencyMap { return MapOverSetting(m, 0, sys) })
	out := []Picture{speed}
	switch {
	case full < all/2:
		out = []Picture{setting, speed}
	case full < all*(1-1e-3):
		out = append(out, setting)
	}
	if b.Fit != nil {
		out = append(out, Picture{fitLeaves, mapHeight, func(p pen.Pen, w, h float64, pal Palette) {
			if m := of(); m != nil {
				FitResiduals(m, sys).Draw(p, w, h, pal)
			}
		}})
	}
	return out
}

// mapHeight is that of a map, with room for a legend in more lines where it is narrow.
func mapHeight(w float64) float64 {
	h := EfficiencyMap{}.Height(w)
	if w < narrowMap {
		h += 2 * legendStep
	}
	return h
}

const narrowMap = 450.0

func mapPicture(name string, of func() *audit.MachineMap, lay func(*audit.MachineMap) EfficiencyMap) Picture {
	laid := sync.OnceValue(func() EfficiencyMap {
		m := of()
		if m == nil {
			return EfficiencyMap{}
		}
		f := lay(m)
		f.At = remembered(f.At)
		if f.Inside != nil {
			f.Inside = remembered(f.Inside)
		}
		return f
	})
	return Picture{name, mapHeight, func(p pen.Pen, w, h float64, pal Palette) { laid().Draw(p, w, h, pal) }}
}

// remembered keeps what a function of two numbers returns: a map is drawn on one grid, whatever its size.
func remembered[T any](f func(x, y float64) T) func(x, y float64) T {
	var mu sync.Mutex
	known := map[[2]float64]T{}
	return func(x, y float64) T {
		mu.Lock()
		defer mu.Unlock()
		at := [2]float64{x, y}
		v, ok := known[at]
		if !ok {
			v = f(x, y)
			known[at] = v
		}
		return v
	}
}
