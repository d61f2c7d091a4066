package logger

import (
	"regexp"
	"strconv"
	"strings"
	"sync"

	"barlitre/machines/units"
)

// dims are the quantities that a unit alone may mean, the likely ones first.
var dims = []units.Dim{units.Pressure, units.Flow, units.Velocity, units.AngularSpeed, units.Force, units.Torque, units.Length, units.Angle,
	units.Power, units.Energy, units.Temperature, units.Time, units.Current, units.Voltage, units.Frequency, units.Acceleration, units.Volume, units.Mass, units.Ratio,
	units.DisplacementPerRev, units.KinematicViscosity, units.DynamicViscosity, units.Density, units.Area}

// spellings are units as loggers write them.
var spellings = map[string]string{"mps": "m/s", "mmps": "mm/s", "radps": "rad/s", "lmin": "L/min", "l_min": "L/min", "lpm": "L/min", "pct": "%", "vdc": "V", "degc": "C",
	"nm": "N m", "grad": "deg", "grad c": "C", "deg c": "C", "sec": "s", "seconds": "s", "sekunden": "s", "s]": "s", "msec": "ms", "kn": "kN", "kwh": "kWh", "wh": "Wh", "ma": "mA", "kw": "kW", "w": "W", "n": "N", "v": "V"}

// unitIn is a unit as a head has it.
type unitIn struct {
	units.Unit
	absolute bool
}

// unitOf reads a unit of any quantity. "bar abs" and the like are pressures against vacuum.
// What it found is kept, for a file asks for the same few texts at every cell.
func unitOf(text string) (unitIn, bool) {
	if len(text) > 24 {
		return unitIn{}, false
	}
	unitsRead.Lock()
	defer unitsRead.Unlock()
	if u, ok := unitsRead.by[text]; ok {
		return u, u.Factor != 0
	}
	u, ok := readUnit(text)
	if len(unitsRead.by) < 10000 {
		unitsRead.by[text] = u
	}
	return u, ok
}

var unitsRead = struct {
	sync.Mutex
	by map[string]unitIn
}{by: map[string]unitIn{}}

func readUnit(text string) (unitIn, bool) {
	s := strings.Trim(strings.TrimSpace(text), "[](){}<>")
	s = strings.TrimSpace(s)
	if s == "" {
		return unitIn{}, false
	}
	low := strings.ToLower(s)
	for _, end := range []string{"(abs)", "(abs", "_abs", " abs.", " abs", "(a)", "(a", " a"} {
		if base, ok := strings.CutSuffix(low, end); ok {
			if u, ok := units.Find(strings.TrimSpace(base), units.Pressure); ok {
				return unitIn{u, true}, true
			}
		}
	}
	switch low {
	case "bara", "mbara", "kpaa", "psia", "mpaa":
		if u, ok := units.Find(low[:len(low)-1], units.Pressure); ok {
			return unitIn{u, true}, true
		}
	}
	for _, end := range []string{"(g)", "(g", " g", "g", "(rel)", " rel", "(ü)", "(ü", " ü", "ü"} {
		if base, ok := strings.CutSuffix(low, end); ok && base != "" {
			if u, ok := units.Find(strings.TrimSpace(base), units.Pressure); ok {
				return unitIn{u, false}, true
			}
		}
	}
	for _, name := range []string{s, spellings[low]} {
		for _, d := range dims {
			if u, ok := units.Find(name, d); ok && (name != "" && (d != units.Ratio || name == "%" || low == "percent")) {
				return unitIn{u, false}, true
			}
		}
	}
	return unitIn{}, false
}

var bracketed = regexp.MustCompile(`^(.*?)\s*[\[({<]\s*([^\[\](){}<>]*(?:\([^()]*\))?)\s*[\])}>]\s*(.*)$`)

// tails are units that may follow a name after an underscore; letters of ports, as in p_A, are none.
var tails = map[string]bool{"s": true, "ms": true, "bar": true, "psi": true, "mpa": true, "kpa": true, "pa": true, "mps": true, "mmps": true, "radps": true, "rpm": true,
	"n": true, "kn": true, "nm": true, "mm": true, "m": true, "kw": true, "w": true, "kwh": true, "wh": true, "degc": true, "lpm": true, "lmin": true, "ma": true, "hz": true, "pct": true, "rad": true, "deg": true}

// nameAndUnit splits a head: "p1 [bar]", "Druck/bar", "force in kN", "speed rpm", "boom_F_N".
func nameAndUnit(head string) (name, unit string) {
	head = strings.TrimSpace(strings.TrimLeft(strings.TrimSpace(head), "#%"))
	if m := bracketed.FindStringSubmatch(head); m != nil && m[1] != "" {
		if _, ok := unitOf(m[2]); ok || strings.Contains(head, "[") || m[2] == "-" {
			name = strings.TrimSpace(m[1])
			if rest := strings.Trim(m[3], " _-,"); rest != "" {
				name += " " + rest
			}
			return name, strings.TrimSpace(m[2])
		}
	}
	for _, link := range []string{" in ", " ", "/", ", ", "_"} {
		for at := 0; ; {
			i := strings.Index(head[at:], link)
			if i < 0 {
				break
			}
			i += at
			at = i + len(link)
			unit := head[at:]
			if i == 0 || link == "_" && !tails[strings.ToLower(unit)] || link == " " && len(unit) == 1 && strings.ToLower(unit) != "s" {
				continue
			}
			if _, ok := unitOf(unit); ok {
				return strings.TrimSpace(head[:i]), unit
			}
		}
	}
	return head, ""
}

var (
	statWords = []struct {
		kind Kind
		is   *regexp.Regexp
	}{{Minimum, regexp.MustCompile(`(?i)(^|[^a-z])min(imum|\.)?($|[^a-z])`)}, {Maximum, regexp.MustCompile(`(?i)(^|[^a-z])(max(imum|\.)?|peak)($|[^a-z])`)},
		{Mean, regexp.MustCompile(`(?i)(^|[^a-z])(mean|avg|average|mittel(wert)?)($|[^a-z])`)}}
	counterWords = regexp.MustCompile(`(?i)^(#|no\.?|nr\.?|n|id|idx|index|rec(ord)?( ?(no|nr)\.?)?|count(er)?|sample( ?(no|nr)\.?)?|scan|row|line|zeile|seq)$`)
	timeWords    = regexp.MustCompile(`(?i)^(t|time|zeit|zeitstempel|uhrzeit|temps|heure|horodatage|tiempo|hora|tempo|ora|tid|tijd|czas|čas|aika|date|datum|fecha|clock|timestamp|stamp|elapsed|epoch|unix)($|[^a-z])|time($|[^a-z])|date`)
	spanText     = regexp.MustCompile(`(?i)(4|0)\s*(?:-|–|\.\.\.?|to|bis)\s*(20|10)\s*(mA|V)\s*(?:=|->|→|:|is|for|für)+\s*([-+]?[\d.,]+)\s*(?:-|–|\.\.\.?|to|bis)\s*([-+]?[\d.,]+)\s*([^\s;,\])]+)`)
)

func kindOf(name string) Kind {
	for _, w := range statWords {
		if w.is.MatchString(name) {
			return w.kind
		}
	}
	return ""
}

// scalingIn finds a text such as "4-20 mA = 0-400 bar".
func scalingIn(text string) (*Scaling, string, bool) {
	m := spanText.FindStringSubmatch(text)
	if m == nil {
		return nil, "", false
	}
	num := func(s string) float64 {
		x, _ := strconv.ParseFloat(strings.Replace(s, ",", ".", 1), 64)
		return x
	}
	s := &Scaling{Signal: "mA", From: [2]float64{num(m[1]), num(m[2])}, To: [2]float64{num(m[4]), num(m[5])}}
	if strings.EqualFold(m[3], "V") {
		s.Signal = "V"
	}
	if s.From[0] >= s.From[1] || s.To[0] == s.To[1] || (s.Signal == "V") != (s.From[1] == 10) {
		return nil, "", false
	}
	_, ok := unitOf(m[6])
	return s, m[6], ok
}
