package frame

import (
	"fyne.io/fyne/v2"

	"barlitre/machines/units"
)

// settings are the user's own, kept between starts.
type settings struct {
	system        units.System
	comma         bool
	dark          bool
	scale         float32
	width, height float32
}

var systems = map[string]units.System{"metric": units.Metric, "us": units.US, "si": units.SI}

func systemName(s units.System) string {
	for name, v := range systems {
		if v == s {
			return name
		}
	}
	return "metric"
}

func readSettings(p fyne.Preferences) settings {
	s := settings{
		system: systems[p.StringWithFallback("units", "metric")],
		comma:  p.Bool("decimal comma"),
		dark:   p.Bool("dark"),
		scale:  float32(p.FloatWithFallback("scale", 1)),
		width:  float32(p.FloatWithFallback("width", 1280)),
		height: float32(p.FloatWithFallback("height", 800)),
	}
	if s.scale < 1 || s.scale > 2 {
		s.scale = 1
	}
	return s
}

func (s settings) write(p fyne.Preferences) {
	p.SetString("units", systemName(s.system))
	p.SetBool("decimal comma", s.comma)
	p.SetBool("dark", s.dark)
	p.SetFloat("scale", float64(s.scale))
	p.SetFloat("width", float64(s.width))
	p.SetFloat("height", float64(s.height))
}

func (s settings) size() fyne.Size {
	return fyne.NewSize(max(s.width, 640), max(s.height, 480))
}
