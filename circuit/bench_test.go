package circuit

import (
	"context"
	"fmt"
	"math"
	"os"
	"runtime"
	"strings"
	"testing"

	"barlitre/circuit/duty"
)

// nobody takes time steps, and chunks, and keeps nothing.
type nobody struct{}

func (nobody) Sample(*Sample) error { return nil }

func (nobody) Part(int, int, *Sample) Receiver { return nobody{} }

func (nobody) Join(Receiver) error { return nil }

// dithered makes every sample differ from the one before: force × (1 + 0.05 sin 2π·1.7 t),
// ram speed × (1 + 0.05 sin 2π·2.3 t), motor speed × (1 + 0.05 sin 2π·1.3 t).
func dithered(d *duty.Duty, axes []duty.Axis) *duty.Duty {
	s := d.Series(axes, false)
	out := &duty.Duty{Name: "dithered", Time: s.T, Sampled: true}
	for i, a := range axes {
		speed, load := make([]float64, len(s.T)), make([]float64, len(s.T))
		hz := 2.3
		if a.Kind == duty.Rotary {
			hz = 1.3
		}
		for k, t := range s.T {
			speed[k] = s.Axes[i].Speed[k] * (1 + 0.05*math.Sin(2*math.Pi*hz*t))
			load[k] = s.Axes[i].Load[k] * (1 + 0.05*math.Sin(2*math.Pi*1.7*t))
		}
		out.Tracks = append(out.Tracks, duty.Track{Of: a.Name, What: duty.Speed, Values: speed}, duty.Track{Of: a.Name, What: duty.Load, Values: load})
	}
	return out
}

var trialAxes = []duty.Axis{{Name: "ram", Kind: duty.Linear}, {Name: "turn", Kind: duty.Rotary}}

var bothDuty = points("both", 0.01, []float64{0, 0.1, 1, 1.5, 2.0, 2.1, 5.0, 5.1, 6, 6.5, 7.0, 7.1, 9.0, 9.1, 12},
	duty.Track{Of: "ram", What: duty.Speed, Values: []float64{0, .15, .15, .15, .15, .03, .03, 0, 0, 0, 0, -.2, -.2, 0, 0}},
	duty.Track{Of: "ram", What: duty.Load, Values: []float64{5e3, 5e3, 5e3, 5e3, 5e3, 20e3, 60e3, 60e3, 60e3, 60e3, 60e3, 5e3, 5e3, 5e3, 5e3}},
	duty.Track{Of: "turn", What: duty.Speed, Values: []float64{0, 0, 0, 25, 25, 25, 25, 25, 25, 0, 0, 0, 0, 0, 0}},
	duty.Track{Of: "turn", What: duty.Load, Values: []float64{120, 120, 120, 120, 120, 120, 120, 120, 120, 120, 120, 120, 120, 120, 120}})

// BenchmarkBalance measures one thread, everything booked: two trial circuits, and
// load-sensing circuits that grow by sections (n6: 40 blocks).
func BenchmarkBalance(b *testing.B) {
	for _, c := range []struct {
		name, text string
		axes       []duty.Axis
		d          *duty.Duty
	}{{"C1-dither", c1, ramAxis, ramDuty}, {"C3-dither", c3, trialAxes, bothDuty}} {
		plain := *c.d
		plain.Sampled = true
		b.Run(c.name, func(b *testing.B) { measure(b, c.text, c.axes, dithered(&plain, c.axes)) })
	}
	for _, n := range []int{2, 4, 6, 8} {
		text, axes, d := sections(n)
		blocks := 0
		for _, row := range strings.Split(text, "\n") {
			if row != "" && row[0] != '-' {
				blocks++
			}
		}
		b.Run(fmt.Sprintf("sections-%d-of-%d-blocks", n, blocks), func(b *testing.B) { measure(b, text, axes, d) })
	}
}

func measure(b *testing.B, text string, axes []duty.Axis, d *duty.Duty) {
	k, found := Compile(build(b, text), axes, d)
	if k == nil {
		b.Fatal(found)
	}
	s, p := k.Series(d), k.Defaults()
	fallbacks := 0
	b.ReportAllocs()
	b.ResetTimer()
	for range b.N {
		_, cert, err := Run(context.Background(), k, p, s, trialOil, State{}, nobody{})
		if err != nil || cert.Unbalanced > 0 {
			b.Fatal(err, cert)
		}
		fallbacks = cert.Fallbacks
	}
	b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(s.T)), "ns/sample")
	b.ReportMetric(float64(fallbacks), "fallbacks")
	b.ReportMetric(float64(k.n), "unknowns")
}

// sections is a load-sensing pump that feeds n sections of compensator, valve and
// cylinder with make-up, which all move at the same time, each in its own time.
func sections(n int) (text string, axes []duty.Axis, d *duty.Duty) {
	var t strings.Builder
	row := func(format string, args ...any) { fmt.Fprintf(&t, format+"\n", args...) }
	row("TK tank\nM1 electric_motor; rated_power: %d kW; efficiency: 0.94", 30*n)
	row("P1 pump; displacement: %d cm3/rev; control: load_sensing; margin: 20 bar", 50*n)
	row("RV1 relief; crack: 250 bar\nF1 filter; nominal_flow: %d L/min", 60*n)
	row("- M1.shaft P1.shaft\n- P1.S TK.T\n- RV1.T TK.T\n- F1.B TK.T")
	rail, back, signal := "- P1.P RV1.P", "- F1.A", "V1.LS PC1.LS"
	d = &duty.Duty{Name: "sections", Sampled: true}
	for k := range 1200 {
		d.Time = append(d.Time, float64(k)*0.01)
	}
	for i := 1; i <= n; i++ {
		row("PC%d compensator\nV%d valve; follows: a%d; nominal_flow: 60 L/min", i, i, i)
		row("C%d cylinder; axis: a%d; hold: valve; bore: 80 mm; rod: 56 mm; friction: 800 N; viscous: 1500 N s/m", i, i)
		row("MA%d check; opens: 0 bar\nMB%d check; opens: 0 bar\n- MA%d.in MB%d.in TK.T", i, i, i, i)
		row("- PC%d.A V%d.P\n- V%d.A C%d.A MA%d.out\n- V%d.B C%d.B MB%d.out", i, i, i, i, i, i, i, i)
		rail, back = rail+fmt.Sprintf(" PC%d.P", i), back+fmt.Sprintf(" V%d.T", i)
		if i > 1 {
			row("SH%d shuttle\n- %s SH%d.X\n- V%d.LS PC%d.LS SH%d.Y", i, signal, i, i, i, i)
			signal = fmt.Sprintf("SH%d.A", i)
		}
		a := duty.Axis{Name: fmt.Sprintf("a%d", i), Kind: duty.Linear}
		speed, load := make([]float64, len(d.Time)), make([]float64, len(d.Time))
		for k, t := range d.Time {
			speed[k] = 0.08 * math.Sin(2*math.Pi*(t/6+float64(i)/float64(n+1)))
			load[k] = 20e3 * (1 + 0.3*math.Sin(2*math.Pi*t*(0.5+0.1*float64(i))))
		}
		axes = append(axes, a)
		d.Tracks = append(d.Tracks, duty.Track{Of: a.Name, What: duty.Speed, Values: speed}, duty.Track{Of: a.Name, What: duty.Load, Values: load})
	}
	row("%s\n%s\n- %s P1.LS", rail, back, signal)
	return t.String(), axes, d
}

// BenchmarkDay measures a day at 100 Hz, 8.64 million samples, in one go and in chunks on
// one and on two goroutines, and the most memory that the process has taken from the
// system up to then (runtime.MemStats.Sys). It runs only with BARLITRE_LONG set.
func BenchmarkDay(b *testing.B) {
	if os.Getenv("BARLITRE_LONG") == "" {
		b.Skip("set BARLITRE_LONG to measure a day")
	}
	d := long(ramDuty, ramAxis, 7200)
	k, found := Compile(build(b, c1), ramAxis, d)
	if k == nil {
		b.Fatal(found)
	}
	s, p := k.Series(d), k.Defaults()
	in := func(workers int) func() (State, Certificate, error) {
		return func() (State, Certificate, error) {
			return RunParallel(context.Background(), k, p, s, trialOil, workers, nobody{})
		}
	}
	for _, c := range []struct {
		name string
		run  func() (State, Certificate, error)
	}{
		{"whole", func() (State, Certificate, error) {
			return Run(context.Background(), k, p, s, trialOil, State{}, nobody{})
		}},
		{"chunks-one", in(1)}, {"chunks-two", in(2)},
	} {
		b.Run(c.name, func(b *testing.B) {
			for range b.N {
				if _, cert, err := c.run(); err != nil || cert.Unbalanced > 0 {
					b.Fatal(err, cert)
				}
			}
			var m runtime.MemStats
			runtime.ReadMemStats(&m)
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(s.T)), "ns/sample")
			b.ReportMetric(float64(len(s.T)), "samples")
			b.ReportMetric(float64(m.Sys)/1e6, "MB-peak")
		})
	}
}
