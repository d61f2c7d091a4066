package circuit

// families holds the models of a run by kind, so that what happens in every step calls those of the
// commonest kinds directly, one kind after the other.
type families struct {
	pistons      []*pistonModel
	motors       []*motorModel
	pumps        []*pumpModel
	valves       []*valveModel
	compensators []*compensatorModel
	checks       []*checkModel
	filters      []*filterModel
	others       []model
}

func familiesOf(all []model) (f families) {
	for _, m := range all {
		switch m := m.(type) {
		case *pistonModel:
			f.pistons = append(f.pistons, m)
		case *motorModel:
			f.motors = append(f.motors, m)
		case *pumpModel:
			f.pumps = append(f.pumps, m)
		case *valveModel:
			f.valves = append(f.valves, m)
		case *compensatorModel:
			f.compensators = append(f.compensators, m)
		case *checkModel:
			f.checks = append(f.checks, m)
		case *filterModel:
			f.filters = append(f.filters, m)
		default:
			f.others = append(f.others, m)
		}
	}
	return f
}

// eval adds the rows of all.
func (f *families) eval(e *eval) {
	for _, m := range f.pistons {
		m.eval(e)
	}
	for _, m := range f.motors {
		m.eval(e)
	}
	for _, m := range f.pumps {
		m.eval(e)
	}
	for _, m := range f.valves {
		m.eval(e)
	}
	for _, m := range f.compensators {
		m.eval(e)
	}
	for _, m := range f.checks {
		m.eval(e)
	}
	for _, m := range f.filters {
		m.eval(e)
	}
	for _, m := range f.others {
		m.eval(e)
	}
}

// book writes what all do in a balanced step.
func (f *families) book(k *booking) {
	for _, m := range f.pistons {
		m.book(k)
	}
	for _, m := range f.motors {
		m.book(k)
	}
	for _, m := range f.pumps {
		m.book(k)
	}
	for _, m := range f.valves {
		m.book(k)
	}
	for _, m := range f.compensators {
		m.book(k)
	}
	for _, m := range f.checks {
		m.book(k)
	}
	for _, m := range f.filters {
		m.book(k)
	}
	for _, m := range f.others {
		m.book(k)
	}
}
