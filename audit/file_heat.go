package audit

import (
	"gopkg.in/yaml.v3"

	"barlitre/circuit"
	"barlitre/machines"
	"barlitre/machines/units"
)

// plainOil is a mineral oil of which nothing is known.
func plainOil() machines.Oil { return machines.NewOil(46e-6, 6.8e-6) }

// heat reads the section heat, of the file or of a circuit.
func (r *reader) heat(outer scope, n *yaml.Node) HeatSection {
	h := HeatSection{Values: map[string]circuit.Value{}, Words: map[string]string{}}
	if n == nil {
		return h
	}
	s := outer.in("heat")
	s.title = heatTitle
	before := len(r.found)
	f := r.fields(s, n, "", heatKeyNames()...)
	h.Given = len(f) > 0
	for _, k := range HeatKeys {
		e, ok := f[k.Key]
		if !ok {
			continue
		}
		switch {
		case k.IsText:
			h.Words[k.Key] = r.text(s, f, k.Key)
			points, err := parseRatePoints(h.Words[k.Key])
			if err != nil {
				r.bad(s, e.value, k.Key, "%v", err)
			}
			h.Points = points
		case len(k.Choices) > 0:
			h.Words[k.Key] = r.word(s, f, k.Key, k.Choices...)
		case k.Positive:
			if v, ok := r.positive(s, f, k.Key, k.Dim); ok {
				h.Values[k.Key] = v
			}
		default:
			v, ok := r.value(s, e.value, k.Key, k.Dim)
			if ok && k.Zero && v.SI < 0 {
				r.bad(s, e.value, k.Key, "is %s, must not be below 0", v.Text)
			} else if ok {
				h.Values[k.Key] = v
			}
		}
	}
	if len(r.found) == before {
		r.heatFits(s, f, h)
	}
	return h
}

// heatFits finds what contradicts itself within a section.
func (r *reader) heatFits(s scope, f map[string]entry, h HeatSection) {
	_, rate := h.Values["cooler_rate"]
	if rate && len(h.Points) > 0 {
		r.bad(s, f["cooler_points"].value, "cooler_points", "capacity by flow and capacity (cooler_rate) both say what the cooler takes; keep one")
	}
	opens, has := h.Values["thermostat_opens"]
	if full, ok := h.Values["thermostat_full"]; ok && has && full.SI < opens.SI {
		r.bad(s, f["thermostat_full"].value, "thermostat_full", "fully open at %s, below the %s at which it opens (thermostat_opens)", full.Text, opens.Text)
	}
	whole := func(key string, most float64) {
		if v, ok := h.Values[key]; ok && (v.SI != float64(int(v.SI)) || v.SI < 1 || v.SI > most) {
			r.bad(s, f[key].value, key, "is %s; write a whole number from 1 to %g", v.Text, most)
		}
	}
	whole("shift_days", 7)
	whole("fans", 100)
	for _, key := range []string{"shift_hours", "shift_start"} {
		if v, ok := h.Values[key]; ok && v.SI > units.Day {
			r.bad(s, f[key].value, key, "is %s, more than a day has", v.Text)
		}
	}
	if v, ok := h.Values["fouling"]; ok && v.SI < 1 {
		r.bad(s, f["fouling"].value, "fouling", "is %s, must be 1 or above", v.Text)
	}
}
