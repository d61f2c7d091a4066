package circuit

import (
	"context"
	"math"
	"testing"

	"barlitre/circuit/duty"
)

type nobody struct{}

func (nobody) Sample(*Sample) error { return nil }

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

// BenchmarkBalance measures one thread, everything booked.
func BenchmarkBalance(b *testing.B) {
	for _, c := range []struct {
		name, text string
		axes       []duty.Axis
		d          *duty.Duty
	}{{"C1-dither", c1, ramAxis, ramDuty}, {"C3-dither", c3, trialAxes, bothDuty}} {
		b.Run(c.name, func(b *testing.B) {
			plain := *c.d
			plain.Sampled = true
			d := dithered(&plain, c.axes)
			k, found := Compile(build(b, c.text), c.axes, d)
			if k == nil {
				b.Fatal(found)
			}
			s, p := k.Series(d), k.Defaults()
			b.ReportAllocs()
			b.ResetTimer()
			for i := 0; i < b.N; i++ {
				if _, cert, err := Run(context.Background(), k, p, s, trialOil, State{}, nobody{}); err != nil || cert.Unbalanced > 0 {
					b.Fatal(err, cert)
				}
			}
			b.ReportMetric(float64(b.Elapsed().Nanoseconds())/float64(b.N)/float64(len(s.T)), "ns/sample")
		})
	}
}
