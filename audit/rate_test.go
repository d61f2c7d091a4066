package audit_test

import (
	"bytes"
	"context"
	"io"
	"math"
	"sort"
	"strings"
	"testing"

	"barlitre/audit"
	"barlitre/circuit/recording/logger"
	"barlitre/circuit/recording/rate"
)

type tableBytes struct{ bytes.Buffer }

func (*tableBytes) Close() error { return nil }

// The pump of trial C3 over ten cycles of 12 s, pressure and flow as the table of time steps
// has them, read back by the reader of recordings. An independent calculation of a duty of
// this kind has mean(p)·mean(Q) understate the energy by 1 % at 1 s, 2.5 % at 2 s, 10 % at 5 s
// and 21 % from 10 s on.
//
// Which energy it is, is told by 12 s, where it does not matter where the intervals begin:
// that of the pump loses 22.8 % there, 1.09 times the 21 %; taken at the inlet of either
// valve apart it would be 7 and 37 %, at the motor 54 %, at the cylinder it turns its sign.
// Of the shorter intervals, the one that begins most luckily in the cycle comes nearest, 1.1, 4.3, 14.2 and
// 22.1 %, within a factor of 1.8; one that begins with the cycle loses 1.7, 7.1, 14.3 and 22.2 %, a
// factor of 2.8, and the mean over all beginnings 3.1, 6.5, 14.3 and 22.2 %, 3.1 to 1. No beginning has 2.5 %
// at 2 s (4.3 to 8.2 %). Neither has another way to reckon, tried on the same table with intervals that begin with the
// cycle: the share of the energy at the motor that is lost (4.4 % at 2 s, 14.3 % at 12 s), the flow of the valves alone (the same),
// the pressure without its margin of 20 bar (9.0 and 29 %), each valve with its own load pressure and the margin (13 and 29 %,
// 1.7 to 13 % by beginning), rows at instants instead of means (-15 %, -16 to 17 % by beginning), straight lines between such
// rows (-3.7 %, -3.7 to 28 %), one cycle with a shorter interval at its end (5.1 % at 5 s, 11.7 % at 10 s). Where one of them
// meets 2.5 % at 2 s it misses the 21 % from 10 s on. So the published duty, which is described as of this kind and not written out,
// had other ramps or instants than the trial.
//
// What the check estimates from the coarse rows alone, without the fine ones, must be within a
// factor of four of what they lose while a cycle has two rows at least; with fewer it must say that it cannot be told. It must warn.
func TestMeansOfTrialC3(t *testing.T) {
	f, _ := audit.Read("testdata/trials/c3.yaml")
	var table tableBytes
	s, err := audit.Solve(context.Background(), f, audit.Options{CSV: func(string) (io.WriteCloser, error) { return &table, nil }})
	if err != nil || s.Circuits[0].Duties[0].Balance == nil {
		t.Fatal(err)
	}
	file, err := logger.OpenBytes("c3.csv", table.Bytes())
	if err != nil {
		t.Fatal(err)
	}
	rec, err := file.Import(context.Background(), file.Guess(), nil)
	if err != nil {
		t.Fatal(err)
	}
	p, q := rec.Find("P1.P.p"), rec.Find("P1.P.q")
	if p == nil || q == nil {
		var have []string
		for _, x := range rec.Series {
			have = append(have, x.Column)
		}
		t.Fatalf("channels %q", have)
	}
	var ts, ps, qs []float64
	one, pv, qv := rec.Time, p.Values(), q.Values()
	for k := range 10 {
		for i := range one {
			if at := one[i] + 12*float64(k); len(ts) == 0 || at > ts[len(ts)-1] {
				ts, ps, qs = append(ts, at), append(ps, pv[i]), append(qs, math.Abs(qv[i]))
			}
		}
	}
	for _, c := range []struct {
		h, want float64
		warns   bool
		begins  float64 // lost where intervals begin with the cycle, by sums over 1200 rows a cycle of the same table, apart from this program
	}{{1, 0.01, true, 0.0170}, {2, 0.025, true, 0.0706}, {5, 0.10, true, 0.1425}, {10, 0.21, true, 0.2218}, {12, 0.21, true, 0.2281}} {
		// 60 s hold whole intervals of each length and whole cycles: nothing is lost or won at an end
		got, least, most := 0.0, 1.0, 0.0 // mean, best and worst of where intervals begin in the cycle
		const starts = 16
		for k := range starts {
			i := sort.SearchFloat64s(ts, float64(k)/starts*c.h)
			end := sort.SearchFloat64s(ts, ts[i]+60-1e-9)
			x := 1 - rate.Means(ts[i:end+1], ps[i:end+1], qs[i:end+1], c.h)/rate.Products(ts[i:end+1], ps[i:end+1], qs[i:end+1])
			if k == 0 && math.Abs(x-c.begins) > 0.001 {
				t.Errorf("means over %g s from the start of the cycle lose %.2f %%, want %.2f %%", c.h, 100*x, 100*c.begins)
			}
			got, least, most = got+x/starts, math.Min(least, x), math.Max(most, x)
		}
		t.Logf("means over %g s lose %.2f %% (%.2f to %.2f), independent calculation %.1f %%", c.h, 100*got, 100*least, 100*most, 100*c.want)
		if r := least / c.want; r > 1.8 || r < 1/1.8 {
			t.Errorf("means over %g s lose %.2f %% at least, independent calculation %.1f %%", c.h, 100*least, 100*c.want)
		}
		if r := got / c.want; r > math.Sqrt(10) || r < 1/math.Sqrt(10) || c.h == 12 && r > 1.1 {
			t.Errorf("means over %g s lose %.2f %% in the mean, independent calculation %.1f %%", c.h, 100*got, 100*c.want)
		}
		var tc, pc, qc []float64
		for a := 0.0; a+c.h <= 120+1e-9; a += c.h {
			tc, pc, qc = append(tc, a), append(pc, meanOver(ts, ps, a, a+c.h)), append(qc, meanOver(ts, qs, a, a+c.h))
		}
		check := rate.Of(tc, pc, qc, true, 12)
		t.Logf("%4g s: %5.2f %% lost, estimated from the rows alone %5.2f %% (order %.2f); %v", c.h, 100*got, 100*check.Error, check.Order, check.Remarks)
		if c.h >= 10 && (!math.IsNaN(check.Error) || !strings.Contains(check.Remarks[0], "cannot be told from these rows")) {
			t.Errorf("every %g s: %v is estimated, %v", c.h, check.Error, check.Remarks)
		}
		if c.h < 10 && (check.Error < got/4 || check.Error > 4*got) {
			t.Errorf("every %g s: %.2f %% estimated, it is %.2f %%", c.h, 100*check.Error, 100*got)
		}
		if c.warns && !check.Warns {
			t.Errorf("every %g s: no warning", c.h)
		}
	}
}

// meanOver is the mean of of straight lines between rows, by small steps.
func meanOver(t, v []float64, a, b float64) float64 {
	sum, n, k := 0.0, 0, 0
	for x := a + 0.005; x < b; x += 0.01 {
		for k+2 < len(t) && t[k+1] < x {
			k++
		}
		sum += v[k] + (v[k+1]-v[k])*(x-t[k])/(t[k+1]-t[k])
		n++
	}
	return sum / float64(n)
}
