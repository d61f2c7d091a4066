package figures

import "math"

// Window is the range of the horizontal axis, and Span that of a lane over it.
func (f Plot) Window() (from, to float64) { return f.window() }

// Span returns the vertical range of a lane over a window.
func (l Lane) Span(from, to float64) (lo, hi float64) { return l.span(from, to) }

// window returns the range of the horizontal axis, never empty.
func (f Plot) window() (from, to float64) {
	if finite(f.From) && finite(f.To) && f.From < f.To {
		return f.From, f.To
	}
	from, to = math.Inf(1), math.Inf(-1)
	take := func(v float64) {
		if finite(v) {
			from, to = min(from, v), max(to, v)
		}
	}
	for _, ph := range f.Phases {
		take(ph.From)
		take(ph.To)
	}
	for _, l := range f.Lanes {
		for _, s := range l.Series {
			if s.Long != nil && s.Long.Len() > 0 {
				take(s.Long.X.FromSI(s.Long.x[0]))
				take(s.Long.X.FromSI(s.Long.x[s.Long.Len()-1]))
			}
			for i := range min(len(s.X), len(s.Y)) {
				take(s.X[i])
			}
		}
	}
	return widened(from, to, 0)
}

// span returns the range of the vertical axis, never empty.
func (l Lane) span(from, to float64) (lo, hi float64) {
	if a, b := l.Range[0], l.Range[1]; finite(a) && finite(b) && a < b {
		return a, b
	}
	lo, hi = math.Inf(1), math.Inf(-1)
	zero := l.Zero
	for _, s := range l.Series {
		zero = zero || s.Fill
		if s.Long != nil {
			if a, b, ok := s.Long.span(from, to); ok {
				lo, hi = min(lo, a), max(hi, b)
			}
		}
		for i := range min(len(s.X), len(s.Y)) {
			if v := s.Y[i]; finite(v) && s.X[i] >= from && s.X[i] <= to {
				lo, hi = min(lo, v), max(hi, v)
			}
		}
		for i := range min(len(s.X), len(s.Base)) {
			if v := s.Base[i]; finite(v) && s.X[i] >= from && s.X[i] <= to {
				lo, hi = min(lo, v), max(hi, v)
			}
		}
	}
	if zero && lo <= hi {
		lo, hi = min(lo, 0), max(hi, 0)
	}
	return widened(lo, hi, margin)
}

// widened adds a share of the range at both ends. A range without extent, or so
// small beside its values that digits run out, is opened by a tenth of them (by 1
// about zero); no range at all is 0…1.
func widened(lo, hi, share float64) (float64, float64) {
	if !(lo <= hi) {
		return 0, 1
	}
	most := max(math.Abs(lo), math.Abs(hi))
	if most < smallest {
		return -1, 1
	}
	if hi-lo <= 1e-7*most {
		return lo - 0.1*most, hi + 0.1*most
	}
	d := share * (hi - lo)
	return lo - d, hi + d
}

// laneTicks returns the ticks of a lane of height h in labelled numbers.
func (d *plotLayout) laneTicks(i int, h float64) ([]float64, int) {
	l, k := d.area.Lanes[i], pow10(d.exps[i])
	n := int(max(2, min(6, h/20)))
	at, dec := ticks(l.Lo/k, l.Hi/k, n)
	for more := n + 1; len(at) < 2 && more <= 3*n; more++ { // one number gives no scale
		finer, d := ticks(l.Lo/k, l.Hi/k, more)
		if len(finer) > 1 && (finer[1]-finer[0])*k/(l.Hi-l.Lo)*h < smallSize+3 {
			break // they would touch
		}
		at, dec = finer, d
	}
	return at, dec
}
