package figures

import (
	"math"

	"barlitre/circuit/drawing"
)

// netNow is what a line carries at an instant.
type netNow struct {
	pressure float64   // Pa, NaN where the state has none
	into     []float64 // m³/s, into the block at each end
	known    bool      // there is a state
}

// flows reads pressures and flows of all lines. A tank takes what the other ends leave
// over.
func (s *Sheet) flows(st *SheetState) []netNow {
	out := make([]netNow, len(s.nets))
	ends := 0
	for i := range s.nets {
		ends += len(s.nets[i].ends)
	}
	room, at := make([]float64, ends), s.fixed().ends
	for i := range s.nets {
		n := &s.nets[i]
		now := netNow{pressure: math.NaN(), known: st != nil}
		now.into, room = room[:len(n.ends):len(n.ends)], room[len(n.ends):]
		sum := 0.0
		for k := range n.ends {
			if v, ok := st.Signal(at[i][k].p); ok && finite(v) && math.IsNaN(now.pressure) {
				now.pressure = v
			}
			if v, ok := st.Signal(at[i][k].q); ok && finite(v) {
				now.into[k] = v
				sum += v
			}
		}
		if n.tank >= 0 {
			now.into[n.tank] -= sum
			if st != nil && math.IsNaN(now.pressure) {
				now.pressure = 0
			}
		}
		out[i] = now
	}
	return out
}

// along returns the flow along the points of a stretch [m³/s].
func (st *stretch) along(n netNow) float64 {
	sum := 0.0
	for k, share := range st.share {
		if share != 0 {
			sum += share * n.into[k]
		}
	}
	return sum
}

// chevron is a mark of direction: its tip and the direction it points in.
type chevron struct {
	tip, dir drawing.Pt
}

// Spacing of chevrons along a straight piece [M].
const (
	chevronEvery = 11.0
	chevronLeast = 2.6 // shorter pieces carry none; 1.8 if a stretch has no longer one
	chevronClear = 1.6 // from crossings
)

// chevrons returns the marks along a stretch with flow along its points, or against them
// if q is below 0. The longest piece has one if there is room, other pieces if they are
// long enough.
func (s *Sheet) chevrons(st *stretch, q float64) []chevron {
	var out []chevron
	longest := 0.0
	for i := 1; i < len(st.pts); i++ {
		longest = math.Max(longest, distance(st.pts[i-1], st.pts[i]))
	}
	for i := 1; i < len(st.pts); i++ {
		a, b := st.pts[i-1], st.pts[i]
		length := distance(a, b)
		if length < chevronLeast && (length < longest || length < 1.8) {
			continue
		}
		if q < 0 {
			a, b = b, a
		}
		dir := drawing.Pt{X: (b.X - a.X) / length, Y: (b.Y - a.Y) / length}
		n := math.Max(1, math.Round(length/chevronEvery))
		for k := 0.0; k < n; k++ {
			at := (k+0.5)*length/n + 0.35
			tip := drawing.Pt{X: a.X + dir.X*at, Y: a.Y + dir.Y*at}
			if s.nearCrossing(tip) {
				continue
			}
			out = append(out, chevron{tip, dir})
		}
	}
	return out
}

func (s *Sheet) nearCrossing(p drawing.Pt) bool {
	for _, c := range s.crossings {
		if distance(c.At, p) < chevronClear {
			return true
		}
	}
	return false
}

// distance along the axes, as lines run.
func distance(a, b drawing.Pt) float64 { return math.Abs(a.X-b.X) + math.Abs(a.Y-b.Y) }
