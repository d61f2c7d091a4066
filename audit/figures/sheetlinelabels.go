package figures

import (
	"math"
	"sort"

	"barlitre/audit/pen"
	"barlitre/circuit/drawing"
)

// lineLabels finds room for the labels of lines: one a line with pressure and flow, and
// one with the flow for each other stretch that is long enough. A label that would lie
// on anything is left out.
func (s *Sheet) lineLabels(k *labeller) {
	of := make([][]int, len(s.nets))
	for i, st := range s.stretches {
		if s.nets[st.net].kind.Fluid() && !st.pilot && s.seen.worth(i) {
			of[st.net] = append(of[st.net], i)
		}
	}
	order := make([]int, len(s.nets))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return s.weight(order[a]) > s.weight(order[b]) })
	first := make([]int, len(s.nets))
	for _, n := range order {
		first[n] = -1
		if l, ok := s.lineLabel(of[n], s.nets[n].tank < 0, k); ok {
			s.labels = append(s.labels, l)
			first[n] = l.stretch
		}
	}
	for _, n := range order {
		for _, i := range of[n] {
			if i == first[n] || s.stretches[i].length < 5 || first[n] < 0 || s.mirrored(i, first[n]) || !s.seen.flows(i) {
				continue
			}
			if l, ok := s.lineLabel([]int{i}, false, k); ok {
				s.labels = append(s.labels, l)
			}
		}
	}
}

// weight ranks nets by what a reader looks for first: lines to pumps and actuators,
// then others, then returns.
func (s *Sheet) weight(n int) float64 {
	w := 0.0
	for _, e := range s.nets[n].ends {
		switch p := s.parts[e.part]; {
		case p.isMachine():
			w += 2
		case p.block.Kind == "valve":
			w++
		case p.block.Kind == "tank":
			w -= 4
		}
	}
	return w
}

// mirrored tells whether the same flow passes two stretches, as on both sides of a
// place where only pilot lines branch off.
func (s *Sheet) mirrored(i, j int) bool {
	a, b := s.stretches[i], s.stretches[j]
	if a.net != b.net {
		return false
	}
	same, opposed := true, true
	for k, e := range s.nets[a.net].ends {
		p, _ := s.parts[e.part].symbol.Port(e.port)
		if p.Type == drawing.PilotLine {
			continue
		}
		same = same && a.share[k] == b.share[k]
		opposed = opposed && a.share[k] == -b.share[k]
	}
	return same || opposed
}

// lineLabel finds the best free place beside the given stretches.
func (s *Sheet) lineLabel(stretches []int, pressure bool, k *labeller) (sheetLabel, bool) {
	forms := [][]row{{rowFlow}}
	if pressure {
		forms = [][]row{{rowBoth}, {rowPressure, rowFlow}}
	}
	var spots []labelSpot
	for _, i := range stretches {
		st := &s.stretches[i]
		prefer := -0.1*math.Min(st.length, 20) - s.endWeight(st)
		for m := 1; m < len(st.pts); m++ {
			for _, rows := range forms {
				spots = append(spots, besideSegment(st.pts[m-1], st.pts[m], rows, i, prefer)...)
			}
		}
	}
	sp, ok := k.best(spots)
	if !ok || sp.cost > 12 {
		return sheetLabel{}, false
	}
	if c, _ := k.weigh(sp.box, math.Inf(1)); c > 0 {
		return sheetLabel{}, false
	}
	return k.take(sp, -1), true
}

// endWeight prefers the stretch that ends at a pump or an actuator.
func (s *Sheet) endWeight(st *stretch) float64 {
	for _, e := range s.nets[st.net].ends {
		at := s.endPoint(e)
		if at != st.pts[0] && at != st.pts[len(st.pts)-1] {
			continue
		}
		if s.parts[e.part].isMachine() {
			return 3
		}
	}
	return 0
}

// besideSegment lists places along a straight piece of a line.
func besideSegment(a, b drawing.Pt, rows []row, stretch int, prefer float64) []labelSpot {
	w, h := labelSize(nil, rows)
	var out []labelSpot
	add := func(x, y float64, al pen.Align, c float64) {
		out = append(out, labelSpot{box: boxAt(x, y, w, h), align: al, rows: rows, stretch: stretch, cost: c + prefer + 4})
	}
	const off = lineWidest/2 + 0.35
	length := math.Abs(a.X-b.X) + math.Abs(a.Y-b.Y)
	for _, f := range []float64{0.5, 0.4, 0.6, 0.3, 0.7, 0.2, 0.8, 0.1, 0.9} {
		x, y := a.X+f*(b.X-a.X), a.Y+f*(b.Y-a.Y)
		c := 4 * math.Abs(f-0.5)
		if a.X == b.X {
			c += 2 * math.Max(0, h-length)
			add(x+off, y-h/2, pen.Left, c)
			add(x-off-w, y-h/2, pen.Right, c+0.3)
			continue
		}
		c += math.Max(0, w-length)
		add(x-w/2, y-off-h+0.3, pen.Center, c)
		add(x-w/2, y+off-0.2, pen.Center, c+0.5)
	}
	return out
}
