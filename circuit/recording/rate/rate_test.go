package rate

import (
	"math"
	"strings"
	"testing"
)

// Effort and flow as 2 + sin and 2 + sin of one angle: the mean of the product is 4.5, by
// calculus; means over h of a sine of period T lose sinc²(h/T) of its half.
func sines(h float64, rows int, means bool) (t, e []float64) {
	const w = 2 * math.Pi / 12
	for i := range rows {
		s := h * float64(i)
		t = append(t, s)
		if means { // over s to s + h
			e = append(e, 2+(math.Cos(w*s)-math.Cos(w*(s+h)))/(w*h))
		} else {
			e = append(e, 2+math.Sin(w*s))
		}
	}
	return t, e
}

func TestMeansLoseWhatGoesTogether(t *testing.T) {
	ts, e := sines(0.01, 12001, false)
	if got := Products(ts, e, e); math.Abs(got/(4.5*120)-1) > 1e-5 {
		t.Errorf("energy %g", got)
	}
	for _, h := range []float64{1, 2, 3} {
		x := math.Pi * h / 12
		want := (4 + 0.5*math.Pow(math.Sin(x)/x, 2)) / 4.5
		if got := Means(ts, e, e, h) / (4.5 * 120); math.Abs(got-want) > 1e-5 {
			t.Errorf("means over %g s: %g of the energy, want %g", h, got, want)
		}
	}
}

// What is estimated of the means alone must be near the error that calculus gives; with
// few rows a cycle it may be on the safe side.
func TestErrorIsEstimated(t *testing.T) {
	for _, h := range []float64{0.5, 1, 1.5} {
		ts, e := sines(h, int(1200/h), true)
		x := math.Pi * h / 12
		want := 1 - (4+0.5*math.Pow(math.Sin(x)/x, 2))/4.5
		c := Of(ts, e, e, true, 12)
		if c.Error < want/2 || c.Error > want*3 {
			t.Errorf("every %g s: error %g estimated, it is %g (order %g)", h, c.Error, want, c.Order)
		}
	}
}

func TestRowsAndCycle(t *testing.T) {
	ts, e := sines(2, 600, true)
	if c := Of(ts, e, e, true, 12); !c.Warns || c.PerCycle != 6 || c.Multiple != 0 || len(c.Remarks) != 3 {
		t.Errorf("%+v", c)
	}
	ts, e = sines(0.05, 6000, false)
	if c := Of(ts, e, e, false, 12); c.Warns || c.Error > 1e-3 || len(c.Coarser) < 4 {
		t.Errorf("%+v", c)
	}
	if c := Of(ts[:5], e[:5], e[:5], false, 0); !c.Warns {
		t.Error("five rows")
	}
	if c := Of(ts, e, make([]float64, len(ts)), false, 0); !math.IsNaN(c.Error) || c.Warns {
		t.Errorf("nothing moves: %+v", c)
	}
}

// Means over whole cycles are all alike: thinned and joined they do not change, and yet they
// lose a ninth of the energy (4 of 4.5, by calculus). The check must not say 0 %.
func TestWholeCyclesCannotBeTold(t *testing.T) {
	for _, cycle := range []float64{12, 0} {
		ts, e := sines(12, 50, true)
		c := Of(ts, e, e, true, cycle)
		if !math.IsNaN(c.Error) || !c.Warns || !strings.Contains(c.Remarks[0], "cannot be told from these rows") {
			t.Errorf("cycle %g s: %+v", cycle, c)
		}
	}
	steady, one := sines(0.1, 500, false)
	for i := range one {
		one[i] = 2
	}
	if c := Of(steady, one, one, false, 0); c.Warns || c.Error != 0 {
		t.Errorf("a steady machine, logged fast: %+v", c)
	}
}
