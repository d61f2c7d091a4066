package thermal

import (
	"math"
	"math/rand"
	"testing"
)

// plain is a body of one capacity with a constant load that goes on all week.
func plain(t *testing.T, b Body, heat float64, c Cooler, air Air) *Plant {
	t.Helper()
	p := &Plant{Body: b, Cooler: c, Air: air, Loads: []Load{{Name: "all", At: []Point{{Theta: 300, Heat: heat}}}}, Spans: []Span{{0, Week, 0}}}
	if err := p.Prepare(); err != nil {
		t.Fatal(err)
	}
	return p
}

// tank200 is a tank of 200 L with the steel around it worth a quarter of the oil: ρc 1.65 MJ/(m³·K), 1.7 m² of wall without
// base, 12 W/(m²·K).
func tank200() Body {
	return Body{Oil: 0.2 * 1.65e6 * 1.25, Walls: OrdinaryAir * 1.7, RhoC: 1.65e6}
}

// A trade article on tanks prints 1.7 m² and, at 12 W/(m²·K) and 50 K, about 1 kW for this tank; the time constants are C/(UA + K).
func TestTimeConstants(t *testing.T) {
	b := tank200()
	if a := TankArea(0.2); math.Abs(a-1.7) > 0.02 {
		t.Errorf("a cube of 200 L has %.3f m² of wall, want 1.7", a)
	}
	if p := b.Walls * 50; math.Abs(p-1020) > 0.5 {
		t.Errorf("its walls give off %.1f W at 50 K, want 1020 W", p)
	}
	if h := b.TimeConstant(0) / 3600; math.Abs(h-5.6) > 0.05 {
		t.Errorf("uncooled it follows in %.2f h, want about 5.6 h", h)
	}
	if m := b.TimeConstant(200) / 60; math.Abs(m-31) > 0.5 {
		t.Errorf("with 200 W/K it follows in %.1f min, want about 31 min", m)
	}
	// The march itself: 63.2 % of the rise after one time constant, with and without a cooler in a loop of plenty of oil.
	for _, rate := range []float64{0, 200} {
		c := Cooler{}
		if rate > 0 {
			c = Cooler{Place: OffLine, LoopFlow: 1e3, Rate: rate}
		}
		p := plain(t, b, 2000, c, Air{Mean: 298})
		tau := b.TimeConstant(rate)
		run, err := p.March(0, tau, State{298, 298}, nil)
		if err != nil {
			t.Fatal(err)
		}
		want := 298 + 2000/(b.Walls+rate)*(1-math.Exp(-1))
		if got := run.End.Oil; math.Abs(got-want) > 1e-3 {
			t.Errorf("after one time constant the oil is at %.4f K, want %.4f K", got, want)
		}
	}
}

// Heat transfer of tank walls as books print it: 0.001 hp/(ft²·°F) and 29.17 ft² for 10 gpm, 1500 psi, 25 % loss, 75 °F
// (a textbook on fluid power, section 14.5), and 10,180 Btu/h from 100 ft² at 40 °F (14.7); 2 Btu/(h·ft²·°F) is in the trade's
// list of formulas. They lie within a third of OrdinaryAir.
func TestWallCoefficients(t *testing.T) {
	const hp, foot, btu = 745.6999, 0.3048, 1055.056
	book := 0.001 * hp / (foot * foot) * 1.8
	if math.Abs(book-14.45) > 0.01 {
		t.Errorf("0.001 hp/(ft² F) is %.3f W/(m²·K), want 14.45", book)
	}
	lost := 10 * 231 * math.Pow(0.0254, 3) / 60 * 1500 * 6894.757 * 0.25
	if area := lost / (book * 75 / 1.8) / (foot * foot); math.Abs(area-29.17) > 0.02 {
		t.Errorf("the tank needs %.2f ft², want 29.17", area)
	}
	if q := book * 100 * foot * foot * 40 / 1.8 * 3600 / btu; math.Abs(q-10180) > 10 {
		t.Errorf("100 ft² give off %.0f Btu/h, want 10180", q)
	}
	lexicon := 2 * btu / 3600 / (foot * foot) * 1.8
	if math.Abs(lexicon-11.36) > 0.01 {
		t.Errorf("2 Btu/(h ft² F) is %.3f W/(m²·K), want 11.36", lexicon)
	}
	for _, h := range []float64{book, lexicon} {
		if math.Abs(OrdinaryAir/h-1) > 1.0/3 {
			t.Errorf("%.1f W/(m²·K) of a book is far from %g", h, OrdinaryAir)
		}
	}
}

// randomPlant draws a plant that a machine might be: tanks of 20 L to 3 m³, with viscosity in its heat, any cooler in any place.
func randomPlant(r *rand.Rand) *Plant {
	between := func(a, b float64) float64 { return a * math.Pow(b/a, r.Float64()) }
	volume := between(0.02, 3)
	p := &Plant{Body: Body{Oil: volume * 1.7e6 * (1 + r.Float64()), Walls: between(3, 24) * TankArea(volume), RhoC: 1.7e6},
		Air: Air{Mean: 273 + 40*r.Float64(), Swing: 10 * r.Float64(), Warmest: 54000}}
	if r.Intn(2) == 0 {
		p.Body.Steel, p.Body.Coupling, p.Body.SteelWalls = between(0.2, 3)*p.Body.Oil, between(20, 800), between(1, 30)
	}
	heat := between(200, 30000)
	for i := range 1 + r.Intn(3) {
		l := Load{Name: string(rune('a' + i))}
		for _, theta := range []float64{263, 283, 303, 323, 343, 363} {
			pt := Point{Theta: theta, Heat: heat * (0.7 + 3*math.Exp(-(theta-263)/18) + 0.004*(theta-263)), Drawn: 2 * heat}
			for k := range pt.Lines {
				if q := between(1e-6, 2e-3); r.Intn(4) > 0 && Place(k) != OffLine {
					pt.Lines[k] = Line{{0.5, q, 0.3 * heat}, {0.3, q / 5, 0.2 * heat}}
				}
			}
			l.At = append(l.At, pt)
		}
		p.Loads = append(p.Loads, l)
	}
	for d, from := 0, 0.0; d < 7; d++ {
		from = float64(d)*Day + 3e4*r.Float64()
		p.Spans = append(p.Spans, Span{from, from + 1e3 + 4e4*r.Float64(), r.Intn(len(p.Loads))})
	}
	c := &p.Cooler
	c.Place, c.Fan, c.Switched = Place(r.Intn(int(places))), between(50, 2000), r.Intn(2) == 0
	switch r.Intn(4) {
	case 0: // none
	case 1:
		c.Points = []RatePoint{{2e-4, between(50, 200)}, {5e-4, between(200, 400)}, {1e-3, between(400, 800)}}
	default:
		c.Rate = between(20, 1000)
	}
	if r.Intn(2) == 0 {
		c.Opens, c.Full = 313, 318
	}
	if r.Intn(3) == 0 {
		c.Water = 290
	}
	if c.Place == OffLine {
		c.LoopFlow, c.LoopPower = between(1e-4, 1e-3), 300
	}
	return p
}

// The balance of heat closes over any run, with what is stored taken from the temperatures.
func TestHeatCloses(t *testing.T) {
	r := rand.New(rand.NewSource(1))
	for i := range 200 {
		p := randomPlant(r)
		if err := p.Prepare(); err != nil {
			t.Fatal(err)
		}
		from := Week * r.Float64()
		c, err := p.March(from, from+2*Week*r.Float64(), State{270 + 60*r.Float64(), 270 + 60*r.Float64()}, nil)
		if err != nil {
			t.Fatalf("plant %d: %v", i, err)
		}
		if gap := c.Gap(); gap > 1e-6 {
			t.Errorf("plant %d: the heat misses by %.2g of what passed", i, gap)
		}
		if n := len(c.Oil) - 1; math.Abs(c.Stored-p.Body.Oil*(c.Oil[n]-c.Oil[0])-p.Body.Steel*(c.Steel[n]-c.Steel[0])) > 1e-9*(math.Abs(c.Heat)+math.Abs(c.Walls)) {
			t.Errorf("plant %d: what is stored is not that of the temperatures", i)
		}
	}
}

// slow follows a plant by the classical Runge-Kutta method in steps of a few seconds, written apart from March.
func slow(p *Plant, from, to float64, s State) State {
	type slope struct{ oil, steel float64 }
	f := func(t float64, s State) slope {
		load := -1
		for _, x := range p.Spans {
			if w := math.Mod(t, Week); w >= x.From && w < x.To {
				load = x.Load
			}
		}
		b, air, in := p.Body, p.Air.At(t), 0.0
		if load >= 0 {
			c := p.curves[load]
			theta := math.Max(c.low, math.Min(c.high, s.Oil))
			cold := air
			if p.Cooler.Water > 0 {
				cold = p.Cooler.Water
			}
			in = c.heat.Predict(theta) - p.Cooler.Share(s.Oil)*(c.rate.Predict(theta)*(s.Oil-cold)+c.extra.Predict(theta))
			if p.Cooler.Place == OffLine {
				in += p.Cooler.LoopPower
			}
		}
		if b.Steel == 0 {
			return slope{(in - (b.Walls+b.SteelWalls)*(s.Oil-air)) / b.Oil, 0}
		}
		over := b.Coupling * (s.Oil - s.Steel)
		return slope{(in - b.Walls*(s.Oil-air) - over) / b.Oil, (over - b.SteelWalls*(s.Steel-air)) / b.Steel}
	}
	move := func(s State, k slope, h float64) State { return State{s.Oil + h*k.oil, s.Steel + h*k.steel} }
	for t := from; t < to-1e-6; {
		h := math.Min(4, to-t)
		for _, x := range p.Spans { // no step goes over a change of load
			for _, edge := range []float64{x.From, x.To} {
				if edge > t+1e-9 && edge < t+h {
					h = edge - t
				}
			}
		}
		k1 := f(t, s)
		k2 := f(t+h/2, move(s, k1, h/2))
		k3 := f(t+h/2, move(s, k2, h/2))
		k4 := f(t+h*(1-1e-12), move(s, k3, h))
		s = move(s, slope{(k1.oil + 2*k2.oil + 2*k3.oil + k4.oil) / 6, (k1.steel + 2*k2.steel + 2*k3.steel + k4.steel) / 6}, h)
		t += h
	}
	return s
}

// The march ends where a slow integration by another method ends, on plants with kinks of thermostats and changes of load.
func TestMarchAgainstSmallSteps(t *testing.T) {
	r := rand.New(rand.NewSource(2))
	for i := range 30 {
		p := randomPlant(r)
		if err := p.Prepare(); err != nil {
			t.Fatal(err)
		}
		start := State{285 + 30*r.Float64(), 285}
		if p.Body.Steel == 0 {
			start.Steel = start.Oil
		}
		c, err := p.March(0, Day, start, nil)
		if err != nil {
			t.Fatal(err)
		}
		want := slow(p, 0, Day, start)
		if math.Abs(c.End.Oil-want.Oil) > 0.01 || p.Body.Steel > 0 && math.Abs(c.End.Steel-want.Steel) > 0.01 {
			t.Errorf("plant %d ends at %.4f and %.4f K, small steps at %.4f and %.4f K", i, c.End.Oil, c.End.Steel, want.Oil, want.Steel)
		}
	}
}

// The week that repeats itself ends as it began, and on a plant that never stops it is the steady temperature.
func TestPeriodic(t *testing.T) {
	r := rand.New(rand.NewSource(3))
	for i := range 40 {
		p := randomPlant(r)
		if err := p.Prepare(); err != nil {
			t.Fatal(err)
		}
		c, err := p.Periodic()
		if err != nil {
			t.Fatalf("plant %d: %v", i, err)
		}
		if d := math.Abs(c.End.Oil - c.Oil[0]); d > sameMonday {
			t.Errorf("plant %d: the week ends %.2g K from where it began", i, d)
		}
	}
	p := plain(t, tank200(), 1500, Cooler{Place: OffLine, LoopFlow: 5e-4, Rate: 100, RateFlow: 5e-4}, Air{Mean: 300})
	c, err := p.Periodic()
	if err != nil {
		t.Fatal(err)
	}
	want := 300 + 1500/(100+tank200().Walls)
	if math.Abs(c.End.Oil-want) > 1e-3 || math.Abs(p.Steady(0, 300)-want) > 1e-6 {
		t.Errorf("periodic %.4f K, steady %.4f K, want %.4f K", c.End.Oil, p.Steady(0, 300), want)
	}
}

func BenchmarkWeek(b *testing.B) {
	p := randomPlant(rand.New(rand.NewSource(5)))
	p.Cooler = Cooler{Place: OffLine, LoopFlow: 5e-4, Rate: 300, Opens: 313, Full: 318}
	if err := p.Prepare(); err != nil {
		b.Fatal(err)
	}
	for b.Loop() {
		if _, err := p.Periodic(); err != nil {
			b.Fatal(err)
		}
	}
}
