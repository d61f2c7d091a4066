package thermal

import (
	"math"
	"testing"
)

// A cooler of a stated rate takes that rate times the entering difference at its flow; effectiveness by units of transfer
// at a capacity ratio of 0 is 1 − exp(−NTU) (Incropera, Fundamentals of Heat and Mass Transfer, table 11.4, from memory).
func TestCoolerRate(t *testing.T) {
	const rhoC = 1.65e6
	c := Cooler{Rate: 300, RateFlow: 6e-4}
	near := func(q, want float64) {
		t.Helper()
		if got, err := c.RateAt(q, rhoC); err != nil || math.Abs(got-want) > 1e-9*math.Max(1, want) {
			t.Errorf("at %g m³/s it takes %.6f W/K (%v), want %.6f", q, got, err, want)
		}
	}
	near(6e-4, 300)
	near(0, 0)
	w := rhoC * 6e-4
	ntu := -math.Log(1 - 300/w)
	near(3e-4, w/2*(1-math.Exp(-2*ntu)))
	near(6e-8, rhoC*6e-8) // all that so little oil carries
	c.Scale = 0.5
	near(6e-4, w*(1-math.Exp(-ntu/2)))
	if _, err := (&Cooler{Rate: 2000, RateFlow: 1e-4}).RateAt(1e-4, rhoC); err == nil {
		t.Error("2 kW/K from 6 L/min of oil was taken")
	}
	c = Cooler{Points: []RatePoint{{2e-4, 150}, {6e-4, 300}, {1e-3, 350}}}
	near(2e-4, 150)
	near(6e-4, 300)
	near(5, 350)
	for q := 0.0; q < 1e-3; q += 1e-5 {
		a, _ := c.RateAt(q, rhoC)
		if b, _ := c.RateAt(q+1e-5, rhoC); b < a {
			t.Errorf("between the points the rate falls at %g m³/s", q)
		}
	}
	for _, bad := range []Cooler{{Points: []RatePoint{{2e-4, 150}, {2e-4, 200}}}, {Points: []RatePoint{{2e-4, -1}}}} {
		if _, err := bad.RateAt(1e-4, rhoC); err == nil {
			t.Errorf("%+v was taken", bad.Points)
		}
	}
}

// The cooler that Need names, put into the plant, keeps the oil where it was asked to: in an off-line loop it is the heat
// over the difference of the entering temperatures, as the trade works it out.
func TestNeed(t *testing.T) {
	// A textbook on fluid power, example 11.5: 0.00126 m³/s, 70 bar, overall 85 %; half the flow over the relief valve in the
	// mean, line losses of a tenth of that: 6.41 kW.
	work := 0.00126 * 70e5
	heat := work/0.85*0.15 + work/2 + work/2*0.1
	if math.Abs(heat-6407.5) > 6.4 {
		t.Fatalf("the heat is %.1f W, want 6407.5", heat)
	}
	p := plain(t, tank200(), heat, Cooler{Place: OffLine, LoopFlow: 8e-4}, Air{Mean: 303})
	n, err := p.Need(0, 328, 303, false)
	if err != nil || math.Abs(n.Rate-heat/25) > 1e-3 || n.Heat != heat {
		t.Errorf("it needs %.3f W/K (%v), want %.3f", n.Rate, err, heat/25)
	}
	n, err = p.Need(0, 328, 303, true)
	if want := (heat - 25*tank200().Walls) / 25; err != nil || math.Abs(n.Rate-want) > 1e-3 {
		t.Errorf("with walls it needs %.3f W/K (%v), want %.3f", n.Rate, err, want)
	}
	p.Cooler.Rate, p.Cooler.RateFlow = n.Rate, n.Flow
	if err := p.Prepare(); err != nil {
		t.Fatal(err)
	}
	if got := p.Steady(0, 303); math.Abs(got-328) > 1e-3 {
		t.Errorf("with it the oil comes to %.4f K, want 328", got)
	}
	if _, err := p.Need(0, 300, 303, false); err == nil {
		t.Error("oil colder than the air was cooled")
	}
	p.Cooler.LoopFlow = 1e-5 // carries 16.5 W/K: never enough
	if n, _ := p.Need(0, 328, 303, false); !math.IsInf(n.Rate, 1) {
		t.Errorf("0.6 L/min carry %.1f W/K", n.Rate)
	}
}

// A cooler in a line that nothing flows in cools nothing; one in the line of the hot drain takes more than the same in the tank.
func TestPlaces(t *testing.T) {
	load := Load{Name: "stand-by", At: []Point{{Theta: 300, Heat: 1000, Lines: [places]Line{CaseDrain: {{1, 5e-5, 800}}}}}}
	for _, x := range []struct {
		place  Place
		colder func(free, cooled float64) bool
	}{
		{ReturnLine, func(free, cooled float64) bool { return math.Abs(free-cooled) < 1e-6 }},
		{CaseDrain, func(free, cooled float64) bool { return cooled < free-10 }},
	} {
		p := &Plant{Body: tank200(), Air: Air{Mean: 300}, Loads: []Load{load}, Cooler: Cooler{Place: x.place}}
		if err := p.Prepare(); err != nil {
			t.Fatal(err)
		}
		free := p.Steady(0, 300)
		p.Cooler.Rate = 100
		if err := p.Prepare(); err != nil {
			t.Fatal(err)
		}
		if cooled := p.Steady(0, 300); !x.colder(free, cooled) {
			t.Errorf("place %d: %.2f K without, %.2f K with cooler", x.place, free, cooled)
		}
	}
	// By hand: K = ρcq·(1 − exp(−100/ρcq)), and the drain oil is 800/ρcq warmer than the tank.
	w := 1.65e6 * 5e-5
	k := w * (1 - math.Exp(-100/w))
	want := 300 + (1000-k*800/w)/(k+tank200().Walls)
	p := &Plant{Body: tank200(), Air: Air{Mean: 300}, Loads: []Load{load}, Cooler: Cooler{Place: CaseDrain, Rate: 100}}
	if err := p.Prepare(); err != nil {
		t.Fatal(err)
	}
	if got := p.Steady(0, 300); math.Abs(got-want) > 1e-6 {
		t.Errorf("with its drain cooled the oil comes to %.4f K, want %.4f", got, want)
	}
}

// Shifts lie where the week has them, past midnight too, and never more than the whole week.
func TestShifts(t *testing.T) {
	hours := func(s []Span) (sum float64) {
		end := 0.0
		for _, x := range s {
			if x.From < end || x.To > Week {
				t.Errorf("%v do not follow each other", s)
			}
			end = x.To
			sum += x.To - x.From
		}
		return sum / 3600
	}
	for _, x := range []struct {
		s    Shifts
		want float64
		n    int
	}{
		{Shifts{6 * 3600, 16 * 3600, 5}, 80, 5},
		{Shifts{22 * 3600, 8 * 3600, 7}, 56, 8},
		{Shifts{0, Day, 7}, 168, 1},
		{Shifts{6 * 3600, Day, 7}, 168, 1},
		{Shifts{6 * 3600, Day, 5}, 120, 1},
		{Shifts{6 * 3600, 0, 5}, 0, 0},
	} {
		got := x.s.Spans(0)
		if math.Abs(hours(got)-x.want) > 1e-9 || len(got) != x.n {
			t.Errorf("%+v gives %v: %g h, want %g h in %d", x.s, got, hours(got), x.want, x.n)
		}
	}
}

// The periodic ripple of a pulse: power P for a tenth of the time; for a short cycle it is (P − mean)·time/C, the usual estimate.
func TestRipple(t *testing.T) {
	const c, tau = 4e5, 3000.0
	at, p := []float64{0, 6, 6, 60}, []float64{10e3, 10e3, 0, 0}
	low, high := Ripple(at, p, c, tau)
	if want := 9e3 * 6 / c; math.Abs(high-low-want) > 2e-3*want {
		t.Errorf("the ripple is %.5f K, want %.5f", high-low, want)
	}
	// A cycle far longer than the time constant: the oil follows the power all the way.
	at = []float64{0, 5e4, 5e4, 1e5}
	low, high = Ripple(at, p, c, tau)
	if want := 10e3 * tau / c; math.Abs(high-low-want) > 1e-4*want {
		t.Errorf("the ripple is %.3f K, want %.3f", high-low, want)
	}
}

// Loads that alternate put in the mean of their heat, and each line keeps what flows in it.
func TestMix(t *testing.T) {
	a := Load{At: []Point{{Theta: 300, Heat: 1000, Lines: [places]Line{{{1, 1e-3, 500}}}}, {Theta: 330, Heat: 800}}}
	b := Load{At: []Point{{Theta: 300, Heat: 200}, {Theta: 330, Heat: 100}}}
	m, err := Mix("both", []Load{a, b}, []float64{0.25, 0.75})
	if err != nil || m.At[0].Heat != 400 || m.At[1].Heat != 275 {
		t.Errorf("%+v, %v", m, err)
	}
	if q, h := m.At[0].Lines[ReturnLine].Mean(); q != 0.25e-3 || h != 125 {
		t.Errorf("the return line carries %g m³/s and %g W", q, h)
	}
	b.At = b.At[:1]
	if _, err := Mix("", []Load{a, b}, []float64{0.5, 0.5}); err == nil {
		t.Error("loads known at other temperatures were mixed")
	}
}
