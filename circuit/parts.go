package circuit

// PartReceiver is a Receiver that can be filled by several goroutines: each fills a part
// of its own, and the parts are joined in the order of time. A run either hands all its
// time steps to Sample or joins parts.
type PartReceiver interface {
	Receiver
	// Part makes a receiver for the time steps from up to but not with to. before is
	// the one ahead of them, nil at the start of the run and not to be changed; its
	// own figures are of the part before, the time between the two is of this one.
	Part(from, to int, before *Sample) Receiver
	// Join takes over what a part has received. A part may also be dropped for one
	// that takes the same time steps again.
	Join(part Receiver) error
}

// partsOf gives a receiver that has no parts tapes for its parts.
func partsOf(to Receiver) PartReceiver {
	if p, ok := to.(PartReceiver); ok {
		return p
	}
	return taped{to}
}

// Part is a part of every receiver.
func (ss Receivers) Part(from, to int, before *Sample) Receiver {
	out := make(Receivers, len(ss))
	for i, s := range ss {
		out[i] = partsOf(s).Part(from, to, before)
	}
	return out
}

// Join hands each receiver its part.
func (ss Receivers) Join(part Receiver) error {
	for i, p := range part.(Receivers) {
		if err := partsOf(ss[i]).Join(p); err != nil {
			return err
		}
	}
	return nil
}

// taped hands a receiver its time steps from tapes.
type taped struct{ Receiver }

func (t taped) Part(from, to int, _ *Sample) Receiver { return &tape{room: to - from} }

func (t taped) Join(part Receiver) error { return part.(*tape).play(t.Receiver) }

// tape keeps time steps until their turn comes, in columns.
type tape struct {
	room      int
	heads     []Sample  // without their slices
	values    []float64 // signals, powers, pulses and voids of a time step, one step after another
	axes      []AxisNow
	sig, pow  int // how many there are of each
	void, mov int
}

// Sample keeps a copy of s.
func (t *tape) Sample(s *Sample) error {
	if t.heads == nil {
		t.sig, t.pow, t.void, t.mov = len(s.Signals), len(s.Power), len(s.Void), len(s.Axes)
		t.heads = make([]Sample, 0, t.room)
		t.values = make([]float64, 0, t.room*(t.sig+2*t.pow+t.void))
		t.axes = make([]AxisNow, 0, t.room*t.mov)
	}
	t.values = append(append(append(append(t.values, s.Signals...), s.Power...), s.Pulse...), s.Void...)
	t.axes = append(t.axes, s.Axes...)
	head := *s
	head.Signals, head.Power, head.Pulse, head.Void, head.Axes = nil, nil, nil, nil, nil
	t.heads = append(t.heads, head)
	return nil
}

func (t *tape) play(to Receiver) error {
	values, axes := t.values, t.axes
	take := func(n int) []float64 {
		v := values[:n:n]
		values = values[n:]
		return v
	}
	for i := range t.heads {
		s := &t.heads[i]
		s.Signals, s.Power, s.Pulse, s.Void = take(t.sig), take(t.pow), take(t.pow), take(t.void)
		s.Axes, axes = axes[:t.mov:t.mov], axes[t.mov:]
		if err := to.Sample(s); err != nil {
			return err
		}
	}
	return nil
}

// clone is a copy that later time steps leave alone.
func (s *Sample) clone() *Sample {
	c := *s
	c.Signals, c.Power = append([]float64(nil), s.Signals...), append([]float64(nil), s.Power...)
	c.Pulse = append([]float64(nil), s.Pulse...)
	c.Void, c.Axes = append([]float64(nil), s.Void...), append([]AxisNow(nil), s.Axes...)
	return &c
}
