package circuit

import (
	"context"
	"testing"
)

// byKind holds the models of the trial circuits by kind, so that their calls are direct.
type byKind struct {
	valves       []*valveModel
	pumps        []*pumpModel
	motors       []*motorModel
	pistons      []*pistonModel
	compensators []*compensatorModel
	checks       []*checkModel
	filters      []*filterModel
	reliefs      []*reliefModel
	shuttles     []*shuttleModel
	electrics    []*electricModel
}

func (k *byKind) take(m model) bool {
	switch m := m.(type) {
	case *valveModel:
		k.valves = append(k.valves, m)
	case *pumpModel:
		k.pumps = append(k.pumps, m)
	case *motorModel:
		k.motors = append(k.motors, m)
	case *pistonModel:
		k.pistons = append(k.pistons, m)
	case *compensatorModel:
		k.compensators = append(k.compensators, m)
	case *checkModel:
		k.checks = append(k.checks, m)
	case *filterModel:
		k.filters = append(k.filters, m)
	case *reliefModel:
		k.reliefs = append(k.reliefs, m)
	case *shuttleModel:
		k.shuttles = append(k.shuttles, m)
	case *electricModel:
		k.electrics = append(k.electrics, m)
	default:
		return false
	}
	return true
}

func (k *byKind) eval(e *eval) {
	for _, m := range k.valves {
		m.eval(e)
	}
	for _, m := range k.pumps {
		m.eval(e)
	}
	for _, m := range k.motors {
		m.eval(e)
	}
	for _, m := range k.pistons {
		m.eval(e)
	}
	for _, m := range k.compensators {
		m.eval(e)
	}
	for _, m := range k.checks {
		m.eval(e)
	}
	for _, m := range k.filters {
		m.eval(e)
	}
	for _, m := range k.reliefs {
		m.eval(e)
	}
	for _, m := range k.shuttles {
		m.eval(e)
	}
	for _, m := range k.electrics {
		m.eval(e)
	}
}

// BenchmarkDispatch sets one evaluation of all blocks through the interface of models
// against direct calls of the same models sorted by kind: what the interface costs.
func BenchmarkDispatch(b *testing.B) {
	k, found := Compile(build(b, c3), trialAxes, bothDuty)
	if k == nil {
		b.Fatal(found)
	}
	s := k.Series(bothDuty)
	r := newRun(k, k.Defaults(), trialOil, s)
	if _, _, err := r.all(context.Background(), State{}, 0, len(s.T)/4, nobody{}); err != nil {
		b.Fatal(err)
	}
	var direct byKind
	for _, m := range r.models {
		if !direct.take(m) {
			b.Skipf("%T is not among the kinds of this circuit", m)
		}
	}
	r.ev.slopes = nil
	b.Run("interface", func(b *testing.B) {
		for range b.N {
			clear(r.ev.rows)
			for _, m := range r.models {
				m.eval(&r.ev)
			}
		}
	})
	b.Run("by-kind", func(b *testing.B) {
		for range b.N {
			clear(r.ev.rows)
			direct.eval(&r.ev)
		}
	})
}
