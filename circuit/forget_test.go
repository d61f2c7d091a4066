package circuit

import (
	"context"
	"reflect"
	"testing"
)

// A run takes over the memory of one that has ended and nothing else: what it finds is to the last
// bit what a newly compiled circuit finds, also after a run with other parameters.
func TestRunsForget(t *testing.T) {
	text, axes, d := sections(3)
	found := func(k *Compiled, p []float64) map[string][]float64 {
		r := &columns{c: k, sig: map[string][]float64{}}
		if _, cert, err := Run(context.Background(), k, p, k.Series(d), trialOil, State{}, r); err != nil || cert.Unbalanced > 0 {
			t.Fatal(err, cert)
		}
		return r.sig
	}
	compiled := func() *Compiled {
		k, found := Compile(build(t, text), axes, d)
		if k == nil {
			t.Fatal(found)
		}
		return k
	}
	used := compiled()
	worn := used.Defaults()
	i, ok := used.Index("RV1", "crack")
	if !ok {
		t.Fatal("no RV1.crack")
	}
	worn[i] *= 0.5
	fresh := compiled()
	want := found(fresh, fresh.Defaults())
	if reflect.DeepEqual(found(used, worn), want) {
		t.Fatal("half the relief setting changes nothing")
	}
	for range 3 {
		if !reflect.DeepEqual(found(used, used.Defaults()), want) {
			t.Fatal("a run remembers the one before")
		}
	}
}
