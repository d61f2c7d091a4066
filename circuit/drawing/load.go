package drawing

import (
	_ "embed"
	"encoding/json"
	"fmt"
	"strconv"
	"strings"
	"sync"
)

//go:embed symbols.json
var symbolsFile []byte

type symbolData struct {
	Name, Title         string
	Level               int
	Own, Upright, Above bool
	Ports, Draw         []string
}

type libraryData struct {
	Pieces  map[string][]string
	Aliases map[string]string
	Symbols []symbolData
}

type library struct {
	names  []string
	byName map[string]Symbol
}

// loaded reads the embedded file once. A fault in it is caught by the tests
// of this package; symbols before the fault stay usable.
var loaded = sync.OnceValues(func() (library, error) { return readLibrary(symbolsFile) })

func readLibrary(raw []byte) (library, error) {
	lib := library{byName: map[string]Symbol{}}
	var data libraryData
	if err := json.Unmarshal(raw, &data); err != nil {
		return lib, fmt.Errorf("symbols: %w", err)
	}
	for _, d := range data.Symbols {
		s, err := d.symbol(data.Pieces)
		if err != nil {
			return lib, fmt.Errorf("symbol %q: %w", d.Name, err)
		}
		if _, twice := lib.byName[d.Name]; twice {
			return lib, fmt.Errorf("symbol %q is given twice", d.Name)
		}
		lib.byName[d.Name] = s
		lib.names = append(lib.names, d.Name)
	}
	for alias, name := range data.Aliases {
		s, ok := lib.byName[name]
		if !ok {
			return lib, fmt.Errorf("alias %q: no symbol %q", alias, name)
		}
		lib.byName[alias] = s
	}
	return lib, nil
}

// Lookup finds a symbol by name or second name.
func Lookup(name string) (Symbol, bool) {
	lib, _ := loaded()
	s, ok := lib.byName[name]
	return s.clone(), ok
}

// Names lists all symbols, related ones together; second names are left out.
func Names() []string {
	lib, _ := loaded()
	return append([]string(nil), lib.names...)
}

func (d symbolData) symbol(pieces map[string][]string) (Symbol, error) {
	s := Symbol{Name: d.Name, Title: d.Title, Level: d.Level, Own: d.Own, Upright: d.Upright, above: d.Above}
	pen := stepReader{pieces: pieces}
	if err := pen.read(d.Draw, Pt{}, 0); err != nil {
		return s, err
	}
	s.Prims = pen.prims
	for _, text := range d.Ports {
		p, err := readPort(text)
		if err != nil {
			return s, err
		}
		p.Optional = s.hasPart("port:" + p.Name)
		s.Ports = append(s.Ports, p)
	}
	s.measure()
	return s, nil
}

func (s Symbol) hasPart(part string) bool {
	for _, p := range s.Prims {
		if p.Part == part {
			return true
		}
	}
	return false
}

var directions = map[string]Pt{"right": {1, 0}, "down": {0, 1}, "left": {-1, 0}, "up": {0, -1}}

var portTypes = map[string]PortType{"oil": Oil, "pilot": PilotLine, "drain": DrainLine, "shaft": Shaft, "electric": Electric, "rod": Rod}

// readPort reads "NAME x y direction type".
func readPort(text string) (Port, error) {
	f := strings.Fields(text)
	if len(f) != 5 {
		return Port{}, fmt.Errorf("port %q: want name, x, y, direction, type", text)
	}
	v, err := numbers(f[1:3])
	if err != nil {
		return Port{}, fmt.Errorf("port %q: %w", text, err)
	}
	dir, ok := directions[f[3]]
	if !ok {
		return Port{}, fmt.Errorf("port %q: no direction %q", text, f[3])
	}
	kind, ok := portTypes[f[4]]
	if !ok {
		return Port{}, fmt.Errorf("port %q: no port type %q", text, f[4])
	}
	return Port{Name: f[0], At: Pt{v[0], v[1]}, Dir: dir, Type: kind}, nil
}

func numbers(words []string) ([]float64, error) {
	v := make([]float64, len(words))
	for i, w := range words {
		x, err := strconv.ParseFloat(w, 64)
		if err != nil {
			return nil, fmt.Errorf("%q is not a number", w)
		}
		v[i] = x
	}
	return v, nil
}
