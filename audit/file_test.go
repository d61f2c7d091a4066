package audit

import (
	"bytes"
	"errors"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"barlitre/circuit"
	"barlitre/circuit/duty"
	"barlitre/machines/units"
)

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if math.IsNaN(got) || math.Abs(got-want) > tol*math.Max(1e-12, math.Abs(want)) {
		t.Errorf("%s: got %v, want %v", what, got, want)
	}
}

// full reads testdata/full.yaml, which uses all of the format.
func full(t *testing.T) *File {
	t.Helper()
	f, found := Read("testdata/full.yaml")
	if f == nil || len(found) > 0 {
		t.Fatal(found)
	}
	return f
}

func TestReadHead(t *testing.T) {
	f := full(t)
	want := Site{Name: "Werk Süd", Customer: "Käufer's plant", Author: "A. Tester", Date: "2024-05-01", Note: "invented", Currency: "EUR"}
	if f.Title != "Scrap-baling press, hall 3" || f.Site != want {
		t.Errorf("got %q, %+v", f.Title, f.Site)
	}
	near(t, "oil temperature", f.Oil.Temperature.SI, 323.15, 1e-12)
	near(t, "density", f.Oil.Density.SI, 870, 0)
	near(t, "viscosity index", f.Oil.VI.SI, 100, 0)
	if f.Oil.Density.Origin != circuit.DataSheet || f.Oil.Grade != "ISO VG 46" || f.Oil.HasViscosity || !f.Oil.HasVI {
		t.Errorf("oil: %+v", f.Oil)
	}
	near(t, "air", f.Air.SI, 303.15, 1e-12)
	near(t, "price", f.Price.SI, 0.18/3.6e6, 1e-12)
	near(t, "price low", f.Price.Low, 0.15/3.6e6, 1e-12) // bare: in the unit of the value
	near(t, "price high", f.Price.High, 0.22/3.6e6, 1e-12)
	near(t, "co2", f.CO2.SI, 0.35/3.6e6, 1e-12)
	if f.Price.Note != "marginal" || f.Price.Line != 13 || f.CO2Year != 2024 || f.CO2Basis != "location" || f.CreditReturned {
		t.Errorf("energy: %+v %d %q %v", f.Price, f.CO2Year, f.CO2Basis, f.CreditReturned)
	}
}

func TestReadDuties(t *testing.T) {
	f := full(t)
	if len(f.Axes) != 2 || f.Axes[0] != (duty.Axis{Name: "ram"}) || f.Axes[1] != (duty.Axis{Name: "drum", Kind: duty.Rotary}) {
		t.Errorf("axes: %+v", f.Axes)
	}
	d := f.Duties[0]
	near(t, "hours", d.Hours, 3000*3600, 0)
	near(t, "step", d.Step, 0.01, 1e-12)
	near(t, "cycle", d.Cycle(), 4, 1e-12)
	near(t, "speed", d.Track("ram", duty.Speed).Values[3], -0.1, 1e-12)
	near(t, "load", d.Track("ram", duty.Load).Values[2], 250e3, 1e-12)
	near(t, "turning", d.Track("drum", duty.Speed).Values[1], 10*2*math.Pi/60, 1e-12)
	near(t, "torque", d.Track("drum", duty.Load).Values[2], 1000, 1e-12) // a unit of its own beats that of the key
	if len(d.Phases) != 2 || d.Phases[1] != (duty.Phase{Name: "press", From: 2.1}) || !d.Repeats || f.Sources[0].File != "" {
		t.Errorf("duty: %+v", d)
	}
	d = f.Duties[1]
	near(t, "recorded speed", d.Track("ram", duty.Speed).Values[1], 0.15, 1e-12)
	near(t, "default step", d.Step, 0.002, 1e-12) // a thousandth of 2 s
	// sha256sum testdata/press.csv
	want := Source{File: "press.csv", SHA256: "04dc5b629336c88e937e2180e6a9d653f828a5bc11e91b89773771daeac8e930"}
	if d.Name != "Spätschicht" || d.Repeats || f.Sources[1] != want {
		t.Errorf("duty: %+v, %+v", d, f.Sources[1])
	}
}

func TestReadCircuits(t *testing.T) {
	f := full(t)
	a, p := f.Circuit("As found"), f.Circuit("Pump-controlled")
	if a.Role != AsFound || p.Role != Proposal || a.Note != "throttled, constant flow" || a.PumpAtRest != circuit.Keep || a.Cost.Given {
		t.Errorf("got %+v, %+v", a, p)
	}
	if c := p.Cost; !c.Given || c.Low.SI != 20000 || c.Likely.SI != 26000 || c.High.SI != 35000 || c.Note != "user quote" {
		t.Errorf("cost %+v", p.Cost)
	}
	r := a.Block("RV1")
	v := r.Values["override"]
	near(t, "override", v.SI, 10e5/(0.1/60), 1e-12)
	near(t, "override low", v.Low, 5e5/(0.1/60), 1e-12)
	if v.Origin != circuit.Assumed || v.Text != "10 bar per 100 L/min" || r.At == nil || *r.At != [2]float64{12, 30} || r.Line != 58 {
		t.Errorf("RV1: %+v", r)
	}
	if !math.IsNaN(r.Values["crack"].Low) {
		t.Error("a range that nobody gave")
	}
	if w := a.Block("V1").Words; w["follows"].Text != "ram" || w["centre"] != (circuit.Word{Text: "closed", Line: 60}) {
		t.Errorf("V1: %+v", w)
	}
	near(t, "displacement", a.Block("P1").Values["displacement"].SI, 45e-6/(2*math.Pi), 1e-12)
	if tank := p.Block("T1"); tank.Turn != 2 || !tank.Mirror || tank.At[1] != 4.5 {
		t.Errorf("T1: %+v", tank)
	}
	if l := a.Lines[2]; l.Line != 68 || len(l.Ports) != 4 || l.Ports[3] != (circuit.PortRef{Block: "P1", Port: "S"}) {
		t.Errorf("line: %+v", l)
	}
}

// Bytes come back as they were, whatever the line ends, marks and blanks.
func TestUneditedBytes(t *testing.T) {
	text, err := os.ReadFile("testdata/full.yaml")
	if err != nil {
		t.Fatal(err)
	}
	open := Beside("testdata/full.yaml")
	for name, data := range map[string][]byte{
		"as it is":        text,
		"CRLF":            bytes.ReplaceAll(text, []byte("\n"), []byte("\r\n")),
		"byte order mark": append([]byte("\ufeff"), text...),
		"no end of line":  bytes.TrimRight(text, "\n"),
		"blank end":       append(bytes.Clone(text), "\n\n  \n# end"...),
	} {
		f, found := Parse(data, open, "")
		if len(found) > 0 || !bytes.Equal(f.Bytes(), data) {
			t.Errorf("%s: %v", name, found)
		}
	}
}

func TestSave(t *testing.T) {
	f := full(t)
	dir := t.TempDir()
	path := filepath.Join(dir, "press.yaml")
	link := filepath.Join(dir, "link.yaml")
	if err := os.WriteFile(path, []byte("old"), 0o600); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink(path, link); err != nil {
		t.Logf("no links here: %v", err)
		link = path
	}
	if err := f.Save(link); err != nil {
		t.Fatal(err)
	}
	got, err := os.ReadFile(path)
	if err != nil || !bytes.Equal(got, f.Bytes()) {
		t.Errorf("saved text differs (%v)", err)
	}
	info, _ := os.Stat(path)
	if entries, _ := os.ReadDir(dir); info.Mode().Perm() != 0o600 || len(entries) > 2 {
		t.Errorf("mode %v, folder %v", info.Mode(), entries)
	}
	if err := f.Save(filepath.Join(dir, "none", "press.yaml")); err == nil {
		t.Error("saved into a folder that is not there")
	}
}

func oilFile(t *testing.T, oil string) (*File, []circuit.Finding) {
	t.Helper()
	text, err := os.ReadFile("testdata/small.yaml")
	if err != nil {
		t.Fatal(err)
	}
	return Parse([]byte(strings.Replace(string(text), "{temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}", oil, 1)), nil, "")
}

// At 40 and 100 °C the viscosity is the one that is given, by definition of the
// grade and of the two points; density changes by 7e-4 a kelvin from 15 °C.
func TestConditions(t *testing.T) {
	at := func(celsius float64) float64 { return 1 + 7e-4*(celsius-15) }
	for _, c := range []struct {
		oil               string
		celsius, rho, eta float64
		tol               float64
	}{
		{"{temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}", 50, 870, 0.040, 0},
		{"{grade: VG 46, temperature: 40 C, density: 880 kg/m3}", 40, 880 / at(40), 46e-6 * 880 / at(40), 1e-9},
		{"{grade: 46, temperature: 50 C}", 40, 870 / at(40), 46e-6 * 870 / at(40), 1e-9},
		{"{viscosity_40: 50 mm2/s, viscosity_100: 8 mm2/s, temperature: 50 C}", 100, 870 / at(100), 8e-6 * 870 / at(100), 1e-9},
		// By ASTM D341 an oil of 46 and 6.8 mm²/s at 40 and 100 °C has 29.973 mm²/s at 50 °C (independent
		// calculation of the double logarithm).
		{"{grade: ISO VG 46, viscosity_100: 6.8 mm2/s, temperature: 50 C}", 50, 870 / at(50), 29.9730e-6 * 870 / at(50), 1e-4},
		// typed for 50 °C: scaled by the grade
		{"{grade: ISO VG 46, viscosity_100: 6.8 mm2/s, temperature: 50 C, density: 850 kg/m3, viscosity: 30 mPa s}", 40,
			850 * at(50) / at(40), 0.030 * 46e-6 / 29.9730e-6 * at(50) / at(40), 1e-4},
	} {
		f, found := oilFile(t, c.oil)
		if len(found) > 0 {
			t.Fatal(c.oil, found)
		}
		got, err := f.ConditionsAt(c.celsius + units.ZeroCelsius)
		if err != nil {
			t.Fatal(c.oil, err)
		}
		near(t, c.oil+" density", got.Density, c.rho, c.tol)
		near(t, c.oil+" viscosity", got.Viscosity, c.eta, c.tol)
	}
}

func TestOilFaults(t *testing.T) {
	for oil, want := range map[string]string{
		"{temperature: 50 C, viscosity: 40 mPa s}":                                       "density at the working temperature is missing",
		"{grade: ISO VG 46}":                                                             "temperature is missing",
		"{grade: goose fat, temperature: 50 C}":                                          `grade "goose fat" is not an ISO VG grade`,
		"{viscosity_40: 46 mm2/s, temperature: 50 C}":                                    "(viscosity_40) needs that at 100 °C or a viscosity index",
		"{viscosity_40: 8 mm2/s, viscosity_100: 46 mm2/s, temperature: 50 C}":            "must be above that at 100 C",
		"{grade: VG 46, viscosity_100: 7 mm2/s, viscosity_index: 99, temperature: 50 C}": "keep one",
		"{grade: VG 46, viscosity_index: 900, temperature: 50 C}":                        "viscosity index is 900, must be 0 to 400",
		"{grade: VG 46, temperature: 50 C, density: 0 kg/m3}":                            "oil, density: is 0 kg/m3, must be above 0",
	} {
		if _, found := oilFile(t, oil); len(found) != 1 || !strings.Contains(found[0].Text, want) {
			t.Errorf("%s: got %v, want %q", oil, found, want)
		}
	}
	f, _ := oilFile(t, "{temperature: 50 C, density: 870 kg/m3, viscosity: 40 mPa s}")
	if _, err := f.ConditionsAt(300); !errors.Is(err, ErrOneTemperature) {
		t.Errorf("got %v", err)
	}
}

func TestDefaultStep(t *testing.T) {
	for cycle, want := range map[float64]float64{0: 0, 100: 0.01, 12: 0.01, 8: 0.01, 6: 0.005, 2: 0.002, 1: 0.001, 0.3: 2e-4, 0.04: 5e-5} {
		near(t, "step", defaultStep(cycle), want, 1e-9)
	}
}
