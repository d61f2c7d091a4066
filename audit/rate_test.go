package audit_test

import (
	"bytes"
	"context"
	"io"
	"math"
	"sort"
	"testing"

	"barlitre/audit"
	"barlitre/circuit/recording/logger"
	"barlitre/circuit/recording/rate"
)

type tableBytes struct{ bytes.Buffer }

func (*tableBytes) Close() error { return nil }

// The pump of trial C3 over ten cycles of 12 s, pressure and flow as the table of time steps
// has them, read back by the reader of recordings. An independent calculation of the same
// kind of duty has products of means understate the energy by 1 % at 1 s, 2.5 % at 2 s, 10 %
// at 5 s and 21 % from 10 s on: ours must be of that order of magnitude, a factor of √10 up
// or down (3.1, 6.5, 13.8 and 22.8 %, the mean over where the intervals begin). What the check estimates
// from the coarse rows alone, without the fine ones, must be within a factor of four of what
// they lose as long as a cycle has more than one row, and it must warn.
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
	}{{1, 0.01, true}, {2, 0.025, true}, {5, 0.10, true}, {12, 0.21, true}} {
		got := 0.0 // mean over where intervals begin in the cycle
		for k := range 8 {
			i := sort.SearchFloat64s(ts, float64(k)/8*c.h)
			end := sort.SearchFloat64s(ts, ts[i]+108)
			got += (1 - rate.Means(ts[i:end+1], ps[i:end+1], qs[i:end+1], c.h)/rate.Products(ts[i:end+1], ps[i:end+1], qs[i:end+1])) / 8
		}
		if r := got / c.want; r < 1/math.Sqrt(10) || r > math.Sqrt(10) {
			t.Errorf("means over %g s lose %.2f %%, independent calculation %.1f %%", c.h, 100*got, 100*c.want)
		}
		var tc, pc, qc []float64
		for a := 0.0; a+c.h <= 120+1e-9; a += c.h {
			tc, pc, qc = append(tc, a), append(pc, meanOver(ts, ps, a, a+c.h)), append(qc, meanOver(ts, qs, a, a+c.h))
		}
		check := rate.Of(tc, pc, qc, true, 12)
		t.Logf("%4g s: %5.2f %% lost, estimated from the rows alone %5.2f %% (order %.2f); %v", c.h, 100*got, 100*check.Error, check.Order, check.Remarks)
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
