package cycles

import (
	"context"
	"errors"
	"math"
	"math/rand"
	"testing"
)

// plant makes a recording of known cycles: a stroke out, a stand under pressure, a stroke
// back, a pause; every cycle has a length and a load of its own. Between blocks of cycles
// the machine stands, idles and is off.
type plant struct {
	in     Input
	starts []float64
	energy []float64
	spent  map[State]float64
	r      *rand.Rand
}

const step = 0.05

func (p *plant) row(v, pressure, power float64) {
	t := 0.0
	if n := len(p.in.T); n > 0 {
		t = p.in.T[n-1] + step
	}
	p.in.T = append(p.in.T, t)
	p.in.Motion[0] = append(p.in.Motion[0], v*(1+0.02*p.r.NormFloat64())) // a meter's noise
	p.in.Level[0] = append(p.in.Level[0], pressure*(1+0.02*p.r.NormFloat64()))
	p.in.Power = append(p.in.Power, power)
}

func (p *plant) stand(seconds float64, s State, pressure, power float64) {
	for range int(seconds / step) {
		p.row(0, pressure, power)
	}
	p.spent[s] += seconds
}

// cycle takes length s: 30 % out at 0.1 m/s, 20 % hold, 30 % back, 20 % pause under pressure.
func (p *plant) cycle(length, load float64) {
	n := int(math.Round(length / step))
	t := 0.0
	if k := len(p.in.T); k > 0 {
		t = p.in.T[k-1] + step
	}
	p.starts = append(p.starts, t)
	sum := 0.0
	for i := range n {
		u := float64(i) / float64(n)
		v, pr := 0.0, 100*load
		switch {
		case u < 0.3:
			v = 0.1 * math.Sin(math.Pi*u/0.3)
		case u >= 0.5 && u < 0.8:
			v, pr = -0.1*math.Sin(math.Pi*(u-0.5)/0.3), 40
		}
		w := math.Max(0, v) * pr * 1e3
		sum += w * step
		p.row(v, pr, w)
	}
	p.energy = append(p.energy, sum)
}

func newPlant(seed int64) *plant {
	return &plant{in: Input{Motion: make([][]float64, 1), Level: make([][]float64, 1)}, spent: map[State]float64{}, r: rand.New(rand.NewSource(seed))}
}

// Forty cycles of 12 s with a jitter of 5 %, in two blocks with idling and a shut down between
// them: the period, each start, the energies and the times of the states must come out.
func TestKnownCycles(t *testing.T) {
	p := newPlant(3)
	p.stand(60, Idle, 10, 0)
	lengths := 0.0
	for k := range 40 {
		if k == 20 {
			p.stand(300, Off, 0, 0)
			p.stand(120, Idle, 10, 0)
		}
		l := 12 * (1 + 0.05*(2*p.r.Float64()-1))
		load := 1 + 0.1*p.r.NormFloat64()
		if k == 31 {
			load = 2
		}
		p.cycle(l, load)
		lengths += math.Round(l/step) * step
	}
	p.stand(200, Hold, 120, 0)
	r, err := Find(p.in, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(r.Period/(lengths/40)-1) > 0.02 {
		t.Errorf("period %g s, made with %g s (height %g)", r.Period, lengths/40, r.Height)
	}
	if len(r.Cycles) < 38 || len(r.Cycles) > 41 {
		t.Fatalf("%d cycles, made 40", len(r.Cycles))
	}
	near := 0
	for k, s := range p.starts {
		for _, c := range r.Cycles {
			if math.Abs(c.From-s) < 0.6 {
				near++
				if math.Abs(c.Energy()-p.energy[k]) > 0.05*p.energy[k] {
					t.Errorf("cycle %d takes %g J, made with %g", k, c.Energy(), p.energy[k])
				}
				break
			}
		}
	}
	if near < 38 {
		t.Errorf("%d of 40 starts found within 0.6 s", near)
	}
	if c := r.Cycles[r.Extreme]; math.Abs(c.From-p.starts[31]) > 0.6 {
		t.Errorf("the extreme cycle starts at %g s, made at %g", c.From, p.starts[31])
	}
	if l := r.Cycles[r.Typical].Likeness; l < 0.999 {
		t.Errorf("typical: %g", l)
	}
	got := map[State]float64{}
	for _, s := range r.Shares {
		got[s.State] = s.Time
	}
	for s, want := range map[State]float64{Off: 300, Idle: 180} {
		if math.Abs(got[s]-want) > 0.02*want {
			t.Errorf("%s for %g s, made %g", s, got[s], want)
		}
	}
	if hold := 200 + 0.4*lengths; math.Abs(got[Hold]-hold) > 0.1*hold {
		t.Errorf("hold for %g s, made %g", got[Hold], hold)
	}
	if o := r.Overlay(p.in.Level[0], 50); len(o) != len(r.Cycles) || len(o[0]) != 50 {
		t.Error("overlay")
	}
}

// The typical cycle is one of the many, not of the few that differ; the spread is that of
// the energies that it was made with.
func TestTypicalAmongTwoKinds(t *testing.T) {
	p := newPlant(5)
	for k := range 30 {
		if k%10 == 9 {
			p.cycle(12, 1.6)
		} else {
			p.cycle(12, 1+0.01*float64(k%3))
		}
	}
	r, err := Find(p.in, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if e := r.Cycles[r.Typical].Energy(); math.Abs(e/p.energy[1]-1) > 0.05 {
		t.Errorf("typical %g J, most have %g", e, p.energy[1])
	}
	if math.Abs(r.Energy.Most/p.energy[9]-1) > 0.05 || math.Abs(r.Energy.Least/p.energy[0]-1) > 0.05 || math.Abs(r.Energy.P50/p.energy[1]-1) > 0.05 {
		t.Errorf("%+v, made with %g to %g", r.Energy, p.energy[0], p.energy[9])
	}
}

// Noise has no period, and a plain sine has its own, to a part in a thousand.
func TestPeriodOfNoiseAndSine(t *testing.T) {
	r := rand.New(rand.NewSource(1))
	var ts, noise, sine []float64
	for i := range 20000 {
		ts, noise, sine = append(ts, 0.01*float64(i)), append(noise, r.NormFloat64()), append(sine, math.Sin(2*math.Pi*0.01*float64(i)/7.3))
	}
	got, err := Find(Input{T: ts, Motion: [][]float64{noise}}, Options{})
	if err != nil || got.Period != 0 || got.Cycles != nil || got.Typical != -1 {
		t.Errorf("noise: %v, %g s, %v", err, got.Period, got.Height)
	}
	got, err = Find(Input{T: ts, Motion: [][]float64{sine}}, Options{})
	if err != nil || math.Abs(got.Period-7.3) > 0.0073 {
		t.Errorf("sine: %v, %g s", err, got.Period)
	}
	if _, err := Find(Input{T: ts}, Options{}); err == nil {
		t.Error("nothing that moves")
	}
}

// A day or more at full rate: cycles of 20 s at 100 Hz, 10 million rows.
func BenchmarkFind(b *testing.B) {
	p := longPlant(10_000_000, 20)
	for b.Loop() {
		r, err := Find(p, Options{})
		if err != nil || len(r.Cycles) < 4900 {
			b.Fatal(err, len(r.Cycles))
		}
	}
}

// Short cycles of a long recording are more than the points of one transform: 2 million rows
// at 100 Hz, 3 s a cycle, made at 3 s times whole numbers.
func TestShortCyclesOfALongRecording(t *testing.T) {
	r, err := Find(longPlant(2_000_000, 3), Options{})
	if err != nil || math.Abs(r.Period-3) > 0.003 || len(r.Cycles) < 6600 || len(r.Cycles) > 6667 {
		t.Fatalf("%v: %d cycles of %g s", err, len(r.Cycles), r.Period)
	}
	off := 0.0
	for _, c := range r.Cycles {
		off = math.Max(off, math.Abs(math.Mod(c.From+1.5, 3)-1.5-math.Mod(r.Cycles[0].From, 3)))
	}
	if off > 0.1 {
		t.Errorf("starts are up to %g s off", off)
	}
}

// longPlant repeats a cycle of so many seconds, of which every seventh takes half as much again.
func longPlant(rows int, period float64) Input {
	in := Input{T: make([]float64, rows), Motion: [][]float64{make([]float64, rows)}, Level: [][]float64{make([]float64, rows)}, Power: make([]float64, rows)}
	r := rand.New(rand.NewSource(7))
	for i := range rows {
		in.T[i] = 0.01 * float64(i)
		u, k := math.Mod(in.T[i], period)/period, int(in.T[i]/period)
		v, pr := 0.0, 100.0
		switch {
		case u < 0.3:
			v = 0.1 * math.Sin(math.Pi*u/0.3)
		case u >= 0.5 && u < 0.8:
			v, pr = -0.1*math.Sin(math.Pi*(u-0.5)/0.3), 40
		}
		if k%7 == 3 {
			pr *= 1.5
		}
		in.Motion[0][i], in.Level[0][i] = v*(1+0.02*r.NormFloat64()), pr*(1+0.02*r.NormFloat64())
		in.Power[i] = math.Max(0, v) * pr * 1e3
	}
	return in
}

// A search that is cancelled ends with that error, at once where it is over before it begins.
func TestSearchIsCancelled(t *testing.T) {
	var in Input
	v := []float64{}
	for i := range 20000 {
		in.T = append(in.T, 0.01*float64(i))
		v = append(v, math.Max(0, math.Sin(0.02*math.Pi*float64(i))))
	}
	in.Motion = [][]float64{v}
	ctx, stop := context.WithCancel(context.Background())
	if r, err := Find(in, Options{Context: ctx}); err != nil || len(r.Cycles) < 150 {
		t.Fatalf("%v", err)
	}
	stop()
	if _, err := Find(in, Options{Context: ctx}); !errors.Is(err, context.Canceled) {
		t.Error(err)
	}
}
