package units

import (
	"math"
	"math/rand"
	"strings"
	"testing"
)

func near(got, want, rel float64) bool {
	return math.Abs(got-want) <= rel*math.Max(math.Abs(want), 1e-300)
}

// Exact definitions are from memory of ISO 80000 and NIST SP 811 unless another source is given.
func TestConversions(t *testing.T) {
	for _, c := range []struct {
		text   string
		dim    Dim
		want   float64
		rel    float64
		source string
	}{
		{"1 psi", Pressure, 6894.757, 1e-7, "printed table of conversions, 7 digits"},
		{"1 gpm", Flow, 6.30902e-5, 1e-6, "printed table, 6 digits"},
		{"1 in3", Volume, 16.387064e-6, 1e-12, "exact"},
		{"1 hp", Power, 745.70, 1e-6, "printed table, 5 digits; 745.69987"},
		{"1 lbf in", Torque, 0.112985, 2e-6, "printed table, 6 digits"},
		{"1 lbf ft", Torque, 1.3558179483314004, 1e-12, "exact"},
		{"1 PS", Power, 735.49875, 1e-12, "75 kp m/s, exact"},
		{"1 kp/cm2", Pressure, 98066.5, 1e-12, "exact"},
		{"1 at", Pressure, 98066.5, 1e-12, "exact"},
		{"1 mbar", Pressure, 100, 1e-12, "exact"},
		{"25 MPa", Pressure, 2.5e7, 1e-12, "exact"},
		{"60 L/min", Flow, 1e-3, 1e-12, "exact"},
		{"60 l/min", Flow, 1e-3, 1e-12, "exact"},
		{"3.6 m3/h", Flow, 1e-3, 1e-12, "exact"},
		{"1 cis", Flow, 16.387064e-6, 1e-12, "exact"},
		{"45 cm3/rev", DisplacementPerRev, 45e-6 / (2 * math.Pi), 1e-12, "D = V/2π"},
		{"45 cc/rev", DisplacementPerRev, 45e-6 / (2 * math.Pi), 1e-12, "D = V/2π"},
		{"1 in3/rev", DisplacementPerRev, 16.387064e-6 / (2 * math.Pi), 1e-12, "D = V/2π"},
		{"1480 rpm", AngularSpeed, 154.985, 2e-6, "1480·2π/60"},
		{"1480 1/min", AngularSpeed, 154.985, 2e-6, "1480·2π/60"},
		{"1480/min", AngularSpeed, 154.985, 2e-6, "1480·2π/60"},
		{"2 rev/s", AngularSpeed, 4 * math.Pi, 1e-12, "exact"},
		{"1 Btu/h", Power, 0.2931, 2e-4, "trade table, 4 digits"},
		{"1 kcal/h", Power, 1.163, 1e-9, "exact for the international table calorie"},
		{"50 C", Temperature, 323.15, 1e-12, "exact"},
		{"120 F", Temperature, (120-32)/1.8 + 273.15, 1e-12, "exact"},
		{"−40 °F", Temperature, 233.15, 1e-12, "-40 F is -40 C"},
		{"9 F", TemperatureDifference, 5, 1e-12, "9 F of difference are 5 K"},
		{"46 cSt", KinematicViscosity, 46e-6, 1e-12, "exact"},
		{"40 mPa·s", DynamicViscosity, 0.040, 1e-12, "exact"},
		{"40 cP", DynamicViscosity, 0.040, 1e-12, "exact"},
		{"1 lb/ft3", Density, 16.01846337, 1e-9, "exact definitions of lb and ft"},
		{"0.43 Btu/(lb F)", SpecificHeat, 1800.324, 1e-9, "1 Btu/(lb F) = 4186.8 J/(kg K), exact"},
		{"10 bar per 100 L/min", FlowResistance, 1e6 / (0.1 / 60), 1e-12, "arithmetic"},
		{"0.1 bar/(L/min)", FlowResistance, 1e6 / (0.1 / 60), 1e-12, "arithmetic"},
		{"0.02 L/min per 100 bar", FlowConductance, 0.02e-3 / 60 / 1e7, 1e-12, "arithmetic"},
		{"1500 N s/m", ViscousFriction, 1500, 1e-12, "exact"},
		{"1.5 kN/(m/s)", ViscousFriction, 1500, 1e-12, "exact"},
		{"2 N m/(rad/s)", RotaryFriction, 2, 1e-12, "exact"},
		{"0.8 kW/K", HeatCapacityRate, 800, 1e-12, "exact"},
		{"0.36 EUR/kWh", EnergyPrice, 1e-7, 1e-12, "arithmetic"},
		{"90 CHF per MWh", EnergyPrice, 2.5e-8, 1e-12, "arithmetic"},
		{"12000 EUR", Money, 12000, 0, "exact"},
		{"0.36 kg/kWh", CO2Factor, 1e-7, 1e-12, "arithmetic"},
		{"2.7 kg/L", Density, 2700, 1e-12, "exact"},
		{"97 %", Ratio, 0.97, 1e-12, "exact"},
		{"1.5e-8", Ratio, 1.5e-8, 0, "exact"},
		{"3", Count, 3, 0, "exact"},
		{"12 W/(m² K)", HeatTransfer, 12, 0, "exact"},
		{"2 Btu/(h ft2 F)", HeatTransfer, 11.36, 5e-4, "textbook: 11.36 W/m2K, 4 digits"},
		{"0.05 mm", Length, 5e-5, 1e-12, "exact"},
		{"5 µm", Length, 5e-6, 1e-12, "exact"},
		{"45 °", Angle, math.Pi / 4, 1e-12, "exact"},
	} {
		got, _, err := Parse(c.text, c.dim)
		if err != nil || !near(got, c.want, c.rel+1e-15) {
			t.Errorf("%s (%s) = %v, %v; want %v (%s)", c.text, c.dim, got, err, c.want, c.source)
		}
	}
}

func TestRefusals(t *testing.T) {
	for _, c := range []struct {
		text string
		dim  Dim
		part string // of the message
	}{
		{"160 bsr", Pressure, `unit "bsr" is not a unit of pressure; use bar, Pa, kPa, MPa or psi`},
		{"160", Pressure, "has no unit"},
		{"0", Pressure, "has no unit"},
		{"1,5 bar", Pressure, "decimal point"},
		{"1,234.5 bar", Pressure, "decimal point"},
		{"bar", Pressure, "does not start with a number"},
		{"", Flow, "does not start with a number"},
		{"NaN bar", Pressure, "does not start with a number"},
		{"Inf bar", Pressure, "does not start with a number"},
		{"1e999 bar", Pressure, "out of range"},
		{"1e308 bar", Pressure, "out of range"},
		{"5 L/min", Pressure, "not a unit of pressure"},
		{"5 N m", Energy, "not a unit of energy"},
		{"-300 C", Temperature, "absolute zero"},
		{"3 x", Count, "no unit"},
		{"5 bar", Ratio, "% or no unit"},
		{"5 mw", Power, "not a unit of power"},
		{"12 euro", Money, "three capital letters"},
		{"1 EUR/L", EnergyPrice, "unit of energy"},
		{"1 bar per 0 L/min", FlowResistance, "not a unit of flow resistance"},
		{"1 bar per -5 L/min", FlowResistance, "not a unit of flow resistance"},
		{"1.2.3 bar", Pressure, "not a unit"},
		{"12 000 bar", Pressure, "not a unit"},
		{"5 bar", Dim(99), "unknown quantity"},
	} {
		_, _, err := Parse(c.text, c.dim)
		if err == nil || !strings.Contains(err.Error(), c.part) {
			t.Errorf("Parse(%q, %s): error %v, want it to say %q", c.text, c.dim, err, c.part)
		}
	}
}

func TestParseLoose(t *testing.T) {
	bar := Preferred(Pressure, Metric)
	for _, c := range []struct {
		text string
		want float64 // bar; NaN: refused
	}{
		{"1,5", 1.5}, {"1.5", 1.5}, {"1,234", 1.234}, {"1.234", 1.234}, {"1.234,5", 1234.5}, {"1,234.5", 1234.5},
		{"1,234,567", 1234567}, {"12 000", 12000}, {"12\u202f000,5 bar", 12000.5}, {"12'000.5 bar", 12000.5},
		{"2300 psi", 2300 * PSI / Bar}, {"2300 PSI", 2300 * PSI / Bar}, {"16 MPA", 160}, {"1,5E+02", 150},
		{"\u22123 BAR", -3}, {"1,234.5e1", 12345}, {"1.5e\u22128 bar", 1.5e-8}, {"+4", 4}, {",5", 0.5},
		{"1.2.3", math.NaN()}, {"1,23,456", math.NaN()}, {"1..5", math.NaN()}, {"", math.NaN()}, {"bar", math.NaN()}, {"5 L/min", math.NaN()},
		{"1.2,3.4", math.NaN()}, {"1e400", math.NaN()},
	} {
		got, u, err := ParseLoose(c.text, Pressure, bar)
		if math.IsNaN(c.want) {
			if err == nil {
				t.Errorf("%q gave %v %s, want an error", c.text, got, u.Symbol)
			}
			continue
		}
		if err != nil || !near(got, c.want*Bar, 1e-12) {
			t.Errorf("%q = %v Pa, %v; want %v bar", c.text, got, err, c.want)
		}
	}
	if _, _, err := ParseLoose("5", Pressure, Unit{}); err == nil {
		t.Error("a bare number without a fallback unit must be refused")
	}
	if _, ok := Find("mw", Power); ok {
		t.Error(`"mw" may be mW or MW and must not be guessed`)
	}
}

func TestFind(t *testing.T) {
	for _, c := range []struct {
		text string
		dim  Dim
		want string
	}{
		{"[bar]", Pressure, "bar"}, {"(L/min)", Flow, "L/min"}, {"[l/MIN]", Flow, "L/min"}, {"bar(g)", Pressure, "bar"},
		{"°C", Temperature, "C"}, {"Nm", Torque, "N m"}, {"cm³", Volume, "cm3"}, {"MW", Power, "MW"}, {"BAR/(l/min)", FlowResistance, "bar/(L/min)"},
	} {
		if u, ok := Find(c.text, c.dim); !ok || u.Symbol != c.want {
			t.Errorf("Find(%q, %s) = %q, %v; want %q", c.text, c.dim, u.Symbol, ok, c.want)
		}
	}
	if u, ok := Find("bar", Flow); ok {
		t.Errorf("bar is no unit of flow, got %q", u.Symbol)
	}
}

// Every unit of every quantity must read back what FileText writes, and what Format shows.
func TestRoundTrip(t *testing.T) {
	rnd := rand.New(rand.NewSource(1))
	for d := Dim(0); d < dimCount; d++ {
		list := Units(d)
		for s := Metric; s <= SI; s++ {
			u := Preferred(d, s)
			if u.Dim != d || u.Factor <= 0 || u.Symbol != quantities[d].preferred[s] {
				t.Errorf("no preferred unit of %s in system %d: %+v", d, s, u)
			}
			list = append(list, u)
		}
		for _, u := range list {
			if back, ok := Find(u.Label(), d); !ok || back.Factor != u.Factor {
				t.Errorf("label %q of %s is not read back", u.Label(), d)
			}
			for range 200 {
				checkRoundTrip(t, u, math.Exp(rnd.NormFloat64()*8)*float64(1-2*rnd.Intn(2)))
			}
		}
	}
}

func checkRoundTrip(t *testing.T, u Unit, si float64) {
	t.Helper()
	if u.Dim == Temperature {
		si = 1 + math.Mod(math.Abs(si), 1000) // six digits of Fahrenheit may round below absolute zero
	}
	text := FileText(si, u)
	got, back, err := Parse(text, u.Dim)
	// Near 0 C the offset 273.15 costs absolute, not relative, accuracy.
	if err != nil || math.Abs(got-si) > 2.3e-16*(math.Abs(si)+math.Abs(u.Offset)) || back.Symbol != u.Symbol {
		t.Errorf("%v -> %q -> %v %q, %v", si, text, got, back.Symbol, err)
	}
	if again := FileText(got, back); again != text && u.Offset == 0 {
		t.Errorf("%q becomes %q on the second writing", text, again)
	}
	for _, r := range text {
		if r > 126 {
			t.Errorf("%q is not ASCII", text)
		}
	}
	shown := Format(si, u, 6)
	loose, _, err := ParseLoose(shown, u.Dim, Unit{})
	if err != nil || math.Abs(loose-si) > 5.1e-6*(math.Abs(si)+math.Abs(u.Offset)) {
		t.Errorf("%v shown as %q reads as %v, %v", si, shown, loose, err)
	}
}

// What a person typed must come back as typed, not as 160.00000000000003.
func TestFileTextKeepsShortDecimals(t *testing.T) {
	rnd := rand.New(rand.NewSource(2))
	for d := Dim(0); d < dimCount; d++ {
		for _, u := range Units(d) {
			for range 50 {
				x := float64(1+rnd.Intn(99999)) / math.Pow10(rnd.Intn(4))
				want := strings.TrimSpace(FileText(x, Unit{Factor: 1}) + " " + u.Symbol)
				si, _, err := Parse(want, d)
				if got := FileText(si, u); err != nil || got != want {
					t.Errorf("typed %q, written %q (%v)", want, got, err)
				}
			}
		}
	}
}

func TestNumber(t *testing.T) {
	for _, c := range []struct {
		x      float64
		digits int
		want   string
	}{
		{163.4, 3, "163"}, {163.4, 2, "160"}, {160, 4, "160.0"}, {9999.6, 5, "9999.6"}, {9999.6, 4, "10\u202f000"}, {12345, 5, "12\u202f345"},
		{1234567, 3, "1\u202f230\u202f000"}, {-0.5, 2, "−0.50"}, {0, 3, "0"}, {math.Copysign(0, -1), 3, "0"}, {0.00123456, 3, "0.00123"},
		{1.5e-8, 2, "1.5e−8"}, {2.5e12, 2, "2.5e12"}, {math.NaN(), 3, "n/a"}, {math.Inf(1), 3, "n/a"}, {4321, 4, "4321"}, {1.25, 0, "1"},
		{99.96, 3, "100"}, {12345.678, 7, "12\u202f345.68"}, {-16000, 3, "−16\u202f000"},
	} {
		if got := Number(c.x, c.digits); got != c.want {
			t.Errorf("Number(%v, %d) = %q, want %q", c.x, c.digits, got, c.want)
		}
	}
	if got := Format(1.634e7, Preferred(Pressure, Metric), 3); got != "163\u202fbar" {
		t.Errorf("got %q", got)
	}
	if got := Format(0.97, Percent, 2); got != "97\u202f%" {
		t.Errorf("got %q", got)
	}
}

// A range that rounds to one number is not printed as a range.
func TestRanges(t *testing.T) {
	for _, x := range []struct{ got, want string }{
		{Range("3.8", "6.2"), "3.8 to 6.2"},
		{Range("1.0", "1.0"), "1.0"},
		{Around("4.7", " years", "3.8", "6.2"), "4.7 years (3.8 to 6.2)"},
		{Around("1.0", " years", "1.0", "1.1"), "1.0 years (1.0 to 1.1)"},
		{Around("1.0", " years", "1.0", "1.0"), "1.0 years"},
		{Around("2.0", "", "1.0", "1.0"), "2.0 (1.0)"},
	} {
		if x.got != x.want {
			t.Errorf("%q, want %q", x.got, x.want)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"160 bar", "45 cm³/rev", "10 bar per 100 L/min", "0.18 EUR/kWh", "1,5", "−5 °C", "1e999", " per ", "1/", "((", "1 N/(/)"} {
		f.Add(s, 2)
	}
	f.Fuzz(func(t *testing.T, s string, d int) {
		dim := Dim(d)
		if si, u, err := Parse(s, dim); err == nil {
			if math.IsNaN(si) || math.IsInf(si, 0) {
				t.Errorf("%q gave %v", s, si)
			}
			if back, _, err := Parse(FileText(si, u), dim); err != nil || math.Abs(back-si) > 1e-15*(math.Abs(si)+math.Abs(u.Offset)) {
				t.Errorf("%q -> %q -> %v, %v", s, FileText(si, u), back, err)
			}
		}
		if si, _, err := ParseLoose(s, dim, Preferred(dim, Metric)); err == nil && (math.IsNaN(si) || math.IsInf(si, 0)) {
			t.Errorf("loose %q gave %v", s, si)
		}
		Find(s, dim)
	})
}
